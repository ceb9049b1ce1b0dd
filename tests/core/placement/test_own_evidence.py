from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest

from core.placement.own_evidence import interchange_by_own_evidence, log_evidence
from core.quality.interchange import chest_interchanges, limb_interchanges
from core.recordings.leads import independent_from_twelve, twelve_from_independent
from core.torso.ensemble import load_ensemble

FOUND = [
    one
    for one in (*limb_interchanges(), *chest_interchanges())
    if one.electrodes in (("RA", "LA"), ("V1", "V3"), ("V2", "V5"), ("V4", "V6"))
]


def with_beat(report, beat_mv):
    return replace(report, beat_mv=beat_mv)


def rearranged(report, one):
    leads = independent_from_twelve(report.beat_mv)
    return with_beat(report, twelve_from_independent(one.matrix @ leads))


@pytest.mark.parametrize("pair", ["raised", "inferior", "steady", "medial"])
def test_recordings_as_they_should_be_name_nothing(request, pair):
    comparison = request.getfixturevalue(pair)
    for report in (comparison.earlier, comparison.later):
        assert interchange_by_own_evidence(report, load_ensemble()) is None


@pytest.mark.parametrize("one", FOUND, ids=lambda one: "-".join(one.electrodes))
def test_a_plain_interchange_is_named_from_one_recording(steady, one):
    found = interchange_by_own_evidence(rearranged(steady.earlier, one), load_ensemble())
    assert found is not None
    assert found.of_limbs == one.of_limbs
    if not one.of_limbs:
        assert found.electrodes == one.electrodes


def test_the_evidence_does_not_depend_on_the_gain(steady):
    report = steady.earlier
    louder = with_beat(report, 2.5 * report.beat_mv)
    assert log_evidence(louder, load_ensemble()) == pytest.approx(
        log_evidence(report, load_ensemble()), abs=1e-9
    )


def test_undoing_what_was_done_gives_the_evidence_back(steady):
    ensemble = load_ensemble()
    for one in FOUND:
        undoing = np.linalg.inv(one.matrix)[None]
        undone = log_evidence(rearranged(steady.later, one), ensemble, undoing)
        assert undone == pytest.approx(log_evidence(steady.later, ensemble), abs=1e-6)


def test_leads_of_noise_have_less_evidence_than_leads_of_a_heart(steady):
    noise = np.random.default_rng(1).normal(size=steady.earlier.beat_mv.shape)
    assert log_evidence(with_beat(steady.earlier, noise), load_ensemble()) < log_evidence(
        steady.earlier, load_ensemble()
    )
