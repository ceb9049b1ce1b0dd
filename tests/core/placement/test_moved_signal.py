"""What a move does to the signal, beyond its own lead and size."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from core import ElectrodeMove, NotEnoughBeats, move_electrodes
from core.errors import NoTracing
from core.placement.moved import mean_gain
from core.placement.person import shift_electrode
from core.recordings.leads import CHEST_LEADS, TWELVE_LEADS
from tests.helpers.synthetic import as_recording, synthetic

COLUMN = {lead: column for column, lead in enumerate(TWELVE_LEADS)}
MADE = synthetic(duration_s=4.0, rr_s=0.7, noise_mv=0.01).recording
millimetres = st.floats(-100.0, 100.0).map(lambda mm: round(mm, 1))


@settings(max_examples=40, deadline=None, derandomize=True)
@given(lead=st.sampled_from(CHEST_LEADS), up_mm=millimetres, left_mm=millimetres)
def test_any_permitted_move_changes_its_own_lead_alone(lead, up_mm, left_mm):
    """To the bit: it follows from the lead definitions (stated in CinC 2025 #360)."""
    moved = move_electrodes(MADE, [ElectrodeMove(lead, up_mm=up_mm, left_mm=left_mm)])
    changed = (moved.signal_mv != MADE.signal_mv).any(axis=0)
    expected = np.zeros(12, dtype=bool)
    expected[COLUMN[lead]] = bool(up_mm or left_mm)
    np.testing.assert_array_equal(changed, expected)
    assert np.isfinite(moved.signal_mv).all()


def test_the_order_of_moves_does_not_matter(steady_earlier):
    moves = [
        ElectrodeMove("V1", up_mm=58.0),
        ElectrodeMove("V2", 58.0),
        ElectrodeMove("V6", 0, -40),
    ]
    one, other = (move_electrodes(steady_earlier, order) for order in (moves, moves[::-1]))
    np.testing.assert_array_equal(one.signal_mv, other.signal_mv)


def test_up_and_left_are_not_mistaken_for_each_other(steady_earlier):
    up, left = (
        move_electrodes(steady_earlier, [move]).signal_mv[:, COLUMN["V2"]]
        for move in (ElectrodeMove("V2", up_mm=30.0), ElectrodeMove("V2", left_mm=30.0))
    )
    before = steady_earlier.signal_mv
    neighbour = before[:, COLUMN["V3"]]
    # V3 lies to the left of V2 and below it.
    assert np.corrcoef(left, neighbour)[0, 1] > np.corrcoef(up, neighbour)[0, 1]


def test_v2_moved_to_v3_s_place_becomes_like_v3(in_place):
    """The one move whose result was recorded: the neighbour's own tracing."""
    sites = in_place.person.ensemble.sites_mm[[v.index for v in in_place.person.variants]]
    left, up = in_place.person.weights @ (sites[:, 2] - sites[:, 1]).reshape(-1, 2)
    found, target = in_place.moved("V2", up_mm=up, left_mm=left), in_place.lead("V3")
    before = np.linalg.norm(in_place.lead("V2") - target)
    assert np.linalg.norm(found - target) < 0.5 * before


def test_variants_foretell_by_their_weights(cedar):
    """All weight on one variant leaves that variant's word alone."""
    move, person = ElectrodeMove("V3", up_mm=25.0, left_mm=15.0), cedar.person
    alone = []
    for chosen in range(len(person.variants)):
        variants = tuple(
            replace(variant, weight=float(n == chosen)) for n, variant in enumerate(person.variants)
        )
        alone.append(mean_gain(replace(person, variants=variants), move))
    left, up = np.array([15.0]), np.array([25.0])
    for variant, gain in zip(person.variants, alone, strict=True):
        expected = shift_electrode(person, variant, 2, left_mm=left, up_mm=up).gain[0]
        np.testing.assert_allclose(gain, expected, atol=1e-12)
    np.testing.assert_allclose(mean_gain(person, move), person.weights @ alone, atol=1e-12)


def test_the_recording_given_is_not_touched():
    before = MADE.signal_mv.copy()
    moved = move_electrodes(MADE, [ElectrodeMove("V2", up_mm=40.0)])
    np.testing.assert_array_equal(MADE.signal_mv, before)
    assert not moved.signal_mv.flags.writeable


def test_the_name_says_that_it_was_moved(steady_earlier):
    moved = move_electrodes(steady_earlier, [ElectrodeMove("V2", up_mm=40.0)])
    assert moved.source.name == f"{steady_earlier.source.name}-moved"
    assert moved.subject == steady_earlier.subject


def test_twice_the_voltage_gives_twice_the_change():
    """Volume conduction is linear."""
    louder = as_recording(2.0 * MADE.signal_mv, 500.0)
    move = [ElectrodeMove("V4", up_mm=-30.0)]
    once = move_electrodes(MADE, move).signal_mv - MADE.signal_mv
    twice = move_electrodes(louder, move).signal_mv - louder.signal_mv
    # 2 is exact in binary; the filters of the conditioning round.
    np.testing.assert_allclose(twice, 2 * once, atol=1e-9)


@pytest.mark.parametrize("edge", [100.0, -100.0])
def test_the_farthest_move_is_allowed(edge):
    moved = move_electrodes(MADE, [ElectrodeMove("V6", up_mm=edge, left_mm=-edge)])
    assert np.isfinite(moved.signal_mv).all()


def test_samples_missing_in_one_lead_do_not_spoil_another_that_is_moved(steady_earlier):
    signal = steady_earlier.signal_mv.copy()
    signal[:, COLUMN["V5"]] = np.nan
    gap = steady_earlier.with_signal(signal, name="gap")
    moved = move_electrodes(gap, [ElectrodeMove("V3", up_mm=30.0)]).signal_mv
    assert np.isfinite(moved[:, COLUMN["V3"]]).all()
    assert np.isnan(moved[:, COLUMN["V5"]]).all()


def test_a_lead_without_a_tracing_is_not_given_one(steady_earlier):
    signal = steady_earlier.signal_mv.copy()
    signal[:, COLUMN["V5"]] = 0.0
    flat = steady_earlier.with_signal(signal, name="flat")
    with pytest.raises(NoTracing, match="V5 holds no usable tracing"):
        move_electrodes(flat, [ElectrodeMove("V5", up_mm=30.0)])
    move_electrodes(flat, [ElectrodeMove("V2", up_mm=30.0)])


def test_too_few_beats_are_a_clear_no():
    with pytest.raises(NotEnoughBeats):
        move_electrodes(MADE.stretch(0.0, 1.0), [ElectrodeMove("V2", up_mm=20.0)])
