"""HL7 annotated ECGs, hand-built and by another writer."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest

from core import RecordingError, read_recording
from core.recordings.aecg_reader import looks_like_aecg
from tests.helpers import aecg_files as aecg
from tests.helpers.mutate import mutated

FORMATS = Path(__file__).resolve().parents[3].parent / "shared" / "data" / "formats"
NAMES = ("I", "II", "V1", "V2", "V3", "V4", "V5", "V6")
COLUMNS = [0, 1, *range(6, 12)]
COUNTS = np.random.default_rng(1).integers(-400, 400, (8, 60))


def leads(counts: np.ndarray = COUNTS, **options: str) -> dict[str, str]:
    return {name: aecg.digits(row, **options) for name, row in zip(NAMES, counts, strict=True)}


def write(folder: Path, content: bytes) -> Path:
    path = folder / "invented.xml"
    path.write_bytes(content)
    return path


def test_samples_person_time_and_filters_are_read(tmp_path):
    content = aecg.annotated_ecg(aecg.series(aecg.sequence_set(leads())))
    recording = read_recording(write(tmp_path, content))
    # A product of two doubles.
    np.testing.assert_allclose(
        recording.signal_mv[:, COLUMNS].T, COUNTS * 0.0025, rtol=0, atol=1e-12
    )
    assert recording.sampling_rate_hz == 500.0
    assert recording.subject.to_dict() == {
        "id": "INVENTED-01",
        "sex": "female",
        "age_years": pytest.approx(61.7, abs=0.05),
    }
    assert recording.subject.name == "Invented Ash"
    assert recording.recorded_at.isoformat() == "2031-11-12T22:40:05"
    assert recording.filters.low_pass_hz == 150.0
    assert recording.source.format == "HL7 aECG"


@pytest.mark.parametrize(("unit", "scale", "origin"), [("mV", "0.005", "1.5"), ("V", "1e-6", "0")])
def test_units_and_origins_are_honoured(tmp_path, unit, scale, origin):
    made = aecg.sequence_set(leads(unit=unit, scale=scale, origin=origin))
    recording = read_recording(write(tmp_path, aecg.annotated_ecg(aecg.series(made))))
    factor = {"mV": 1.0, "V": 1e3}[unit]
    truth = (float(origin) + COUNTS * float(scale)) * factor
    np.testing.assert_allclose(recording.signal_mv[:, COLUMNS].T, truth, rtol=0, atol=1e-9)


def test_the_rhythm_is_taken_and_never_the_representative_beat(tmp_path):
    longer = np.resize(COUNTS, (8, 500))
    beat = aecg.series(aecg.sequence_set(leads(longer)), code="REPRESENTATIVE_BEAT")
    rhythm = aecg.series(aecg.sequence_set(leads()))
    assert read_recording(write(tmp_path, aecg.annotated_ecg(beat, rhythm))).n_samples == 60
    with pytest.raises(RecordingError, match=r"holds no rhythm .*REPRESENTATIVE_BEAT"):
        read_recording(write(tmp_path, aecg.annotated_ecg(beat)))


def test_sets_recorded_at_once_are_joined_and_others_are_refused(tmp_path):
    made = leads()
    limb = {name: made[name] for name in ("I", "II")}
    chest = {name: made[name] for name in NAMES[2:]}
    together = aecg.series(aecg.sequence_set(limb), aecg.sequence_set(chest))
    assert read_recording(write(tmp_path, aecg.annotated_ecg(together))).n_samples == 60
    later = aecg.sequence_set(chest, aecg.times(head="20311112224015"))
    apart = aecg.series(aecg.sequence_set(limb), later)
    with pytest.raises(RecordingError, match="lead group by lead group"):
        read_recording(write(tmp_path, aecg.annotated_ecg(apart)))


def test_further_leads_are_kept(tmp_path):
    made = leads() | {"V4R": aecg.digits(COUNTS[0])}
    recording = read_recording(
        write(tmp_path, aecg.annotated_ecg(aecg.series(aecg.sequence_set(made))))
    )
    assert recording.further_leads == ("V4R",)


@pytest.mark.parametrize("encoding", ["utf-8", "utf-8-sig", "utf-16"])
def test_the_content_tells_it(encoding):
    text = aecg.annotated_ecg().decode()
    assert looks_like_aecg(text.encode(encoding)[:4096])
    assert looks_like_aecg(b'<?xml version="1.0"?><v3:AnnotatedECG xmlns:v3="urn:hl7-org:v3">')
    assert not looks_like_aecg(b"<?xml version='1.0'?><html>AnnotatedECG</html>")


BOMB = (
    '<!DOCTYPE b [<!ENTITY a "aaaaaaaaaa"><!ENTITY b "&a;&a;&a;&a;&a;&a;&a;&a;">'
    '<!ENTITY c "&b;&b;&b;&b;&b;&b;&b;&b;">]>'
)
ELSEWHERE = '<!DOCTYPE b [<!ENTITY a SYSTEM "file:///etc/hostname">]>'


@pytest.mark.parametrize(
    ("content", "says"),
    [
        (aecg.annotated_ecg(head=BOMB), "damaged"),
        (aecg.annotated_ecg(head=ELSEWHERE), "damaged"),
        (aecg.annotated_ecg(), "holds no rhythm"),
        (aecg.annotated_ecg()[:-9], "damaged"),
        (aecg.annotated_ecg(aecg.series()), "holds no sequences"),
        (
            aecg.annotated_ecg(aecg.series(aecg.sequence_set(leads(unit="mmHg")))),
            "unit 'mmHg'",
        ),
        (
            aecg.annotated_ecg(aecg.series(aecg.sequence_set(leads(scale="nan")))),
            "no number",
        ),
        (
            aecg.annotated_ecg(aecg.series(aecg.sequence_set(leads(), aecg.times(step="0")))),
            "damaged|time between samples",
        ),
        (
            aecg.annotated_ecg(aecg.series(aecg.sequence_set(leads(), time=""))),
            "no time between samples",
        ),
    ],
)
def test_what_cannot_be_read_is_said(tmp_path, content, says):
    with pytest.raises(RecordingError, match=says) as refusal:
        read_recording(write(tmp_path, content))
    assert str(refusal.value).startswith("invented.xml: ")


def test_a_damaged_file_is_read_or_refused(tmp_path):
    content = aecg.annotated_ecg(aecg.series(aecg.sequence_set(leads())))
    refused = 0
    for seed in range(400):
        path = write(tmp_path, mutated(content, np.random.default_rng(seed)))
        try:
            read_recording(path)
        except RecordingError:
            refused += 1
    assert 0 < refused < 400


@pytest.mark.skipif(not FORMATS.is_dir(), reason="../shared/data/formats is not here")
def test_a_file_by_another_writer():
    import wfdb

    recording = read_recording(FORMATS / "healthy.aecg.xml")
    truth = wfdb.rdrecord(str(FORMATS.parent / "ptb" / "s0460_re_10s")).p_signal[:, :12]
    # One step of +-6 mV in 16 bits, in which the file was written.
    assert np.abs(recording.signal_mv - truth).max() <= 12 / 65535
