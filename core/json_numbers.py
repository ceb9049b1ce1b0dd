"""Numbers and results as JSON can hold them."""

from __future__ import annotations

import json
import math
from collections.abc import Iterable
from typing import Any


def number_or_none(value: float | None) -> float | None:
    """A Python float, or None for NaN, infinity and None."""
    if value is None or not math.isfinite(value):
        return None
    return float(value)


def numbers_or_none(values: Iterable[float]) -> list[float | None]:
    """Each value as `number_or_none` gives it."""
    return [number_or_none(value) for value in values]


def as_json(content: dict[str, Any]) -> bytes:
    """A result as JSON text; NaN is refused rather than written."""
    text = json.dumps(content, ensure_ascii=False, indent=1, allow_nan=False)
    return (text + "\n").encode()
