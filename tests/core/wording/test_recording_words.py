from __future__ import annotations

from datetime import datetime

import pytest

from core.wording.recordings import beats_used, key_numbers, person, when, when_and_who

QTC = {"bazett": 430.0, "fridericia": 411.6, "framingham": 412.0, "hodges": 409.0}


def test_a_date_leaves_no_order_of_day_and_month_to_guess():
    assert when(datetime(2031, 4, 3, 9, 5)) == "3 April 2031, 09:05"


def test_every_month_has_a_name_of_its_own():
    names = [when(datetime(2031, month, 15)).split()[1] for month in range(1, 13)]
    assert (names[0], names[-1]) == ("January", "December")
    assert len(set(names)) == 12


def test_what_the_file_does_not_say_is_said_to_be_missing():
    assert when(None) == "time not stated"
    assert when_and_who(None, None) == "time not stated · no identifier"
    assert person(None, None, None, None) == "no identification in the file"


@pytest.mark.parametrize(
    ("known", "text"),
    [
        (("Invented Ash", "INVENTED-01", "female", 61.0), "Invented Ash · INVENTED-01 · female"),
        ((None, "INVENTED-01", None, None), "INVENTED-01"),
        ((None, None, None, 0.4), "0 years"),
    ],
)
def test_a_person_is_what_the_file_says(known, text):
    assert person(*known).startswith(text)


def test_key_numbers_have_units_and_the_formulas_name():
    text = key_numbers(71.6, 158.0, 88.0, QTC)
    assert text == "72/min · PR 158 · QRS 88 · QTc 412 ms (Fridericia)"


def test_a_pr_that_was_not_measured_is_a_dash():
    assert "PR – · QRS" in key_numbers(71.6, None, 88.0, QTC)


def test_used_beats_are_counted():
    assert beats_used(9, 11) == "9 of 11 beats used"
