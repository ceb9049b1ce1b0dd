from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest

from core.comparison.laid import BESIDE_QRS_S, lay_beats
from core.measures.report import measure
from core.recordings.leads import CHEST_LEADS, LIMB_LEADS, TWELVE_LEADS
from tests.helpers.synthetic import synthetic

CHEST = [TWELVE_LEADS.index(lead) for lead in CHEST_LEADS]
LIMB = [TWELVE_LEADS.index(lead) for lead in LIMB_LEADS]


@pytest.fixture(scope="module")
def report():
    return measure(synthetic(noise_mv=0.002).recording)


def with_rows(report, rows, change):
    beat = report.beat_mv.copy()
    beat[rows] = change(beat[rows])
    return replace(report, beat_mv=beat)


def tenth_of_a_sample(report) -> float:
    """Lags are found so finely (tests/core/beats/test_alignment.py)."""
    return 0.1 * report.step_ms


@pytest.mark.parametrize("samples", [-7, 0, 3])
def test_an_r_that_was_put_elsewhere_in_the_qrs_is_laid_back(report, samples):
    analysis = replace(report.analysis, r_index=report.analysis.r_index + samples)
    later = replace(report, analysis=analysis)
    laid = lay_beats(report, later)
    off = tenth_of_a_sample(report)
    assert laid.lag_ms == pytest.approx(-samples * report.step_ms, abs=off)
    steepest = np.abs(np.diff(report.beat_mv)).max() / report.step_ms
    assert np.nanmax(np.abs(laid.later_mv - laid.earlier_mv)) < steepest * off


def test_the_limb_leads_tell_the_time(report):
    """A shift of chest electrodes may make their QRS early or late, but not the limb leads'."""
    later = with_rows(report, CHEST, lambda beat: np.roll(beat, 4, axis=1))
    assert lay_beats(report, later).lag_ms == pytest.approx(0.0, abs=tenth_of_a_sample(report))


def test_the_chest_leads_tell_it_where_that_is_asked(report):
    later = with_rows(report, LIMB, lambda beat: np.roll(beat, 4, axis=1))
    by_chest = lay_beats(report, later, by_chest=True)
    assert by_chest.lag_ms == pytest.approx(0.0, abs=tenth_of_a_sample(report))


def test_small_limb_leads_do_not_tell_it_alone(report):
    small = with_rows(report, LIMB, lambda beat: 0.05 * beat)
    later = with_rows(small, CHEST, lambda beat: np.roll(beat, 4, axis=1))
    lag_ms = 4 * report.step_ms
    assert lay_beats(small, later).lag_ms == pytest.approx(lag_ms, abs=2 * report.step_ms)


@pytest.mark.parametrize("pair", ["raised", "inferior", "steady", "medial"])
def test_the_qrs_slice_holds_the_qrs_of_both(request, pair):
    comparison = request.getfixturevalue(pair)
    laid, earlier, later = comparison.laid, comparison.earlier, comparison.later
    held = laid.time_ms[laid.qrs]
    f, g = earlier.points.fiducials, later.points.fiducials
    assert held[0] <= earlier.time_ms[f.qrs_onset]
    assert held[-1] >= earlier.time_ms[f.qrs_offset]
    assert held[0] <= later.time_ms[g.qrs_onset] - laid.lag_ms
    assert held[-1] >= later.time_ms[g.qrs_offset] - laid.lag_ms
    # Little besides: ST must not tell where the electrodes are.
    longer = max(earlier.time_ms[f.qrs_offset], later.time_ms[g.qrs_offset] - laid.lag_ms)
    assert held[-1] - longer <= 1000.0 * BESIDE_QRS_S + earlier.step_ms


@pytest.mark.parametrize("pair", ["raised", "inferior", "steady", "medial"])
def test_the_waves_slice_runs_from_p_to_the_end_of_t_as_far_as_both_beats_go(request, pair):
    comparison = request.getfixturevalue(pair)
    laid, f = comparison.laid, comparison.earlier.points.fiducials
    known = ~np.isnan(laid.later_mv).any(axis=0)
    assert known[laid.waves].all()
    whole = np.arange(f.p_onset, f.t_offset + 1)
    assert set(range(*laid.waves.indices(known.size))) == set(whole[known[whole]])
