"""The reach against shifts drawn, foretold and sorted one by one."""

from __future__ import annotations

import numpy as np
import pytest
from scipy.stats import chisquare, norm

from core import Settings, Spread
from core.measures.lead_values import measure_lead_values
from core.measures.repeat_noise import repeat_noise
from core.placement.foretell import INDEPENDENT_ROWS
from core.placement.person import shift_electrode
from core.placement.reach import draw_shifts, placement_reach

SLOW_DRAWS, FAST_DRAWS = 1200, 10_000


def settings_of(confidence: float) -> Settings:
    return Settings(draws=FAST_DRAWS, confidence=confidence)


def reach_of(somebody, settings: Settings):
    noise = repeat_noise(somebody.report, somebody.report, settings)
    rng = np.random.default_rng(1)
    return placement_reach(somebody.person, somebody.report, noise, settings, rng), noise


def one_by_one(somebody, noise, confidence, electrode, rng) -> dict[str, list[float]]:
    """Changes of one lead, each with a shift, a doubt and a repeat noise of its own.

    ST at one instant and the QRS area, whose sources' size is that of the eight leads' values.
    """
    person, report, row = somebody.person, somebody.report, 6 + electrode
    eight = report.beat_mv[INDEPENDENT_ROWS]
    before = measure_lead_values(report.beat_mv[row], report.points)
    changes: dict[str, list[float]] = {"st_mv": [], "qrs_net_mv_ms": []}
    # Two placements, each off by the usual spread of 22 mm in both directions.
    left, up = (rng.normal(0, 22, (2, SLOW_DRAWS)) - rng.normal(0, 22, (2, SLOW_DRAWS))).clip(
        -100, 100
    )
    for n in range(SLOW_DRAWS):
        variant = person.variants[rng.choice(len(person.variants), p=person.weights)]
        shift = shift_electrode(person, variant, electrode, left_mm=left[[n]], up_mm=up[[n]])
        after = measure_lead_values(report.beat_mv[row] + shift.gain[0] @ eight, report.points)
        for name, drawn in changes.items():
            values = report.values[name][INDEPENDENT_ROWS]
            doubt = np.sqrt(values @ variant.precision @ values / 8 * shift.variance[0])
            repeat = noise[name][row] / norm.ppf(0.5 + confidence / 2)
            drawn.append(
                float(after[name] - before[name]) + doubt * rng.normal() + repeat * rng.normal()
            )
    return changes


@pytest.mark.parametrize(("electrode", "confidence"), [(1, 0.95), (3, 0.95), (3, 0.8)])
def test_each_end_has_its_share_of_draws_beyond_it(cedar, electrode, confidence):
    found, noise = reach_of(cedar, settings_of(confidence))
    rng = np.random.default_rng(40 + electrode)
    row, tail, compared = 6 + electrode, (1 - confidence) / 2, 0
    for name, changes in one_by_one(cedar, noise, confidence, electrode, rng).items():
        low, high, half = found.low[name][row], found.high[name][row], noise[name][row]
        below, above = np.mean(np.array(changes) < low), np.mean(np.array(changes) > high)
        # Both counts scatter as binomials; 3.29 standard deviations, 1 in 1000.
        scatter = 3.29 * np.sqrt(tail * (1 - tail) * (1 / SLOW_DRAWS + 1 / FAST_DRAWS))
        for share, end in ((below, -low), (above, high)):
            if end > half:
                assert share == pytest.approx(tail, abs=scatter)
                compared += 1
            else:  # shifts reach less far than the repeat noise, which is then the reach
                assert share < tail + scatter
    assert compared >= 2  # of four ends


def test_variants_are_drawn_by_their_weights(cedar):
    n = 40_000
    draws = draw_shifts(cedar.person, Settings(draws=n), np.random.default_rng(6))
    counts = np.bincount(draws.variant, minlength=len(cedar.person.variants))
    assert chisquare(counts, n * cedar.person.weights).pvalue > 1e-3
    # Equal shares would be told from these.
    assert chisquare(counts).pvalue < 1e-6


def test_a_spread_in_one_direction_draws_no_shift_in_the_other(cedar):
    noise = repeat_noise(cedar.report, cedar.report, Settings())
    reach = placement_reach(
        cedar.person,
        cedar.report,
        noise,
        Settings(spread_mm=Spread(left=0.0, up=25.0)),
        np.random.default_rng(1),
    )
    assert set(reach.gain) == {"V1", "V2", "V3", "V4", "V5", "V6"}
    rng = np.random.default_rng(8)
    for electrode, (lead, gain) in enumerate(reach.gain.items()):
        # Every gain is that of some move straight up or down.
        up = np.arange(-100.0, 101.0, 2.0)
        by_variant = [
            shift_electrode(cedar.person, v, electrode, left_mm=0 * up, up_mm=up).gain
            for v in cedar.person.variants
        ]
        for one in gain[rng.choice(len(gain), 20)]:
            nearest = min(np.abs(known - one).max(axis=1).min() for known in by_variant)
            # Half a step of 2 mm of gains that change by some hundredths a mm.
            assert nearest < 0.05, lead
