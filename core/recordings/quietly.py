"""Libraries that read without a word."""

from __future__ import annotations

import contextlib
import io
import warnings
from collections.abc import Iterator

import numpy as np


@contextlib.contextmanager
def quietly() -> Iterator[None]:
    """Keep a library from warning or printing: a reader says itself what is wrong, or nothing.

    Standard output may be a result that somebody pipes on. Warnings and output are switched for
    the whole process, so two threads must not read at the same time.
    """
    with (
        warnings.catch_warnings(),
        np.errstate(all="ignore"),
        contextlib.redirect_stdout(io.StringIO()),
    ):
        warnings.simplefilter("ignore")
        yield
