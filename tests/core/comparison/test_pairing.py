from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from core.comparison.laid import lay_beats
from core.comparison.pairing import pair_beats
from core.measures.report import measure
from tests.helpers.synthetic import synthetic


def preceding_s(report) -> np.ndarray:
    """Interval before each beat that was found; the usual one before the first."""
    times = np.array([beat.r_time_s for beat in report.analysis.beats])
    return np.diff(times, prepend=times[0] - np.median(np.diff(times)))


def difference_s(comparison, pairs) -> float:
    earlier, later = preceding_s(comparison.earlier), preceding_s(comparison.later)
    return sum(abs(earlier[one] - later[other]) for one, other in pairs)


@pytest.mark.parametrize("pair", ["raised", "inferior", "steady", "medial"])
def test_as_many_pairs_as_the_shorter_has_used_beats(request, pair):
    comparison = request.getfixturevalue(pair)
    used = comparison.earlier.analysis.used, comparison.later.analysis.used
    assert len(comparison.beat_pairs) == min(map(len, used))
    assert {pair.earlier for pair in comparison.beat_pairs} <= set(used[0])
    assert {pair.later for pair in comparison.beat_pairs} <= set(used[1])


@given(st.data())
def test_no_other_pairing_has_intervals_more_alike(raised, data):
    used = raised.earlier.analysis.used, raised.later.analysis.used
    n = len(raised.beat_pairs)
    one, other = (data.draw(st.permutations(beats))[:n] for beats in used)
    found = difference_s(raised, [(pair.earlier, pair.later) for pair in raised.beat_pairs])
    # Sums may be taken in another order.
    assert found <= difference_s(raised, zip(one, other, strict=True)) + 1e-12


def test_a_recording_with_itself_pairs_every_beat_with_itself():
    # Beats at odd intervals, so that no two follow the same one.
    report = measure(synthetic(jitter_s=0.06, seed=5).recording)
    pairs = pair_beats(report, report, lay_beats(report, report))
    assert pairs
    for pair in pairs:
        assert pair.earlier == pair.later
        # A lag is found to a tenth of a sample (tests/core/beats/test_alignment.py).
        assert abs(pair.lag_ms) < 0.1 * report.step_ms


def test_lags_are_in_ms_whatever_the_sampling_rates():
    reports = [measure(synthetic(rate_hz=rate, seed=2).recording) for rate in (1000.0, 250.0)]
    for first, second in (reports, reports[::-1]):
        pairs = pair_beats(first, second, lay_beats(first, second))
        # R is found to half a sample of the coarser recording, 4 ms a sample.
        assert max(abs(pair.lag_ms) for pair in pairs) < 2.0
