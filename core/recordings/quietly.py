"""Libraries that read without a word."""

from __future__ import annotations

import contextlib
import warnings
from collections.abc import Iterator

import numpy as np


@contextlib.contextmanager
def quietly() -> Iterator[None]:
    """Keep a library from warning: a reader says itself what is wrong, or nothing.

    Warnings are switched for the whole process, so two threads must not read at the same time.
    """
    with warnings.catch_warnings(), np.errstate(all="ignore"):
        warnings.simplefilter("ignore")
        yield
