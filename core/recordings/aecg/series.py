"""Series of an annotated ECG: which of them is the rhythm."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from core.recordings.aecg.document import Node
from core.recordings.aecg.errors import AecgError
from core.recordings.aecg.sequences import RELATIVE, LeadSet, is_complete, read_set
from core.recordings.aecg.times import moment_of
from core.recordings.shown import shown

RHYTHM = "RHYTHM"
_BEATS = frozenset(["REPRESENTATIVE_BEAT", "MEDIAN_BEAT", "MEDIAN", "AVERAGE_BEAT"])
_NESTED = frozenset(["series", "derivedSeries", "derivation"])
# Leads recorded one after another are twelve sets; each set is compared with the ones before.
MOST_SETS = 1000
# Relative times of sets may each count from their own set. If the series lasted that many times
# longer than any of its leads, the sets were not recorded at once.
_ONE_AFTER_ANOTHER = 1.5


@dataclass(frozen=True, slots=True, eq=False)
class Rhythm:
    """The series taken for the rhythm, and the leads of it that run together."""

    series: Node
    leads: LeadSet


def rhythm_of(root: Node) -> Rhythm:
    """The longest original rhythm that holds a 12-lead ECG.

    A representative beat, or a series derived from another, is never taken for it. Where none
    is complete, the one with the most leads, so that what is missing can be named.

    Raises
    ------
    AecgError
        If there is no original rhythm, or its leads were recorded one group after another.
    """
    listed = list(_all_series(root))
    rhythms = [
        node for node, is_derived in listed if not is_derived and node.code.upper() == RHYTHM
    ]
    if not rhythms:
        raise _no_rhythm(listed)
    found = [Rhythm(series, leads) for series in rhythms for leads in _lead_sets(series)]
    if not found:
        raise AecgError("holds no sequences of leads in its rhythm")
    complete = [rhythm for rhythm in found if rhythm.leads.is_complete]
    if complete:
        return max(complete, key=lambda rhythm: rhythm.leads.duration_s)
    in_all: dict[int, set[str]] = {}
    for rhythm in found:
        in_all.setdefault(id(rhythm.series), set()).update(rhythm.leads.leads)
    if any(is_complete(leads) for leads in in_all.values()):
        raise AecgError(
            "was recorded lead group by lead group, not all leads at once",
            "Choose a recording of twelve leads that run together.",
        )
    return max(found, key=lambda rhythm: len(rhythm.leads.leads))


def _all_series(root: Node) -> Iterator[tuple[Node, bool]]:
    """Every series at any level, and whether it was derived from another."""
    waiting = [(root, False)]
    while waiting:
        node, is_derived = waiting.pop()
        is_derived = is_derived or node.name in ("derivation", "derivedSeries")
        if node.name in ("series", "derivedSeries"):
            yield node, is_derived
        waiting.extend((child, is_derived) for child in reversed(node.children))


def _no_rhythm(listed: list[tuple[Node, bool]]) -> AecgError:
    codes = {node.code.upper() for node, _ in listed}
    kinds = ", ".join(sorted(shown(code) or "unnamed" for code in codes)[:5])
    if RHYTHM in codes:
        return AecgError(
            "holds no rhythm but one that was derived from another series",
            "Export it with the rhythm as recorded.",
        )
    only = " but a representative beat" if codes & _BEATS else ""
    return AecgError(
        f"holds no rhythm{only} (series: {kinds or 'none'})", "Export it with its rhythm."
    )


def _lead_sets(series: Node) -> list[LeadSet]:
    """The sets of a series, joined where they begin together."""
    sets: list[LeadSet] = []
    for node in series.within("sequenceSet", not_in=_NESTED):
        one = read_set(node)
        if one is not None:
            sets.append(one)
        if len(sets) > MOST_SETS:
            raise AecgError(f"holds more than {MOST_SETS} sequence sets")
    joined: list[LeadSet] = []
    for one in sets:
        place = next((at for at, held in enumerate(joined) if held.begins_with(one)), None)
        if place is None:
            joined.append(one)
        else:
            joined[place] = joined[place].joined_to(one)
    if len(joined) < len(sets) and _contradicts(series, sets):
        return sets
    return joined


def _contradicts(series: Node, sets: list[LeadSet]) -> bool:
    """Whether the series' length says that sets with the same relative start ran in turn."""
    low, high = (
        moment_of(series.attribute("value", "effectiveTime", side)) for side in ("low", "high")
    )
    if low is None or high is None or all(one.clock != RELATIVE for one in sets):
        return False
    longest_s = max((lead.duration_s for one in sets for lead in one.leads.values()), default=0.0)
    return (high - low).total_seconds() > _ONE_AFTER_ANOTHER * longest_s
