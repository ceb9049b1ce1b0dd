from __future__ import annotations

import re
from dataclasses import replace

import pytest
from hypothesis import given
from hypothesis import strategies as st

from core.recordings.leads import TWELVE_LEADS
from core.wording.judgements import (
    WORDS,
    Deciding,
    ShiftWords,
    next_step,
    overall_sentence,
    reason_beyond,
    reason_in_reach,
    reason_not_judged,
    reason_steady,
)
from core.wording.numbers import MINUS

NBSP = "\N{NO-BREAK SPACE}"
RISE = Deciding("ST", 0.12, 0.05, -0.08, 0.20, 0.10, 0.02, -0.03, 0.07)
FALL = replace(RISE, name="T", change=-0.30, expected=-0.25, remainder=-0.05)
V2_UP = ShiftWords("V2", "up", 27, 14, 37)


def is_whole(text: str) -> bool:
    broken = re.search(r"\b(nan|None(?! of)|inf)\b|  |\.\.|[{}\[\]]", text)
    return text.endswith(".") and text[0].isupper() and broken is None


def test_a_steady_lead_tells_both_measures_with_their_noise():
    text = reason_steady([RISE, FALL])
    assert text == (
        f"ST +0.12{NBSP}mV (repeat noise ±0.05) and T {MINUS}0.30{NBSP}mV "
        "(repeat noise ±0.05): inside repeat noise."
    )


def test_a_chest_lead_beyond_reach_tells_the_reach():
    text = reason_beyond(RISE, limb=False)
    assert text.startswith(f"ST +0.12{NBSP}mV: beyond what electrode shifts can make")
    assert f"{MINUS}0.08 to +0.20 mV" in text


def test_a_limb_lead_beyond_reach_tells_that_no_shift_makes_it_and_the_noise():
    text = reason_beyond(RISE, limb=True)
    assert "cannot change a limb lead" in text
    assert "±0.05 mV" in text
    assert "0.20" not in text  # a limb lead has no reach besides the noise


@pytest.mark.parametrize(
    ("backed", "points_to_shift", "parts"),
    [
        (True, True, ["the QRS points to a shift that makes +0.10", "which leaves +0.02"]),
        (False, True, ["but the shift that the QRS points to makes +0.10", "leaves +0.02"]),
        (False, False, ["but the QRS hardly changed and does not point to a shift"]),
    ],
)
def test_a_lead_in_reach_tells_what_the_qrs_says(backed, points_to_shift, parts):
    text = reason_in_reach(RISE, backed=backed, points_to_shift=points_to_shift)
    assert text.startswith(f"ST +0.12{NBSP}mV: inside the reach ({MINUS}0.08 to +0.20 mV)")
    for part in parts:
        assert part in text
    assert is_whole(text)


numbers = st.none() | st.floats(-2.0, 2.0)
decidings = st.builds(
    Deciding, st.sampled_from(["ST", "T"]), st.floats(-2, 2), st.floats(0, 1), *[numbers] * 6
)


@given(decidings, st.booleans(), st.booleans())
def test_no_number_that_is_missing_leaks_into_a_reason(m, one, other):
    for text in (
        reason_steady([m]),
        reason_beyond(m, limb=one),
        reason_in_reach(m, backed=one, points_to_shift=other),
        reason_not_judged("later tracing flat"),
    ):
        assert is_whole(text), text


shifts = st.builds(
    ShiftWords,
    st.sampled_from(TWELVE_LEADS[6:]),
    st.sampled_from(["up", "left"]),
    *[st.floats(-90, 90)] * 3,
)


@given(st.dictionaries(st.sampled_from(TWELVE_LEADS), st.sampled_from(list(WORDS)), min_size=1))
def test_every_lead_that_changed_or_was_not_judged_is_named(codes):
    changes: dict[str, dict[str, Deciding | None]] = {}
    for lead in TWELVE_LEADS:
        if lead in codes:
            known = None if codes[lead] == "not-judged" else RISE
            changes.setdefault(codes[lead], {})[lead] = known
    text = overall_sentence(changes, [])
    assert is_whole(text), text
    for lead, code in codes.items():
        if code != "steady" and lead not in TWELVE_LEADS[7:11]:  # V2 to V5 may be spanned
            assert re.search(rf"\b{lead}\b", text), (lead, text)


@given(st.lists(shifts, max_size=4))
def test_shifts_are_told_after_the_changes(found):
    text = overall_sentence({"in-reach-backed": {"V2": RISE}}, found)
    assert is_whole(text)
    assert ("The QRS puts" in text) == bool(found)
    for shift in found:
        assert shift.describe() in text


@pytest.mark.parametrize(
    ("changes", "words"),
    [
        ({"V1": RISE}, f"ST +0.12{NBSP}mV in V1"),
        ({"V1": RISE, "V2": RISE}, f"ST up to +0.12{NBSP}mV in V1 and V2"),
        ({"V1": FALL, "V2": FALL}, f"T down to {MINUS}0.30{NBSP}mV in V1 and V2"),
        (
            {"V1": FALL, "V2": replace(FALL, change=-0.1), "V4": RISE},
            f"T down to {MINUS}0.30{NBSP}mV in V1 and V2; ST +0.12{NBSP}mV in V4",
        ),
    ],
)
def test_rises_and_falls_are_told_apart_with_the_largest(changes, words):
    text = overall_sentence({"in-reach-backed": changes}, [])
    assert text.startswith(f"{words}: within placement reach, and the QRS backs it.")


@pytest.mark.parametrize(
    ("changes", "text"),
    [
        ({"steady": {"I": RISE}}, "No lead changed beyond repeat noise."),
        (
            {"steady": {"I": RISE}, "not-judged": {"V1": None}},
            "None of the leads that can be judged changed beyond repeat noise. Not judged: V1.",
        ),
        ({"not-judged": {"V1": None, "V2": None}}, "Not judged: V1 and V2."),
    ],
)
def test_a_pair_without_a_change(changes, text):
    assert overall_sentence(changes, []) == text


def test_what_is_beyond_reach_is_told_first():
    changes = {
        "steady": {"I": RISE},
        "in-reach-backed": {"V1": RISE},
        "in-reach-unbacked": {"V3": RISE},
        "beyond-reach": {"V5": RISE},
        "not-judged": {"V6": None},
    }
    text = overall_sentence(changes, [V2_UP])
    told = ["in V5: beyond", "in V3: within", "in V1: within", "V2 about", "Other leads", "V6."]
    at = [text.index(part) for part in told]
    assert at == sorted(at)


@pytest.mark.parametrize(
    ("leads", "parts"),
    [
        ({"beyond-reach": ["II"], "in-reach-backed": ["V1"]}, ["change of the heart until"]),
        ({"in-reach-unbacked": ["V4"]}, ["heart may have changed", "V4 in the fifth space"]),
        ({"in-reach-backed": ["V1", "V2"]}, ["V1 and V2 in the fourth space"]),
        ({"in-reach-backed": ["V2", "V3"]}, ["left sternal border", "half-way between V2 and V4"]),
        ({"steady": ["I"]}, ["does not rule out ischaemia"]),
        ({"not-judged": ["I"]}, ["check the electrodes"]),
    ],
)
def test_the_next_step_follows_the_weightiest_judgement(leads, parts):
    text = next_step(leads)
    assert text.startswith("Next: ")
    assert is_whole(text)
    assert "record again" in text
    for part in parts:
        assert part in text


@pytest.mark.parametrize("code", ["beyond-reach", "in-reach-unbacked"])
def test_where_the_heart_may_have_changed_care_is_not_delayed(code):
    assert "without delaying care" in next_step({code: ["V3"]})


def shown(text: str) -> list[float]:
    """The numbers of a sentence that have decimals, as a reader takes them."""
    return [float(word.replace(MINUS, "-")) for word in re.findall(rf"[+{MINUS}]?\d\.\d+", text)]


# Six digits at most are shown: a millionth of a mV apart is apart.
@given(st.floats(0.02, 0.5), st.floats(1e-5, 0.5), st.booleans())
def test_what_is_beyond_a_range_is_not_shown_inside_it(high, over, rises):
    change = high + over if rises else -high - over
    m = replace(RISE, change=change, noise=high, reach_low=-high, reach_high=high)
    said, low, most = shown(reason_beyond(m, limb=False))
    assert not low <= said <= most
    said, noise = shown(reason_beyond(m, limb=True))
    assert abs(said) > noise
