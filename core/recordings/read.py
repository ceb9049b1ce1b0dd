"""Open any recording: the format is recognised by content, not by the file's ending."""

from __future__ import annotations

import os
from collections.abc import Callable
from pathlib import Path

from core.errors import RecordingError
from core.recordings.aecg.reader import looks_like_aecg, read_aecg
from core.recordings.cleanest import cleanest_of
from core.recordings.csv_reader import looks_like_csv, read_csv
from core.recordings.dicom_reader import looks_like_dicom, open_dicom
from core.recordings.edf_reader import looks_like_edf, open_edf
from core.recordings.held import Held, asked_stretch, held_in_memory
from core.recordings.recording import Recording
from core.recordings.scp.container import looks_like_scp
from core.recordings.scp.reader import read_scp
from core.recordings.wfdb_reader import looks_like_wfdb_header, open_wfdb

READABLE = (
    "a WFDB record, a DICOM ECG waveform, an EDF, BDF or SCP-ECG file, an annotated ECG (HL7 "
    "aECG), or a table (CSV)"
)


def _whole(read: Callable[[Path], Recording]) -> Callable[[Path], Held]:
    return lambda path: held_in_memory(read(path))


# Recognised by content, the surest signs first; a table is any text that names leads.
_READERS: tuple[tuple[Callable[[bytes], bool], Callable[[Path], Held]], ...] = (
    (looks_like_dicom, open_dicom),
    (looks_like_scp, _whole(read_scp)),
    (looks_like_edf, open_edf),
    (looks_like_aecg, _whole(read_aecg)),
    (looks_like_wfdb_header, open_wfdb),
)


def read_recording(
    path: str | os.PathLike[str],
    *,
    unit: str | None = None,
    sampling_rate_hz: float | None = None,
    stretch_s: tuple[float, float] | None = None,
) -> Recording:
    """Read a 12-lead recording from a file, or a WFDB record by its name.

    Of a recording that memory doesn't hold, the cleanest ten seconds are read.

    Parameters
    ----------
    path : str or path-like
        A file, or a WFDB record name with or without ``.hea``.
    unit : str, optional
        Unit of the leads of a table that states none, such as ``"mV"``.
    sampling_rate_hz : float, optional
        Of a table that has no time column and states no rate.
    stretch_s : tuple of float, optional
        From when to when to read, in s from the recording's start; a second at least.

    Returns
    -------
    Recording

    Raises
    ------
    TableIncomplete
        If a table states no unit or no rate, and none is given.
    RecordingError
        With one line that says what is wrong, which file, and what would mend it.
    """
    chosen = Path(path)
    try:
        held = _open(chosen, unit, sampling_rate_hz)
        if stretch_s is not None:
            return asked_stretch(held, *stretch_s)
        return held.whole() if held.fits_memory else cleanest_of(held)
    except OSError as error:
        raise RecordingError(
            f"{chosen.name}: the file cannot be opened ({error.strerror or 'unknown reason'}). "
            "Check that it exists and that you may read it."
        ) from error
    except MemoryError as error:
        raise RecordingError(
            f"{chosen.name}: the file claims more samples than fit into memory. "
            "Export a shorter stretch of it."
        ) from error


def _open(chosen: Path, unit: str | None, sampling_rate_hz: float | None) -> Held:
    header = chosen.with_name(chosen.name + ".hea") if chosen.name else chosen
    if not chosen.is_file() and header.is_file():
        return open_wfdb(header)
    if chosen.is_dir():
        raise RecordingError(
            f"{chosen.name or chosen}: this is a folder. Name one recording inside it."
        )
    if not chosen.exists():
        raise RecordingError(f"{chosen}: there is no such file. Check the name and the folder.")
    if not chosen.is_file():  # a pipe or a device may never end
        raise RecordingError(
            f"{chosen.name}: this is a pipe or a device, not a file. Save the recording to a file."
        )
    with chosen.open("rb") as file:
        start = file.read(4096)
    if not start:
        raise RecordingError(f"{chosen.name}: the file is empty. Export the recording again.")
    for recognises, read in _READERS:
        if recognises(start):
            return read(chosen)
    if looks_like_csv(start):
        return held_in_memory(read_csv(chosen, unit=unit, sampling_rate_hz=sampling_rate_hz))
    beside = chosen.with_suffix(".hea")
    if beside.is_file():  # the signal file of a WFDB record was named
        return open_wfdb(beside)
    raise RecordingError(
        f"{chosen.name}: the content is not that of any readable format. Choose {READABLE}."
    )
