from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest

from core import measure
from core.recordings.leads import TWELVE_LEADS
from tests.helpers.synthetic import synthetic

COPIED = {"V4R": "V3", "X": "V6", "V8": "II"}


@pytest.fixture(scope="module")
def with_further():
    """Further leads that are copies of some of the twelve, with wander of their own."""
    made = synthetic(noise_mv=0.003).recording
    columns = [TWELVE_LEADS.index(lead) for lead in COPIED.values()]
    time_s = np.arange(made.n_samples) / made.sampling_rate_hz
    wander = 0.3 * np.sin(2 * np.pi * 0.2 * time_s)
    further = made.signal_mv[:, columns] + wander[:, None]
    return made, replace(made, further_leads=tuple(COPIED), further_mv=further)


def test_a_further_lead_is_measured_as_the_lead_that_it_copies(with_further):
    _, recording = with_further
    report = measure(recording)
    told = report.to_dict()["further_measures"]
    assert list(told) == list(COPIED)
    for further, lead in COPIED.items():
        row = TWELVE_LEADS.index(lead)
        for name in ("st_mv", "t_mv", "r_mv"):
            # What is left of 0.3 mV of wander, and 3 uV of noise averaged: under 10 uV.
            assert told[further][name] == pytest.approx(report.values[name][row], abs=0.01)


def test_further_leads_change_nothing_of_the_twelve(with_further):
    plain, recording = with_further
    one, other = measure(plain).to_dict(), measure(recording).to_dict()
    assert one["leads"] == other["leads"]
    assert one["beats"] == other["beats"]
    assert one["further_measures"] == {}
