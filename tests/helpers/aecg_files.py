"""Annotated ECGs of invented people, written by hand from the standard's structure."""

from __future__ import annotations

from collections.abc import Mapping, Sequence

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
