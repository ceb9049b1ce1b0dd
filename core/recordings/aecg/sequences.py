"""Sequence sets of an annotated ECG: leads on one time axis, and their samples in mV.

A set holds one sequence of times (head and increment) and one for each lead (origin, scale and
digits): value = origin + digit x scale.
"""

from __future__ import annotations

import math
from collections.abc import Collection
from dataclasses import dataclass
from datetime import datetime

import numpy as np
from numpy.typing import NDArray

from core.recordings.aecg.digits import Digits, number_of
from core.recordings.aecg.document import Node
from core.recordings.aecg.errors import EXPORT_AGAIN, AecgError
from core.recordings.aecg.times import moment_of
from core.recordings.assemble import STEP_RANGE_MV, Channel
from core.recordings.csv_times import decimals_of
from core.recordings.leads import (
    CHEST_LEADS,
    TWELVE_LEADS,
    can_derive_limb_leads,
    lead_of_label,
)
from core.recordings.shown import shown
from core.recordings.units import MILLIVOLTS_PER_UNIT

ABSOLUTE, RELATIVE = "TIME_ABSOLUTE", "TIME_RELATIVE"
_LEAD = "MDC_ECG_LEAD_"
# The nomenclature has a code of its own for aVR upside down.
_INVERTED_AVR = "AVRNEG"
_PER_SECOND = {"s": 1.0, "ms": 1e3, "us": 1e6, "µs": 1e6, "μs": 1e6}
_EPOCH = datetime(1970, 1, 1)
# Sets begin together if their starts agree to so many samples: heads are rounded by writers.
_SAME_START_SAMPLES = 0.5
# Samples written with decimals: copies are kept no finer than 1 nV, which 32 bits hold up to 2 V.
_FINEST_COUNTS_PER_MV = 1e6
_VALUES_FOR_DECIMALS = 10_000


@dataclass(frozen=True, slots=True, eq=False)
class LeadSequence:
    """Samples of one lead, not yet scaled."""

    lead: str
    sign: float
    value: Node
    rate_hz: float

    @property
    def digits(self) -> Digits:
        """Its samples; empty where it has none."""
        node = self.value.first("digits")
        return Digits() if node is None or node.digits is None else node.digits

    @property
    def duration_s(self) -> float:
        """How long it was recorded."""
        return self.digits.n_values / self.rate_hz


@dataclass(frozen=True, slots=True, eq=False)
class LeadSet:
    """Leads whose samples begin at the same time.

    Attributes
    ----------
    clock : str
        What the start counts from; starts of two clocks cannot be compared.
    start_s : float, optional
        None where the file does not say.
    rate_hz : float
        Of the set; leads that were joined to it keep their own.
    """

    clock: str
    start_s: float | None
    rate_hz: float
    leads: dict[str, LeadSequence]

    @property
    def is_complete(self) -> bool:
        """Whether it holds a 12-lead ECG."""
        return is_complete(self.leads)

    @property
    def duration_s(self) -> float:
        """How long all of its twelve leads last."""
        return min(
            (lead.duration_s for name, lead in self.leads.items() if name in TWELVE_LEADS),
            default=0.0,
        )

    def begins_with(self, other: LeadSet) -> bool:
        """Whether another set begins at the same time."""
        if self.clock != other.clock or self.start_s is None or other.start_s is None:
            return False
        slack_s = _SAME_START_SAMPLES / max(self.rate_hz, other.rate_hz)
        return abs(self.start_s - other.start_s) <= slack_s

    def joined_to(self, other: LeadSet) -> LeadSet:
        """Both sets' leads; one that is in both is this set's."""
        return LeadSet(self.clock, self.start_s, self.rate_hz, other.leads | self.leads)

    def channels(self) -> list[Channel]:
        """The leads in mV, once: their samples are given away.

        Raises
        ------
        AecgError
            If a scale is missing, without a unit of voltage or impossible, or a sample is no
            number.
        """
        return [_channel(lead) for lead in self.leads.values()]


def is_complete(leads: Collection[str]) -> bool:
    """Whether all twelve leads are among these or follow from them."""
    return all(lead in leads for lead in CHEST_LEADS) and can_derive_limb_leads(leads)


def read_set(node: Node) -> LeadSet | None:
    """A sequence set; None where it holds no leads.

    Raises
    ------
    AecgError
        If the time between samples is missing, without a unit or impossible.
    """
    times: dict[str, Node] = {}
    values: list[tuple[str, float, Node]] = []
    # Of a set within a set, which the standard does not have, each keeps its own.
    for sequence in node.within("sequence", not_in=("sequenceSet",)):
        code, value = sequence.code.upper(), sequence.first("value")
        if value is None:
            continue
        if code in (ABSOLUTE, RELATIVE):
            times.setdefault(code, value)
        elif (found := _lead_of_code(code)) is not None:
            values.append((*found, value))
    if not values:
        return None
    rate_hz = _rate_hz(list(times.values()))
    clock = ABSOLUTE if ABSOLUTE in times else RELATIVE
    leads: dict[str, LeadSequence] = {}
    for name, sign, value in values:
        lead = LeadSequence(name, sign, value, rate_hz)
        # A lead without samples was not recorded; one with faulty ones is refused if it is used.
        if lead.digits.n_values or lead.digits.fault is not None:
            leads.setdefault(name, lead)
    return LeadSet(clock, _start_s(clock, times[clock]), rate_hz, leads)


def _lead_of_code(code: str) -> tuple[str, float] | None:
    if not code.startswith(_LEAD):
        return None
    name = code.removeprefix(_LEAD)
    return ("aVR", -1.0) if name == _INVERTED_AVR else lead_of_label(name)


def _rate_hz(times: list[Node]) -> float:
    if not times:
        raise AecgError("states no time between samples")
    rates_hz = []
    for value in times:
        # HL7's generated lists may dwell on a value, or begin again; times of samples do neither.
        if value.attributes.get("denominator", "1") != "1" or "period" in value.attributes:
            raise AecgError("states times of samples that are not evenly spaced")
        increment = value.first("increment")
        if increment is None:
            raise AecgError("states no time between samples")
        step = _number(increment, "the time between samples")
        if step <= 0:
            raise AecgError(f"states {step:g} as the time between samples")
        rates_hz.append(_per_unit(increment, _PER_SECOND, "the time between samples") / step)
    if not all(math.isclose(rate, rates_hz[0], rel_tol=1e-6) for rate in rates_hz):
        raise AecgError("states two different times between the same samples")
    return rates_hz[0]


def _start_s(clock: str, value: Node) -> float | None:
    head = value.first("head")
    if head is None:
        return None
    if clock == ABSOLUTE:
        moment = moment_of(head.attributes.get("value"))
        return None if moment is None else (moment - _EPOCH).total_seconds()
    number = number_of(head.attributes.get("value"))
    per_second = _PER_SECOND.get((head.attributes.get("unit") or "").strip().lower())
    return None if number is None or per_second is None else number / per_second


def _channel(lead: LeadSequence) -> Channel:
    name, digits = lead.lead, lead.digits
    if digits.fault is not None:
        raise AecgError(f"has '{digits.fault}', which is no number, among the samples of {name}")
    scale = lead.value.first("scale")
    if scale is None:
        raise AecgError(f"does not state the scale of lead {name}")
    step_mv = _millivolts(scale, f"the scale of lead {name}")
    smallest_mv, largest_mv = STEP_RANGE_MV
    if not smallest_mv <= abs(step_mv) <= largest_mv:
        raise AecgError(f"states {step_mv:g} mV as the scale of lead {name}, which no recorder has")
    values = digits.take()
    with np.errstate(over="ignore", invalid="ignore"):  # refused as no ECG's when assembled
        counts_per_mv = _counts_per_mv(values, step_mv)
        values *= lead.sign * step_mv
        values += lead.sign * _origin_mv(name, lead.value)
    return Channel(name, values, counts_per_mv, lead.rate_hz)


def _origin_mv(name: str, value: Node) -> float:
    origin = value.first("origin")
    if origin is None or number_of(origin.attributes.get("value")) == 0:
        return 0.0
    return _millivolts(origin, f"the origin of lead {name}")


def _counts_per_mv(values: NDArray[np.float64], step_mv: float) -> float:
    """Steps in one mV: of the scale, or of the decimals that the samples themselves have."""
    decimals = decimals_of(values[:_VALUES_FOR_DECIMALS])
    counts_per_mv = 10.0**decimals / abs(step_mv)
    return min(counts_per_mv, _FINEST_COUNTS_PER_MV) if decimals else counts_per_mv


def _millivolts(node: Node, what: str) -> float:
    factor = _per_unit(node, MILLIVOLTS_PER_UNIT, what)
    return _number(node, what) * factor


def _number(node: Node, what: str) -> float:
    stated = node.attributes.get("value")
    number = number_of(stated)
    if number is None:
        raise AecgError(f"states {what} as '{shown(stated or '')}', which is no number")
    return number


def _per_unit(node: Node, units: dict[str, float], what: str) -> float:
    unit = (node.attributes.get("unit") or "").strip()
    factor = units.get(unit.lower())
    if factor is None:
        stated = f"in the unit '{shown(unit)}', which cannot be read" if unit else "without a unit"
        is_voltage = units is MILLIVOLTS_PER_UNIT
        raise AecgError(
            f"states {what} {stated}", "Export it in microvolts." if is_voltage else EXPORT_AGAIN
        )
    return factor
