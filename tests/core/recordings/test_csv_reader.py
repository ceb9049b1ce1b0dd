"""Tables of samples, written by numpy and the csv module and not by the program."""

from __future__ import annotations

import codecs
import contextlib
import csv
import io
from datetime import date, datetime
from pathlib import Path

import numpy as np
import pytest

from core import RecordingError
from core.recordings import csv_table
from core.recordings.csv_reader import looks_like_csv, read_csv
from core.recordings.leads import TWELVE_LEADS
from core.recordings.recording import Filters
from tests.helpers.csv_files import LEADS, RATE, in_mv, small_tables, table, values_uv, with_time
from tests.helpers.mutate import mutated


def write(folder: Path, content: str | bytes) -> Path:
    path = folder / "table.csv"
    path.write_bytes(content if isinstance(content, bytes) else content.encode())
    return path


def read(folder: Path, content: str | bytes, **said: object):
    return read_csv(write(folder, content), **said)


def refusal(folder: Path, content: str | bytes, **said: object) -> str:
    with pytest.raises(RecordingError) as caught:
        read(folder, content, **said)
    message = str(caught.value)
    assert message.startswith("table.csv: ")
    assert "\n" not in message
    return message


def assert_is_the_table(recording, n: int = 300) -> None:
    np.testing.assert_allclose(recording.signal_mv, values_uv(n) / 1000, rtol=0, atol=1e-12)
    assert recording.sampling_rate_hz == 500.0
    assert recording.leads_present == TWELVE_LEADS


@pytest.mark.parametrize(
    ("delimiter", "decimal"), [(",", "."), (";", "."), ("\t", "."), (";", ","), ("\t", ",")]
)
def test_delimiters_and_decimal_marks(tmp_path, delimiter, decimal):
    assert_is_the_table(read(tmp_path, in_mv(delimiter=delimiter, decimal=decimal)))


@pytest.mark.parametrize(
    "encoded",
    [
        lambda text: text.encode("utf-8-sig"),
        lambda text: text.encode("utf-16"),
        lambda text: codecs.BOM_UTF16_BE + text.encode("utf-16-be"),
        lambda text: text.encode("latin-1"),
        lambda text: text.encode("utf-8"),
        lambda text: text.replace("\n", "\r\n").encode(),
        lambda text: text.replace("\n", "\r").encode(),
        lambda text: text.rstrip("\n").encode(),
    ],
)
def test_encodings_and_line_ends(tmp_path, encoded):
    headings = [f"{lead} [µV]" for lead in LEADS]
    text = table(values_uv(), headings, form="%d", above="# name: Åse Ünknown\n" + RATE)
    content = encoded(text)
    assert looks_like_csv(content[:4096])
    recording = read(tmp_path, content)
    assert_is_the_table(recording)
    assert recording.subject.name == "Åse Ünknown"


@pytest.mark.parametrize(
    ("form", "per_mv"),
    [
        ("{} (mV)", 1), ("{}[uV]", 1e3), ("{} [µV]", 1e3), ("{} [μV]", 1e3), ("{}_uV", 1e3),
        ("{} / mV", 1), ("{}/uV", 1e3), ("{} mV", 1), ("Lead {} (microvolts)", 1e3),
        ("ECG {}_mv", 1), ("{} (V)", 1e-3), ("{} (nV)", 1e6), ("  {}  (mV) ", 1),
    ],
)  # fmt: skip
def test_units_in_the_headings(tmp_path, form, per_mv):
    headings = [form.format(lead) for lead in LEADS]
    text = table(values_uv() / 1000 * per_mv, headings, form="%.6f", above=RATE)
    assert looks_like_csv(text.encode())
    assert_is_the_table(read(tmp_path, text))


def test_a_row_of_units(tmp_path):
    text = table(values_uv(), LEADS, form="%d", above=RATE)
    head, _, rows = text.partition("aVF,V1")
    name, _, rest = rows.partition("\n")
    units = ",".join(["(uV)"] * 12)
    assert_is_the_table(read(tmp_path, f"{head}aVF,V1{name}\n{units}\n{rest}"))


@pytest.mark.parametrize(
    "line", ["# unit: uV", "#units = µV", "# Unit : microvolt;;;", '"# unit: uV",,']
)
def test_a_unit_in_a_comment(tmp_path, line):
    assert_is_the_table(
        read(tmp_path, table(values_uv(), LEADS, form="%d", above=RATE + line + "\n"))
    )


def test_a_unit_that_the_caller_states(tmp_path):
    text = table(values_uv(), LEADS, form="%d", above=RATE)
    assert_is_the_table(read(tmp_path, text, unit="uV"))
    assert "'I (mV)', or state it when it is opened" in refusal(tmp_path, text)
    assert "'mm' is no unit of voltage" in refusal(tmp_path, text, unit="mm")


def test_a_unit_said_twice_must_be_the_same(tmp_path):
    assert_is_the_table(read(tmp_path, in_mv(), unit="mV"))
    assert "states 'mV' for lead I, not 'uV'" in refusal(tmp_path, in_mv(), unit="uV")


def test_a_unit_that_is_no_voltage_is_refused(tmp_path):
    headings = [f"{lead} (mV)" for lead in LEADS]
    headings[7] = "V2 (mmHg)"
    text = table(values_uv() / 1000, headings, above=RATE)
    assert "lead V2 is in the unit 'mmHg'" in refusal(tmp_path, text)


@pytest.mark.parametrize(
    ("heading", "scale"),
    [
        ("time", 1), ("Time (s)", 1), ("t", 1), ("time_s", 1), ("seconds", 1), ("Zeit [s]", 1),
        ("time_ms", 1e3), ("time (ms)", 1e3), ("t [ms]", 1e3), ("ms", 1e3), ("Time / µs", 1e6),
        # Without a unit: 2 s or 2000 s between samples is no ECG.
        ("time", 1e3), ("timestamp", 1e6),
    ],
)  # fmt: skip
def test_the_rate_from_a_time_column(tmp_path, heading, scale):
    text = with_time(np.arange(300) / 500 * scale, heading)
    assert looks_like_csv(text.encode())
    assert_is_the_table(read(tmp_path, text))


def test_a_stated_unit_of_time_is_believed(tmp_path):
    text = with_time(np.arange(300) / 500, "time (ms)")
    assert "states 500000 samples a second" in refusal(tmp_path, text)


@pytest.mark.parametrize(
    ("rate_hz", "form"),
    [(500, "%.3f"), (1000, "%.3f"), (360, "%.3f"), (257, "%.4f"), (512, "%.3f"), (360, "%.5g"),
     (1000 / 3, "%.9f"), (977, "%.17g"), (8000, "%.6f")],
)  # fmt: skip
def test_rates_behind_rounded_times(tmp_path, rate_hz, form):
    start_s = 0 if form.endswith("g") else 12
    text = with_time(start_s + np.arange(5000) / rate_hz, "time", form=form, n=5000)
    assert read(tmp_path, text).sampling_rate_hz == pytest.approx(rate_hz, rel=1e-8)


def test_times_of_a_clock_that_began_long_ago(tmp_path):
    text = with_time(1_700_000_000 + np.arange(300) / 500, "timestamp", form="%.6f")
    assert_is_the_table(read(tmp_path, text))


@pytest.mark.parametrize(
    ("form", "lost"), [("%.3f", 150), ("%.3f", 1), ("%.3f", 298), ("%.6f", 150)]
)
@pytest.mark.parametrize("rate_hz", [500, 360, 512, 1000])
def test_a_lost_sample_is_found(tmp_path, rate_hz, form, lost):
    times = np.delete(np.arange(301) / rate_hz, lost)
    message = refusal(tmp_path, with_time(times, "time (s)", form=form))
    assert "not evenly spaced: line " in message
    if rate_hz == 500:
        assert f"line {lost + 2} comes 0.004 after the line before it, where 0.002" in message


def test_other_times_that_give_no_rate(tmp_path):
    even = np.arange(300) / 500
    paused = even + 7.0 * (np.arange(300) > 100)
    assert "line 103 comes 7.002 after" in refusal(tmp_path, with_time(paused, "time"))
    assert "is not later" in refusal(tmp_path, with_time(even[::-1], "time"))
    assert "is not later" in refusal(tmp_path, with_time(even * 0, "time"))
    coarse = with_time(even, "time", form="%.2f")
    assert "is not later" in refusal(tmp_path, coarse)
    jittery = even + np.random.default_rng(1).uniform(-5e-4, 5e-4, 300)
    assert "not evenly spaced" in refusal(tmp_path, with_time(jittery, "time", form="%.9f"))
    gone = with_time(np.where(np.arange(300) == 7, np.nan, even), "time")
    assert "line 9 holds no time" in refusal(tmp_path, gone)
    alone = with_time(even[:1], "time", n=1)
    assert "fewer than two rows" in refusal(tmp_path, alone)


@pytest.mark.parametrize(
    "line",
    ["# sampling_rate_hz: 500", "# Sampling rate: 500 Hz", "#fs=500", "# sample-rate: 0.5 kHz",
     "# sampling frequency: 500,0 Hz", "# sampling_rate_hz: 500.0;;;;"],
)  # fmt: skip
def test_a_rate_in_a_comment(tmp_path, line):
    assert_is_the_table(read(tmp_path, in_mv(above=line + "\n")))


def test_a_rate_that_the_caller_states(tmp_path):
    assert_is_the_table(read(tmp_path, in_mv(above=""), sampling_rate_hz=500.0))
    assert "'# sampling_rate_hz: 500'" in refusal(tmp_path, in_mv(above=""))


def test_a_rate_said_twice_must_be_the_same(tmp_path):
    text = with_time(np.arange(300) / 500, "time", above=RATE)
    assert_is_the_table(read(tmp_path, text, sampling_rate_hz=500.0))
    message = refusal(tmp_path, text, sampling_rate_hz=250.0)
    assert "stated as 500 Hz and as 250 Hz" in message
    assert "as 500 Hz and as 1000 Hz" in refusal(
        tmp_path, with_time(np.arange(300) / 1000, "time", above=RATE)
    )


@pytest.mark.parametrize("missing", ["", " ", "NaN", "nan", "NA", "-", "null"])
@pytest.mark.parametrize("decimal", [".", ","])
def test_an_empty_cell_is_a_gap(tmp_path, missing, decimal):
    lines = in_mv(delimiter=";", decimal=decimal).splitlines()
    cells = lines[12].split(";")
    cells[3] = missing
    lines[12] = ";".join(cells)
    recording = read(tmp_path, "\n".join(lines))
    assert np.isnan(recording.signal_mv[10, 3])
    assert np.isnan(recording.signal_mv).sum() == 1


def test_who_when_and_filters_from_comments(tmp_path):
    above = (
        "# patient_id: INVENTED-01\n# Name: Ash Invented\n# sex: F\n# birth date: 1950-03-09\n"
        "# recorded at: 2031-11-12T22:40:05+01:00\n# high_pass_hz: 0.05\n# low-pass hz: 150\n"
        "# a remark without a key\n\n"
    )
    recording = read(tmp_path, in_mv(above=above + RATE))
    subject = recording.subject
    assert (subject.id, subject.name, subject.sex) == ("INVENTED-01", "Ash Invented", "female")
    assert subject.born_on == date(1950, 3, 9)
    assert subject.age_years == pytest.approx(81.68, abs=0.01)
    assert recording.recorded_at == datetime(2031, 11, 12, 22, 40, 5)
    assert recording.filters == Filters(0.05, 150.0, None)
    assert read(tmp_path, in_mv(above=RATE + "# age: 61\n# date: soon\n")).subject.age_years == 61.0


def test_comments_and_blank_lines_among_the_rows(tmp_path):
    lines = in_mv().splitlines()
    lines[20:20] = ["# a remark; with, marks", "", "   "]
    assert_is_the_table(read(tmp_path, "\n".join(lines)))


def test_cells_in_quotation_marks(tmp_path):
    text = io.StringIO()
    writer = csv.writer(text, quoting=csv.QUOTE_ALL)
    writer.writerow([*(f"{lead} (mV)" for lead in LEADS), "remark"])
    for row in values_uv() / 1000:
        writer.writerow([*row, "noise, perhaps"])
    assert looks_like_csv(text.getvalue().encode()[:4096])
    assert_is_the_table(read(tmp_path, RATE + text.getvalue()))


def test_a_decimal_comma_in_quotation_marks_is_refused_by_cell(tmp_path):
    text = RATE + ",".join(f"{lead} (mV)" for lead in LEADS) + "\n" + ",".join(['"0,1"'] * 12)
    assert "line 3, column 'I (mV)' holds '0,1'" in refusal(tmp_path, text)


def test_columns_that_are_no_leads_are_left_out(tmp_path):
    headings = ["", "sample", *(f"{lead} (mV)" for lead in LEADS), "X (g)", "event"]
    rows = [
        [str(k), str(k), *(f"{v:.3f}" for v in row), "0.9", "beat; or _noise_"]
        for k, row in enumerate(values_uv() / 1000)
    ]
    text = RATE + "\n".join(",".join(row) for row in [headings, *rows])
    recording = read(tmp_path, text)
    assert_is_the_table(recording)
    assert recording.further_leads == ()


def test_further_leads_and_a_lead_upside_down(tmp_path):
    headings = [f"{lead} (mV)" for lead in LEADS]
    headings[3] = "-aVR (mV)"
    extra = np.arange(300)[:, np.newaxis] / 1000
    text = table(
        np.hstack([values_uv() / 1000, extra, extra]), [*headings, "V7 (mV)", "X (mV)"], above=RATE
    )
    recording = read(tmp_path, text)
    assert recording.further_leads == ("V7", "X")
    np.testing.assert_allclose(recording.signal_mv[:, 3], -values_uv()[:, 3] / 1000)
    np.testing.assert_allclose(recording.further_mv, np.hstack([extra, extra]))


def test_missing_limb_leads_are_derived(tmp_path):
    eight = [0, 1, *range(6, 12)]
    text = table(values_uv()[:, eight], [LEADS[k] for k in eight], form="%d", above=RATE)
    recording = read(tmp_path, text, unit="uV")
    assert recording.leads_derived == ("III", "aVR", "aVL", "aVF")


@pytest.mark.parametrize(
    ("values", "unit", "per_mv"),
    [
        (values_uv() / 1000, "mV", 1000.0),
        (values_uv() * 2.5, "uV", 10_000.0),
        (values_uv() * 0.0, "mV", 1000.0),
        (values_uv() / 1000 + 0.000123456789, "mV", 1e6),
        (values_uv() / 1e6, "V", 1000.0),
    ],
)
def test_the_step_is_that_of_the_decimals_written(tmp_path, values, unit, per_mv):
    text = table(values, LEADS, form="%.12g", above=RATE)
    assert read(tmp_path, text, unit=unit).counts_per_mv == (per_mv,) * 12


def test_rows_in_many_blocks(tmp_path, monkeypatch):
    monkeypatch.setattr(csv_table, "BLOCK_CHARACTERS", 997)
    assert_is_the_table(read(tmp_path, in_mv()))
    lines = in_mv().splitlines()
    lines[200] = lines[200].replace("0", "o")
    assert "line 201, column '" in refusal(tmp_path, "\n".join(lines))


def cell(line: int, place: int, text: str) -> str:
    lines = in_mv().splitlines()
    cells = lines[line - 1].split(",")
    cells[place] = text
    lines[line - 1] = ",".join(cells)
    return "\n".join(lines)


@pytest.mark.parametrize(
    ("text", "says"),
    [
        (cell(40, 6, "noise"), "line 40, column 'V1 (mV)' holds 'noise', which is no number"),
        (cell(41, 6, "1_0"), "line 41, column 'V1 (mV)' holds '1_0'"),
        (cell(42, 6, "inf"), "line 42, column 'V1 (mV)' holds 'inf'"),
        (cell(43, 6, "1e999"), "line 43, column 'V1 (mV)' holds '1e999'"),
        (cell(44, 6, "0x10"), "holds '0x10'"),
        (cell(45, 6, "\x07" * 99), "holds '" + "?" * 20 + "'"),
        (cell(46, 6, "2000"), "lead V1 reaches 2e+03 mV"),
        (cell(47, 6, "1,5"), "line 47 has 13 cells where the header row has 12. If its decimal"),
        (in_mv()[:-40], "where the header row has 12. Export the table again, whole"),
        (in_mv(delimiter=";", decimal=",").replace(",1", ".1", 1), "same decimal mark"),
        (in_mv(delimiter=";").replace(".1", ",1", 1), "same decimal mark"),
        (in_mv(decimal=","), "line 3 has 24 cells where the header row has 12. If its decimal"),
        (in_mv().replace("V2", "V1", 1), "lead V1 stands in two columns of line 2"),
        (RATE + "1,2,3\n4,5,6\n", "no header row that names its leads"),
        (RATE, "no header row that names its leads"),
        ("", "no header row that names its leads"),
        (in_mv(0), "holds no samples"),
        (RATE + "I (mV),II (mV),V1 (mV)\n1,2,3\n", "a comparison needs V1 to V6"),
        (in_mv() + "1," * 40_000, "longer than 65536 characters"),
        (in_mv().encode("utf-16")[:-1], "begins as UTF-16 text and does not go on"),
    ],
)
def test_a_bad_table_says_where_and_what_would_mend_it(tmp_path, text, says):
    assert says in refusal(tmp_path, text)


def test_a_table_too_long_for_memory_is_refused(tmp_path, monkeypatch):
    monkeypatch.setattr(csv_table, "MOST_VALUES", 12 * 200)
    assert "more than 200 rows" in refusal(tmp_path, in_mv())


def test_the_content_tells_it():
    assert looks_like_csv(b"# a remark\n\ntime\tI\tII\tV1\n0\t1\t2\t3\n")
    assert looks_like_csv((",".join(LEADS)).encode()[:30])
    assert not looks_like_csv(b"")
    assert not looks_like_csv(b"time,I,II\n0,1,2\n")
    assert not looks_like_csv(b"Dear colleague, I, for one, ...\n")
    assert not looks_like_csv(b"invented 12 500 5000\ninvented.dat 16 1000 16 0 0 0 0 I\n")
    assert not looks_like_csv(b"I,II,III\n\0")
    assert not looks_like_csv(bytes(range(256)) * 16)
    # A comment in UTF-8 may hold the byte that Latin-1 takes for the end of a line.
    assert looks_like_csv("# name: Åse …\nI,II,III\n".encode())


@pytest.mark.parametrize("content", small_tables().values(), ids=small_tables())
def test_nothing_but_a_refusal_comes_out_of_a_mutated_table(tmp_path, content):
    rng = np.random.default_rng(21)
    for _ in range(80):
        path = write(tmp_path, mutated(content, rng))
        looks_like_csv(path.read_bytes()[:4096])
        with contextlib.suppress(RecordingError):
            read_csv(path)
