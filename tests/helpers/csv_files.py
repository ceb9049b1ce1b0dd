"""Tables of samples, written by numpy and not by the program."""

from __future__ import annotations

import io

import numpy as np
from numpy.typing import NDArray

from core.recordings.leads import TWELVE_LEADS

LEADS = list(TWELVE_LEADS)
RATE = "# sampling_rate_hz: 500\n"


def values_uv(n: int = 300, seed: int = 4) -> NDArray[np.int64]:
    """Whole microvolts, shape (n, 12)."""
    return np.random.default_rng(seed).integers(-3000, 3000, (n, 12))


def table(
    values: NDArray[np.int64],
    headings: list[str],
    *,
    delimiter: str = ",",
    form: str = "%.3f",
    above: str = "",
    decimal: str = ".",
) -> str:
    """A table as numpy writes it."""
    text = io.StringIO()
    np.savetxt(text, values, fmt=form, delimiter=delimiter)
    rows = text.getvalue().replace(".", decimal)
    return f"{above}{delimiter.join(headings)}\n{rows}"


def in_mv(n: int = 300, **said: object) -> str:
    headings = [f"{lead} (mV)" for lead in LEADS]
    return table(values_uv(n) / 1000, headings, **{"above": RATE, **said})


def with_time(
    times: NDArray[np.float64], heading: str, *, form: str = "%.6g", n: int = 300, **said
) -> str:
    headings = [heading, *(f"{lead} (mV)" for lead in LEADS)]
    values = np.column_stack([times, values_uv(n) / 1000])
    return table(values, headings, form=[form, *["%.3f"] * 12], **said)  # type: ignore[arg-type]


def small_tables() -> dict[str, bytes]:
    """Four tables of forty rows: other delimiters, decimal marks, encodings and headings."""
    comments = "# patient id: P\n# recorded at: 2031-11-12\n# unit: mV\n"
    in_ms = with_time(np.arange(40) * 2.0, "time (ms)", n=40, delimiter=";", decimal=",")
    quoted = table(values_uv(40), LEADS, form='"%d"', above=RATE + "# unit: uV\n")
    return {
        "commas": in_mv(40).encode(),
        "semicolons": in_ms.encode(),
        "utf-16": (comments + in_mv(40)).encode("utf-16"),
        "quoted": quoted.encode(),
    }
