"""The shipped pairs, and what a reader sees on the bench."""

from __future__ import annotations

from pathlib import Path

from app.views.bench_window import BenchWindow
from core.shipped_files import samples_folder
from tests.app.drawing.readback import drawn_on, words

ENDINGS = {"medial": ".dcm"}


def pair(story: str) -> tuple[Path, Path]:
    """The earlier and the later file of a sample pair."""
    ending = ENDINGS.get(story, ".hea")
    earlier, later = (
        samples_folder() / f"{story}-{which}{ending}" for which in ("earlier", "later")
    )
    return earlier, later


def on_show(bench: BenchWindow) -> str:
    """Every word that is drawn in the window."""
    return words(drawn_on(bench))


def names(bench: BenchWindow) -> tuple[str, str]:
    """Names of the compared files, earlier and later."""
    comparison = bench.state.comparison
    assert comparison is not None
    return comparison.earlier.recording.source.name, comparison.later.recording.source.name
