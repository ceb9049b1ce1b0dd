"""Every notice, made of invented facts: its sentence, its severity, its code."""

from __future__ import annotations

import inspect
import re
import typing
from collections.abc import Callable

import pytest

from core.notices import Notice
from core.wording import notices
from core.wording.notices import NOTICE_WORDS

# Something for each kind of argument that a notice takes.
FACTS: dict[object, object] = {
    str: "later",
    int: 11,
    float: 0.12,
    bool: True,
    typing.Sequence[str]: ["V1", "V2", "V3"],
}
# Arguments that a kind alone doesn't tell.
NAMED_FACTS: dict[str, object] = {
    "unusable": [("V3", "flat"), ("V4", "samples missing")],
    "faults": [("mains hum", "V1", 0.08), ("mains hum", "V2", 0.11), ("a step", "II", 0.7)],
    "notice": notices.other_identifier(),
}
# This one begins with the recording's name, which its caller writes large.
OWN_FACTS = {"irregular": {"which": "Later"}}
MAKERS = [
    maker
    for _, maker in inspect.getmembers(notices, inspect.isfunction)
    if maker.__module__ == notices.__name__ and typing.get_type_hints(maker).get("return") is Notice
]


def told(maker: Callable[..., Notice]) -> Notice:
    kinds = typing.get_type_hints(maker)
    del kinds["return"]
    facts = {
        name: NAMED_FACTS[name] if name in NAMED_FACTS else FACTS[_plain(kind)]
        for name, kind in kinds.items()
    }
    return maker(**facts | OWN_FACTS.get(maker.__name__, {}))


def _plain(kind: object) -> object:
    if typing.get_origin(kind) is not None and typing.get_args(kind) == (str,):
        return typing.Sequence[str]
    return kind


def test_all_notices_are_looked_at():
    """As many as the source makes."""
    assert len(MAKERS) == len(re.findall(r"-> Notice:", inspect.getsource(notices)))


@pytest.mark.parametrize("maker", MAKERS, ids=lambda maker: maker.__name__)
def test_a_notice_is_whole_sentences(maker):
    text = told(maker).text
    assert text[0].isupper() or text[0].isdigit()
    assert text.endswith(".")
    assert "\n" not in text
    assert not re.search(r"\b(nan|None|inf)\b|  |\.\.|[{}\[\]]|\( ?\)", text), text
    for sentence in re.split(r"(?<=[a-z)])\. ", text):
        assert sentence[0].isupper() or sentence[0].isdigit(), sentence


@pytest.mark.parametrize("maker", MAKERS, ids=lambda maker: maker.__name__)
def test_a_notice_has_a_severity_with_a_word_and_a_plain_code(maker):
    notice = told(maker)
    assert notice.severity in NOTICE_WORDS
    assert re.fullmatch(r"[a-z][a-z0-9-]*", notice.code)


@pytest.mark.parametrize(
    "maker",
    [
        notices.other_identifier,
        notices.monitoring_filter,
    ],
)
def test_what_makes_a_comparison_mean_nothing_stops_it(maker):
    assert told(maker).severity == "stop"


@pytest.mark.parametrize(
    "maker",
    [
        notices.another_person,
        notices.order_reversed,
        notices.rates_differ,
        notices.qrs_differs,
        notices.paced_in_one,
        notices.leads_unusable,
        notices.not_adult,
        notices.electrodes_elsewhere,
        notices.interchanged,
        notices.chest_interchanged,
    ],
)
def test_what_the_reader_must_weigh_is_a_caution(maker):
    assert told(maker).severity == "caution"


def test_a_lifted_stop_stays_a_stop_under_its_own_name():
    stop = notices.other_identifier()
    lifted = notices.stop_lifted(stop)
    assert (lifted.code, lifted.severity) == (stop.code, "stop")
    assert lifted.text.startswith(stop.text)


@pytest.mark.parametrize(
    ("reasons", "words"),
    [
        (["noisy"], "1 of 9 beats left out of the representative beat: 1 noisy."),
        (
            ["noisy", "premature", "noisy", "another shape"],
            "4 of 9 beats left out of the representative beat: 2 noisy, 1 premature and 1 "
            "another shape.",
        ),
    ],
)
def test_beats_left_out_are_counted_by_reason(reasons, words):
    assert notices.beats_left_out(reasons, 9).text == words


def test_disturbed_leads_are_told_kind_by_kind_with_the_largest_size():
    text = notices.leads_disturbed(NAMED_FACTS["faults"]).text
    assert text.startswith("Mains hum up to 0.11 mV in V1 and V2; a step up to 0.70 mV in II. ")


@pytest.mark.parametrize(
    ("of_limbs", "begins"),
    [(True, "The limb electrodes look interchanged, most likely RA"), (False, "RA and LA look")],
)
def test_interchanged_limbs_are_named_as_most_likely(of_limbs, begins):
    assert notices.looks_interchanged(["RA", "LA"], of_limbs=of_limbs).text.startswith(begins)


def test_how_far_j_moves_is_told_in_microvolts_without_its_sign():
    text = notices.high_pass_differs(0.05, 0.25, "V3", -0.0414).text
    assert "41 µV in V3" in text
    assert "0.05 Hz against 0.25 Hz" in text
