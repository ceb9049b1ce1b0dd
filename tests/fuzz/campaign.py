"""Many damaged files of one format, each from a seed of its own."""

from __future__ import annotations

import math

import numpy as np

from tests.fuzz.tally import Tally, fast_folder, output_watched
from tests.helpers.damage import FORMATS
from tests.helpers.watched import read_watched


def run(name: str, *, n_files: int, seed: int, seconds: float = math.inf) -> Tally:
    """Read so many files, or as many as the time allows.

    File *k* is made from the seed and *k* alone, except that ``wfdb-signal`` leaves all but one
    signal file sound.
    """
    with fast_folder() as folder, output_watched() as printed:
        write = FORMATS[name](folder)
        tally = Tally(name)
        for number in range(n_files):
            path = write(np.random.default_rng([seed, number]))
            tally.add(number, folder, read_watched(path), printed.take())
            if tally.is_enough or tally.seconds > seconds:
                break
    return tally
