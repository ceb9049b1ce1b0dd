"""WFDB records for tests, written by the wfdb package itself and not by the program."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import wfdb
from numpy.typing import NDArray

from core.recordings.leads import TWELVE_LEADS


def write_record(
    folder: Path,
    name: str,
    counts: NDArray[np.int64],
    leads: list[str],
    *,
    rate_hz: float = 500.0,
    gain: float = 1000.0,
    baseline: int = 0,
    unit: str = "mV",
    fmt: str = "16",
    comments: list[str] | None = None,
) -> Path:
    """Write counts, shape (n_samples, n_leads); the record's path without an ending."""
    n = len(leads)
    wfdb.wrsamp(
        name,
        fs=rate_hz,
        units=[unit] * n,
        sig_name=leads,
        d_signal=np.asarray(counts, dtype=np.int64),
        fmt=[fmt] * n,
        adc_gain=[gain] * n,
        baseline=[baseline] * n,
        comments=comments or [],
        write_dir=str(folder),
    )
    return folder / name


def write_small_records(folder: Path) -> list[Path]:
    """Records of twelve leads in many storage forms, whole and in segments; their headers."""
    rng = np.random.default_rng(8)
    counts = rng.integers(-100, 100, (120, 12))
    leads = list(TWELVE_LEADS)
    comments = ["age: 51", "sex: F"]
    layout_header(folder, "varied_layout", leads)
    headers = []
    for form in ("16", "24", "32", "80"):
        record = write_record(
            folder, f"form{form}", counts, leads, fmt=form, gain=200.0, comments=comments
        )
        headers.append(record.with_suffix(".hea"))
    # The wfdb package does not write these, but any bytes are samples of theirs.
    for form, n_bytes in {
        "8": 1440,
        "61": 2880,
        "160": 2880,
        "212": 2160,
        "310": 1920,
        "311": 1920,
    }.items():
        (folder / f"form{form}.dat").write_bytes(rng.bytes(n_bytes))
        lines = [f"form{form}.dat {form} 200/mV 12 0 0 0 0 {lead}" for lead in leads]
        headers.append(_header(folder, f"form{form}", [f"form{form} 12 500 120", *lines]))
    # A compressed file holds eight signals at most.
    for name, part in (("limb", slice(6)), ("chest", slice(6, 12))):
        write_record(folder, name, counts[:, part], leads[part], fmt="516")
    limb, chest = ((folder / f"{name}.hea").read_text().splitlines() for name in ("limb", "chest"))
    headers.append(_header(folder, "flac", ["flac 12 500 120", *limb[1:7], *chest[1:7]]))
    return [
        *headers,
        _header(folder, "joined", ["joined/2 12 500 240", "form16 120", "form212 120"]),
        _header(
            folder,
            "varied",
            ["varied/4 12 500 300", "varied_layout 0", "form16 120", "~ 60", "form24 120"],
        ),
        _header(
            folder,
            "frames",
            ["frames 12 250 60", *(f"form16.dat 16x2 200/mV 16 0 0 0 0 {lead}" for lead in leads)],
        ),
        _header(
            folder,
            "skewed",
            ["skewed 12 500 120 22:40:05 12/11/2031"]
            + [f"form16.dat 16:4 200(3)/mV 16 0 0 0 0 {lead}" for lead in leads],
        ),
    ]


def layout_header(folder: Path, name: str, leads: list[str]) -> Path:
    """The header that says which signals the segments of a varied record may hold."""
    lines = [f"{name} {len(leads)} 500 0", *(f"~ 0 200/mV 16 0 0 0 0 {lead}" for lead in leads)]
    return _header(folder, name, lines)


def _header(folder: Path, name: str, lines: list[str]) -> Path:
    path = folder / f"{name}.hea"
    path.write_text("\n".join(lines) + "\n")
    return path
