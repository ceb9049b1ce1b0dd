"""Further leads in words: what was measured, and that it is not judged."""

from __future__ import annotations

from collections.abc import Mapping

from core.wording.lists import joined
from core.wording.numbers import NARROW, millivolts, signed

HEADING = "Further leads: measured, not judged"
VALUES = "ST, T: earlier / later, in mV"
MEANING = (
    "Measured where the twelve leads place J and T. No placement reach is known for these leads, "
    "so a change in them may come from the electrodes or from the heart. A dash: the recording "
    "does not hold the lead, or no usable tracing in it."
)
_WHY = "Measured, not judged: no placement reach is known for this lead."
_NAMES = {"st_mv": "ST", "t_mv": "T"}
Measures = Mapping[str, float | None]


def values_of_further_lead(earlier: Measures | None, later: Measures | None) -> list[str]:
    """``["ST +0.02 / +0.10", "T +0.31 / –"]``: earlier and later, a dash for what is not there."""
    return [
        f"{short} {signed((earlier or {}).get(name))} / {signed((later or {}).get(name))}"
        for name, short in _NAMES.items()
    ]


def reason_of_further_lead(
    earlier: Measures | None, later: Measures | None, faults: Mapping[str, str]
) -> str:
    """What was measured in which recording, and why it is not judged.

    Parameters
    ----------
    earlier, later : mapping of measure to mV, or None
        None where a recording does not hold the lead.
    faults : mapping of ``"earlier"`` or ``"later"`` to what is wrong with its tracing
    """
    held = {which: m for which, m in (("earlier", earlier), ("later", later)) if m is not None}
    told = []
    if len(held) == 1:
        told.append(f"Only the {next(iter(held))} recording holds this lead.")
    if faults:
        unusable = joined([f"{which} tracing {fault}" for which, fault in faults.items()])
        told.append(f"{unusable[0].upper()}{unusable[1:]}.")
    measured = [
        f"{which} ST{NARROW}{millivolts(m['st_mv'])} and T{NARROW}{millivolts(m['t_mv'])}"
        for which, m in held.items()
        if which not in faults
    ]
    if measured:
        words = ", ".join(measured)
        told.append(f"{words[0].upper()}{words[1:]}.")
    return " ".join([*told, _WHY])
