"""Foretold measures of a displaced electrode's lead, worked out the plain way too."""

from __future__ import annotations

import numpy as np
import pytest

from core import ElectrodeMove, move_electrodes
from core.measures.lead_values import COMPARED, measure_lead_values
from core.measures.report import measure
from core.placement.foretell import INDEPENDENT_ROWS, Displacements, foretell_measures
from core.placement.moved import mean_gain
from core.placement.person import shift_electrode
from core.recordings.leads import TWELVE_LEADS

# A mean or a fit of samples: what a sum of leads has, each lead gives its share of.
LINEAR = ("j_mv", "st_mv", "st_slope_mv_per_s", "qrs_net_mv_ms")


def some_draws(person, n: int, seed: int) -> Displacements:
    rng = np.random.default_rng(seed)
    variant = rng.integers(len(person.variants), size=n)
    return Displacements(variant, *rng.uniform(-60.0, 60.0, (2, n)))


@pytest.mark.parametrize("electrode", range(6))
def test_linear_measures_change_by_the_gain_times_the_leads_own(in_place, electrode):
    report = in_place.report
    found = foretell_measures(
        in_place.person, report, electrode, some_draws(in_place.person, 30, electrode)
    )
    for name in LINEAR:
        expected = found.gain @ report.values[name][INDEPENDENT_ROWS]
        # Rounding, and an isoelectric line that is 0 only to rounding.
        np.testing.assert_allclose(found.change[name], expected, atol=1e-9)


@pytest.mark.parametrize("electrode", range(6))
def test_every_measure_is_that_of_the_moved_lead(in_place, electrode):
    """One draw at a time, on the whole beat, measured as a recording's own lead is."""
    person, report = in_place.person, in_place.report
    draws = some_draws(person, 12, 10 + electrode)
    found = foretell_measures(person, report, electrode, draws)
    eight, row = report.beat_mv[INDEPENDENT_ROWS], 6 + electrode
    before = measure_lead_values(report.beat_mv[row], report.points)
    for n, (variant, left, up) in enumerate(
        zip(draws.variant, draws.left_mm, draws.up_mm, strict=True)
    ):
        gain = shift_electrode(
            person,
            person.variants[variant],
            electrode,
            left_mm=np.array([left]),
            up_mm=np.array([up]),
        ).gain[0]
        after = measure_lead_values(report.beat_mv[row] + gain @ eight, report.points)
        for name in COMPARED:
            change = after[name] - before[name]
            np.testing.assert_allclose(found.change[name][n], change, atol=1e-9)


@pytest.mark.parametrize("electrode", range(6))
def test_no_displacement_foretells_nothing_and_doubts_nothing(in_place, electrode):
    zero = np.zeros(3)
    draws = Displacements(np.zeros(3, dtype=int), zero, zero)
    found = foretell_measures(in_place.person, in_place.report, electrode, draws)
    for name in COMPARED:
        known = found.change[name][~np.isnan(found.change[name])]
        # Many beats at once and one alone may be summed in another order.
        np.testing.assert_allclose(known, 0.0, atol=1e-12)
        assert (found.model_sd[name] == 0.0).all()
    assert (found.gain == 0.0).all()


def source_of(report, name: str, electrode: int) -> np.ndarray:
    """The eight leads at the instant that a measure of one lead is read at."""
    eight, qrs = report.beat_mv[INDEPENDENT_ROWS], report.points.qrs_window()
    if name == "t_mv":
        return eight[:, report.points.fiducials.t_peak]
    if name == "r_mv":
        return eight[:, qrs][:, eight[2 + electrode, qrs].argmax()]
    if name == "s_mv":
        return eight[:, qrs][:, eight[2 + electrode, qrs].argmin()]
    return report.values[name][INDEPENDENT_ROWS]


@pytest.mark.parametrize("name", COMPARED)
@pytest.mark.parametrize("electrode", [0, 3, 5])
def test_the_model_s_doubt_has_the_source_s_size(cedar, electrode, name):
    """A prior scaled by hand to the eight leads that the measure hangs on."""
    person, report = cedar.person, cedar.report
    draws = some_draws(person, 8, electrode)
    found = foretell_measures(person, report, electrode, draws)
    source = source_of(report, name, electrode)
    for n, position in enumerate(draws.variant):
        variant = person.variants[position]
        variance = shift_electrode(
            person,
            variant,
            electrode,
            left_mm=draws.left_mm[[n]],
            up_mm=draws.up_mm[[n]],
        ).variance[0]
        doubt = np.sqrt(source @ variant.precision @ source / 8 * variance)
        assert found.model_sd[name][n] == pytest.approx(doubt, rel=1e-9)


@pytest.mark.parametrize("move", [ElectrodeMove("V2", up_mm=40.0), ElectrodeMove("V4", -30.0, 10)])
def test_a_moved_recording_measures_as_was_foretold(in_place, move):
    """The long way: move the signal, find the beats again, measure."""
    report = in_place.report
    row = TWELVE_LEADS.index(move.electrode)
    gain = mean_gain(in_place.person, move)
    moved = measure(move_electrodes(report.recording, [move]))
    for name in ("j_mv", "st_mv"):
        foretold = gain @ report.values[name][INDEPENDENT_ROWS]
        change = moved.values[name][row] - report.values[name][row]
        # J may be found a sample or two elsewhere: a few uV. In mV.
        assert change == pytest.approx(foretold, abs=0.005)


def test_variants_are_not_mixed_up(cedar):
    """Draws of each variant are foretold as if they were alone."""
    person, report = cedar.person, cedar.report
    draws = some_draws(person, 40, 1)
    together = foretell_measures(person, report, 2, draws)
    for position in np.unique(draws.variant):
        of = draws.variant == position
        alone = foretell_measures(
            person,
            report,
            2,
            Displacements(draws.variant[of], draws.left_mm[of], draws.up_mm[of]),
        )
        np.testing.assert_allclose(together.gain[of], alone.gain, atol=1e-12)
