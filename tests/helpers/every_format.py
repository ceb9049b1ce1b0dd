"""One tracing in every format that is read, each file by an independent writer or byte by byte.

`WRITERS` is the table: a name, who wrote the file, and a function that writes counts of 2.5 uV,
shape (n_samples, 12), into a folder and gives the path to open.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, replace
from datetime import datetime
from functools import partial
from pathlib import Path

import edfio
import numpy as np
import wfdb
from numpy.typing import NDArray

from core.recordings.csv_writer import recording_csv
from core.recordings.leads import TWELVE_LEADS
from core.recordings.recording import Recording
from core.recordings.wfdb_writer import write_wfdb
from sample_records.maker.dicom_file import waveform_group
from tests.helpers import aecg_files, edf_files
from tests.helpers import scp_files as scp
from tests.helpers.dicom_files import write_object
from tests.helpers.synthetic import as_recording

RATE_HZ = 500
STEP_MV = 0.0025
LEADS = list(TWELVE_LEADS)
STARTED = datetime(2031, 11, 12, 22, 40, 5)
SCP_NUMBERS = (1, 2, 61, 62, 63, 64, 3, 4, 5, 6, 7, 8)
Counts = NDArray[np.int64]


@dataclass(frozen=True)
class Writer:
    """How a file is made, and who makes it."""

    made_by: str
    write: Callable[[Path, Counts], Path]


def wfdb_record(fmt: str, folder: Path, counts: Counts) -> Path:
    wfdb.wrsamp(
        "whole",
        fs=RATE_HZ,
        units=["mV"] * 12,
        sig_name=LEADS,
        d_signal=np.asarray(counts, dtype=np.int64),
        fmt=[fmt] * 12,
        adc_gain=[1 / STEP_MV] * 12,
        baseline=[0] * 12,
        base_datetime=STARTED,
        write_dir=str(folder),
    )
    return folder / "whole.hea"


def wfdb_leads_apart(folder: Path, counts: Counts) -> Path:
    """Limb leads in one signal file, chest leads in another, in microvolts."""
    for name, part in (("limb", slice(0, 6)), ("chest", slice(6, 12))):
        counts[:, part].astype("<i2").tofile(folder / f"{name}.dat")
    lines = [f"apart 12 {RATE_HZ} {counts.shape[0]} 22:40:05 12/11/2031"]
    for column, lead in enumerate(LEADS):
        name = "limb" if column < 6 else "chest"
        lines.append(f"{name}.dat 16 0.4(0)/uV 16 0 {counts[0, column]} 0 0 {lead}")
    (folder / "apart.hea").write_text("\n".join(lines) + "\n")
    return folder / "apart.hea"


def wfdb_segments(folder: Path, counts: Counts) -> Path:
    """Two segments of one record, one after the other."""
    half = counts.shape[0] // 2
    lines = [f"whole/2 12 {RATE_HZ} {counts.shape[0]} 22:40:05 12/11/2031"]
    for name, part in (("first", counts[:half]), ("second", counts[half:])):
        part.astype("<i2").tofile(folder / f"{name}.dat")
        head = [f"{name} 12 {RATE_HZ} {part.shape[0]}"]
        head += [f"{name}.dat 16 400(0)/mV 16 0 {part[0, k]} 0 0 {LEADS[k]}" for k in range(12)]
        (folder / f"{name}.hea").write_text("\n".join(head) + "\n")
        lines.append(f"{name} {part.shape[0]}")
    (folder / "whole.hea").write_text("\n".join(lines) + "\n")
    return folder / "whole.hea"


def dicom(folder: Path, counts: Counts) -> Path:
    group = waveform_group(counts.astype(np.int16), LEADS, RATE_HZ, step_uv=STEP_MV * 1000)
    return write_object(folder / "whole.dcm", group, recorded_at=STARTED)


def edfio_file(form: str, folder: Path, counts: Counts) -> Path:
    signal_class, file_class = (
        (edfio.EdfSignal, edfio.Edf) if form == "EDF" else (edfio.BdfSignal, edfio.Bdf)
    )
    limit = 1 << (15 if form == "EDF" else 23)
    signals = [
        signal_class(
            counts[:, column] * STEP_MV,
            RATE_HZ,
            label=lead,
            physical_dimension="mV",
            physical_range=(-10, 10),
            digital_range=(-limit, limit - 1),
        )
        for column, lead in enumerate(LEADS)
    ]
    path = folder / f"whole.{form.lower()}"
    file_class(signals, starttime=STARTED.time()).write(path)
    return path


def edf_interrupted(folder: Path, counts: Counts) -> Path:
    """EDF+D whose records follow on without a gap, a second each."""
    records = counts.reshape(-1, RATE_HZ, 12)
    signals = [
        edf_files.Signal(lead, records[:, :, k], physical=(-81920, 81917.5))
        for k, lead in enumerate(LEADS)
    ]
    path = folder / "whole.edf"
    told = edf_files.starts(range(records.shape[0]))
    path.write_bytes(edf_files.edf_bytes([*signals, told], reserved="EDF+D"))
    return path


def aecg(folder: Path, counts: Counts) -> Path:
    leads = {lead.upper(): aecg_files.digits(counts[:, k].tolist()) for k, lead in enumerate(LEADS)}
    path = folder / "whole.xml"
    path.write_bytes(aecg_files.annotated_ecg(aecg_files.series(aecg_files.sequence_set(leads))))
    return path


def scp_record(
    protocol: int,
    order: int,
    coder: Callable[[], scp.Coder] | None,
    folder: Path,
    counts: Counts,
) -> Path:
    made = coder() if coder else None
    n = counts.shape[0]
    sections = {
        1: scp.tags(),
        3: scp.lead_definitions([(number, 1, n) for number in SCP_NUMBERS]),
        6: scp.coded_leads(
            counts.T.tolist(), step_nv=2500, interval_us=2000, order=order, coder=made
        ),
    }
    if made is not None:
        sections[2] = made.table
    path = folder / "whole.scp"
    path.write_bytes(scp.record(sections, protocol=protocol))
    return path


def table(folder: Path, counts: Counts) -> Path:
    lines = ["time (s)," + ",".join(f"{lead} (mV)" for lead in LEADS)]
    lines += [
        f"{n / RATE_HZ:.3f}," + ",".join(f"{value * STEP_MV:.4f}" for value in row)
        for n, row in enumerate(counts.tolist())
    ]
    path = folder / "whole.csv"
    path.write_text("\n".join(lines) + "\n")
    return path


def exported_table(folder: Path, counts: Counts) -> Path:
    path = folder / "exported.csv"
    path.write_bytes(recording_csv(_as_read(counts)))
    return path


def exported_record(folder: Path, counts: Counts) -> Path:
    header, _ = write_wfdb(_as_read(counts), folder / "exported")
    return header


def _as_read(counts: Counts) -> Recording:
    made = as_recording(counts * STEP_MV, RATE_HZ)
    return replace(made, counts_per_mv=(1 / STEP_MV,) * 12)


WRITERS = {
    "WFDB 16": Writer("wfdb", partial(wfdb_record, "16")),
    "WFDB 212": Writer("wfdb", partial(wfdb_record, "212")),
    "WFDB 24": Writer("wfdb", partial(wfdb_record, "24")),
    "WFDB 32": Writer("wfdb", partial(wfdb_record, "32")),
    "WFDB 80": Writer("wfdb", partial(wfdb_record, "80")),
    "WFDB 516 (FLAC)": Writer("wfdb", partial(wfdb_record, "516")),
    "WFDB, leads in two files": Writer("bytes", wfdb_leads_apart),
    "WFDB, two segments": Writer("bytes", wfdb_segments),
    "DICOM": Writer("pydicom", dicom),
    "EDF": Writer("edfio", partial(edfio_file, "EDF")),
    "BDF": Writer("edfio", partial(edfio_file, "BDF")),
    "EDF+D": Writer("bytes", edf_interrupted),
    "HL7 aECG": Writer("bytes", aecg),
    "SCP-ECG 1, plain": Writer("bytes", partial(scp_record, 10, 0, None)),
    "SCP-ECG 1.3, default table": Writer("bytes", partial(scp_record, 13, 2, scp.default_coder)),
    "SCP-ECG 2, own table": Writer("bytes", partial(scp_record, 20, 1, scp.own_coder)),
    "SCP-ECG 3, default table": Writer("bytes", partial(scp_record, 30, 2, scp.default_coder)),
    "table": Writer("text", table),
    "table, exported": Writer("this program", exported_table),
    "WFDB, exported": Writer("this program", exported_record),
}


def tracing(n_s: int = 12, *, largest: int = 900, seed: int = 3) -> Counts:
    """Counts of twelve leads that satisfy the limb-lead algebra, shape (n_samples, 12)."""
    rng = np.random.default_rng(seed)
    n = n_s * RATE_HZ
    smooth = np.cumsum(rng.normal(0, 1, (n, 8)), axis=0)
    scaled = np.rint(smooth / np.abs(smooth).max(axis=0) * largest / 2).astype(np.int64)
    one, two = 2 * scaled[:, 0], 2 * scaled[:, 1]
    limb = [one, two, two - one, -(one + two) // 2, one - two // 2, two - one // 2]
    return np.column_stack([*limb, scaled[:, 2:]])
