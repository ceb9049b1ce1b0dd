"""Open any recording: the format is recognised by content, not by the file's ending."""

from __future__ import annotations

import os
from pathlib import Path

from core.errors import RecordingError
from core.recordings.dicom_reader import looks_like_dicom, read_dicom
from core.recordings.recording import Recording
from core.recordings.wfdb_reader import looks_like_wfdb_header, read_wfdb

READABLE = "a WFDB record or a DICOM ECG waveform"


def read_recording(path: str | os.PathLike[str]) -> Recording:
    """Read a 12-lead recording from a file, or a WFDB record by its name.

    Parameters
    ----------
    path : str or path-like
        A file, or a WFDB record name with or without ``.hea``.

    Returns
    -------
    Recording

    Raises
    ------
    RecordingError
        With one line that says what is wrong, which file, and what would mend it.
    """
    chosen = Path(path)
    try:
        return _read(chosen)
    except OSError as error:
        raise RecordingError(
            f"{chosen.name}: the file cannot be opened ({error.strerror or 'unknown reason'}). "
            "Check that it exists and that you may read it."
        ) from error
    except MemoryError as error:
        raise RecordingError(
            f"{chosen.name}: the file claims more samples than fit into memory. "
            "Export the recording again."
        ) from error


def _read(chosen: Path) -> Recording:
    header = chosen.with_name(chosen.name + ".hea") if chosen.name else chosen
    if not chosen.is_file() and header.is_file():
        return read_wfdb(header)
    if chosen.is_dir():
        raise RecordingError(
            f"{chosen.name or chosen}: this is a folder. Name one recording inside it."
        )
    if not chosen.exists():
        raise RecordingError(f"{chosen}: there is no such file. Check the name and the folder.")
    with chosen.open("rb") as file:
        start = file.read(4096)
    if not start:
        raise RecordingError(f"{chosen.name}: the file is empty. Export the recording again.")
    if looks_like_dicom(start):
        return read_dicom(chosen)
    if looks_like_wfdb_header(start):
        return read_wfdb(chosen)
    beside = chosen.with_suffix(".hea")
    if beside.is_file():  # the signal file of a WFDB record was named
        return read_wfdb(beside)
    raise RecordingError(
        f"{chosen.name}: the content is not that of any readable format. Choose {READABLE}."
    )
