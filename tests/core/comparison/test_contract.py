"""The JSON and the CSV that other programs rely on."""

from __future__ import annotations

import copy
import csv
import io
import json

import pytest
from jsonschema import ValidationError

from core import Settings, compare, measure
from core.comparison.refused import refused_comparison
from core.comparison.table import comparison_csv
from core.errors import NotComparable, NotEnoughBeats
from core.recordings.leads import TWELVE_LEADS
from tests.helpers.schemas import validate
from tests.helpers.synthetic import synthetic

PAIRS = ("raised", "inferior", "steady", "medial")


@pytest.mark.parametrize("pair", PAIRS)
def test_every_comparison_is_valid_and_holds_no_nan(request, pair):
    content = request.getfixturevalue(pair).to_dict()
    validate("comparison", content)
    json.dumps(content, allow_nan=False)


def test_a_recording_report_is_valid(real_recording):
    validate("recording", measure(real_recording).to_dict())


def test_a_refused_comparison_is_valid_and_says_why(steady):
    recording = steady.earlier.recording
    error = NotEnoughBeats("short: only 1 usable beat found. Record 10 s.")
    content = refused_comparison(recording, recording.stretch(0, 1), Settings(), error)
    validate("comparison", content)
    assert content["overall"]["sentence"] == str(error)
    assert [notice["severity"] for notice in content["notices"]] == ["stop"]
    assert {lead["judgement"] for lead in content["leads"].values()} == {"not-judged"}


def test_a_comparison_that_a_stop_ended_tells_all_notices(steady, raised):
    with pytest.raises(NotComparable) as refusal:
        compare(steady.earlier.recording, raised.later.recording)
    content = refused_comparison(
        steady.earlier.recording, raised.later.recording, Settings(), refusal.value
    )
    validate("comparison", content)
    assert "identifiers-differ" in [notice["code"] for notice in content["notices"]]


def test_a_refused_comparison_holds_no_number_that_was_not_measured(steady):
    recording = steady.earlier.recording
    content = refused_comparison(recording, recording, Settings(), NotEnoughBeats("Too short."))
    json.dumps(content, allow_nan=False)
    for lead in content["leads"].values():
        assert {number for m in lead["measures"].values() for number in m.values()} == {None}
    assert set(content["placement"]["electrodes"].values()) == {None}
    assert content["placement"]["tail_probability"] is None
    assert content["earlier"]["heart_rate_per_min"] is None
    assert content["earlier"]["source"]["sha256"] == recording.source.sha256


@pytest.mark.parametrize(
    "spoil",
    [
        lambda c: c["leads"].pop("V6"),
        lambda c: c["leads"]["V1"].update(judgement="normal"),
        lambda c: c["leads"]["V1"]["measures"]["st_mv"].update(change="0.1"),
        lambda c: c["placement"]["electrodes"].pop("V1"),
        lambda c: c["placement"].update(tail_probability=1.2),
        lambda c: c.pop("caveat"),
        lambda c: c["earlier"]["source"].update(name="folder/file.hea"),
        lambda c: c["notices"].append({"code": "x", "severity": "loud", "text": "y"}),
    ],
)
def test_the_schema_refuses_what_breaks_the_contract(raised, spoil):
    content = copy.deepcopy(raised.to_dict())
    spoil(content)
    with pytest.raises(ValidationError):
        validate("comparison", content)


def test_beat_pairs_name_used_beats_once(raised):
    content = raised.to_dict()
    for which in ("earlier", "later"):
        named = [pair[which] for pair in content["beat_pairs"]]
        assert len(set(named)) == len(named)
        assert all(content[which]["beats"][index]["used"] for index in named)
    # R is at one point of every beat of a recording, so all lags are alike to a few samples.
    lags = [pair["lag_ms"] for pair in content["beat_pairs"]]
    assert max(lags) - min(lags) < 8.0


def test_a_refused_comparison_has_the_keys_of_one_that_was_made(raised):
    recording = raised.earlier.recording
    made = raised.to_dict()
    refused = refused_comparison(recording, recording, Settings(), NotEnoughBeats("Too short."))
    assert refused.keys() == made.keys()
    for part in ("earlier", "later", "placement", "overall"):
        assert refused[part].keys() == made[part].keys()


def test_no_name_and_no_folder_is_told(raised):
    text = json.dumps(raised.to_dict())
    assert raised.earlier.recording.subject.name not in text
    assert "sample_records" not in text


def test_the_table_says_what_the_json_says(raised):
    rows = list(csv.DictReader(io.StringIO(comparison_csv(raised))))
    content = raised.to_dict()["leads"]
    assert len(rows) == 12 * 7
    for row in rows:
        m = content[row["lead"]]["measures"][row["measure"]]
        assert row["judgement"] == content[row["lead"]]["judgement"]
        for name, value in m.items():
            assert (float(row[name]) if row[name] else None) == value


def test_the_tables_columns_are_those_of_the_contract(raised):
    header, *rows = csv.reader(io.StringIO(comparison_csv(raised)))
    numbers = ["earlier", "later", "change", "noise_low", "noise_high", "reach_low", "reach_high"]
    numbers += ["expected", "remainder", "remainder_low", "remainder_high"]
    assert header == ["lead", "judgement", "measure", *numbers]
    measures = ["j_mv", "st_mv", "st_slope_mv_per_s", "t_mv", "r_mv", "s_mv", "qrs_net_mv_ms"]
    assert [(row[0], row[2]) for row in rows] == [(x, y) for x in TWELVE_LEADS for y in measures]
    assert "" in {field for row in rows for field in row}  # the pair has a lead without S
    assert not {"nan", "None"} & {field for row in rows for field in row}


def test_a_report_of_two_recordings_of_other_rates_is_valid(steady):
    fast = synthetic(rate_hz=1000.0).recording
    slow = synthetic(rate_hz=250.0, seed=1).recording
    comparison = compare(fast, slow)
    validate("comparison", comparison.to_dict())
    # One heart: only the sampling differs, by far less than repeat noise.
    assert comparison.overall.judgement == "steady"
