"""Put the bench into the states that a reader can meet."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path

from app.views.bench_window import BenchWindow
from core import Comparison

EARLIER, LATER = Path("earlier.hea"), Path("later.hea")
REFUSAL = (
    "The two files state different identifiers. Compare recordings of one person only; if both "
    "are of one person all the same, lift this stop."
)


def nothing_to_do(request: object, report: object, should_stop: object) -> None:
    """Work that is none."""


def show(bench: BenchWindow, comparison: Comparison) -> None:
    """A pair was compared."""
    bench.state.choose(EARLIER, LATER)
    bench.state.begin()
    bench.state.finish(comparison)


def empty(bench: BenchWindow, comparison: Comparison) -> None:
    """Nothing is open."""


def one_chosen(bench: BenchWindow, comparison: Comparison) -> None:
    """One recording is chosen."""
    bench.state.choose(EARLIER, None)


def working(bench: BenchWindow, comparison: Comparison) -> None:
    """A pair is being compared."""
    bench.state.choose(EARLIER, LATER)
    bench.state.begin()
    bench.state.advance(0.5, "weighing the torso ensemble")


def stopped(bench: BenchWindow, comparison: Comparison) -> None:
    """The reader stopped the comparison."""
    working(bench, comparison)
    bench.state.stop()


def refused(bench: BenchWindow, comparison: Comparison) -> None:
    """The pair cannot be compared unless a stop is lifted."""
    working(bench, comparison)
    bench.state.refuse(REFUSAL, ("identifiers-differ",))


PHASES: tuple[Callable[[BenchWindow, Comparison], None], ...] = (
    empty,
    one_chosen,
    working,
    stopped,
    refused,
    show,
)
