"""The judgements in words: marks, reasons, the overall sentence and what to do next."""

from __future__ import annotations

from collections.abc import Collection, Mapping, Sequence
from dataclasses import dataclass

from core.wording.lists import joined, named
from core.wording.numbers import digits_apart, millivolts, plain, signed_range

WORDS = {
    "steady": "steady",
    "in-reach-backed": "in reach, backed",
    "in-reach-unbacked": "in reach, not backed",
    "beyond-reach": "beyond reach",
    "not-judged": "not judged",
}
MARKS = {
    "steady": "\N{BLACK CIRCLE}",
    "in-reach-backed": "\N{BLACK DIAMOND}",
    "in-reach-unbacked": "\N{WHITE DIAMOND}",
    "beyond-reach": "\N{BLACK UP-POINTING TRIANGLE}",
    "not-judged": "\N{EN DASH}",
}
MEANINGS = {
    "steady": "ST and T changed by no more than repeat noise.",
    "in-reach-backed": (
        "The change is beyond repeat noise, no larger than electrode shifts can make it, and the "
        "QRS changed as such a shift would change it."
    ),
    "in-reach-unbacked": (
        "The change is beyond repeat noise and no larger than electrode shifts can make it, but "
        "the QRS does not point to a shift that would make it."
    ),
    "beyond-reach": "The change is larger than electrode shifts can make it.",
    "not-judged": "The recordings do not allow a judgement in this lead.",
}
SHORT_NAMES = {"st_mv": "ST", "t_mv": "T"}


@dataclass(frozen=True, slots=True)
class Deciding:
    """One measure's numbers, as the sentences need them; in mV."""

    name: str  # "ST" or "T"
    change: float
    noise: float
    reach_low: float | None
    reach_high: float | None
    expected: float | None
    remainder: float | None
    remainder_low: float | None
    remainder_high: float | None


@dataclass(frozen=True, slots=True)
class ShiftWords:
    """An electrode's estimated shift in one direction, in mm; positive is up or left."""

    electrode: str
    direction: str  # "up" or "left"
    estimate: float
    low: float
    high: float

    def describe(self) -> str:
        """``"V2 about 27 mm up (95 %: 14 to 37)"``."""
        word, sign = self.direction, 1.0
        if self.estimate < 0:
            word, sign = {"up": "down", "left": "to the right"}[self.direction], -1.0
        elif word == "left":
            word = "to the left"
        ends = sorted((sign * self.low, sign * self.high))
        return (
            f"{self.electrode} about {plain(abs(self.estimate))} mm {word} "
            f"(95 %: {plain(ends[0])} to {plain(ends[1])})"
        )


def reason_steady(measures: Sequence[Deciding]) -> str:
    """Why a lead is steady."""
    parts = [f"{m.name} {millivolts(m.change)} (repeat noise ±{m.noise:.2f})" for m in measures]
    return f"{joined(parts)}: inside repeat noise."


def reason_beyond(m: Deciding, *, limb: bool) -> str:
    """Why a lead is beyond reach; what is beyond a limit is never shown as equal to it."""
    if limb:
        digits = digits_apart(abs(m.change), m.noise)
        return (
            f"{m.name} {millivolts(m.change, digits)}: chest electrode shifts cannot change a limb "
            f"lead, and repeat noise is ±{m.noise:.{digits}f} mV."
        )
    digits = digits_apart(m.change, m.reach_low, m.reach_high)
    return (
        f"{m.name} {millivolts(m.change, digits)}: beyond what electrode shifts can make here "
        f"({signed_range(m.reach_low, m.reach_high, digits)} mV)."
    )


def reason_in_reach(m: Deciding, *, backed: bool, points_to_shift: bool) -> str:
    """Why a lead is in reach, backed or not."""
    within = (
        f"{m.name} {millivolts(m.change)}: inside the reach "
        f"({signed_range(m.reach_low, m.reach_high)} mV)"
    )
    if not points_to_shift:
        return f"{within}, but the QRS hardly changed and does not point to a shift."
    remains = f"{millivolts(m.remainder)} ({signed_range(m.remainder_low, m.remainder_high)})"
    if backed:
        return (
            f"{within}; the QRS points to a shift that makes {millivolts(m.expected)}, which "
            f"leaves {remains}."
        )
    return (
        f"{within}, but the shift that the QRS points to makes {millivolts(m.expected)} and "
        f"leaves {remains}."
    )


def reason_not_judged(why: str) -> str:
    """Why a lead is not judged."""
    return f"Not judged: {why}."


_VERDICTS = {
    "beyond-reach": "beyond what electrode shifts can make",
    "in-reach-unbacked": "within placement reach, but the QRS does not back a shift",
    "in-reach-backed": "within placement reach, and the QRS backs it",
}


def overall_sentence(
    changes: Mapping[str, Mapping[str, Deciding | None]], shifts: Sequence[ShiftWords]
) -> str:
    """What was found, in a few sentences.

    Parameters
    ----------
    changes : mapping of judgement code to its leads, each with the change that decided
    shifts : sequence of ShiftWords
        The estimated shifts that are worth naming.
    """
    parts = [
        f"{_changes_in_words(changes[code])}: {verdict}."
        for code, verdict in _VERDICTS.items()
        if changes.get(code)
    ]
    steady, not_judged = changes.get("steady", {}), changes.get("not-judged", {})
    if not parts and steady:
        everywhere = "None of the leads that can be judged" if not_judged else "No lead"
        parts.append(f"{everywhere} changed beyond repeat noise.")
        steady = {}
    if shifts:
        described = joined([shift.describe() for shift in shifts])
        parts.append(f"The QRS puts {described} in the later recording.")
    if steady:
        parts.append("Other leads steady." if not_judged else "All other leads steady.")
    if not_judged:
        parts.append(f"Not judged: {named(list(not_judged))}.")
    return " ".join(parts)


def _changes_in_words(changes: Mapping[str, Deciding | None]) -> str:
    """``"ST up to +0.20 mV in II, III and aVF; ST down to −0.11 mV in V1 to V6"``."""
    groups: dict[tuple[str, bool], list[tuple[str, Deciding]]] = {}
    for lead, change in changes.items():
        if change is not None:
            groups.setdefault((change.name, change.change > 0), []).append((lead, change))
    words = []
    for (name, rises), members in groups.items():
        most = max((change.change for _, change in members), key=abs)
        way = "" if len(members) == 1 else " up to" if rises else " down to"
        words.append(f"{name}{way} {millivolts(most)} in {named([lead for lead, _ in members])}")
    return "; ".join(words)


def next_step(by_code: Mapping[str, Collection[str]]) -> str:
    """What to do next, by the leads of each judgement."""
    if by_code.get("beyond-reach"):
        return (
            "Next: read it as a change of the heart until shown otherwise; record again with the "
            "sites checked, without delaying care."
        )
    if unbacked := by_code.get("in-reach-unbacked"):
        return (
            f"Next: the heart may have changed; check {_sites(unbacked)} and record again, "
            "without delaying care."
        )
    if backed := by_code.get("in-reach-backed"):
        return f"Next: check {_sites(backed)} and record again."
    if by_code.get("steady"):
        return "Next: steady does not rule out ischaemia; with lasting symptoms, record again."
    return "Next: check the electrodes and record again."


_SITE_OF = {
    "V1": "V1 in the fourth space at the right sternal border",
    "V2": "V2 in the fourth space at the left sternal border",
    "V3": "V3 half-way between V2 and V4",
    "V4": "V4 in the fifth space at the midclavicular line",
    "V5": "V5 half-way between V4 and V6",
    "V6": "V6 at V4's level at the midaxillary line",
}


def _sites(leads: Collection[str]) -> str:
    """The sites to check; V1 and V2 share one phrase."""
    sites = [_SITE_OF[lead] for lead in leads if lead in _SITE_OF]
    if "V1" in leads and "V2" in leads:
        sites = ["V1 and V2 in the fourth space at the sternal borders", *sites[2:]]
    return joined(sites) if sites else "the electrodes"
