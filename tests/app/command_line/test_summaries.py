"""The summaries for the terminal say what the results say."""

from __future__ import annotations

import re

import numpy as np
import pytest

from app.command_line.summaries import comparison_summary, recording_summary
from core import compare, measure
from core.recordings.leads import CHEST_LEADS, TWELVE_LEADS
from core.wording.caution import CAUTIONS, PLACEMENT_CAVEAT
from core.wording.judgements import MARKS, WORDS
from core.wording.notices import NOTICE_WORDS
from core.wording.numbers import NONE, signed
from tests.helpers.synthetic import synthetic

PAIRS = ("raised", "inferior", "steady", "medial")


@pytest.fixture(scope="module")
def one_lead_lost():
    recording = synthetic().recording
    signal = recording.signal_mv.copy()
    signal[:, TWELVE_LEADS.index("V4")] = np.nan
    return compare(recording, recording.with_signal(signal, name="lost"))


def row_of(lead: str, text: str) -> str:
    """The line of a lead in the table of leads."""
    return next(line for line in text.splitlines() if line.split(" ")[0] == lead)


@pytest.mark.parametrize("pair", PAIRS)
def test_every_lead_has_its_judgement_and_its_numbers(request, pair):
    comparison = request.getfixturevalue(pair)
    text = comparison_summary(comparison)
    for lead, result in comparison.leads.items():
        row = row_of(lead, text)
        assert f"{MARKS[result.judgement]} {WORDS[result.judgement]} " in row
        st = result.measures["st_mv"]
        told = re.search(r"ST +(\S+) +(\S+) +(\S+) ", row).groups()
        assert told == (signed(st.earlier), signed(st.later), signed(st.change))


@pytest.mark.parametrize("pair", PAIRS)
def test_sentence_step_notices_caveat_and_cautions_are_there(request, pair):
    comparison = request.getfixturevalue(pair)
    lines = comparison_summary(comparison).splitlines()
    overall = comparison.overall
    assert f"{MARKS[overall.judgement]} {overall.sentence}" in lines
    assert overall.next_step in lines
    for notice in comparison.notices:
        assert f"{NOTICE_WORDS[notice.severity]}: {notice.text}" in lines
    assert lines[-5:] == [PLACEMENT_CAVEAT, *CAUTIONS]


@pytest.mark.parametrize("pair", PAIRS)
def test_every_electrode_has_its_shift(request, pair):
    comparison = request.getfixturevalue(pair)
    told = comparison_summary(comparison).partition("by the QRS")[2]
    for lead in CHEST_LEADS:
        shift = comparison.placement.electrodes[lead]
        row = row_of(lead, told)
        assert f"up {signed(shift.up_mm.estimate, 0)} (" in row
        assert f"left {signed(shift.left_mm.estimate, 0)} (" in row


def test_a_lost_lead_is_dashes_and_not_judged(one_lead_lost):
    text = comparison_summary(one_lead_lost)
    row = row_of("V4", text)
    assert WORDS["not-judged"] in row
    assert row.count(NONE) >= 5
    assert not re.search(r"\d\.\d", row)
    assert row_of("V4", text.partition("by the QRS")[2]).split() == ["V4", "not", "judged"]


def test_a_measurement_has_a_row_for_every_lead(one_lead_lost):
    report = one_lead_lost.later
    text = recording_summary(report)
    for position, lead in enumerate(TWELVE_LEADS):
        row = row_of(lead, text)
        if lead == "V4":
            assert not re.search(r"\d\.\d", row)
        else:
            assert row.split()[1:3] == [
                signed(float(report.values[name][position])) for name in ("j_mv", "st_mv")
            ]
    assert text.splitlines()[-4:] == list(CAUTIONS)


def test_nothing_but_readable_text_is_printed(request, one_lead_lost):
    texts = [recording_summary(measure(synthetic().recording)), comparison_summary(one_lead_lost)]
    texts += [comparison_summary(request.getfixturevalue(pair)) for pair in PAIRS]
    for text in texts:
        assert text.endswith(".\n")
        assert not re.search(r"\b(nan|inf|None(?! of))\b|[{}]", text)
