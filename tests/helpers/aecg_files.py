"""Annotated ECGs of invented people, written by hand from the standard's structure."""

from __future__ import annotations

from collections.abc import Mapping, Sequence

import numpy as np
from numpy.typing import NDArray

NAMES = ("I", "II", "V1", "V2", "V3", "V4", "V5", "V6")
# 0.12 s at 500 Hz, as `plain` writes them.
COUNTS = np.random.default_rng(1).integers(-400, 400, (8, 60))
HL7 = "urn:hl7-org:v3"


def digits(
    values: Sequence[int], *, scale: str = "2.5", unit: str = "uV", origin: str = "0"
) -> str:
    """A list of physical quantities: value = origin + digit x scale."""
    return (
        f'<value xsi:type="SLIST_PQ"><origin value="{origin}" unit="{unit}"/>'
        f'<scale value="{scale}" unit="{unit}"/>'
        f"<digits>{' '.join(map(str, values))}</digits></value>"
    )


def sequence(code: str, value: str) -> str:
    return f'<component><sequence><code code="{code}"/>{value}</sequence></component>'


def times(*, step: str = "0.002", unit: str = "s", head: str = "20311112224005") -> str:
    return sequence(
        "TIME_ABSOLUTE",
        f'<value xsi:type="GLIST_TS"><head value="{head}"/>'
        f'<increment value="{step}" unit="{unit}"/></value>',
    )


def sequence_set(leads: Mapping[str, str], time: str | None = None) -> str:
    """Leads by their name, such as ``"AVR"``, with their values."""
    parts = [times() if time is None else time]
    parts += [sequence(f"MDC_ECG_LEAD_{name}", value) for name, value in leads.items()]
    return f"<component><sequenceSet>{''.join(parts)}</sequenceSet></component>"


def series(*sets: str, code: str = "RHYTHM") -> str:
    return (
        f'<component><series><code code="{code}"/><effectiveTime><low value="20311112224005"/>'
        f"</effectiveTime>{FILTERS}{''.join(sets)}</series></component>"
    )


FILTERS = """
<controlVariable><controlVariable><code code="MDC_ATTR_FILTER_LOW_PASS"/>
<component><controlVariable><code code="MDC_ATTR_FILTER_CUTOFF_FREQ"/>
<value xsi:type="PQ" value="150" unit="Hz"/></controlVariable></component>
</controlVariable></controlVariable>
"""
PERSON = """
<componentOf><timepointEvent><componentOf><subjectAssignment><subject><trialSubject>
<id root="1.2.3" extension="INVENTED-01"/>
<subjectDemographicPerson><name>Invented Ash</name><administrativeGenderCode code="F"/>
<birthTime value="19700309"/></subjectDemographicPerson>
</trialSubject></subject></subjectAssignment></componentOf></timepointEvent></componentOf>
"""


def annotated_ecg(*parts: str, person: str = PERSON, head: str = "") -> bytes:
    """The whole document."""
    return (
        f'<?xml version="1.0" encoding="UTF-8"?>{head}'
        f'<AnnotatedECG xmlns="{HL7}" xmlns:xsi="http://www.w3.org/2001/XMLSchema-instance">'
        f"{person}{''.join(parts)}</AnnotatedECG>"
    ).encode()


def leads(counts: NDArray[np.int64] = COUNTS, **options: str) -> dict[str, str]:
    return {name: digits(row, **options) for name, row in zip(NAMES, counts, strict=True)}


def plain(*, time: str | None = None, **changed: str) -> bytes:
    """A whole file; *changed* are values of leads by their name, None to leave one out."""
    made = {name: value for name, value in (leads() | changed).items() if value is not None}
    return annotated_ecg(series(sequence_set(made, time)))


def relative(*, step: str = "2", unit: str = "ms", head: str = "0") -> str:
    """Times counted from a start that is not stated: a list of physical quantities."""
    return sequence(
        "TIME_RELATIVE",
        f'<value xsi:type="GLIST_PQ"><head value="{head}" unit="{unit}"/>'
        f'<increment value="{step}" unit="{unit}"/></value>',
    )


def derived(code: str, n: int = 600) -> str:
    """A series derived from the one around it, as the standard nests it."""
    inside = sequence_set(leads(np.resize(COUNTS, (8, n))), relative())
    return f'<derivation><derivedSeries><code code="{code}"/>{inside}</derivedSeries></derivation>'


def halves(first: str, second: str, *, around: str = "") -> bytes:
    """Limb leads in one set, chest leads in another, each with its own times."""
    made = leads()
    limb = sequence_set({name: made[name] for name in NAMES[:2]}, first)
    chest = sequence_set({name: made[name] for name in NAMES[2:]}, second)
    one = series(limb, chest)
    if around:
        one = one.replace('<low value="20311112224005"/>', around)
    return annotated_ecg(one)


def with_derived_beat(content: bytes) -> bytes:
    """The same document with a short beat derived from its series."""
    beat = derived("REPRESENTATIVE_BEAT", n=40).encode()
    return content.replace(b"</series>", beat + b"</series>")
