"""The five judgements of a lead."""

from __future__ import annotations

from collections.abc import Iterable

from core.comparison.results import MeasureChange

STEADY = "steady"
BACKED = "in-reach-backed"
UNBACKED = "in-reach-unbacked"
BEYOND = "beyond-reach"
NOT_JUDGED = "not-judged"
# From the one that matters most; a pair's judgement is the first that any lead has.
BY_WEIGHT = (BEYOND, UNBACKED, BACKED, STEADY, NOT_JUDGED)

# The measures that a lead is judged by: ST and T.
DECIDING = ("st_mv", "t_mv")


def judge_lead(measures: dict[str, MeasureChange], *, qrs_points_to_shift: bool) -> str:
    """Judge a lead by the changes of its ST and T.

    - steady: all inside the repeat noise;
    - beyond-reach: one of them outside the placement reach;
    - in-reach-backed: the QRS points to a shift, and the change that it makes leaves nothing
      (the remainder's range holds 0, or the remainder lies inside the repeat noise);
    - in-reach-unbacked: otherwise;
    - not-judged: neither ST nor T could be compared.
    """
    compared = [measures[name] for name in DECIDING if measures[name].change is not None]
    if not compared:
        return NOT_JUDGED
    moved = [m for m in compared if outside(m.change, m.noise_low, m.noise_high)]
    if not moved:
        return STEADY
    if any(outside(m.change, m.reach_low, m.reach_high) for m in moved):
        return BEYOND
    backed = qrs_points_to_shift and not any(leaves_something(m) for m in moved)
    return BACKED if backed else UNBACKED


def leaves_something(m: MeasureChange) -> bool:
    """Whether the expected change leaves more of the recorded one than chance would."""
    return outside(m.remainder, m.noise_low, m.noise_high) and outside(
        0.0, m.remainder_low, m.remainder_high
    )


def judge_pair(judgements: Iterable[str]) -> str:
    """The weightiest judgement of any lead."""
    found = set(judgements)
    return next(code for code in BY_WEIGHT if code in found)


def outside(value: float | None, low: float | None, high: float | None) -> bool:
    """Whether a known value lies outside a known range."""
    if value is None or low is None or high is None:
        return False
    return not low <= value <= high
