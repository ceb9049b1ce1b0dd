from __future__ import annotations

import numpy as np
import pytest

from core.beats.analyse import analyse_beats
from core.beats.kinds import premature
from core.beats.representative import beat_locked_part, representative_of
from core.errors import NotEnoughBeats
from tests.helpers.synthetic import as_recording, synthetic


def test_beats_lie_where_they_were_made():
    made = synthetic(noise_mv=0.01)
    analysis = analyse_beats(made.recording)
    times = np.array([beat.r_time_s for beat in analysis.beats])
    lag = times - made.r_times_s
    # R is where all leads together are largest; what counts is that it is the same everywhere.
    assert np.abs(lag - lag.mean()).max() < 0.001  # half a sample
    assert abs(lag.mean()) < 0.015


def test_the_ends_of_the_recording_are_left_out():
    made = synthetic(noise_mv=0.01)
    cut = made.recording.stretch(0.2, 9.0)
    reasons = [beat.why_not for beat in analyse_beats(cut).beats]
    assert reasons[0] == "cut off by the end of the recording"
    assert set(reasons[1:-1]) == {None}


def test_a_beat_of_another_shape_is_left_out():
    made = synthetic(noise_mv=0.01)
    signal = made.recording.signal_mv.copy()
    start = round((made.onsets_s[4] - 0.02) * 500)
    signal[start : start + 70, 6:] *= -1.0
    analysis = analyse_beats(as_recording(signal, 500.0))
    assert analysis.beats[4].why_not == "another shape"
    assert sum(beat.used for beat in analysis.beats) >= len(analysis.beats) - 3


def test_where_two_kinds_alternate_the_commoner_one_is_kept():
    made = synthetic(noise_mv=0.01)
    signal = made.recording.signal_mv.copy()
    others = range(1, made.onsets_s.size, 2)
    for beat in others:
        start = round((made.onsets_s[beat] - 0.02) * 500)
        signal[start : start + 70] = signal[start : start + 70, ::-1]
    reasons = [beat.why_not for beat in analyse_beats(as_recording(signal, 500.0)).beats]
    assert [i for i, why in enumerate(reasons) if why == "another shape"] == list(others)


def test_premature_means_early_in_a_regular_rhythm():
    regular = np.array([0.0, 1.0, 2.0, 2.6, 4.0, 5.0, 6.0, 7.0])
    assert premature(regular).tolist() == [False] * 3 + [True] + [False] * 4
    irregular = np.cumsum([0.5, 0.9, 0.6, 1.1, 0.45, 0.8, 1.2, 0.55])
    assert not premature(irregular).any()


def test_one_bad_beat_in_ten_hardly_moves_the_representative():
    made = synthetic(noise_mv=0.005)
    beats = analyse_beats(made.recording).aligned_mv[:10]
    spoilt = beats.copy()
    spoilt[3] += np.linspace(0, 2.0, spoilt.shape[-1])  # up to 2 mV off
    moved = 1000 * (representative_of(spoilt) - representative_of(beats))
    # uV: less than a trimmed beat's rank can move the mean of the others' noise of 5 uV.
    assert np.abs(moved).max() < 5.0


def test_the_beat_locked_part_repeats_the_beat_and_bridges_the_gaps():
    beat = np.arange(10.0)[None]
    laid = beat_locked_part(beat, 3, np.array([5, 30]), 45)
    np.testing.assert_array_equal(laid[0, 2:12], beat[0])
    np.testing.assert_array_equal(laid[0, 27:37], beat[0])
    assert (np.diff(laid[0, 11:28]) < 0).all()  # a straight way from the end to the next start
    assert (laid[0, 37:] == 9.0).all()


def test_a_gap_in_the_samples_costs_its_beat_and_no_more():
    made = synthetic(noise_mv=0.01)
    signal = made.recording.signal_mv.copy()
    at = round(made.onsets_s[5] * 500)
    signal[at : at + 30, 8] = np.nan
    reasons = [beat.why_not for beat in analyse_beats(as_recording(signal, 500.0)).beats]
    assert reasons[5] == "samples missing"
    assert reasons.count("samples missing") <= 2  # a window may reach into its neighbour


@pytest.mark.parametrize("seconds", [0.1, 1.0, 2.0])
def test_too_short_a_recording_is_a_clear_no(seconds):
    made = synthetic()
    with pytest.raises(NotEnoughBeats, match="at least 3"):
        analyse_beats(made.recording.stretch(0.0, seconds))


def test_silence_is_a_clear_no():
    with pytest.raises(NotEnoughBeats, match="no beat"):
        analyse_beats(as_recording(np.zeros((5000, 12)), 500.0))
