"""Write a recording as a table of samples, in mV, with what is known of it in comment lines."""

from __future__ import annotations

import math
from collections.abc import Iterator

import numpy as np
from numpy.typing import NDArray

from core.errors import RecordingError
from core.recordings.all_leads import all_leads_mv, steps_of_all_leads
from core.recordings.comments import said_of
from core.recordings.recording import Recording

# A step of 1 pV is finer than any amplifier; more decimals would only be rounding noise.
MOST_DECIMALS = 9
_ROWS_AT_ONCE = 20_000


def recording_csv(recording: Recording) -> bytes:
    """A table that `read_csv` reads back to within half a step of the quantisation.

    A missing sample is an empty cell.

    Raises
    ------
    RecordingError
        If a sample is infinite.
    """
    leads = [*recording.leads, *recording.further_leads]
    table_mv = all_leads_mv(recording)
    if np.isinf(table_mv).any():
        raise RecordingError(
            f"{recording.source.name}: the signal holds infinite values. Choose another recording."
        )
    decimals = _decimals(recording, table_mv)
    lines = [f"# {key}: {value}" for key, value in _said(recording)]
    lines.append(",".join(["time (s)", *(f"{lead} (mV)" for lead in leads)]))
    text = "\n".join([*lines, *_rows(table_mv, decimals, recording.sampling_rate_hz)])
    return (text + "\n").encode()


def _decimals(recording: Recording, table_mv: NDArray[np.float64]) -> list[int]:
    """Decimals of every column: those of a step where they hold its samples exactly, else two more.

    Steps that are no power of ten, and leads derived from others, fall between the decimals.
    """
    decimals = []
    for column, counts_per_mv in enumerate(steps_of_all_leads(recording)):
        of_step = min(max(math.ceil(math.log10(counts_per_mv) - 1e-9), 0), MOST_DECIMALS)
        values = table_mv[:, column]
        known = values[~np.isnan(values)]
        exact = bool(np.all(np.abs(np.round(known, of_step) - known) < 1e-12))
        decimals.append(of_step if exact else min(of_step + 2, MOST_DECIMALS))
    return decimals


def _rows(table_mv: NDArray[np.float64], decimals: list[int], rate_hz: float) -> Iterator[str]:
    """The rows, a block of lines at a time."""
    time_decimals = _time_decimals(rate_hz)
    form = ",".join(f"%.{digits}f" for digits in [time_decimals, *decimals])
    for first in range(0, table_mv.shape[0], _ROWS_AT_ONCE):
        block = table_mv[first : first + _ROWS_AT_ONCE]
        times = np.arange(first, first + block.shape[0]) / rate_hz
        # Rounded first: a value just below 0 would be written as minus 0.
        rounded = [np.round(column, n) + 0.0 for column, n in zip(block.T, decimals, strict=True)]
        columns = [column.tolist() for column in (times, *rounded)]
        text = "\n".join(form % row for row in zip(*columns, strict=True))
        yield text.replace("nan", "") if np.isnan(block).any() else text


def _time_decimals(rate_hz: float) -> int:
    """The fewest decimals, from three on, that keep the time of every sample."""
    step_s = 1.0 / rate_hz
    for decimals in range(3, MOST_DECIMALS):
        if abs(round(step_s, decimals) - step_s) < 1e-12:
            return decimals
    return MOST_DECIMALS


def _said(recording: Recording) -> Iterator[tuple[str, str]]:
    yield from said_of(recording)
    if recording.recorded_at is not None:
        yield "recorded at", recording.recorded_at.isoformat()
    yield "sampling_rate_hz", repr(recording.sampling_rate_hz)
    steps = [repr(count) for count in steps_of_all_leads(recording)]
    yield "counts_per_mv", steps[0] if len(set(steps)) == 1 else " ".join(steps)
    if recording.leads_derived:
        yield "leads derived", " ".join(recording.leads_derived)
