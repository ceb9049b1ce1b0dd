"""HL7 annotated ECGs: hand-built, their contents explained, and one by another writer.

Unless a test says otherwise: eight leads of 60 whole numbers at 500 Hz, 2.5 uV each.
"""

from __future__ import annotations

import re
import time
from datetime import date
from pathlib import Path

import numpy as np
import pytest

from core import Recording, RecordingError
from core.recordings.aecg import digits as digits_module
from core.recordings.aecg import document
from core.recordings.aecg.reader import looks_like_aecg, read_aecg
from core.recordings.leads import TWELVE_LEADS
from core.recordings.recording import Filters
from tests.helpers import aecg_files as aecg
from tests.helpers.aecg_damage import damaged
from tests.helpers.aecg_files import COUNTS, NAMES, derived, halves, leads, plain, relative

DATA = Path(__file__).resolve().parents[3].parent / "shared" / "data"
COLUMNS = [0, 1, *range(6, 12)]
STEP_MV = 0.0025
SLOWEST_S = 2.0
FUZZED = 300


def read(folder: Path, content: bytes | str) -> Recording:
    path = folder / "invented.xml"
    path.write_bytes(content if isinstance(content, bytes) else content.encode())
    return read_aecg(path)


def refusal(folder: Path, content: bytes | str) -> str:
    """The one line with which a file is refused."""
    with pytest.raises(RecordingError) as refused:
        read(folder, content)
    said = str(refused.value)
    assert said.startswith("invented.xml: ")
    assert "\n" not in said
    assert re.search(r"[.;] (correct|export|choose|save|cut) .*\.$", said.lower()), (
        said
    )  # what would mend it
    return said


def recorded_mv(recording: Recording) -> np.ndarray:
    """The eight leads that the file holds, shape (8, n)."""
    return recording.signal_mv[:, COLUMNS].T


def is_exactly(recording: Recording, truth_mv: np.ndarray) -> None:
    # Only the rounding of a product and a sum of doubles lies between the two.
    np.testing.assert_allclose(recorded_mv(recording), truth_mv, rtol=0, atol=1e-12)


# What is read


def test_a_plain_file_comes_back_exactly(tmp_path):
    recording = read(tmp_path, plain())
    is_exactly(recording, COUNTS * STEP_MV)
    assert recording.sampling_rate_hz == 500.0
    assert recording.leads_present == NAMES
    assert recording.counts_per_mv[0] == 400.0
    assert recording.source.format == "HL7 aECG"
    assert recording.source.name == "invented.xml"


@pytest.mark.parametrize(
    ("unit", "per_mv"), [("uV", 1e3), ("mV", 1.0), ("V", 1e-3), ("nV", 1e6), ("µV", 1e3)]
)
def test_every_unit_with_an_origin_and_a_scale(tmp_path, unit, per_mv):
    """value = origin + digit x scale: here 0.25 mV + digit x 0.005 mV, in each unit."""
    options = {"unit": unit, "scale": repr(0.005 * per_mv), "origin": repr(0.25 * per_mv)}
    recording = read(tmp_path, plain(**leads(**options)))
    is_exactly(recording, 0.25 + COUNTS * 0.005)


def test_a_negative_scale_turns_the_lead_over(tmp_path):
    recording = read(tmp_path, plain(V2=aecg.digits(COUNTS[3], scale="-2.5")))
    np.testing.assert_allclose(recording.signal_mv[:, 7], -COUNTS[3] * STEP_MV, atol=1e-12)


@pytest.mark.parametrize(
    ("time", "rate_hz"),
    [
        (aecg.times(step="0.004"), 250.0),
        (aecg.times(step="2", unit="ms"), 500.0),
        (aecg.times(step="1000", unit="us"), 1000.0),
        (relative(step="1.953125"), 512.0),
        (relative(step="2e-3", unit="s"), 500.0),
        (aecg.times() + relative(), 500.0),  # both, which say the same
    ],
)
def test_the_rate_is_one_over_the_increment(tmp_path, time, rate_hz):
    assert read(tmp_path, plain(time=time)).sampling_rate_hz == rate_hz


def test_digits_are_parted_by_any_white_space(tmp_path):
    marks = ["\n", "\t", "  ", " \r\n    ", "<!-- a comment -->\n", "&#10;"]
    written = "".join(f"{count}{marks[i % len(marks)]}" for i, count in enumerate(COUNTS[4]))
    value = aecg.digits([]).replace("<digits>", f"<digits>\n   {written}")
    is_exactly(read(tmp_path, plain(V3=value)), COUNTS * STEP_MV)


def test_digits_cut_anywhere_between_two_reads_stay_whole(tmp_path, monkeypatch):
    """The list is taken in blocks; none of their ends may part a number."""
    monkeypatch.setattr(document, "_BLOCK_BYTES", 7)
    monkeypatch.setattr(digits_module, "_BLOCK_CHARACTERS", 5)
    is_exactly(read(tmp_path, plain()), COUNTS * STEP_MV)


def test_a_word_longer_than_a_block_is_no_number():
    """Neither cut into several nor passed over: 0.000 (and so on) would be a number if cut."""
    for word in ("1" * 300_000, "0." + "0" * 600_000):
        digits = digits_module.Digits()
        for text in (word, " 5"):
            digits.add(text)
        digits.end()
        assert digits.fault == word[:20]
        assert digits.n_values == 0


def test_digits_with_decimals_and_exponents_are_numbers(tmp_path):
    values = ["0.125", "-1.5e1", "+3", ".5", "2.", "1E-2", *["0"] * 54]
    recording = read(tmp_path, plain(V1=aecg.digits(values, scale="1", unit="mV")))
    told_mv = [0.125, -15.0, 3.0, 0.5, 2.0, 0.01]
    np.testing.assert_allclose(recording.signal_mv[:6, 6], told_mv, rtol=1e-15)
    # Three decimals of 1 mV: a written copy must not round them to whole mV.
    assert recording.counts_per_mv[6] == 1000.0


def test_whole_numbers_without_a_type_or_an_origin(tmp_path):
    """Type and origin left out: the numbers say enough with a scale and its unit."""
    value = aecg.digits(COUNTS[0]).replace(' xsi:type="SLIST_PQ"', ' xsi:type="SLIST_INT"')
    value = value.replace('<origin value="0" unit="uV"/>', "")
    is_exactly(read(tmp_path, plain(I=value)), COUNTS * STEP_MV)


def test_all_codes_of_leads(tmp_path):
    names = ("I", "II", "III", "AVR", "aVL", "AVF", *(f"V{n}" for n in range(1, 10)))
    names += ("V3R", "V4R", "X", "Y", "Z", "UNHEARD_OF")
    rows = np.resize(COUNTS, (len(names), 60)) + np.arange(len(names))[:, None]
    made = {name: aecg.digits(row) for name, row in zip(names, rows, strict=True)}
    recording = read(tmp_path, aecg.annotated_ecg(aecg.series(aecg.sequence_set(made))))
    assert recording.leads_present == TWELVE_LEADS
    assert recording.further_leads == ("V3R", "V4R", "V7", "V8", "V9", "X", "Y", "Z")
    np.testing.assert_allclose(recording.signal_mv.T, rows[:12] * STEP_MV, atol=1e-12)
    order = [names.index(lead) for lead in recording.further_leads]
    np.testing.assert_allclose(recording.further_mv.T, rows[order] * STEP_MV, atol=1e-12)


def test_avr_upside_down_is_put_right(tmp_path):
    recording = read(tmp_path, plain(AVRneg=aecg.digits(COUNTS[0])))
    np.testing.assert_allclose(recording.signal_mv[:, 3], -COUNTS[0] * STEP_MV, atol=1e-12)


def test_an_empty_lead_was_not_recorded(tmp_path):
    recording = read(tmp_path, plain(III=aecg.digits([])))
    assert "III" in recording.leads_derived
    assert "only" not in refusal(tmp_path, plain(V2=aecg.digits([])))


def test_a_lead_that_ends_early_has_a_gap(tmp_path):
    recording = read(tmp_path, plain(V6=aecg.digits(COUNTS[7][:50])))
    assert np.isnan(recording.signal_mv[50:, 11]).all()
    assert np.isnan(recording.signal_mv).sum() == 10


# Prefixes, namespaces, encodings


def test_a_prefix_changes_nothing(tmp_path):
    text = plain().decode()
    text = re.sub(r"<(/?)(?=[A-Za-z])", r"<\1hl7:", text).replace("xmlns=", "xmlns:hl7=")
    assert "<hl7:digits>" in text
    assert looks_like_aecg(text.encode()[:4096])
    is_exactly(read(tmp_path, text), COUNTS * STEP_MV)


def test_no_namespace_changes_nothing(tmp_path):
    is_exactly(read(tmp_path, plain().replace(b' xmlns="urn:hl7-org:v3"', b"")), COUNTS * STEP_MV)


def test_elements_of_another_namespace_are_passed_over(tmp_path):
    """A maker's own series, longer than the rhythm, and its own scale inside the standard's."""
    text = plain().decode()
    longer = aecg.series(aecg.sequence_set(leads(np.resize(COUNTS, (8, 500)))))
    theirs = f'<extra xmlns="urn:invented">{longer}</extra>'
    text = text.replace("</AnnotatedECG>", theirs + "</AnnotatedECG>")
    text = text.replace("<scale", '<scale xmlns="urn:invented" value="9" unit="V"/><scale', 1)
    is_exactly(read(tmp_path, text), COUNTS * STEP_MV)


@pytest.mark.parametrize(
    ("encoding", "declared"),
    [
        ("utf-8", "UTF-8"),
        ("utf-8-sig", "UTF-8"),
        ("utf-16", "UTF-16"),
        ("utf-16-le", "UTF-16"),
        ("utf-16-be", "UTF-16"),
        ("latin-1", "ISO-8859-1"),
        ("cp1252", "windows-1252"),
    ],
)
def test_encodings(tmp_path, encoding, declared):
    text = plain().decode().replace("UTF-8", declared).replace("Ash", "Äsche")
    content = text.encode(encoding)
    assert looks_like_aecg(content[:4096])
    recording = read(tmp_path, content)
    is_exactly(recording, COUNTS * STEP_MV)
    assert recording.subject.name == "Invented Äsche"


@pytest.mark.parametrize(
    "start",
    [
        "<AnnotatedECG>",
        "<AnnotatedECG/>",
        "  \n<AnnotatedECG\n xmlns='urn:hl7-org:v3'>",
        "<?xml version='1.0'?><!-- <html> --><?a b?><v3:AnnotatedECG xmlns:v3='urn:hl7-org:v3'>",
        "<!DOCTYPE AnnotatedECG><AnnotatedECG>",
        "<!DOCTYPE a [<!ENTITY b 'c>]'>]><AnnotatedECG>",
    ],
)
def test_the_root_tells_an_annotated_ecg(start):
    assert looks_like_aecg(start.encode())


@pytest.mark.parametrize(
    "start",
    [
        "",
        "AnnotatedECG",
        "<html>AnnotatedECG</html>",
        "<html><AnnotatedECG/></html>",
        "<!-- <AnnotatedECG> -->",
        "<!-- <AnnotatedECG> --><html>",
        "<AnnotatedECGs>",
        "<NotAnnotatedECG>",
        "I,II,<AnnotatedECG>",
    ],
)
def test_what_only_mentions_one_is_something_else(start):
    assert not looks_like_aecg(start.encode())


# Which series, which sets


def test_the_longest_original_rhythm_is_taken(tmp_path):
    def rhythm(n: int) -> str:
        return aecg.series(aecg.sequence_set(leads(np.resize(COUNTS, (8, n)))))

    incomplete = aecg.series(
        aecg.sequence_set({"II": aecg.digits(np.resize(COUNTS, 5000)), "V1": aecg.digits([1])})
    )
    beat = rhythm(900).replace("RHYTHM", "REPRESENTATIVE_BEAT")
    content = aecg.annotated_ecg(beat, rhythm(60), incomplete, rhythm(200), rhythm(90))
    assert read(tmp_path, content).n_samples == 200


@pytest.mark.parametrize("code", ["REPRESENTATIVE_BEAT", "RHYTHM"])
def test_what_is_nested_as_derived_is_never_taken(tmp_path, code):
    """Not even where it calls itself a rhythm and is longer."""
    nested = plain().replace(b"</series>", derived(code).encode() + b"</series>")
    is_exactly(read(tmp_path, nested), COUNTS * STEP_MV)
    # As a plain series inside the derivation, too.
    is_exactly(read(tmp_path, nested.replace(b"derivedSeries", b"series")), COUNTS * STEP_MV)


def test_a_file_without_an_original_rhythm_says_what_it_has(tmp_path):
    beat = aecg.series(aecg.sequence_set(leads()), code="REPRESENTATIVE_BEAT")
    said = refusal(tmp_path, aecg.annotated_ecg(beat))
    assert "no rhythm but a representative beat (series: REPRESENTATIVE_BEAT)" in said
    assert "with its rhythm" in said
    unnamed = beat.replace('<code code="REPRESENTATIVE_BEAT"/>', "")
    assert "series: unnamed" in refusal(tmp_path, aecg.annotated_ecg(unnamed))
    around = f"<component><series>{derived('RHYTHM')}</series></component>"
    assert "derived from another" in refusal(tmp_path, aecg.annotated_ecg(around))
    assert "series: none" in refusal(tmp_path, aecg.annotated_ecg())


@pytest.mark.parametrize(
    ("first", "second"),
    [
        (aecg.times(), aecg.times()),
        (aecg.times(head="20311112224005.0000"), aecg.times(head="20311112224005.0009")),
        (relative(), relative()),
        (relative(head="4000"), relative(head="4", step="0.002", unit="s")),
    ],
)
def test_sets_that_begin_together_are_joined(tmp_path, first, second):
    """To within half a sample: 0.9 ms of 2."""
    is_exactly(read(tmp_path, halves(first, second)), COUNTS * STEP_MV)


@pytest.mark.parametrize(
    ("first", "second"),
    [
        (aecg.times(), aecg.times(head="20311112224015")),
        (aecg.times(head="20311112224005.000"), aecg.times(head="20311112224005.002")),
        (relative(), relative(head="10")),
        # Nothing says that the two clocks agree, even where their numbers do (seconds of 1970).
        (aecg.times(), relative()),
        (aecg.times(), relative(head="1952289605", step="0.002", unit="s")),
        (aecg.times(head=""), aecg.times(head="")),  # nor when these began
    ],
)
def test_leads_recorded_one_group_after_another_are_refused(tmp_path, first, second):
    assert "lead group by lead group" in refusal(tmp_path, halves(first, second))


def test_a_lead_in_two_sets_is_the_first_one_s(tmp_path):
    other = aecg.sequence_set({"V1": aecg.digits(COUNTS[0])})
    content = aecg.annotated_ecg(aecg.series(aecg.sequence_set(leads()), other))
    is_exactly(read(tmp_path, content), COUNTS * STEP_MV)


def test_relative_times_that_each_count_from_their_own_set_join_nothing(tmp_path):
    """The sets last 0.12 s each; a series of 10 s holds them one after another."""
    ten_seconds = '<low value="20311112224005"/><high value="20311112224015"/>'
    said = refusal(tmp_path, halves(relative(), relative(), around=ten_seconds))
    assert "lead group by lead group" in said


def test_of_sets_one_after_another_the_complete_one_is_taken(tmp_path):
    strip = aecg.sequence_set({"II": aecg.digits(np.resize(COUNTS, 900))}, aecg.times())
    whole = aecg.sequence_set(leads(), aecg.times(head="20311112224015"))
    is_exactly(read(tmp_path, aecg.annotated_ecg(aecg.series(strip, whole))), COUNTS * STEP_MV)


def test_sets_at_different_rates_are_brought_to_the_highest(tmp_path):
    """A level in the limb leads at 250 Hz stays that level; the chest leads are untouched."""
    limb = {name: aecg.digits([200] * 30) for name in NAMES[:2]}
    chest = {name: value for name, value in leads().items() if name not in limb}
    content = aecg.annotated_ecg(
        aecg.series(aecg.sequence_set(limb, aecg.times(step="0.004")), aecg.sequence_set(chest))
    )
    recording = read(tmp_path, content)
    assert recording.sampling_rate_hz == 500.0
    np.testing.assert_allclose(recorded_mv(recording)[2:], COUNTS[2:] * STEP_MV, atol=1e-12)
    # Resampling a constant by a filter of finite length: within a thousandth of it.
    np.testing.assert_allclose(recorded_mv(recording)[:2], 0.5, rtol=1e-3)


# Who, when, filters


def test_who_when_and_filters(tmp_path):
    recording = read(tmp_path, plain())
    assert recording.subject.id == "INVENTED-01"
    assert recording.subject.name == "Invented Ash"
    assert recording.subject.sex == "female"
    assert recording.subject.born_on == date(1970, 3, 9)
    # 9 March 1970 to 12 November 2031: 61 years and 248 days.
    assert recording.subject.age_years == pytest.approx(61 + 248 / 365.25, abs=0.005)
    assert recording.recorded_at.isoformat() == "2031-11-12T22:40:05"
    assert recording.filters == Filters(low_pass_hz=150.0)


def person(old: str, new: str) -> bytes:
    assert old in aecg.PERSON
    return plain().replace(old.encode(), new.encode())


@pytest.mark.parametrize(
    ("old", "new", "attribute", "found"),
    [
        ('extension="INVENTED-01"', 'extension="X X X X"', "id", None),
        ('extension="INVENTED-01"', 'extension=""', "id", "1.2.3"),
        ('extension="INVENTED-01"', 'extension=" A 7 "', "id", "A 7"),
        ('root="1.2.3" extension="INVENTED-01"', 'nullFlavor="UNK"', "id", None),
        ('code="F"', 'code="M"', "sex", "male"),
        ('code="F"', 'code="UN"', "sex", None),
        ("Invented Ash", "<given>Invented</given>\n<family>Ash</family>", "name", "Invented Ash"),
        ("Invented Ash", "X", "name", None),
        ('value="19700309"', 'value="1970030911"', "born_on", date(1970, 3, 9)),
        ('value="19700309"', 'value="1970"', "born_on", None),  # no day is invented
        ('value="19700309"', 'value="19700230"', "born_on", None),
        ('value="19700309"', 'value="20400101"', "age_years", None),  # after the recording
    ],
)
def test_what_is_unknown_stays_unknown(tmp_path, old, new, attribute, found):
    assert getattr(read(tmp_path, person(old, new)).subject, attribute) == found


def test_a_file_that_names_nobody_is_read(tmp_path):
    content = aecg.annotated_ecg(aecg.series(aecg.sequence_set(leads())), person="")
    assert read(tmp_path, content).subject.to_dict() == {"id": None, "sex": None, "age_years": None}


@pytest.mark.parametrize(
    ("low", "found"),
    [
        ("20311112224005.250+0130", "2031-11-12T22:40:05"),
        ("20311112224005-05", "2031-11-12T22:40:05"),
        ("203111122240", "2031-11-12T22:40:00"),
        ("20311112", "2031-11-12T00:00:00"),
        ("203111", None),
        ("20311112256000", None),
        ("yesterday", None),
    ],
)
def test_the_wall_clock_is_kept_and_the_zone_dropped(tmp_path, low, found):
    old = '<effectiveTime><low value="20311112224005"/>'
    content = plain().decode().replace(old, f'<effectiveTime><low value="{low}"/>')
    when = read(tmp_path, content).recorded_at
    assert (None if when is None else when.isoformat()) == found


def test_the_whole_file_s_time_stands_in_for_the_series_own(tmp_path):
    text = (
        plain().decode().replace('<effectiveTime><low value="20311112224005"/>', "<effectiveTime>")
    )
    text = text.replace("<componentOf>", '<effectiveTime value="20311101"/><componentOf>', 1)
    assert read(tmp_path, text).recorded_at.isoformat() == "2031-11-01T00:00:00"


def filtering(kind: str, *values: str) -> str:
    return (
        f'<controlVariable><controlVariable><code code="MDC_ATTR_FILTER_{kind}"/>'
        f"{''.join(values)}</controlVariable></controlVariable>"
    )


def cutoff(value: str, unit: str = "Hz", code: str = "MDC_ATTR_FILTER_CUTOFF_FREQ") -> str:
    return (
        f'<component><controlVariable><code code="{code}"/>'
        f'<value xsi:type="PQ" value="{value}" unit="{unit}"/></controlVariable></component>'
    )


@pytest.mark.parametrize(
    ("stated", "found"),
    [
        ("", Filters()),
        (filtering("HIGH_PASS", cutoff("nan")) + filtering("LOW_PASS", cutoff("nan")), Filters()),
        (filtering("HIGH_PASS", cutoff("0.05")), Filters(high_pass_hz=0.05)),
        (filtering("HIGH_PASS", cutoff("50", "mHz")), Filters(high_pass_hz=0.05)),
        (filtering("NOTCH", cutoff("50", code="MDC_ATTR_NOTCH_FREQ")), Filters(notch_hz=50.0)),
        # The width of the notch is no notch, and an order has no unit.
        (filtering("NOTCH", cutoff("4", code="MDC_ATTR_NOTCH_BANDWIDTH")), Filters()),
        (filtering("LOW_PASS", cutoff("2", "", code="MDC_ATTR_FILTER_ORDER")), Filters()),
        (filtering("LOW_PASS", cutoff("-40")) + filtering("LOW_PASS", cutoff("0")), Filters()),
        # Two of a kind: the narrower band is what is left of the signal.
        (
            filtering("LOW_PASS", cutoff("150"))
            + filtering("LOW_PASS", cutoff("40"))
            + filtering("HIGH_PASS", cutoff("0.05"))
            + filtering("HIGH_PASS", cutoff("0.5")),
            Filters(high_pass_hz=0.5, low_pass_hz=40.0),
        ),
    ],
)
def test_filters_that_are_stated(tmp_path, stated, found):
    recording = read(tmp_path, plain().decode().replace(aecg.FILTERS, stated))
    assert recording.filters == found


# What is refused


@pytest.mark.parametrize(
    ("changed", "says"),
    [
        ({"V2": aecg.digits(COUNTS[3], unit="mmHg")}, "scale of lead V2 in the unit 'mmHg'"),
        ({"V2": aecg.digits(COUNTS[3], unit="")}, "scale of lead V2 without a unit"),
        ({"V2": aecg.digits(COUNTS[3], scale="nan")}, "'nan', which is no number"),
        ({"V2": aecg.digits(COUNTS[3], scale="2,5")}, "'2,5', which is no number"),
        ({"V2": aecg.digits(COUNTS[3], scale="0")}, "states 0 mV as the scale of lead V2"),
        ({"V2": aecg.digits(COUNTS[3], scale="1e30")}, "no recorder has"),
        ({"V2": aecg.digits(COUNTS[3], origin="inf")}, "the origin of lead V2 as 'inf'"),
        ({"V2": aecg.digits(COUNTS[3], scale="1e5", unit="mV", origin="0")}, "no recorder has"),
        ({"V2": aecg.digits([*COUNTS[3], 10**9])}, "lead V2 reaches"),
        ({"V2": aecg.digits([*COUNTS[3], "1e300"])}, "lead V2 reaches"),
        ({"V2": re.sub("<scale.*?/>", "", aecg.digits(COUNTS[3]))}, "not state the scale of lead"),
        ({"V2": aecg.digits([1, "NaN", 2])}, "'NaN', which is no number, among the samples of V2"),
        ({"V2": aecg.digits(["1e999"])}, "'1e999', which is no number"),
        ({"V2": aecg.digits(["1_000"])}, "'1_000', which is no number"),
        ({"V2": aecg.digits(["12-5"])}, "'12-5', which is no number"),
        ({"V2": aecg.digits(["\N{ARABIC-INDIC DIGIT ONE}"])}, "which is no number"),
        ({"V2": aecg.digits(["7" * 600_000])}, "which is no number"),
        ({"V2": aecg.digits(["0." + "0" * 600_000])}, "which is no number"),
        ({"V2": None}, "holds 7 leads (I, II, V1, V3, V4, V5, V6)"),
        ({"II": None}, "at least two limb leads"),
        (dict.fromkeys(NAMES), "no sequences of leads"),
        (dict.fromkeys(NAMES, aecg.digits([])), "none of the twelve leads"),
        ({"time": ""}, "states no time between samples"),
        ({"time": aecg.times(step="0")}, "states 0 as the time between samples"),
        ({"time": aecg.times(step="-0.002")}, "states -0.002 as the time between samples"),
        ({"time": aecg.times(step="nan")}, "between samples as 'nan', which is no number"),
        ({"time": aecg.times(unit="")}, "time between samples without a unit"),
        ({"time": aecg.times(unit="Hz")}, "time between samples in the unit 'Hz'"),
        ({"time": aecg.times(step="1e-300")}, "samples a second"),
        ({"time": aecg.times(step="1e300")}, "samples a second"),
        ({"time": aecg.times() + relative(step="4")}, "two different times"),
        (
            {"time": aecg.times().replace("<value ", '<value denominator="2" ')},
            "not evenly spaced",
        ),
        (
            {"time": aecg.sequence("TIME_RELATIVE", aecg.digits(range(60), unit="ms"))},
            "states no time between samples",
        ),
    ],
)
def test_a_part_that_is_missing_or_impossible_is_named(tmp_path, changed, says):
    assert says in refusal(tmp_path, plain(**changed))


LAUGHS = "".join(f'<!ENTITY l{n} "{f"&l{n - 1};" * 10}">' for n in range(1, 10))
HEADS = {
    "billion laughs": f'<!DOCTYPE a [<!ENTITY l0 "ha">{LAUGHS}]>',
    "quadratic blow-up": f'<!DOCTYPE a [<!ENTITY l9 "{"a" * 50_000}">]>',
    "outside file": '<!DOCTYPE a [<!ENTITY l9 SYSTEM "file:///etc/hostname">]>',
    "outside definition": '<!DOCTYPE a SYSTEM "http://invented.invalid/a.dtd">',
    "parameter entity": '<!DOCTYPE a [<!ENTITY % p SYSTEM "file:///etc/hostname">%p;]>',
    "harmless document type": "<!DOCTYPE AnnotatedECG>",
}


@pytest.mark.parametrize("head", list(HEADS))
def test_document_types_and_entities_are_refused(tmp_path, head):
    uses = "&l9;" * (10_000 if head == "quadratic blow-up" else 1)
    named = f"<componentOf>{uses}</componentOf>" if "l9" in HEADS[head] else ""
    started = time.monotonic()
    said = refusal(tmp_path, aecg.annotated_ecg(named, head=HEADS[head]))
    assert "document type or entities" in said
    assert time.monotonic() - started < SLOWEST_S


OPEN = '<AnnotatedECG xmlns="urn:hl7-org:v3">'


@pytest.mark.parametrize(
    ("content", "says"),
    [
        (b"", "malformed in line 1"),
        (plain()[:-9], "breaks off"),
        (plain()[: len(plain()) // 2], "breaks off"),
        (plain().replace(b"<digits>", b"<digits", 1), "malformed"),
        (plain().replace(b"Ash", b"&unknown;"), "malformed"),
        (plain() + b"<more/>", "malformed"),
        (plain().replace(b"UTF-8", b"invented"), "text encoding"),
        (plain().replace(b"UTF-8", b"shift_jis"), "text encoding"),
        ("<html/>", "element 'html' and not with 'AnnotatedECG'"),
        (OPEN + "<component>" * 50_000, "100 deep"),
        (OPEN + "<unknown>" * 50_000, "100 deep"),
        (OPEN + "<a/>" * 500_001 + "</AnnotatedECG>", "more than 500000 elements"),
        (OPEN + "<component/>" * 100_001 + "</AnnotatedECG>", "more than 100000 elements"),
        (OPEN + f'<a b="{"c" * 2_000_000}"/></AnnotatedECG>', "a tag or a comment of more than"),
        (OPEN + f"<!--{'c' * 2_000_000}--></AnnotatedECG>", "a tag or a comment of more than"),
        (plain(time=aecg.sequence("TIME_RELATIVE", "<value/>")), "no time between samples"),
        (
            aecg.annotated_ecg(aecg.series(*[aecg.sequence_set({"I": aecg.digits([1])})] * 1001)),
            "more than 1000 sequence sets",
        ),
    ],
    ids=range(17),
)
def test_a_file_that_is_damaged_or_too_much_is_refused_soon(tmp_path, content, says):
    started = time.monotonic()
    assert says in refusal(tmp_path, content)
    assert time.monotonic() - started < SLOWEST_S


def test_more_samples_than_fit_are_refused_while_reading(tmp_path, monkeypatch):
    monkeypatch.setattr(document, "MOST_VALUES", 400)
    assert "million samples" in refusal(tmp_path, plain())


def test_a_lead_at_a_high_rate_does_not_blow_up_the_others(tmp_path):
    """20,000 samples at 100 Hz would be 1.6 million at 8000, in each of twelve leads."""
    slow = dict.fromkeys(NAMES, aecg.digits([1] * 20_000))
    content = aecg.annotated_ecg(
        aecg.series(
            aecg.sequence_set(slow, aecg.times(step="0.01")),
            aecg.sequence_set({"X": aecg.digits([1] * 100)}, aecg.times(step="0.000125")),
        )
    )
    assert "too much to hold in memory" in refusal(tmp_path, content)


def test_a_file_that_is_not_there_is_an_error_of_the_system(tmp_path):
    with pytest.raises(FileNotFoundError):
        read_aecg(tmp_path / "none.xml")


def test_damaged_files_are_read_or_refused_in_one_line(tmp_path):
    """Two sets, a beat derived from them, a person; damaged in bytes or in what they say."""
    content = aecg.with_derived_beat(halves(aecg.times(), aecg.times()))
    assert read(tmp_path, content).n_samples == 60
    outcomes = {"read": 0, "refused": 0}
    for seed in range(FUZZED):
        started, said = time.monotonic(), ""
        try:
            recording = read(tmp_path, damaged(content, np.random.default_rng(seed)))
            assert recording.signal_mv.shape[1] == 12, seed
            outcomes["read"] += 1
        except RecordingError as error:
            said = str(error)
            outcomes["refused"] += 1
        assert "\n" not in said, seed
        assert time.monotonic() - started < SLOWEST_S, seed
    assert min(outcomes.values()) > FUZZED // 10


# By another writer


@pytest.mark.skipif(not DATA.is_dir(), reason="../shared/data is not here: real recordings")
def test_a_file_by_another_writer_agrees_with_its_wfdb_record():
    import wfdb

    recording = read_aecg(DATA / "formats" / "healthy.aecg.xml")
    truth_mv = wfdb.rdrecord(str(DATA / "ptb" / "s0460_re_10s")).p_signal[:, :12]
    # It went through 16 bits over +-6 mV: a step of 12/65535 mV, which the file states with six
    # digits (0.000183108), and an origin of half a step. Rounding leaves half a step; the sixth
    # digit, at 32767 steps, another 1 %.
    step_mv = 12 / 65535
    assert np.abs(recording.signal_mv - truth_mv).max() <= 0.52 * step_mv
    np.testing.assert_allclose(recording.counts_per_mv, 1 / step_mv, rtol=2e-6)
    assert recording.sampling_rate_hz == 1000.0
    assert recording.leads_present == TWELVE_LEADS
    # "X X X X" is nobody, "UN" no sex, and cutoffs of "nan" no filters.
    assert recording.subject.to_dict() == {"id": None, "sex": None, "age_years": None}
    assert recording.filters == Filters()
