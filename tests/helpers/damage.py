"""Damaged files of every format that is read: the same seed gives the same file.

The tests of the readers take a slice of them; ``python -m tests.fuzz`` takes as many as asked.
"""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path
from typing import TypeVar

import numpy as np
from pydicom.uid import (
    DeflatedExplicitVRLittleEndian,
    ExplicitVRBigEndian,
    ExplicitVRLittleEndian,
    ImplicitVRLittleEndian,
)

from core.recordings.leads import TWELVE_LEADS
from sample_records.maker.dicom_file import waveform_group
from tests.helpers import aecg_files as aecg
from tests.helpers import scp_files as scp
from tests.helpers.aecg_damage import damaged
from tests.helpers.csv_files import small_tables
from tests.helpers.dicom_files import write_object
from tests.helpers.edf_files import BDF, EDF, small_file
from tests.helpers.mutate import mutated, mutated_text
from tests.helpers.wfdb_files import write_small_records

Writer = Callable[[np.random.Generator], Path]
T = TypeVar("T")


def wfdb_header(folder: Path) -> Writer:
    """A damaged header beside sound signal files."""
    headers = [path.read_bytes() for path in write_small_records(folder)]
    path = folder / "damaged.hea"

    def write(rng: np.random.Generator) -> Path:
        path.write_bytes(mutated_text(_any(headers, rng), rng))
        return path

    return write


def wfdb_signal(folder: Path) -> Writer:
    """Damaged or cut-off signal files under a sound header."""
    headers = write_small_records(folder)
    sound = {path: path.read_bytes() for path in sorted(folder.glob("*.dat"))}
    spoilt: list[Path] = []

    def write(rng: np.random.Generator) -> Path:
        for path in spoilt:
            path.write_bytes(sound[path])
        header = _any(headers, rng)
        text = header.read_text()
        spoilt[:] = [path for path in sound if path.stem in text] or list(sound)
        spoilt[:] = [_any(spoilt, rng)]
        spoilt[0].write_bytes(mutated(sound[spoilt[0]], rng))
        return header

    return write


def dicom(folder: Path) -> Writer:
    """Objects in four transfer syntaxes; one of them has leads in two groups and a beat."""
    rng = np.random.default_rng(9)
    counts = rng.integers(-900, 900, (120, 12)).astype(np.int16)
    leads = list(TWELVE_LEADS)
    whole = waveform_group(counts, leads, 500, step_uv=2.5)
    limb = waveform_group(counts[:, :6], leads[:6], 500, step_uv=2.5)
    chest = waveform_group(counts[:, 6:], leads[6:], 500, step_uv=2.5)
    beat = waveform_group(counts[:50], leads, 500, step_uv=2.5)
    beat.WaveformOriginality = "DERIVED"
    path = folder / "damaged.dcm"
    sound = []
    for syntax, groups in (
        (ExplicitVRLittleEndian, [whole]),
        (ExplicitVRLittleEndian, [beat, limb, chest]),
        (ImplicitVRLittleEndian, [whole]),
        (ExplicitVRBigEndian, [whole]),
        (DeflatedExplicitVRLittleEndian, [whole]),
    ):
        sound.append(write_object(path, *groups, syntax=syntax).read_bytes())
    return _one_file(path, sound, mutated)


def edf(folder: Path) -> Writer:
    """EDF and BDF, plain, continuous and interrupted."""
    sound = [
        small_file(version, reserved)
        for version in (EDF, BDF)
        for reserved in ("", "EDF+C", "EDF+D")
    ]
    return _one_file(folder / "damaged.edf", sound, mutated)


def csv(folder: Path) -> Writer:
    """Tables with other delimiters, decimal marks, encodings and headings."""
    return _one_file(folder / "damaged.csv", list(small_tables().values()), mutated_text)


def scp_ecg(folder: Path) -> Writer:
    """A section damaged, or a record damaged and sealed again; one in ten keeps a broken seal."""
    made = scp_sections()
    path = folder / "damaged.scp"

    def write(rng: np.random.Generator) -> Path:
        chosen, kind = _any(made, rng), rng.random()
        if kind < 0.6:
            number = int(rng.choice(list(chosen)))
            content = scp.record(chosen | {number: mutated(chosen[number], rng)})
        else:
            content = mutated(scp.record(chosen), rng)
            content = scp.sealed(content) if kind < 0.9 else content
        path.write_bytes(content)
        return path

    return write


def scp_sections() -> list[dict[int, bytes]]:
    """Sections of sound records: every coding, with and without a reference beat, and long."""
    values = scp.leads(100)
    shape = np.random.default_rng(5).integers(-300, 300, (8, 20))
    beats = [(0, 11, 21, 30), (1, 40, 50, 60), (0, 71, 81, 90)]
    made = []
    for coder in scp.CODERS.values():
        for order in (0, 1, 2):
            plain = scp.sections(values, order=order, coder=coder())
            made.append(plain)
        made.append(scp.with_reference_beat(plain, shape, beats, n=100, fiducial=11, coder=coder()))
    made.append({1: scp.tags(), 12: scp.long_rhythm(values)})
    return made


def annotated_ecg(folder: Path) -> Writer:
    """Documents damaged in their bytes or in what the XML says."""
    return _one_file(folder / "damaged.xml", annotated_ecgs(), damaged)


def annotated_ecgs() -> list[bytes]:
    """Sound documents: one set, two sets with a beat derived from them, relative times."""
    halved = aecg.halves(aecg.times(), aecg.times())
    return [
        aecg.plain(),
        aecg.with_derived_beat(halved),
        aecg.plain(time=aecg.times() + aecg.relative()),
        aecg.halves(aecg.relative(), aecg.relative()),
    ]


FORMATS: dict[str, Callable[[Path], Writer]] = {
    "wfdb-header": wfdb_header,
    "wfdb-signal": wfdb_signal,
    "dicom": dicom,
    "edf": edf,
    "csv": csv,
    "scp": scp_ecg,
    "aecg": annotated_ecg,
}


def _one_file(
    path: Path, sound: list[bytes], damage: Callable[[bytes, np.random.Generator], bytes]
) -> Writer:
    def write(rng: np.random.Generator) -> Path:
        path.write_bytes(damage(_any(sound, rng), rng))
        return path

    return write


def _any(choices: list[T], rng: np.random.Generator) -> T:
    return choices[int(rng.integers(len(choices)))]
