"""Moving electrodes: what must hold exactly."""

from __future__ import annotations

import numpy as np
import pytest

from core import ElectrodeMove, move_electrodes
from core.recordings.leads import TWELVE_LEADS
from tests.helpers.synthetic import synthetic


@pytest.fixture(scope="module")
def recording(request):
    return request.getfixturevalue("real_recording")


@pytest.fixture(scope="module")
def moved_v3(recording):
    return move_electrodes(recording, [ElectrodeMove("V3", up_mm=24.0, left_mm=-10.0)])


def test_moving_v3_leaves_the_other_eleven_leads_identical_to_the_bit(recording, moved_v3):
    for column, lead in enumerate(TWELVE_LEADS):
        same = np.array_equal(moved_v3.signal_mv[:, column], recording.signal_mv[:, column])
        assert same == (lead != "V3"), lead


def test_rate_and_length_stay(recording, moved_v3):
    assert moved_v3.sampling_rate_hz == recording.sampling_rate_hz
    assert moved_v3.signal_mv.shape == recording.signal_mv.shape


def test_a_move_of_nothing_changes_nothing(recording):
    moved = move_electrodes(recording, [ElectrodeMove("V2"), ElectrodeMove("V5", 0.0, 0.0)])
    np.testing.assert_array_equal(moved.signal_mv, recording.signal_mv)


def test_two_moves_are_each_what_they_are_alone(recording, moved_v3):
    both = move_electrodes(
        recording,
        [ElectrodeMove("V3", up_mm=24.0, left_mm=-10.0), ElectrodeMove("V6", left_mm=-40.0)],
    )
    np.testing.assert_array_equal(both.signal_mv[:, 8], moved_v3.signal_mv[:, 8])


def test_the_limb_leads_keep_their_algebra():
    made = synthetic().recording
    moved = move_electrodes(made, [ElectrodeMove(f"V{k}", up_mm=20.0) for k in range(1, 7)])
    lead = dict(zip(TWELVE_LEADS, moved.signal_mv.T, strict=True))
    # Rounding of three doubles.
    np.testing.assert_allclose(lead["I"] + lead["III"], lead["II"], atol=1e-12)
    np.testing.assert_allclose(lead["aVR"] + lead["aVL"] + lead["aVF"], 0.0, atol=1e-12)


def test_a_larger_move_changes_more(recording):
    sizes = [
        np.ptp(
            move_electrodes(recording, [ElectrodeMove("V2", up_mm=up)]).signal_mv[:, 7]
            - recording.signal_mv[:, 7]
        )
        for up in (5.0, 15.0, 30.0, 60.0)
    ]
    assert (np.diff(sizes) > 0).all()


@pytest.mark.parametrize("bad", [np.nan, np.inf, 101.0, -100.5])
def test_a_move_off_the_chest_is_refused(bad):
    with pytest.raises(ValueError, match="at most 100 mm"):
        ElectrodeMove("V2", up_mm=bad)


@pytest.mark.parametrize("electrode", ["RA", "II", "V7", "v2", ""])
def test_only_chest_electrodes_can_be_moved(electrode):
    with pytest.raises(ValueError, match="only chest electrodes"):
        ElectrodeMove(electrode, up_mm=10.0)


def test_one_electrode_cannot_be_in_two_places(recording):
    with pytest.raises(ValueError, match="moved twice"):
        move_electrodes(recording, [ElectrodeMove("V2", 10.0), ElectrodeMove("V2", 20.0)])
