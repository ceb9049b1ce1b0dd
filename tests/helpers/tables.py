"""The sample recordings as tables that do not say what their numbers are."""

from __future__ import annotations

from pathlib import Path

from core import read_recording
from core.shipped_files import samples_folder

RATE_HZ = 500.0


def bare_table(folder: Path, record: str, *, unit_stated: bool = False) -> Path:
    """A sample in mV, without times or a rate; *unit_stated* writes the unit into its headings."""
    recording = read_recording(samples_folder() / record)
    assert recording.sampling_rate_hz == RATE_HZ
    headings = [f"{lead} (mV)" if unit_stated else lead for lead in recording.leads]
    rows = (",".join(f"{value:.5f}" for value in row) for row in recording.signal_mv)
    path = folder / f"{record}.csv"
    path.write_text("\n".join([",".join(headings), *rows]) + "\n")
    return path
