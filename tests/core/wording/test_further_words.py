from __future__ import annotations

from core.wording.further import reason_of_further_lead, values_of_further_lead

EARLIER, LATER = {"st_mv": 0.021, "t_mv": 0.304}, {"st_mv": -0.1, "t_mv": 0.0}
NOTHING = {"st_mv": None, "t_mv": None}
WHY = "Measured, not judged: no placement reach is known for this lead."


def plain(text: str) -> str:
    return text.replace("\N{NO-BREAK SPACE}", " ")


def test_values_stand_beside_each_other_and_a_dash_for_what_is_not_there():
    assert values_of_further_lead(EARLIER, LATER) == ["ST +0.02 / −0.10", "T +0.30 / 0.00"]
    assert values_of_further_lead(None, LATER) == ["ST – / −0.10", "T – / 0.00"]
    assert values_of_further_lead(EARLIER, NOTHING) == ["ST +0.02 / –", "T +0.30 / –"]


def test_the_reason_tells_both():
    assert plain(reason_of_further_lead(EARLIER, LATER, {})) == (
        f"Earlier ST +0.02 mV and T +0.30 mV, later ST −0.10 mV and T 0.00 mV. {WHY}"
    )


def test_the_reason_says_what_only_one_recording_holds():
    assert plain(reason_of_further_lead(None, LATER, {})) == (
        f"Only the later recording holds this lead. Later ST −0.10 mV and T 0.00 mV. {WHY}"
    )


def test_the_reason_says_what_is_wrong_with_a_tracing():
    assert plain(reason_of_further_lead(NOTHING, LATER, {"earlier": "clipped"})) == (
        f"Earlier tracing clipped. Later ST −0.10 mV and T 0.00 mV. {WHY}"
    )
    both = {"earlier": "clipped", "later": "flat"}
    assert reason_of_further_lead(NOTHING, NOTHING, both) == (
        f"Earlier tracing clipped and later tracing flat. {WHY}"
    )
