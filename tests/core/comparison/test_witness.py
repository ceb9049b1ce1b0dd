from __future__ import annotations

import numpy as np
import pytest

from core.comparison.witness import chest_interchange_between, limb_interchange_between
from core.quality.interchange import chest_interchanges, limb_interchanges
from tests.helpers.synthetic import beat_mv

TIME_MS = np.arange(-200.0, 450.0, 2.0)


def beats(seed: int = 4, noise_mv: float = 0.008) -> tuple[np.ndarray, np.ndarray]:
    """Two representative beats of one heart: noise, and 5 % more amplitude."""
    rng = np.random.default_rng(seed)
    clean = beat_mv(TIME_MS)
    return tuple(gain * clean + rng.normal(0, noise_mv, clean.shape) for gain in (1.0, 1.05))


@pytest.mark.parametrize("seed", range(5))
def test_two_recordings_as_they_should_be_name_nothing(seed):
    assert limb_interchange_between(*beats(seed)) is None
    assert chest_interchange_between(*beats(seed)) is None


@pytest.mark.parametrize("one", limb_interchanges(), ids=lambda one: "-".join(one.electrodes))
@pytest.mark.parametrize("in_later", [True, False])
def test_a_limb_interchange_is_named_whichever_recording_holds_it(one, in_later):
    earlier, later = beats()
    pair = (earlier, one.matrix @ later) if in_later else (one.matrix @ earlier, later)
    assert limb_interchange_between(*pair).electrodes == one.electrodes


@pytest.mark.parametrize("one", chest_interchanges(), ids=lambda one: "-".join(one.electrodes))
def test_a_chest_interchange_is_named(one):
    earlier, later = beats()
    assert chest_interchange_between(earlier, one.matrix @ later).electrodes == one.electrodes


def test_new_st_elevation_is_no_interchange():
    earlier, later = beats()
    injured = later + 0.3 * np.sign(beat_mv(TIME_MS)[:, 60:61]) * ((TIME_MS > 90) & (TIME_MS < 300))
    assert limb_interchange_between(earlier, injured) is None
    assert chest_interchange_between(earlier, injured) is None


@pytest.mark.parametrize("seed", range(3))
@pytest.mark.parametrize(("others_changed_by", "named"), [(0.0, True), (0.6, False)])
def test_leads_half_like_an_interchange_are_one_only_where_the_others_stayed(
    seed, others_changed_by, named
):
    """Displaced electrodes make leads alike too, but seldom two of them alone."""
    one = next(one for one in chest_interchanges() if one.electrodes == ("V5", "V6"))
    earlier, later = beats(seed)
    half_way = 0.4 * later + 0.6 * one.matrix @ later
    half_way[2:6] *= 1.0 + others_changed_by
    found = chest_interchange_between(earlier, half_way)
    assert (found is not None and found.electrodes == one.electrodes) == named
