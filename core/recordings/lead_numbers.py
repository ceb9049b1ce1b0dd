"""Numbers that stand for leads: SCP-ECG's, and the MDC codes built on them."""

from __future__ import annotations

# EN 1064, 5.6: leads by number. DICOM CID 3001's MDC codes are 131072 more.
_LEADS = {
    1: "I",
    2: "II",
    **{number: f"V{number - 2}" for number in range(3, 9)},
    61: "III",
    62: "aVR",
    63: "aVL",
    64: "aVF",
    9: "V7",
    **{number: f"V{number - 8}R" for number in range(11, 15)},
    16: "X",
    17: "Y",
    18: "Z",
    66: "V8",
    67: "V9",
}
_INVERTED_AVR = 65
MDC_PARTITION = 131072


def lead_of_scp_number(number: int) -> tuple[str, float] | None:
    """The lead of an SCP-ECG number and the sign to bring it to that lead; None for others."""
    if number == _INVERTED_AVR:
        return "aVR", -1.0
    lead = _LEADS.get(number)
    return None if lead is None else (lead, 1.0)


def lead_of_code(code: int) -> tuple[str, float] | None:
    """The same for an MDC or SCP-ECG number."""
    return lead_of_scp_number(code - MDC_PARTITION if code > MDC_PARTITION else code)
