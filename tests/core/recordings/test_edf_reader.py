"""EDF, EDF+ and BDF: written by edfio, and built byte by byte where edfio doesn't write it."""

from __future__ import annotations

import contextlib
from datetime import date, datetime, time
from pathlib import Path

import edfio
import numpy as np
import pytest

from core import RecordingError, read_recording
from core.recordings import edf_layout
from core.recordings.edf_reader import looks_like_edf, open_edf
from core.recordings.leads import TWELVE_LEADS
from core.recordings.recording import Filters
from tests.helpers import edf_files
from tests.helpers.edf_files import (
    BDF,
    EIGHT,
    Annotations,
    Signal,
    counts,
    edf_bytes,
    signals,
    small_file,
    starts,
)
from tests.helpers.mutate import mutated

DATA = Path(__file__).parents[4] / "shared" / "data"
LEADS = list(TWELVE_LEADS)
STEP_MV = 1e-4  # of the hand-built files: 6553.5 uV in 65535 steps


def waves(n: int = 2000, n_leads: int = 12, seed: int = 1) -> np.ndarray:
    """Leads in mV, shape (n_leads, n), between -2 and 2."""
    rng = np.random.default_rng(seed)
    at = np.arange(n) / 500
    return np.array([np.sin(at * (3 + k)) + rng.uniform(-0.9, 0.9, n) for k in range(n_leads)])


def write(folder: Path, content: bytes) -> Path:
    path = folder / "invented.edf"
    path.write_bytes(content)
    return path


def read(folder: Path, listed: list, **said: object):
    return open_edf(write(folder, edf_bytes(listed, **said))).whole()


def columns(recording) -> np.ndarray:
    """The eight recorded leads, shape (8, n)."""
    return recording.signal_mv[:, [0, 1, *range(6, 12)]].T


@pytest.mark.parametrize("form", ["EDF", "BDF"])
def test_edfio_files_come_back_within_one_step(tmp_path, form):
    """Every lead with a range and a unit of its own."""
    truth = waves()
    units = {"mV": 1.0, "uV": 1e3, "V": 1e-3, "nV": 1e6}
    made, step_mv = [], []
    of_form = {"EDF": (edfio.EdfSignal, edfio.Edf, 16), "BDF": (edfio.BdfSignal, edfio.Bdf, 24)}
    signal_class, file_class, bits = of_form[form]
    for number, (lead, values) in enumerate(zip(LEADS, truth, strict=True)):
        unit, per_mv = list(units.items())[number % len(units)]
        reach = (2.0 + number % 3) * per_mv
        made.append(
            signal_class(
                values * per_mv,
                500,
                label=f"ECG {lead}",
                physical_dimension=unit,
                physical_range=(-reach, reach),
            )
        )
        step_mv.append(2 * reach / per_mv / (2**bits - 1))
    path = tmp_path / "by edfio"
    file_class(made).write(path)
    recording = open_edf(path).whole()
    off = np.abs(recording.signal_mv.T - truth)
    # Half a step, and what 8 characters leave of a range in nV or V.
    assert (off.max(axis=1) <= np.array(step_mv)).all()
    assert recording.leads_present == TWELVE_LEADS
    assert recording.sampling_rate_hz == 500.0
    np.testing.assert_allclose(recording.counts_per_mv, 1 / np.array(step_mv), rtol=1e-9)
    assert recording.source.format == form


def test_bdf_bytes_are_numbers_of_24_bits(tmp_path):
    """Smallest, largest, -1, 0, 1 and 65536: 000080, ffff7f, ffffff, 000000, 010000, 000001."""
    told = [-(1 << 23), (1 << 23) - 1, -1, 0, 1, 65536]
    records = np.tile(np.array(told), (8, 1, 100))
    made = edf_bytes(
        signals(
            records,
            unit="nV",
            physical=(-(1 << 23), (1 << 23) - 1),
            digital=(-(1 << 23), (1 << 23) - 1),
        ),
        version=BDF,
        reserved="24BIT",
    )
    assert made[256 * 9 :][:18].hex() == "000080ffff7fffffff000000010000000001"
    recording = open_edf(write(tmp_path, made)).whole()
    # 1 nV a step; only rounding of doubles lies between the two.
    np.testing.assert_allclose(columns(recording)[5, :6], np.array(told) * 1e-6, rtol=0, atol=1e-12)
    assert recording.source.format == "BDF"


def test_the_shared_file_agrees_with_its_wfdb_record():
    path, record = DATA / "formats" / "healthy.edf", DATA / "ptb" / "s0460_re_10s"
    if not path.is_file():
        pytest.skip("../shared/data is not there: real recordings are not part of the project")
    truth = read_recording(record)
    recording = open_edf(path).whole()
    np.testing.assert_allclose(recording.signal_mv, truth.signal_mv, rtol=0, atol=12 / 65535)
    assert recording.sampling_rate_hz == truth.sampling_rate_hz
    assert recording.recorded_at is None
    assert recording.subject.id is None


@pytest.mark.parametrize("name", ["{}", "ECG {}", "EKG {}", "ECG Lead {}", "lead {}"])
def test_labels_of_leads(tmp_path, name):
    leads = [name.format(lead) for lead in EIGHT]
    assert columns(read(tmp_path, signals(counts(), leads))).shape == (8, 2000)


def test_a_lead_upside_down_is_turned(tmp_path):
    values = counts()
    upright = read(tmp_path, signals(values, ["aVF", "aVR", *EIGHT[2:]]))
    turned = read(tmp_path, signals(values, ["aVF", "-aVR", *EIGHT[2:]]))
    np.testing.assert_array_equal(turned.signal_mv[:, 3], -upright.signal_mv[:, 3])
    # The same by a physical minimum above the maximum.
    swapped = signals(values, ["aVF", "aVR", *EIGHT[2:]], physical=(3276.7, -3276.7))
    by_range = read(tmp_path, swapped)
    np.testing.assert_allclose(by_range.signal_mv[:, 6], -upright.signal_mv[:, 6], atol=STEP_MV)


@pytest.mark.parametrize(
    ("unit", "mv"),
    [("uV", 1e-3), ("mV", 1), ("V", 1e3), ("nV", 1e-6), (b"\xb5V", 1e-3), (b"\xc2\xb5V", 1e-3)],
)
def test_units(tmp_path, unit, mv):
    values = counts()
    half = 0.5 / mv
    made = signals(values, unit=unit, physical=(f"{-half:.8g}", f"{half:.8g}"))
    assert columns(read(tmp_path, made))[0, 0] == pytest.approx(
        (values[0, 0, 0] + 0.5) / 65535, abs=1e-9
    )


@pytest.mark.parametrize(("unit", "says"), [("mmHg", "'mmHg', which is no"), ("", "without a")])
def test_another_unit_is_refused(tmp_path, unit, says):
    made = signals(counts())
    made[3].unit = unit
    with pytest.raises(RecordingError, match=says) as refusal:
        read(tmp_path, made)
    assert "lead V2" in str(refusal.value)


def test_the_axes_of_another_sensor_are_no_leads(tmp_path):
    movement = [Signal(axis, np.zeros((4, 10), int), unit="g") for axis in "XYZ"]
    pressure = Signal("Resp", np.zeros((4, 25), int), unit="cmH2O")
    recording = read(tmp_path, [*movement, *signals(counts()), pressure])
    assert recording.further_leads == ()
    in_mv = [Signal(axis, np.ones((4, 500), int)) for axis in "XYZ"]
    assert read(tmp_path, [*signals(counts()), *in_mv]).further_leads == ("X", "Y", "Z")


def test_leads_of_other_rates_are_brought_to_the_highest(tmp_path):
    """A 5 Hz sine, in limb leads of 250 Hz and chest leads of 1000 Hz."""

    def sine(rate_hz: int) -> np.ndarray:
        values = 10000 * np.sin(2 * np.pi * 5 * np.arange(4 * rate_hz) / rate_hz)
        return np.rint(values).astype(int).reshape(4, rate_hz)

    made = [Signal(lead, sine(250)) for lead in EIGHT[:2]]
    made += [Signal(lead, sine(1000)) for lead in EIGHT[2:]]
    recording = read(tmp_path, made)
    assert recording.sampling_rate_hz == 1000.0
    inside = slice(200, -200)  # the interpolation rings at the ends
    np.testing.assert_allclose(
        recording.signal_mv[inside, 0], recording.signal_mv[inside, 6], atol=0.005
    )


@pytest.mark.parametrize(("record_s", "rate_hz"), [(0.5, 1000), ("0.25", 2000), (2, 250)])
def test_the_rate_follows_from_the_record(tmp_path, record_s, rate_hz):
    assert read(tmp_path, signals(counts()), record_s=record_s).sampling_rate_hz == rate_hz


def test_reading_in_blocks_changes_nothing(tmp_path, monkeypatch):
    path = write(tmp_path, edf_bytes(signals(counts(9, 300)), record_s=0.5))
    whole = open_edf(path).whole()
    monkeypatch.setattr(edf_layout, "BLOCK_BYTES", 2 * 8 * 300 * 2 + 5)
    np.testing.assert_array_equal(open_edf(path).whole().signal_mv, whole.signal_mv)


def test_who_by_the_order_of_edf_plus(tmp_path):
    path = tmp_path / "who.edf"
    made = [
        edfio.EdfSignal(v, 500, label=n, physical_dimension="mV")
        for v, n in zip(waves(n_leads=8), EIGHT, strict=True)
    ]
    edfio.Edf(
        made,
        patient=edfio.Patient(
            code="INV_01", sex="F", birthdate=date(1950, 3, 9), name="Invented_Ash"
        ),
        recording=edfio.Recording(startdate=date(2031, 11, 12)),
        starttime=time(22, 40, 5, 250000),
        annotations=[edfio.EdfAnnotation(1.0, None, "a remark")],
    ).write(path)
    recording = open_edf(path).whole()
    subject = recording.subject
    assert (subject.id, subject.name, subject.sex) == ("INV_01", "Invented Ash", "female")
    assert subject.born_on == date(1950, 3, 9)
    assert subject.age_years == pytest.approx(81.68, abs=0.01)
    assert recording.recorded_at == datetime(2031, 11, 12, 22, 40, 5, 250000)
    assert recording.source.format == "EDF+"


@pytest.mark.parametrize(
    ("patient", "reserved", "told"),
    [
        ("X X X X", "", (None, None, None)),
        ("X F X X", "EDF+C", (None, "female", None)),
        ("P-9 M X Invented_Ash", "", ("P-9", "male", "Invented Ash")),
        ("P-9 m 31-FEB-1950 X age:61", "", ("P-9", "male", None)),
        ("P-9", "EDF+C", ("P-9", None, None)),
        ("P-9 F", "EDF+C", ("P-9", "female", None)),
        ("P-9 F", "", ("P-9 F", None, None)),
        ("ward 7 bed 2", "EDF+C", ("ward 7 bed 2", None, None)),
        ("INV_01", "", ("INV_01", None, None)),
        ("  X xx X ", "", (None, None, None)),
        ("", "", (None, None, None)),
    ],
)
def test_who_in_other_hands(tmp_path, patient, reserved, told):
    listed = [*signals(counts()), starts(range(4))]
    subject = read(tmp_path, listed, patient=patient, reserved=reserved).subject
    assert (subject.id, subject.sex, subject.name) == told
    assert subject.born_on is None


@pytest.mark.parametrize(
    ("recording", "day", "clock", "when"),
    [
        ("Startdate X X X X", "12.11.31", "10.00.00", None),
        ("Startdate 01-JAN-1985 X X X", "01.01.85", "10.00.00", datetime(1985, 1, 1, 10)),
        ("Startdate 12-NOV-2131 X X X", "01.01.85", "10.00.00", datetime(2131, 11, 12, 10)),
        ("Startdate soon", "12.11.31", "10.00.00", datetime(2031, 11, 12, 10)),
        ("ward 7", "12.11.99", "09.08.07", datetime(1999, 11, 12, 9, 8, 7)),
        ("ward 7", "12.11.31", "99.99.99", datetime(2031, 11, 12)),
        ("ward 7", "01.01.85", "09.08.07", None),
        ("ward 7", "31.02.31", "09.08.07", None),
        ("", "", "", None),
    ],
)
def test_when(tmp_path, recording, day, clock, when):
    made = read(tmp_path, signals(counts()), recording=recording, date=day, time=clock)
    assert made.recorded_at == when


def test_the_narrowest_filter_counts(tmp_path):
    made = signals(counts(), filters="HP:0.05Hz LP:150Hz N:50Hz")
    made[4].filters = "HP: 500 mHz LP:40Hz"
    made[5].filters = "HP:DC LP:0Hz"
    assert read(tmp_path, made).filters == Filters(0.5, 40.0, 50.0)
    assert read(tmp_path, signals(counts())).filters == Filters()


@pytest.mark.parametrize("kind", ["EDF+D", "BDF+D"])
def test_an_interruption_becomes_a_gap(tmp_path, kind):
    values = counts()
    told = [0.5, 1.5, 3.2, 4.2001]  # 0.7 s are missing; a twentieth of a sample is nothing
    form = {"EDF+D": {}, "BDF+D": {"version": BDF}}[kind]
    listed = [*signals(values), starts(told)]
    listed[-1].label = f"{kind[:3]} Annotations"
    recording = read(
        tmp_path,
        listed,
        reserved=kind,
        recording="Startdate 12-NOV-2031 X X X",
        time="10.00.00",
        **form,
    )
    assert recording.n_samples == 2350
    got = columns(recording)
    assert np.isnan(got[:, 1000:1350]).all()
    assert np.isnan(got).sum() == 8 * 350
    whole = read(tmp_path, signals(values))
    np.testing.assert_array_equal(np.delete(got, np.s_[1000:1350], axis=1), columns(whole))
    assert recording.recorded_at == datetime(2031, 11, 12, 10, 0, 0, 500000)


def test_records_that_follow_each_other_by_rounded_times_leave_no_gap(tmp_path):
    """A third of a second, 167 samples: the header can only say 0.333333."""
    told = [round(k / 3, 3) for k in range(40)]
    listed = [*signals(counts(40, 167)), starts(told)]
    recording = read(tmp_path, listed, reserved="EDF+D", record_s=0.333333)
    assert recording.n_samples == 40 * 167
    assert not np.isnan(recording.signal_mv).any()


def test_a_clock_that_gains_is_no_overlap(tmp_path):
    """0.4 samples a record, eight in all."""
    told = [round(k * (0.1 - 0.4 / 500), 6) for k in range(20)]
    listed = [*signals(counts(20, 50)), starts(told)]
    recording = read(tmp_path, listed, reserved="EDF+D", record_s=0.1)
    assert recording.n_samples == 1000
    assert not np.isnan(recording.signal_mv).any()


@pytest.mark.parametrize(
    ("told", "says"),
    [
        ([0, 1, 3600, 3601], "interrupted for 3598 s and holds 4 s"),
        ([0, 1, 1.5, 2.5], "record 3 starts before"),
        ([0, 1, 0, 1], "record 3 starts before"),
        (["", 1, 2, 3], "record 1 does not say when"),
        ([0, 1, 2, "x"], "record 4 does not say when"),
        ([999999999999, 0, 0, 0], "record 2 starts before"),
    ],
)
def test_interruptions_that_make_no_recording(tmp_path, told, says):
    with pytest.raises(RecordingError, match=says):
        read(tmp_path, [*signals(counts()), starts(told)], reserved="EDF+D")


def test_an_interrupted_file_without_times_is_refused(tmp_path):
    with pytest.raises(RecordingError, match="no annotations to tell the time"):
        read(tmp_path, signals(counts()), reserved="EDF+D")


def test_an_uninterrupted_file_is_read_whatever_its_annotations_hold(tmp_path):
    garbled = Annotations([b"\xff\xfe\x14", b"", b"+1", b"\x14\x14"])
    recording = read(tmp_path, [garbled, *signals(counts())], reserved="EDF+C")
    np.testing.assert_array_equal(recording.signal_mv, read(tmp_path, signals(counts())).signal_mv)


def test_the_content_tells_it():
    for said in ({}, {"version": BDF}, {"reserved": "EDF+D"}):
        assert looks_like_edf(edf_bytes(signals(counts()), **said)[:4096])
    assert not looks_like_edf(b"")
    assert not looks_like_edf(b"0       " * 100)
    assert not looks_like_edf(bytes(4096))
    assert not looks_like_edf(edf_bytes(signals(counts()))[:200])
    assert not looks_like_edf(b"\xffBIOSEMI" + b"x" * 400)


HEADER = 256 * 9


@pytest.mark.parametrize(
    ("spoil", "says"),
    [
        (lambda s: edf_bytes(s)[:-1], "states 4 data records and holds 3"),
        (lambda s: edf_bytes(s, n_records=99999999), "states 99999999 data records and holds 4"),
        (lambda s: edf_bytes(s, n_records=-2), "states -2 data records"),
        (lambda s: edf_bytes(s, n_records="many"), "states no number of data records"),
        (lambda s: edf_bytes(s, n_records=0)[:HEADER], "holds no samples"),
        (lambda s: edf_bytes(s, n_records=-1)[:HEADER], "holds no samples"),
        (lambda s: edf_bytes(s)[:100], "cut off within its header"),
        (lambda s: edf_bytes(s)[:700], "cut off within its header"),
        (lambda s: edf_bytes(s, n_signals=-8), "states no number of signals"),
        (lambda s: edf_bytes(s, n_signals=9999), "not as long as that of 9999 signals"),
        (lambda s: edf_bytes(s, n_signals=9999, header_bytes=2560000), "cut off within its head"),
        (lambda s: edf_bytes(s, header_bytes=-1), "not as long as that of 8 signals"),
        (lambda s: edf_bytes(s, record_s=0), "does not say how long"),
        (lambda s: edf_bytes(s, record_s="nan"), "does not say how long"),
        (lambda s: edf_bytes(s, record_s="1e-300"), "does not say how long"),
        (lambda s: edf_bytes(s, record_s="1e308"), "does not say how long"),
        (lambda s: edf_bytes(s, record_s=1000), "states 0.5 samples a second"),
        (lambda s: edf_bytes(s, record_s=0.001), "states 500000 samples a second"),
        (lambda s: samples_claimed(edf_bytes(s), b"99999999"), "holds 200 MB"),
        (lambda s: samples_claimed(edf_bytes(s), b"-500"), "signal 1 states no number of samples"),
        (lambda s: samples_claimed(edf_bytes(s), b"1e3"), "signal 1 states no number of samples"),
        (lambda s: edf_bytes(s[:5]), "needs V1 to V6"),
        (lambda s: edf_bytes([starts(range(4))], reserved="EDF+C"), "none of the twelve"),
    ],
)
def test_a_damaged_file_says_what_is_wrong(tmp_path, spoil, says):
    path = write(tmp_path, spoil(signals(counts())))
    with pytest.raises(RecordingError, match=says) as refusal:
        open_edf(path).whole()
    message = str(refusal.value)
    assert message.startswith("invented.edf: ")
    assert "\n" not in message
    assert "xport" in message or "Choose" in message


def samples_claimed(content: bytes, number: bytes) -> bytes:
    """Another number of samples a record for the first of eight signals."""
    at = 256 + 216 * 8
    return content[:at] + number.ljust(8) + content[at + 8 :]


@pytest.mark.parametrize(
    ("said", "says"),
    [
        ({"physical": (0, 0)}, "not calibrated: it states 0 to 0"),
        ({"digital": (5, 5)}, "not calibrated"),
        ({"digital": (100, -100)}, "not calibrated"),
        ({"physical": ("nan", 1)}, "not calibrated"),
        ({"physical": ("-1e308", "1e308")}, "not calibrated"),
        ({"physical": ("-inf", 1)}, "plain numbers"),
        ({"physical": ("-6,5", "6,5")}, "plain numbers"),
        ({"digital": ("low", "high")}, "plain numbers"),
        ({"physical": (-9e6, 9e6), "unit": "mV"}, "no ECG does"),
    ],
)
def test_a_range_that_scales_nothing_is_refused(tmp_path, said, says):
    with pytest.raises(RecordingError, match=says):
        read(tmp_path, signals(counts(), **said))


def test_an_unfinished_file_is_read_as_far_as_it_goes(tmp_path):
    content = edf_bytes(signals(counts()), n_records=-1)
    assert open_edf(write(tmp_path, content[:-7])).whole().n_samples == 1500


@pytest.mark.parametrize("reserved", ["", "EDF+C", "EDF+D"])
@pytest.mark.parametrize("version", [edf_files.EDF, BDF])
def test_nothing_but_a_refusal_comes_out_of_a_mutated_file(tmp_path, version, reserved):
    rng = np.random.default_rng(20)
    content = small_file(version, reserved)
    for _ in range(60):
        path = write(tmp_path, mutated(content, rng))
        with contextlib.suppress(RecordingError):
            open_edf(path).whole()
