"""Damaged annotated ECGs: bytes, and XML that stays well-formed but says something else."""

from __future__ import annotations

import re

import numpy as np

from tests.helpers.mutate import mutated

_VALUES = (
    *("", "0", "-1", "nan", "inf", "1e999", "1e-300", "-0", "0x10", "1_0", "1,5", "9" * 50),
    *("\N{ARABIC-INDIC DIGIT ONE}", "mmHg", "ms", "us", "V", "nV", "X X"),
    *("RHYTHM", "REPRESENTATIVE_BEAT", "TIME_RELATIVE", "20311399", "99999999999999"),
    *("MDC_ECG_LEAD_V1", "MDC_ECG_LEAD_X", "MDC_ECG_LEAD_"),
)
_NAMES = (
    *("component", "series", "derivation", "derivedSeries", "sequenceSet", "sequence", "code"),
    *("value", "head", "increment", "origin", "scale", "digits", "unknown"),
)
_ATTRIBUTE = re.compile(r'(?<==")[^"]*(?=")')
_ELEMENT = re.compile(r"<(\w+)(?:\s[^<>]*)?(?:/>|>[^<>]*</\1>)")
# With all that is inside, but for another of its own name: a start and its own end.
_WHOLE = re.compile(
    r"<(component|value|sequence|sequenceSet|series|derivation|derivedSeries)>"
    r"(?:(?!<\1>).)*?</\1>",
    re.DOTALL,
)
_NUMBER = re.compile(r"(?<=[ >])-?\d+(?=[ <])")


def damaged(content: bytes, rng: np.random.Generator) -> bytes:
    """A copy with faults: half of the copies in their bytes, half in what the XML says."""
    if rng.random() < 0.5:
        return mutated(content, rng)
    return reworded(content, rng)


def reworded(content: bytes, rng: np.random.Generator) -> bytes:
    """A copy with one to four faults in what the XML says; nearly all are XML still.

    Raises
    ------
    UnicodeDecodeError
        If the content is no UTF-8.
    """
    text = content.decode()
    for _ in range(int(rng.integers(1, 5))):
        text = _FAULTS[int(rng.integers(len(_FAULTS)))](text, rng)
    return text.encode()


def _any_match(pattern: re.Pattern[str], text: str, rng: np.random.Generator) -> tuple[int, int]:
    found = list(pattern.finditer(text))
    return found[int(rng.integers(len(found)))].span() if found else (0, 0)


def _other_value(text: str, rng: np.random.Generator) -> str:
    first, last = _any_match(_ATTRIBUTE, text, rng)
    return text[:first] + _VALUES[int(rng.integers(len(_VALUES)))] + text[last:]


def _other_number(text: str, rng: np.random.Generator) -> str:
    first, last = _any_match(_NUMBER, text, rng)
    return text[:first] + _VALUES[int(rng.integers(len(_VALUES)))] + text[last:]


def _without_element(text: str, rng: np.random.Generator) -> str:
    first, last = _any_match(_ELEMENT if rng.random() < 0.7 else _WHOLE, text, rng)
    return text[:first] + text[last:]


def _element_elsewhere(text: str, rng: np.random.Generator) -> str:
    first, last = _any_match(_ELEMENT if rng.random() < 0.7 else _WHOLE, text, rng)
    at, _ = _any_match(_ELEMENT, text, rng)
    return text[:at] + text[first:last] + text[at:]


def _other_name(text: str, rng: np.random.Generator) -> str:
    old, new = (_NAMES[int(rng.integers(len(_NAMES)))] for _ in range(2))
    return re.sub(rf"(</?){old}(?=[\s/>])", rf"\1{new}", text)


_FAULTS = (
    _other_value,
    _other_value,
    _other_number,
    _without_element,
    _element_elsewhere,
    _other_name,
)
