"""Make the sample recordings again: ``python -m sample_records.maker``."""

from __future__ import annotations

import sys
from dataclasses import dataclass
from datetime import datetime
from pathlib import Path

import numpy as np

from core.recordings.leads import TWELVE_LEADS
from core.recordings.recording import Recording, Source, Subject
from core.recordings.wfdb_writer import write_wfdb
from sample_records.maker.dicom_file import waveform_group, write_dicom
from sample_records.maker.heart import Injury, build_ventricles
from sample_records.maker.people import ASH, BIRCH, CEDAR, Person
from sample_records.maker.person import Trunk
from sample_records.maker.recorder import Recorder, Session

RECORDS = Path(__file__).resolve().parent.parent / "records"
STEP_UV = 2.5
INTERSPACE_MM = 29.0
INFERIOR_INJURY = Injury((2.0, 26.0, 6.0), 21.0, 24.0, 32.0, 35.0)


@dataclass(frozen=True, slots=True)
class Sample:
    """One recording: who, when, and how it is made."""

    name: str
    person: Person
    subject: Subject
    recorded_at: datetime
    session: Session


def displaced(seed: int, **moved_mm: tuple[float, float]) -> np.ndarray:
    """Shifts (left, up) of V1 to V6: a few mm by chance, and what is given by name."""
    shifts = np.random.default_rng(seed).normal(0.0, 3.0, (6, 2))
    for electrode, (left, up) in moved_mm.items():
        shifts[int(electrode[1]) - 1] += (left, up)
    return shifts


def samples() -> list[Sample]:
    """The four pairs; their story is told in README.md."""
    ash = Subject("INVENTED-01", "Invented Ash", "female", 61.0)
    birch = Subject("INVENTED-02", "Invented Birch", "male", 55.0)
    cedar = Subject("INVENTED-03", "Invented Cedar", "female", 47.0)
    two_spaces = (0.0, 2 * INTERSPACE_MM)
    return [
        Sample("raised-earlier", ASH, ash, datetime(2031, 10, 14, 9, 12), Session(
            68, 101, displaced(11))),
        Sample("raised-later", ASH, ash, datetime(2031, 11, 12, 22, 40), Session(
            75, 102, displaced(12, V1=two_spaces, V2=two_spaces), ectopic_after=6)),
        Sample("inferior-earlier", BIRCH, birch, datetime(2031, 6, 2, 8, 5), Session(
            64, 201, displaced(21))),
        Sample("inferior-later", BIRCH, birch, datetime(2031, 6, 9, 19, 31), Session(
            78, 202, displaced(22), injury=INFERIOR_INJURY)),
        Sample("steady-earlier", CEDAR, cedar, datetime(2031, 3, 3, 10, 20), Session(
            62, 301, displaced(31), noise_mv=0.006)),
        Sample("steady-later", CEDAR, cedar, datetime(2031, 9, 17, 14, 2), Session(
            74, 302, displaced(32), noise_mv=0.018, wander_mv=0.12, hum_mv=0.010)),
        Sample("medial-earlier", ASH, ash, datetime(2031, 11, 20, 11, 8), Session(
            66, 401, displaced(41))),
        Sample("medial-later", ASH, ash, datetime(2031, 12, 1, 7, 45), Session(
            72, 402, displaced(42, V5=(-30.0, 0.0), V6=(-55.0, 0.0)))),
    ]  # fmt: skip


def main(folder: Path) -> None:
    """Write every sample."""
    folder.mkdir(exist_ok=True)
    heart, solved = build_ventricles(), Trunk().solve()
    recorders = {person: Recorder(person, solved, heart) for person in (ASH, BIRCH, CEDAR)}
    for sample in samples():
        signal_mv = recorders[sample.person].record(sample.session)
        if sample.name.startswith("medial"):
            _write_as_dicom(folder, sample, signal_mv)
        else:
            _write_as_wfdb(folder, sample, signal_mv)
        sys.stderr.write(f"{sample.name}\n")


def _write_as_wfdb(folder: Path, sample: Sample, signal_mv: np.ndarray) -> None:
    # I, II and the chest leads in whole steps; the other limb leads follow in half steps.
    step_mv = STEP_UV / 1000.0
    rounded = np.rint(signal_mv / (step_mv / 2)) * (step_mv / 2)
    recording = Recording(
        signal_mv=rounded,
        sampling_rate_hz=sample.session.sampling_rate_hz,
        leads_present=TWELVE_LEADS,
        leads_derived=(),
        counts_per_mv=(2 / step_mv,) * 12,
        source=Source(sample.name, "WFDB", ""),
        subject=sample.subject,
        recorded_at=sample.recorded_at,
    )
    write_wfdb(recording, folder / sample.name)


def _write_as_dicom(folder: Path, sample: Sample, signal_mv: np.ndarray) -> None:
    counts = np.rint(signal_mv * 1000.0 / STEP_UV).astype(np.int16)
    group = waveform_group(
        counts, list(TWELVE_LEADS), sample.session.sampling_rate_hz, step_uv=STEP_UV
    )
    subject = sample.subject
    write_dicom(
        folder / f"{sample.name}.dcm",
        [group],
        patient_id=subject.id or "",
        patient_name="^".join(reversed((subject.name or "").split())),
        sex="F" if subject.sex == "female" else "M",
        age_years=int(subject.age_years or 0),
        recorded_at=sample.recorded_at,
    )


if __name__ == "__main__":
    main(Path(sys.argv[1]) if len(sys.argv) > 1 else RECORDS)
