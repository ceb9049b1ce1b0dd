"""Sentences that users read."""

from __future__ import annotations

import inspect
import re

import pytest
from hypothesis import given
from hypothesis import strategies as st

from core.recordings.leads import CHEST_LEADS, TWELVE_LEADS
from core.wording import notices
from core.wording.caution import CAUTION, CAUTIONS, PLACEMENT_CAVEAT
from core.wording.judgements import MARKS, MEANINGS, WORDS, ShiftWords
from core.wording.lists import joined, named
from core.wording.numbers import millivolts, plain, signed, signed_range

PAIRS = ("raised", "inferior", "steady", "medial")


def sentences(comparison):
    yield comparison.overall.sentence
    yield comparison.overall.next_step
    yield from (notice.text for notice in comparison.notices)
    yield from (result.reason for result in comparison.leads.values())


@pytest.mark.parametrize("pair", PAIRS)
def test_every_sentence_begins_and_ends_as_one(request, pair):
    for sentence in sentences(request.getfixturevalue(pair)):
        assert sentence.endswith("."), sentence
        assert sentence[0].isupper() or sentence[0].isdigit(), sentence
        assert not re.search(r"\b(nan|None|inf|null)\b|  |\.\.|\{|\}", sentence), sentence


def test_the_cautions_say_all_that_they_must():
    for part in (
        "trained readers",
        "not a diagnosis and not a medical device",
        "not thereby harmless and must never delay care",
        "Clinical judgement, local protocols and licensed practice decide",
        "check the electrode sites and record again",
    ):
        assert part in CAUTION
    assert all(caution in CAUTION for caution in CAUTIONS)
    assert "may still come from the heart" in PLACEMENT_CAVEAT


def test_every_judgement_has_a_word_a_mark_and_a_meaning_of_its_own():
    assert WORDS.keys() == MARKS.keys() == MEANINGS.keys()
    for said in (WORDS, MARKS, MEANINGS):
        assert len(set(said.values())) == 5


@pytest.mark.parametrize(
    ("items", "text"),
    [
        ([], ""),
        (["V1"], "V1"),
        (["V1", "V2"], "V1 and V2"),
        (["V1", "V2", "V4"], "V1, V2 and V4"),
    ],
)
def test_lists(items, text):
    assert joined(items) == text


@pytest.mark.parametrize(
    ("leads", "text"),
    [
        (["V2", "V3", "V4", "V5", "V6"], "V2 to V6"),
        (["II", "III", "aVF"], "II, III and aVF"),
        (["aVL", "V1", "V2"], "aVL, V1 and V2"),
        (["V1", "V3", "V4", "V5"], "V1 and V3 to V5"),
        (["V1", "V2", "V3", "V6"], "V1 to V3 and V6"),
    ],
)
def test_neighbours_on_the_chest_are_joined(leads, text):
    assert named(leads) == text


@given(
    st.lists(st.sampled_from(TWELVE_LEADS), unique=True).map(
        lambda leads: sorted(leads, key=TWELVE_LEADS.index)
    )
)
def test_every_lead_is_named_or_spanned(leads):
    text = named(leads)
    spanned = set()
    for word in re.split(r", | and ", text):
        ends = word.split(" to ")
        if len(ends) == 2:
            first, last = (CHEST_LEADS.index(end) for end in ends)
            spanned.update(CHEST_LEADS[first : last + 1])
        elif word:
            spanned.add(word)
    assert spanned == set(leads)


@pytest.mark.parametrize(
    ("value", "text"),
    [(0.123, "+0.12"), (-0.031, "−0.03"), (0.004, "0.00"), (-0.004, "0.00"), (None, "–")],
)
def test_signed_numbers(value, text):
    assert signed(value) == text


def test_ranges_and_units():
    assert signed_range(-0.1, 0.12) == "−0.10 to +0.12"
    assert millivolts(0.2) == "+0.20\N{NO-BREAK SPACE}mV"
    assert plain(12.6) == "13"


@pytest.mark.parametrize(
    ("shift", "text"),
    [
        (ShiftWords("V2", "up", 27, 14, 37), "V2 about 27 mm up (95 %: 14 to 37)"),
        (ShiftWords("V2", "up", -27, -37, -14), "V2 about 27 mm down (95 %: 14 to 37)"),
        (ShiftWords("V6", "left", -40, -64, -23), "V6 about 40 mm to the right (95 %: 23 to 64)"),
        (ShiftWords("V6", "left", 40, 23, 64), "V6 about 40 mm to the left (95 %: 23 to 64)"),
    ],
)
def test_shifts_are_said_in_their_own_direction(shift, text):
    assert shift.describe() == text


def test_every_notice_has_a_code_of_its_own():
    """Read from the source, so that a new notice cannot take another's code."""
    found = re.findall(r'Notice\(\s*"([a-z-]+)"', inspect.getsource(notices))
    assert len(found) > 15
    assert len(set(found)) == len(found)
