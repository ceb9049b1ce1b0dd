"""A recording in a few words: when, whose, its key numbers."""

from __future__ import annotations

from collections.abc import Mapping
from datetime import datetime

from core.wording.numbers import plain

_MONTHS = (
    "January",
    "February",
    "March",
    "April",
    "May",
    "June",
    "July",
    "August",
    "September",
    "October",
    "November",
    "December",
)


def when(recorded_at: datetime | None) -> str:
    """``"14 October 2031, 09:12"``, in words so that no order of day and month is guessed."""
    if recorded_at is None:
        return "time not stated"
    day = f"{recorded_at.day} {_MONTHS[recorded_at.month - 1]} {recorded_at.year}"
    return f"{day}, {recorded_at:%H:%M}"


def when_and_who(recorded_at: datetime | None, identifier: str | None) -> str:
    """Time and identifier."""
    return f"{when(recorded_at)} · {identifier or 'no identifier'}"


def key_numbers(
    rate_per_min: float, pr_ms: float | None, qrs_ms: float, qtc_ms: Mapping[str, float]
) -> str:
    """``"72/min · PR 158 · QRS 88 · QTc 412 ms (Fridericia)"``."""
    return (
        f"{plain(rate_per_min)}/min · PR {plain(pr_ms)} · QRS {plain(qrs_ms)} · "
        f"QTc {plain(qtc_ms['fridericia'])} ms (Fridericia)"
    )


def person(name: str | None, identifier: str | None, sex: str | None, age: float | None) -> str:
    """Who was recorded, as the file says it."""
    known = [part for part in (name, identifier, sex) if part]
    if age is not None:
        known.append(f"{plain(age)} years")
    return " · ".join(known) or "no identification in the file"


def beats_used(used: int, found: int) -> str:
    """``"9 of 11 beats used"``."""
    return f"{used} of {found} beats used"
