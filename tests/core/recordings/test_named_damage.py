"""Damage that has a name: claims of size, absurd rates and gains, bombs and tricks with paths.

Each is refused in one line that says what is wrong, soon, and without room being made for what a
file merely claims. More of an annotated ECG's and of EDF's own stand with their readers.
"""

from __future__ import annotations

import os
import struct
import sys
import tracemalloc
import zlib
from collections.abc import Callable
from pathlib import Path

import numpy as np
import pytest
from pydicom.dataset import Dataset
from pydicom.uid import DeflatedExplicitVRLittleEndian, ExplicitVRBigEndian

from core import RecordingError, read_recording
from core.recordings.leads import TWELVE_LEADS
from core.recordings.scp import signals as scp_signals
from sample_records.maker.dicom_file import coded, waveform_group
from tests.helpers import aecg_files as aecg
from tests.helpers import scp_files as scp
from tests.helpers.csv_files import RATE, in_mv, with_time
from tests.helpers.dicom_files import write_object
from tests.helpers.edf_files import counts, edf_bytes, signals
from tests.helpers.watched import read_watched

LEADS = list(TWELVE_LEADS)
# What reading a sound file of this size takes is far below; what is claimed below is far above.
MOST_BYTES = 250_000_000


def refusal(path: Path) -> str:
    """The one line with which a file is refused; nothing else may have come of it."""
    read_watched(path)  # imports of libraries are not what is measured
    tracemalloc.start()
    try:
        reading = read_watched(path)
        _, peak = tracemalloc.get_traced_memory()
    finally:
        tracemalloc.stop()
    assert reading.faults == []
    assert peak < MOST_BYTES
    assert reading.refusal is not None, "it was read"
    return reading.refusal


# WFDB


def record(
    folder: Path,
    *,
    first: str = "bad 12 500 120",
    form: str = "16",
    gain: str = "200/mV",
    file: str = "bad.dat",
    lines: list[str] | None = None,
    name: str = "bad",
) -> Path:
    """A record of 120 samples of twelve leads, changed in what its header says."""
    values = np.random.default_rng(3).integers(-100, 100, (120, 12)).astype("<i2")
    (folder / "bad.dat").write_bytes(values.tobytes())
    if lines is None:
        lines = [f"{file} {form} {gain} 16 0 0 0 0 {lead}" for lead in LEADS]
    path = folder / f"{name}.hea"
    path.write_text("\n".join([first, *lines]) + "\n")
    return path


def test_the_record_that_is_changed_below_is_sound(tmp_path):
    assert read_recording(record(tmp_path)).n_samples == 120


@pytest.mark.parametrize(
    ("first", "says"),
    [
        ("bad 12 0 120", "states 0 samples a second"),
        ("bad 12 1000000000 120", "states 1e+09 samples a second"),
        # The wfdb package would take each of these for the 250 Hz of a header without a rate.
        ("bad 12 nan 120", "line 1 of the WFDB header does not state numbers"),
        ("bad 12 inf 120", "does not state numbers"),
        ("bad 12 -500 120", "does not state numbers"),
        ("bad 12 1e9 120", "does not state numbers"),
        ("bad 12 500 -120", "does not state numbers"),
        (f"bad 12 {'9' * 400} 120", "cannot be read as the WFDB header describes them"),
        (f"bad 12 500 {'9' * 400}", "cannot be read as"),
        ("bad 12 500 0", "cannot be read as"),
        ("bad 12 500 121", "bad.dat holds 2880 bytes and the header states samples of 2904"),
        ("bad 13 500 120", "states 13 signals, and 12 lines follow"),
        ("bad 9999999999 500 120", "states 0 signals, and 12 lines follow"),
        ("bad 12 500 9999999999", "it is cut off"),
    ],
)
def test_wfdb_rates_and_counts(tmp_path, first, says):
    assert says in refusal(record(tmp_path, first=first))


@pytest.mark.parametrize(
    "gain", ["0/mV", "0.0(0)/mV", "nan/mV", "inf/mV", "1e999/mV", "-0/mV", "e/mV", "/mV"]
)
def test_wfdb_gains_that_tell_no_voltage(tmp_path, gain):
    assert f"states the gain '{gain}' for lead I" in refusal(record(tmp_path, gain=gain))


@pytest.mark.parametrize("gain", ["1e300/mV", "1e-300/mV", "1e12/mV"])
def test_wfdb_gains_that_no_recorder_has(tmp_path, gain):
    assert "which no recorder has" in refusal(record(tmp_path, gain=gain))


@pytest.mark.parametrize(
    ("form", "says"),
    [
        ("16x99999999", "it is cut off"),
        ("16:99999999", "too much to hold in memory"),
        ("16x9999999:9999999+9999999", "too much to hold in memory"),
    ],
)
def test_wfdb_frames_and_skews_that_claim_gigabytes(tmp_path, form, says):
    assert says in refusal(record(tmp_path, form=form))


def test_a_wfdb_pause_that_claims_gigabytes(tmp_path):
    """A segment without a file takes nothing on disk, and a NaN for every sample in memory."""
    layout = [f"~ 0 200/mV 16 0 0 0 0 {lead}" for lead in LEADS]
    record(tmp_path)
    record(tmp_path, first="layout 12 500 0", lines=layout, name="layout")
    lines = ["layout 0", "bad 120", "~ 999999880"]
    path = record(tmp_path, first="whole/3 12 500 1000000000", lines=lines, name="whole")
    assert "more of the record is missing than was recorded" in refusal(path)


@pytest.mark.parametrize(
    "file", ["../bad.dat", "/etc/hostname", "..", ".", "a/b.dat", "C:\\bad.dat", "file:bad.dat"]
)
def test_wfdb_signal_files_elsewhere(tmp_path, file):
    inner = tmp_path / "inner"
    inner.mkdir()
    (tmp_path / "bad.dat").write_bytes(bytes(2880))
    said = refusal(record(inner, file=file))
    assert f"line 2 of the WFDB header names the signal file '{file}'" in said
    assert "only plain names" in said


@pytest.mark.parametrize(
    ("segments", "says"),
    [
        (["../bad 120"], "names the segment '../bad'; only plain names"),
        (["/etc/bad 120"], "only plain names"),
        (["whole 120"], "line 2 of the WFDB header names the record itself as its segment"),
        (["bad 60", "other 60"], "line 3 of the WFDB header names the segment other, whose"),
        (["two 120"], "names the segment two, which has segments itself"),
        (["slow 120"], "segment slow states 250 samples a second and the record 500"),
        (["bad 1"] * 101, "names 101 signals or segments"),
        (["bad"], "cannot be read as"),
        (["bad -120"], "cannot be read as"),
    ],
)
def test_wfdb_segments_that_lead_nowhere(tmp_path, segments, says):
    record(tmp_path)
    record(tmp_path, first="slow 12 250 120", name="slow")
    record(tmp_path, first="two/1 12 500 120", lines=["bad 120"], name="two")
    first = f"whole/{len(segments)} 12 500 120"
    assert says in refusal(record(tmp_path, first=first, lines=segments, name="whole"))


def test_wfdb_segments_of_many_signals(tmp_path):
    """A hundred segments of a hundred signals are a few kilobytes, and seconds of reading."""
    lines = [f"bad.dat 16 200/mV 16 0 0 0 0 {LEADS[k % 12]}" for k in range(100)]
    record(tmp_path, first="many 100 500 14", lines=lines, name="many")
    whole = record(tmp_path, first="whole/100 100 500 1400", lines=["many 14"] * 100, name="whole")
    assert "name more than 1500 signals" in refusal(whole)


def test_compressed_flat_lines_of_a_day(tmp_path):
    """An hour of them is some ten kilobytes; one that claims a day would take half a minute."""
    path = record(tmp_path, form="516", first="bad 12 500 43200000")
    assert "it is cut off" in refusal(path)


def test_a_wfdb_pause_as_long_as_memory_allows(tmp_path):
    """Forty minutes of twelve leads are 120 MB of NaN, from a header alone."""
    layout = [f"~ 0 200/mV 16 0 0 0 0 {lead}" for lead in LEADS]
    record(tmp_path)
    record(tmp_path, first="layout 12 500 0", lines=layout, name="layout")
    lines = ["layout 0", "bad 120", "~ 1199880"]
    path = record(tmp_path, first="whole/3 12 500 1200000", lines=lines, name="whole")
    assert "more of the record is missing than was recorded" in refusal(path)


def test_two_wfdb_records_that_are_each_other_s_segments(tmp_path):
    record(tmp_path, first="one/1 12 500 120", lines=["two 120"], name="one")
    two = record(tmp_path, first="two/1 12 500 120", lines=["one 120"], name="two")
    assert "which has segments itself" in refusal(two)


def test_a_long_wfdb_line_takes_no_time(tmp_path):
    """The wfdb package tries every way to part a word into name and ending: hours for this one."""
    assert "longer than 500 characters" in refusal(record(tmp_path, lines=["a" * 200_000]))


def test_a_wfdb_header_of_comments_alone(tmp_path):
    path = record(tmp_path)
    path.write_text("# nothing\n")
    assert "has no line of a record" in refusal(path)


def test_a_large_wfdb_header(tmp_path):
    path = record(tmp_path)
    path.write_text(path.read_text() + "# said before\n" * 80_000)
    assert "larger than 1000000 bytes" in refusal(path)


# DICOM


def dicom(folder: Path, change: Callable[[Dataset], object], **said: object) -> Path:
    """An object of 120 samples of twelve leads, its waveform group changed."""
    values = np.random.default_rng(3).integers(-100, 100, (120, 12)).astype(np.int16)
    group = waveform_group(values, LEADS, 500, step_uv=2.5)
    change(group)
    return write_object(folder / "bad.dcm", group, **said)


def of_group(keyword: str, value: object) -> Callable[[Dataset], object]:
    return lambda group: setattr(group, keyword, value)


def of_lead_i(keyword: str, value: object) -> Callable[[Dataset], object]:
    return lambda group: setattr(group.ChannelDefinitionSequence[0], keyword, value)


@pytest.mark.filterwarnings("ignore:Invalid value for VR DS")  # said while the file is written
@pytest.mark.parametrize(
    ("change", "says"),
    [
        (of_group("NumberOfWaveformSamples", 4_000_000_000), "samples of 12 channels in"),
        (of_group("NumberOfWaveformChannels", 65_535), "120 samples of 65535 channels in 15728400"),
        (of_group("NumberOfWaveformChannels", 0), "describes 12 channels and holds 0"),
        (of_group("NumberOfWaveformChannels", 4), "describes 12 channels and holds 4"),
        (of_group("NumberOfWaveformSamples", 121), "in 2904 bytes and holds 2880"),
        (of_group("NumberOfWaveformSamples", None), "states no number of waveform samples"),
        (of_group("SamplingFrequency", "0"), "states 0 samples a second"),
        (of_group("SamplingFrequency", "1e9"), "states 1e+09 samples a second"),
        (of_group("SamplingFrequency", "-500"), "states -500 samples a second"),
        (of_group("SamplingFrequency", "nan"), "states nan samples a second"),
        (of_lead_i("ChannelSensitivity", "0"), "lead I states a sensitivity or a baseline of zero"),
        (of_lead_i("ChannelSensitivity", "nan"), "sensitivity or a baseline"),
        (of_lead_i("ChannelSensitivity", "inf"), "sensitivity or a baseline"),
        (of_lead_i("ChannelBaseline", "nan"), "sensitivity or a baseline"),
        (of_lead_i("ChannelSensitivity", "1e300"), "which no recorder has"),
        (of_lead_i("ChannelSensitivity", "1e-300"), "which no recorder has"),
        (of_lead_i("ChannelBaseline", "1e300"), "which no ECG does"),
    ],
)
def test_dicom_claims(tmp_path, change, says):
    assert says in refusal(dicom(tmp_path, change))


def test_a_packed_dicom_object_that_claims_gigabytes(tmp_path):
    """A few hundred kilobytes of zeros, packed, that become 300 MB."""
    path = dicom(tmp_path, lambda group: None, syntax=DeflatedExplicitVRLittleEndian)
    assert read_recording(path).n_samples == 120
    content = path.read_bytes()
    packer = zlib.compressobj(9, zlib.DEFLATED, -zlib.MAX_WBITS)
    bomb = b"".join(packer.compress(bytes(1_000_000)) for _ in range(300)) + packer.flush()
    meta = content.index(b"PYDICOM") + len("PYDICOM 3.0.2 ")
    path.write_bytes(content[:meta] + bomb)
    assert path.stat().st_size < 400_000
    assert "holds more than 100 MB" in refusal(path)


def test_what_pydicom_remarks_is_not_passed_on(tmp_path):
    """A comma in an identifier: pydicom warns and reads on, and so does the reader, unheard."""
    path = dicom(tmp_path, lambda group: None)
    content = path.read_bytes()
    path.write_bytes(content.replace(b"1.2.840.10008.1.2.1\0", b"1.2,840.10008.1.2.1\0", 1))
    reading = read_watched(path)
    assert (reading.faults, reading.refusal) == ([], None)


def test_a_unit_of_control_characters_is_shown_as_text(tmp_path):
    unit = coded("uV\x08\x1b[2Jxxxx", "UCUM", "microvolt")
    said = refusal(dicom(tmp_path, of_lead_i("ChannelSensitivityUnitsSequence", unit)))
    assert "lead I is stored in the unit 'uV??[2Jxxxx', which is no voltage" in said


def test_sequences_within_sequences(tmp_path):
    """Thousands of nested items of a few bytes each."""
    path = dicom(tmp_path, lambda group: None)
    content = path.read_bytes()
    start = content.index(struct.pack("<HH", 0x5400, 0x0100))
    begun = struct.pack("<HH2sHI", 0x5400, 0x0100, b"SQ", 0, 0xFFFFFFFF)
    item = struct.pack("<HHI", 0xFFFE, 0xE000, 0xFFFFFFFF)
    path.write_bytes(content[:start] + (begun + item) * 5000)
    assert "DICOM file is damaged" in refusal(path)


def test_big_endian_dicom_samples_are_turned(tmp_path):
    """pydicom takes them for little-endian, which would make an ECG of noise."""
    truth = read_recording(dicom(tmp_path, lambda group: None)).signal_mv
    path = dicom(tmp_path, lambda group: None, syntax=ExplicitVRBigEndian)
    np.testing.assert_array_equal(read_recording(path).signal_mv, truth)


# EDF: most stand in test_edf_reader.py


@pytest.mark.parametrize(
    ("said", "says"),
    [
        ({"record_s": -1}, "does not say how long"),
        ({"record_s": "inf"}, "does not say how long"),
        ({"n_signals": 0}, "no number of signals"),
        ({"n_records": "1e3"}, "no number of data records"),
    ],
)
def test_edf_counts(tmp_path, said, says):
    path = tmp_path / "bad.edf"
    path.write_bytes(edf_bytes(signals(counts()), **said))
    assert says in refusal(path)


# Tables


def table(folder: Path, text: str) -> Path:
    path = folder / "bad.csv"
    path.write_text(text)
    return path


@pytest.mark.parametrize(
    ("rate", "says"),
    [
        ("0", "states 0 samples a second"),
        ("999999999", "states 1e+09 samples a second"),
        ("1e9", "states no sampling rate"),
        ("-500", "states no sampling rate"),
        ("nan", "states no sampling rate"),
        ("9" * 900, "states no sampling rate"),
    ],
)
def test_rates_in_a_comment_of_a_table(tmp_path, rate, says):
    text = in_mv(40).replace(RATE, f"# sampling_rate_hz: {rate}\n")
    assert says in refusal(table(tmp_path, text))


@pytest.mark.parametrize("rate", [0.0, -500.0, 1e9, float("nan"), float("inf")])
def test_rates_that_the_caller_states_of_a_table(tmp_path, rate):
    path = table(tmp_path, in_mv(40).replace(RATE, ""))
    with pytest.raises(RecordingError, match="samples a second"):
        read_recording(path, sampling_rate_hz=rate)


@pytest.mark.parametrize("step", [0.0, -0.002, 1e-300, 1e17, float("inf"), float("nan")])
def test_times_of_a_table(tmp_path, step):
    times = np.array([0.0, *([step] * 39)]).cumsum()
    said = refusal(table(tmp_path, with_time(times, "time (s)", form="%.17g", n=40)))
    assert "time" in said or "samples a second" in said


def test_steps_of_a_table_that_no_recorder_has(tmp_path):
    for counts_per_mv in ("1e300", "1e-300"):
        text = f"# counts per mv: {counts_per_mv}\n{in_mv(40)}"
        assert "which no recorder has" in refusal(table(tmp_path, text))


# SCP-ECG


def scp_file(folder: Path, made: dict[int, bytes]) -> Path:
    path = folder / "bad.scp"
    path.write_bytes(scp.record(made))
    return path


PLAIN = scp.sections(scp.leads(100))
CODED = scp.sections(scp.leads(100), coder=scp.own_coder())
SUBTRACTED = scp.with_reference_beat(
    PLAIN, scp.leads(20), [(0, 11, 21, 30)], n=100, fiducial=11, step_nv=500
)


def spans(first: int, last: int) -> bytes:
    return scp.lead_definitions([(number, first, last) for number in scp.NUMBERS])


def test_the_records_that_are_changed_below_are_sound(tmp_path):
    for made in (PLAIN, CODED, SUBTRACTED):
        assert read_recording(scp_file(tmp_path, made)).n_samples == 100


def two_tables_in_turn() -> dict[int, bytes]:
    """A code of one bit that only switches to the table it is in, and one for 0."""
    table = struct.pack("<HH", 1, 2) + struct.pack("<BBBhI", 1, 1, 0, 1, 0)
    table += struct.pack("<BBBhI", 1, 1, 1, 0, 1)
    data = struct.pack("<HHBB8H", 2500, 2000, 0, 0, *([60_000] * 8)) + bytes(480_000)
    return PLAIN | {2: table, 6: data}


@pytest.mark.parametrize(
    ("made", "says"),
    [
        (PLAIN | {3: spans(1, 4_000_000_000)}, "runs from sample 1 to 4000000000"),
        (PLAIN | {3: spans(100, 1)}, "runs from sample 100 to 1"),
        (PLAIN | {3: spans(0, 99)}, "runs from sample 0 to 99"),
        (PLAIN | {3: spans(1, 50_000_000)}, "a lead of 50000000 samples has only"),
        (CODED | {3: spans(1, 50_000_000)}, "400000000 compressed samples, too many"),
        (PLAIN | {3: b"\0\0" + PLAIN[3][2:]}, "states 0 leads"),
        (PLAIN | {6: PLAIN[6][:2] + b"\0\0" + PLAIN[6][4:]}, "0 us a sample"),
        (PLAIN | {6: PLAIN[6][:2] + b"\1\0" + PLAIN[6][4:]}, "states 1e+06 samples a second"),
        (PLAIN | {6: PLAIN[6][:2] + b"\xff\xff" + PLAIN[6][4:]}, "states 15.259 samples"),
        (CODED | {2: struct.pack("<H", 60_000) + CODED[2][2:] * 5000}, "60000 code tables"),
        (two_tables_in_turn(), "more switches of the table than samples"),
        (SUBTRACTED | {4: struct.pack("<HHH", 40, 11, 60_000) + bytes(840_000)}, "60000 beats"),
        (
            SUBTRACTED | {4: scp.beat_locations(40, 11, [(0, 1, 21, 100)] * 2000)},
            "beats lie upon each other",
        ),
    ],
    ids=range(13),
)
def test_scp_claims(tmp_path, made, says):
    assert says in refusal(scp_file(tmp_path, made))


def test_scp_leads_that_lie_hours_apart(tmp_path):
    """Eight leads of 30,000 samples, each a while later than the one before."""
    values = np.zeros((8, 30_000), dtype=int)
    made = {
        3: scp.lead_definitions(
            [(number, 1 + 60_000 * number, 30_000 + 60_000 * number) for number in scp.NUMBERS]
        ),
        6: scp.coded_leads(values, step_nv=2500, interval_us=10_000),
    }
    assert "its leads lie far apart" in refusal(scp_file(tmp_path, made))


def test_scp_sections_within_each_other(tmp_path):
    """Each with a checksum of its own, and each as long as nearly the whole file."""
    numbers = range(1, 12)
    content = bytes(1000)
    for number in reversed(numbers[1:]):
        content = scp.section(number, content)
    record = bytearray(scp.record({1: content}))
    _, size, first = struct.unpack_from("<HII", record, 32)
    for number in numbers:
        inside = 16 * (number - 1)
        struct.pack_into("<HII", record, 22 + 10 * number, number, size - inside, first + inside)
    path = tmp_path / "bad.scp"
    path.write_bytes(scp.sealed(bytes(record)))
    assert "its sections lie upon each other" in refusal(path)


def test_scp_differences_that_add_up_past_any_integer(tmp_path):
    """Second differences of 2^30 over 4000 samples, times the step: 2^69."""
    coder = scp.Coder({}, [("1", 31)], struct.pack("<HHBBBhI", 1, 1, 1, 32, 1, 0, 1))
    n = 4000
    one = coder.encode([2**30 - 1] * n)
    content = struct.pack("<HHBB8H", 65_535, 2000, 2, 0, *([len(one)] * 8)) + one * 8
    made = {2: coder.table, 3: spans(1, n), 6: content}
    assert "which no ECG does" in refusal(scp_file(tmp_path, made))


def test_more_compressed_samples_than_are_decoded_in_a_second(tmp_path, monkeypatch):
    monkeypatch.setattr(scp_signals, "MOST_COMPRESSED_SAMPLES", 799)
    assert "800 compressed samples" in refusal(scp_file(tmp_path, CODED))


# Annotated ECGs: bombs of XML stand in test_aecg_package.py


def test_sets_within_sets_of_an_annotated_ecg(tmp_path):
    """Eighty-five sets around the same sequences: each must not go through all of them again."""
    sequences = aecg.times() + aecg.sequence("MDC_ECG_LEAD_V1", "<value/>") * 3000
    nested = "<sequenceSet>" * 85 + sequences + "</sequenceSet>" * 85
    path = tmp_path / "bad.xml"
    path.write_bytes(aecg.annotated_ecg(aecg.series(nested)))
    assert "none of the twelve leads" in refusal(path)


def test_an_entity_within_the_samples_of_an_annotated_ecg(tmp_path):
    path = tmp_path / "bad.xml"
    entity = '<!DOCTYPE AnnotatedECG [<!ENTITY many "1 2 3 4">]>'
    content = aecg.plain().replace(b"?>", b"?>" + entity.encode(), 1)
    path.write_bytes(content.replace(b"<digits>", b"<digits>&many; ", 1))
    assert "document type or entities" in refusal(path)


# Any format

on_linux = pytest.mark.skipif(sys.platform != "linux", reason="other systems name files in text")


@on_linux
def test_a_pipe_is_refused_and_not_waited_for(tmp_path):
    path = tmp_path / "pipe.csv"
    os.mkfifo(path)
    assert "a pipe or a device" in refusal(path)


@on_linux
def test_a_name_that_is_no_text_is_refused_as_text(tmp_path):
    path = tmp_path / os.fsdecode(b"bad\xff.csv")
    path.write_text("nothing")
    with pytest.raises(RecordingError) as refused:
        read_recording(path)
    assert str(refused.value).startswith("bad?.csv: ")


def test_a_table_named_like_a_record_beside_it_is_the_table(tmp_path):
    record(tmp_path)
    assert read_recording(table(tmp_path, in_mv(40))).source.format == "CSV"
