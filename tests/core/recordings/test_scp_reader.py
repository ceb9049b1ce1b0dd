"""SCP-ECG records, built from the standard by the helper, read back to the bit."""

from __future__ import annotations

import struct
from pathlib import Path

import numpy as np
import pytest

from core import RecordingError
from core.recordings.scp.container import looks_like_scp
from core.recordings.scp.reader import read_scp
from tests.helpers import scp_files as scp
from tests.helpers.scp_files import CODERS, INTERVAL_US, NUMBERS, STEP_NV, leads, sections

FORMATS = Path(__file__).resolve().parents[3].parent / "shared" / "data" / "formats"
COLUMNS = [0, 1, *range(6, 12)]


def write(folder: Path, record: bytes) -> Path:
    path = folder / "invented.scp"
    path.write_bytes(record)
    return path


@pytest.mark.parametrize("coder", list(CODERS))
@pytest.mark.parametrize("order", [0, 1, 2])
@pytest.mark.parametrize("protocol", [10, 13, 20])
def test_every_coding_gives_the_samples_back(tmp_path, order, coder, protocol):
    values = leads()
    made = scp.record(sections(values, order=order, coder=CODERS[coder]()), protocol=protocol)
    recording = read_scp(write(tmp_path, made))
    assert recording.sampling_rate_hz == 500.0
    # Only the rounding of a product of two doubles lies between the two.
    np.testing.assert_allclose(
        recording.signal_mv[:, COLUMNS].T, values * STEP_NV * 1e-6, rtol=0, atol=1e-12
    )
    assert recording.leads_derived == ("III", "aVR", "aVL", "aVF")


@pytest.mark.parametrize("coder", list(CODERS))
def test_the_reference_beat_is_put_back(tmp_path, coder):
    """Two beats of the subtracted kind, one of another; the beat in finer steps."""
    values = leads()
    rng = np.random.default_rng(5)
    n_beat, fiducial, fine_nv = 100, 41, 500
    shape = rng.integers(-300, 300, (8, n_beat))
    beats = [(0, 70, 110, 150), (1, 250, 300, 340), (0, 440, 480, 529)]
    # Each sample of a subtracted stretch loses the beat's sample at the same distance from R.
    truth_nv = values * STEP_NV
    for kind, first, at, last in beats:
        if kind == 0:
            sample = np.arange(first, last + 1)
            truth_nv[:, sample - 1] += shape[:, sample - at + fiducial - 1] * fine_nv
    made = scp.with_reference_beat(
        sections(values, order=2, coder=CODERS[coder]()),
        shape,
        beats,
        n=values.shape[1],
        fiducial=fiducial,
        step_nv=fine_nv,
        coder=CODERS[coder](),
    )
    recording = read_scp(write(tmp_path, scp.record(made)))
    np.testing.assert_allclose(
        recording.signal_mv[:, COLUMNS].T, truth_nv * 1e-6, rtol=0, atol=1e-12
    )


def test_who_and_when(tmp_path):
    recording = read_scp(write(tmp_path, scp.record(sections(leads()))))
    assert recording.subject.to_dict() == {"id": "INVENTED-01", "sex": "female", "age_years": 61.0}
    assert recording.subject.name == "Invented Ash"
    assert recording.recorded_at.isoformat() == "2031-11-12T22:40:05"


def test_a_lead_that_starts_later_has_gaps(tmp_path):
    values = leads()
    made = sections(values)
    made[3] = scp.lead_definitions(
        [(number, 1 if number < 8 else 51, 700 if number < 8 else 750) for number in NUMBERS]
    )
    recording = read_scp(write(tmp_path, scp.record(made)))
    assert recording.n_samples == 750
    assert np.isnan(recording.signal_mv[:50, 11]).all()
    assert recording.signal_mv[50, 11] == pytest.approx(values[7, 0] * STEP_NV * 1e-6)


def test_all_its_leads_have_names(tmp_path):
    numbers = (1, 2, 61, 65, 63, 64, *range(3, 9), 9, 66, 67, 11, 12, 16, 17, 18)
    values = np.resize(leads(), (len(numbers), 700))
    made = {
        3: scp.lead_definitions([(number, 1, 700) for number in numbers]),
        6: scp.coded_leads(values, step_nv=STEP_NV, interval_us=INTERVAL_US),
    }
    recording = read_scp(write(tmp_path, scp.record(made)))
    assert recording.leads_derived == ()
    assert recording.further_leads == ("V3R", "V4R", "V7", "V8", "V9", "X", "Y", "Z")
    # Number 65 is aVR upside down.
    assert recording.signal_mv[5, 3] == pytest.approx(-values[3, 5] * STEP_NV * 1e-6)


def test_the_content_tells_it(tmp_path):
    for protocol in (10, 20):
        assert looks_like_scp(scp.record(sections(leads()), protocol=protocol)[:4096])
    assert not looks_like_scp(b"")
    assert not looks_like_scp(b"invented 12 500 5000\n" * 20)
    assert not looks_like_scp(bytes(4096))


def changed(record: bytes, at: int, new: bytes) -> bytes:
    return record[:at] + new + record[at + len(new) :]


@pytest.mark.parametrize(
    ("spoil", "says"),
    [
        (lambda made: scp.record(made)[:-9], "bytes and holds"),
        (lambda made: changed(scp.record(made), 900, b"\xff\x00\xff"), "checksum"),
        (lambda made: scp.record({k: v for k, v in made.items() if k != 6}), "no rhythm data"),
        (lambda made: scp.record({k: v for k, v in made.items() if k != 3}), "no lead definitions"),
        (lambda made: scp.record(made | {3: b"\xff\x00"}), "255 leads"),
        (lambda made: scp.record(made | {3: made[3][:9]}), "cut off"),
        (lambda made: scp.record(made | {6: made[6][:40]}), "cut off"),
        (lambda made: scp.record(made | {6: b"\0\0" + made[6][2:]}), "steps of 0 nV"),
        (lambda made: scp.record(made | {6: changed(made[6], 5, b"\1")}), "thinned out"),
        (lambda made: scp.record(made | {2: struct.pack("<HH", 1, 60000)}), "cut off"),
        (
            lambda made: scp.record(made | {3: changed(made[3], 6, struct.pack("<I", 99_000_000))}),
            "a lead of 99000000 samples has only",
        ),
    ],
)
def test_a_damaged_record_says_what_is_wrong(tmp_path, spoil, says):
    path = write(tmp_path, spoil(sections(leads())))
    with pytest.raises(RecordingError, match=says) as refusal:
        read_scp(path)
    assert str(refusal.value).startswith("invented.scp: ")
    assert "xport it again" in str(refusal.value)


def test_two_codes_that_begin_alike_are_refused(tmp_path):
    rows = [(1, 1, 0, "0"), (2, 2, 1, "01")]
    table = struct.pack("<HH", 1, len(rows))
    for prefix, whole, value, code in rows:
        table += struct.pack("<BBBhI", prefix, whole, 1, value, int(code[::-1], 2))
    with pytest.raises(RecordingError, match="begin alike"):
        read_scp(write(tmp_path, scp.record(sections(leads()) | {2: table})))


@pytest.mark.skipif(not FORMATS.is_dir(), reason="../shared/data/formats is not here")
def test_a_record_of_protocol_3_by_another_writer():
    """Its rhythm is in section 12, in whole nV: 184 where the writer scaled by 183.1."""
    import wfdb

    recording = read_scp(FORMATS / "healthy.scp")
    truth = wfdb.rdrecord(str(FORMATS.parent / "ptb" / "s0460_re_10s")).p_signal[:, :12]
    stated, scaled_by = 184e-6, 12 / 65535  # mV: +-6 mV over 16 bits
    assert recording.sampling_rate_hz == 1000.0
    off = np.abs(recording.signal_mv * scaled_by / stated - truth)
    assert off.max() <= 1.01 * scaled_by  # one quantisation step, and rounding
    assert recording.subject.id is None
