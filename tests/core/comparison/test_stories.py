"""The sample pairs are judged as their stories say (sample_records/README.md)."""

from __future__ import annotations

import re

import pytest

from core.recordings.leads import LIMB_LEADS
from core.wording.judgements import SHORT_NAMES
from core.wording.lists import named
from core.wording.numbers import millivolts, signed_range

TWO_SPACES_MM = 58.0


def leads(comparison, judgement) -> set[str]:
    return {lead for lead, result in comparison.leads.items() if result.judgement == judgement}


def test_v1_and_v2_two_spaces_too_high(raised):
    assert raised.overall.judgement == "in-reach-backed"
    assert leads(raised, "in-reach-backed") == {"V1", "V2"}
    assert leads(raised, "steady") == set(raised.leads) - {"V1", "V2"}
    for electrode in ("V1", "V2"):
        up = raised.placement.electrodes[electrode].up_mm
        assert up.low <= TWO_SPACES_MM <= up.high
        assert up.low > 0
    for electrode in ("V3", "V4", "V5", "V6"):
        assert not raised.placement.electrodes[electrode].worth_naming()
    assert "V1 and V2" in raised.overall.sentence
    assert "fourth space" in raised.overall.next_step


def test_new_inferior_st_elevation_with_reciprocal_change(inferior):
    assert inferior.overall.judgement == "beyond-reach"
    beyond = leads(inferior, "beyond-reach")
    assert {"II", "III", "aVF", "aVL"} <= beyond
    change = {lead: inferior.leads[lead].measures["st_mv"].change for lead in inferior.leads}
    assert min(change[lead] for lead in ("II", "III", "aVF")) > 0.1
    assert change["aVL"] < -0.05
    assert max(change["V1"], change["V2"], change["V3"]) < 0
    assert not any(shift.worth_naming() for shift in inferior.placement.electrodes.values())
    assert "without delaying care" in inferior.overall.next_step


def test_nothing_new_but_rate_and_noise(steady):
    assert leads(steady, "steady") == set(steady.leads)
    assert steady.overall.judgement == "steady"
    assert "does not rule out" in steady.overall.next_step
    assert steady.later.heart_rate_per_min > steady.earlier.heart_rate_per_min + 5


def test_v5_and_v6_not_lateral_enough(medial):
    assert medial.overall.judgement == "in-reach-backed"
    assert leads(medial, "in-reach-backed") == {"V6"}
    left = medial.placement.electrodes["V6"].left_mm
    assert left.low <= -55.0 <= left.high
    assert left.high < 0


@pytest.mark.parametrize(
    ("pair", "most", "least"),
    [("raised", 1.0, 0.2), ("steady", 1.0, 0.2), ("medial", 1.0, 0.2), ("inferior", 0.01, 0.0)],
)
def test_what_placement_explains_is_not_rare_and_what_it_does_not_is(request, pair, most, least):
    assert least <= request.getfixturevalue(pair).placement.tail_probability <= most


@pytest.mark.parametrize("pair", ["raised", "inferior", "medial"])
def test_the_sentence_names_of_st_and_t_what_changed_more_beyond_its_noise(request, pair):
    comparison = request.getfixturevalue(pair)
    groups: dict[tuple[str, str, bool], list[str]] = {}
    for lead, result in comparison.leads.items():
        if result.judgement != "steady":
            m = {name: result.measures[name] for name in ("st_mv", "t_mv")}
            most = max(m, key=lambda name: abs(m[name].change) / m[name].noise_high)
            key = (result.judgement, SHORT_NAMES[most], m[most].change > 0)
            groups.setdefault(key, []).append(lead)
    assert groups
    for (_, name, rises), members in groups.items():
        sign = "+" if rises else "\N{MINUS SIGN}"
        amount = rf"{name} (up to |down to )?{re.escape(sign)}\d\.\d\d.mV"
        assert re.search(f"{amount} in {named(members)}[:;]", comparison.overall.sentence)


@pytest.mark.parametrize("pair", ["raised", "inferior", "steady", "medial"])
def test_every_reason_tells_the_change_that_decided_and_what_it_was_held_against(request, pair):
    for lead, result in request.getfixturevalue(pair).leads.items():
        # Two digits, or as many more as keep the change from looking like its limit.
        told = [
            (result.measures[name], digits)
            for name, short in SHORT_NAMES.items()
            for digits in range(2, 6)
            if re.search(
                rf"\b{short} {re.escape(millivolts(result.measures[name].change, digits))}",
                result.reason,
            )
        ]
        assert told, result.reason
        for m, digits in told:
            if result.judgement == "steady" or lead in LIMB_LEADS:
                assert f"±{m.noise_high:.{digits}f}" in result.reason
            else:
                assert f"({signed_range(m.reach_low, m.reach_high, digits)} mV)" in result.reason
