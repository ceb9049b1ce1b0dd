from __future__ import annotations

import numpy as np
import pytest

from app.drawing.lead_curves import curves_of, shown_times_ms
from core.recordings.leads import TWELVE_LEADS


@pytest.mark.parametrize("lead", TWELVE_LEADS)
def test_a_judged_lead_has_both_beats_and_its_bands(further, lead):
    curves, row = curves_of(further, lead), TWELVE_LEADS.index(lead)
    first, last = shown_times_ms(further)
    assert first <= curves.time_ms[0] < curves.time_ms[-1] <= last
    at = np.searchsorted(further.laid.time_ms, curves.time_ms)
    np.testing.assert_array_equal(curves.earlier_mv, further.laid.earlier_mv[row, at])
    np.testing.assert_array_equal(curves.later_mv, further.laid.later_mv[row, at])
    assert curves.bands is not None
    np.testing.assert_array_equal(curves.bands.noise, further.bands.noise_mv[row, at])
    assert curves.roles == ("earlier", "later")


@pytest.mark.parametrize(
    ("lead", "roles"),
    [
        ("V7", ("earlier", "later")),
        ("V3R", ("later",)),
        ("X", ("earlier",)),
        ("V9", ("earlier",)),
    ],
)
def test_a_further_lead_has_the_beats_that_there_are_and_no_bands(further, lead, roles):
    curves = curves_of(further, lead)
    assert curves.bands is None
    assert curves.roles == roles
    assert curves.earlier_mv.shape == curves.later_mv.shape == curves.time_ms.shape
