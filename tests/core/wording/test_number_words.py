from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from core.wording.numbers import MINUS, NONE, millivolts, plain, signed, signed_range

values = st.floats(-1000, 1000)
digits = st.integers(0, 3)


def read(text: str) -> float:
    """What a reader takes the text for."""
    return float(text.replace(MINUS, "-"))


@given(values, digits)
def test_a_number_reads_as_itself_to_its_last_digit(value, n):
    for text in (signed(value, n), plain(value, n)):
        # Half of the last digit, and what a binary fraction misses it by.
        assert abs(read(text) - value) <= 0.5 * 10.0**-n + 1e-9
        assert len(text.partition(".")[2]) == n


@given(values, digits)
def test_zero_has_no_sign_and_every_other_number_has_one(value, n):
    text = signed(value, n)
    assert text[0] in (f"+{MINUS}" if read(text) != 0 else "0")
    assert plain(value, n)[0] != "+"
    assert read(plain(value, n)) == read(text)


@given(values, digits)
def test_a_hyphen_is_never_taken_for_a_minus(value, n):
    assert "-" not in signed(value, n) + plain(value, n) + signed_range(value, None, n)


@pytest.mark.parametrize(
    ("text", "shown"),
    [
        (signed(None), NONE),
        (plain(None), NONE),
        (signed_range(None, None), NONE),
        (signed_range(None, 0.5), f"{NONE} to +0.50"),
        (millivolts(None), f"{NONE}\N{NO-BREAK SPACE}mV"),
    ],
)
def test_what_was_not_measured_is_a_dash(text, shown):
    assert text == shown
