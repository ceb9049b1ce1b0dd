"""Persons of an open database, where it lies beside the project; 51 to 100 chose no number."""

from __future__ import annotations

from collections import Counter

import numpy as np
import pytest

from core import compare
from core.beats.detection import detect_beats
from core.recordings.leads import independent_from_twelve
from tests.helpers.ludb import FOLDER, RATE_HZ, SAME_BEAT_S, ludb_recording, marked_beats_s

pytestmark = [
    pytest.mark.skipif(not FOLDER.is_dir(), reason="../shared/data/ludb is not here"),
    pytest.mark.slow,
]
HELD_BACK = range(51, 101)


def test_marked_beats_are_found_and_found_beats_are_marked():
    marked = missed = extra = 0
    for number in HELD_BACK:
        truth = marked_beats_s(number)
        leads = independent_from_twelve(ludb_recording(number).signal_mv.T)
        found = detect_beats(leads, RATE_HZ) / RATE_HZ
        near = np.abs(truth[:, None] - found[None, :]) < SAME_BEAT_S
        inside = (found > truth[0] - SAME_BEAT_S) & (found < truth[-1] + SAME_BEAT_S)
        marked += truth.size
        missed += int((~near.any(axis=1)).sum())
        extra += int((~near.any(axis=0) & inside).sum())
    # Readers agree on all but a few of a thousand beats (common practice, no source).
    assert missed <= 0.002 * marked
    assert extra <= 0.002 * marked


def test_halves_of_a_regular_recording_are_steady():
    """No more than the 5 % that 95 % ranges leave to chance; persons with a regular rhythm."""
    judgements: Counter[str] = Counter()
    for number in range(60, 72):
        recording = ludb_recording(number)
        times = marked_beats_s(number)
        if np.std(np.diff(times)) > 0.1 * np.mean(np.diff(times)):
            continue  # atrial fibrillation: five seconds hold too few like intervals
        halves = recording.stretch(0.0, 5.0), recording.stretch(5.0, 10.0)
        judgements.update(lead.judgement for lead in compare(*halves).leads.values())
    assert sum(judgements.values()) >= 60
    assert judgements["steady"] >= 0.95 * sum(judgements.values())
