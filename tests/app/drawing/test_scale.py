from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from PySide6.QtCore import QRectF

from app.drawing.scale import Scale, voltage_range

# A cell on paper: 40 x 30 mm for 800 ms and 2 mV.
SCALE = Scale(QRectF(10.0, 20.0, 40.0, 30.0), -300.0, 500.0, -0.5, 1.5)
lengths = st.floats(10.0, 5000.0)


def test_the_corners_of_the_plot_are_the_ends_of_its_ranges():
    assert SCALE.x([-300.0, 500.0]).tolist() == [10.0, 50.0]
    assert SCALE.y([-0.5, 1.5]).tolist() == [50.0, 20.0]


def test_a_second_and_a_millivolt_are_as_long_everywhere():
    seconds = np.diff(SCALE.x(np.array([-250.0, 750.0])))
    assert seconds == pytest.approx(40.0 / 0.8)  # mm: 50 mm for each s
    millivolts = -np.diff(SCALE.y(np.linspace(-0.5, 1.5, 9)))
    assert millivolts == pytest.approx(np.full(8, 30.0 / 2.0 / 4.0))  # mm for each quarter of a mV


def test_up_is_positive_and_right_is_later():
    assert SCALE.y(1.0) < SCALE.y(0.0)
    assert SCALE.x(1.0) > SCALE.x(0.0)


@given(lengths, lengths, st.floats(-1000.0, 1000.0), st.floats(-5.0, 5.0))
def test_what_is_read_off_is_what_was_put_in(width, height, time_ms, level_mv):
    scale = Scale(QRectF(3.0, 7.0, width, height), -1000.0, 1000.0, -5.0, 5.0)
    back_ms = -1000.0 + (float(scale.x(time_ms)) - 3.0) / width * 2000.0
    back_mv = -5.0 + (7.0 + height - float(scale.y(level_mv))) / height * 10.0
    # Rounding of floats of this size.
    assert back_ms == pytest.approx(time_ms, abs=1e-9)
    assert back_mv == pytest.approx(level_mv, abs=1e-9)


def test_a_value_that_is_not_known_has_no_place():
    assert np.isnan(SCALE.x(np.nan))
    assert np.isnan(SCALE.y([0.0, np.nan])).tolist() == [False, True]


def test_the_range_holds_every_curve_and_zero():
    low, high = voltage_range(np.array([0.3, 1.2]), np.array([0.4, 2.0]), least_mv=0.5)
    assert low < 0.0
    assert high > 2.0


def test_a_small_curve_is_not_blown_up():
    low, high = voltage_range(np.array([-0.01, 0.01]), least_mv=0.9)
    assert high - low >= 0.9
    assert (low + high) / 2 == pytest.approx(0.0)


def test_missing_samples_do_not_count():
    known = voltage_range(np.array([-0.2, 1.0]), least_mv=0.5)
    gappy = voltage_range(np.array([-0.2, np.nan, 1.0]), np.full(3, np.nan), least_mv=0.5)
    assert gappy == known
    assert voltage_range(np.full(3, np.nan), least_mv=0.5) == voltage_range(
        np.zeros(3), least_mv=0.5
    )
