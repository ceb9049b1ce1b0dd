from __future__ import annotations

import numpy as np
import pytest

from core.beats.fiducials import Fiducials
from core.measures.lead_values import Points, measure_lead_values, qrs_waves, signed_extreme

RATE = 1000.0
POINTS = Points(RATE, Fiducials(200, 290, 480, 600, None, None), st_point_ms=60.0)


def beat(**levels: float) -> np.ndarray:
    """Straight lines through named corners: isoelectric line, R, S, J, T."""
    corners = {
        0: 0.0,
        200: 0.0,
        230: levels.get("r", 1.0),
        260: levels.get("s", -0.5),
        290: levels.get("j", 0.1),
        400: levels.get("st", 0.1),
        480: levels.get("t", 0.4),
        600: 0.0,
        700: 0.0,
    }
    offset = levels.get("offset", 0.0)
    return offset + np.interp(np.arange(700), list(corners), list(corners.values()))


def test_amplitudes_of_a_beat_made_of_straight_lines():
    values = measure_lead_values(beat(), POINTS)
    # Levels are means of 4 ms on either side, which a corner pulls by a few uV.
    assert values["j_mv"] == pytest.approx(0.1, abs=0.025)
    assert values["st_mv"] == pytest.approx(0.1, abs=1e-9)
    assert values["st_slope_mv_per_s"] == pytest.approx(0.0, abs=1e-9)
    assert values["t_mv"] == pytest.approx(0.4)
    assert values["r_mv"] == pytest.approx(1.0)
    assert values["s_mv"] == pytest.approx(-0.5)


def test_the_isoelectric_line_is_what_lies_just_before_the_qrs():
    one, other = (measure_lead_values(beat(offset=o), POINTS) for o in (0.0, 0.7))
    for name in one:
        assert one[name] == pytest.approx(other[name], abs=1e-12)


def test_the_qrs_area_is_that_of_its_triangles():
    # 0..1..-0.5..0.1 mV over three times 30 ms: 15 + 7.5 - 6 mV ms by the trapezoid rule.
    assert measure_lead_values(beat(), POINTS)["qrs_net_mv_ms"] == pytest.approx(16.5, abs=0.1)


def test_a_rising_st_segment_has_its_slope():
    values = measure_lead_values(beat(j=0.0, st=0.11), POINTS)
    assert values["st_slope_mv_per_s"] == pytest.approx(1.0, abs=1e-6)


def test_a_negative_t_keeps_its_sign():
    assert measure_lead_values(beat(st=0.0, j=0.0, t=-0.3), POINTS)["t_mv"] == pytest.approx(-0.3)
    assert signed_extreme(np.array([[0.1, -0.2], [0.2, -0.1]])).tolist() == [-0.2, 0.2]


def test_waves_that_are_not_there_are_nan():
    only_r = np.array([0.0, 0.5, 1.0, 0.5, 0.0])
    r, s, q = qrs_waves(only_r)
    assert (float(r), np.isnan(s), np.isnan(q)) == (1.0, True, True)
    complete = np.array([0.0, -0.1, 1.0, -0.4, 0.0])
    assert [float(wave) for wave in qrs_waves(complete)] == [1.0, -0.4, -0.1]


def test_a_qs_complex_has_its_depth_as_s():
    r, s, q = qrs_waves(np.array([0.0, -0.5, -1.2, -0.4, 0.0]))
    assert (np.isnan(r), float(s), np.isnan(q)) == (True, -1.2, True)


def test_thousands_of_beats_are_measured_as_one_is():
    beats = np.stack([beat(t=t) for t in (0.1, 0.2, -0.4)])
    together = measure_lead_values(beats, POINTS)
    for row, single in enumerate(beats):
        for name, value in measure_lead_values(single, POINTS).items():
            # Sums may be taken in another order.
            np.testing.assert_allclose(together[name][row], value, atol=1e-12)


def test_cutting_a_beat_does_not_change_its_measures():
    whole = measure_lead_values(beat(), POINTS)
    cut = measure_lead_values(beat()[150:650], POINTS.starting_at(150))
    for name in whole:
        assert cut[name] == pytest.approx(whole[name], abs=1e-12)
