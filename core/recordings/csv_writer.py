"""Write a recording as a table of samples, in mV, with what is known of it in comment lines."""

from __future__ import annotations

import math
from collections.abc import Iterator
from pathlib import Path

import numpy as np
from numpy.typing import NDArray

from core.errors import RecordingError
from core.files import write_atomically
from core.recordings.recording import Recording

# A step of 1 pV is finer than any amplifier; more decimals would only be rounding noise.
MOST_DECIMALS = 9
_ROWS_AT_ONCE = 20_000


def write_csv(recording: Recording, path: Path) -> None:
    """Write a table that `read_csv` reads back to within half a step of the quantisation.

    A missing sample is an empty cell. The file appears whole or not at all.

    Raises
    ------
    RecordingError
        If a sample is infinite.
    OSError
        If the folder cannot be written to.
    """
    leads = [*recording.leads, *recording.further_leads]
    table_mv = _table(recording)
    if np.isinf(table_mv).any():
        raise RecordingError(
            f"{recording.source.name}: the signal holds infinite values. Choose another recording."
        )
    decimals = _decimals(recording, table_mv)
    lines = [f"# {key}: {value}" for key, value in _said(recording)]
    lines.append(",".join(["time (s)", *(f"{lead} (mV)" for lead in leads)]))
    text = "\n".join([*lines, *_rows(table_mv, decimals, recording.sampling_rate_hz)])
    write_atomically(path, (text + "\n").encode())


def _table(recording: Recording) -> NDArray[np.float64]:
    if not recording.further_leads:
        return recording.signal_mv
    return np.hstack([recording.signal_mv, recording.further_mv])


def _decimals(recording: Recording, table_mv: NDArray[np.float64]) -> list[int]:
    """Decimals of every column: those of a step where they hold its samples exactly, else two more.

    Steps that are no power of ten, and leads derived from others, fall between the decimals.
    """
    finest = max(recording.counts_per_mv)
    counts = [*recording.counts_per_mv, *[finest] * len(recording.further_leads)]
    decimals = []
    for column, counts_per_mv in enumerate(counts):
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
    subject, filters = recording.subject, recording.filters
    counts = [f"{count!r}" for count in recording.counts_per_mv]
    same = len(set(counts)) == 1
    steps = counts + [repr(max(recording.counts_per_mv))] * len(recording.further_leads)
    said = {
        "patient id": subject.id,
        "name": subject.name,
        "sex": subject.sex,
        "age": None if subject.age_years is None else f"{subject.age_years:g}",
        "birth date": subject.born_on and subject.born_on.isoformat(),
        "recorded at": recording.recorded_at and recording.recorded_at.isoformat(),
        "sampling_rate_hz": repr(recording.sampling_rate_hz),
        "counts_per_mv": counts[0] if same else " ".join(steps),
        "leads derived": " ".join(recording.leads_derived),
        "high_pass_hz": filters.high_pass_hz and repr(filters.high_pass_hz),
        "low_pass_hz": filters.low_pass_hz and repr(filters.low_pass_hz),
        "notch_hz": filters.notch_hz and repr(filters.notch_hz),
    }
    for key, value in said.items():
        # A value of several lines would end up among the samples.
        plain = " ".join((value or "").split())
        if plain:
            yield key, plain
