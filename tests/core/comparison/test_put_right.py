from __future__ import annotations

import numpy as np
import pytest

from core import compare
from core.quality.interchange import Interchange, chest_interchanges, limb_interchanges
from core.recordings.leads import independent_from_twelve, twelve_from_independent
from core.recordings.recording import Recording


def interchanged(recording: Recording, one: Interchange) -> Recording:
    leads = one.matrix @ independent_from_twelve(recording.signal_mv.T)
    return recording.with_signal(twelve_from_independent(leads).T, name="interchanged")


def codes(comparison) -> list[str]:
    return [notice.code for notice in comparison.notices]


@pytest.mark.parametrize("one", limb_interchanges(), ids=lambda one: "-".join(one.electrodes))
def test_a_limb_interchange_is_undone_and_said_and_judged_as_if_it_had_not_been(steady, one):
    earlier, later = steady.earlier.recording, steady.later.recording
    comparison = compare(earlier, interchanged(later, one))
    undone = [
        report.recording.interchange_undone for report in (comparison.earlier, comparison.later)
    ]
    assert undone in ([(), one.electrodes], [one.electrodes, ()])
    assert "limb-electrodes-interchanged" in codes(comparison)
    judgements = {lead: result.judgement for lead, result in comparison.leads.items()}
    assert judgements == {lead: result.judgement for lead, result in steady.leads.items()}


@pytest.mark.parametrize("electrodes", [("RA", "LA"), ("RA", "LL")])
def test_the_recording_at_fault_is_told(steady, electrodes):
    one = next(one for one in limb_interchanges() if one.electrodes == electrodes)
    earlier, later = steady.earlier.recording, steady.later.recording
    comparison = compare(interchanged(earlier, one), later)
    assert comparison.earlier.recording.interchange_undone == electrodes
    assert comparison.later.recording.interchange_undone == ()
    # Undone, the independent leads are the recorded ones up to the arithmetic of six sums.
    undone, recorded = (
        independent_from_twelve(recording.signal_mv.T)
        for recording in (comparison.earlier.recording, earlier)
    )
    np.testing.assert_allclose(undone, recorded, atol=1e-9)


def test_a_chest_interchange_is_said_and_not_undone(steady):
    one = next(one for one in chest_interchanges() if one.electrodes == ("V2", "V4"))
    later = interchanged(steady.later.recording, one)
    comparison = compare(steady.earlier.recording, later)
    assert "chest-electrodes-interchanged" in codes(comparison)
    np.testing.assert_array_equal(comparison.later.recording.signal_mv, later.signal_mv)


@pytest.mark.parametrize("pair", ["raised", "inferior", "steady", "medial"])
def test_electrodes_that_were_shifted_are_not_called_interchanged(request, pair):
    comparison = request.getfixturevalue(pair)
    assert not any("interchanged" in code for code in codes(comparison))
