from __future__ import annotations

import pytest

from core import Recording, read_recording
from core.shipped_files import samples_folder
from tests.core.placement.somebody import Somebody, weighed

# Invented persons with every electrode within a few mm of its site.
IN_PLACE = {"Ash": "raised-earlier", "Birch": "inferior-earlier", "Cedar": "steady-earlier"}


@pytest.fixture(scope="session")
def steady_earlier() -> Recording:
    return read_recording(samples_folder() / "steady-earlier")


@pytest.fixture(scope="session")
def cedar(steady_earlier: Recording) -> Somebody:
    return weighed(steady_earlier)


@pytest.fixture(scope="session", params=[*IN_PLACE, "real"])
def in_place(request: pytest.FixtureRequest) -> Somebody:
    """Three invented persons, and the real recording that pydicom ships."""
    if request.param == "real":
        return weighed(request.getfixturevalue("real_recording"))
    return weighed(read_recording(samples_folder() / IN_PLACE[request.param]))
