"""Read a file as a user would, and note what a reader must never do."""

from __future__ import annotations

import contextlib
import signal
import time
import traceback
import warnings
from collections.abc import Iterator
from dataclasses import dataclass, field
from pathlib import Path
from types import FrameType

import numpy as np

from core import Recording, RecordingError, read_recording

# Ample for a file of some kilobytes, which takes milliseconds; a larger one has limits of its own.
SLOWEST_S = 2.0
# A reading that goes on for so long is stopped.
STOPPED_AFTER_S = 20


class _Stopped(BaseException):
    """Not an Exception: no reader may catch it."""


@dataclass(slots=True)
class Reading:
    """What came of one file.

    Attributes
    ----------
    refusal : str, optional
        What the reader said; None where the file was read.
    seconds : float
    faults : list of str
        What must not happen: another error than a refusal, a refusal that is more than a line or
        names a folder, a warning, an impossible recording, too much time.
    """

    refusal: str | None = None
    seconds: float = 0.0
    faults: list[str] = field(default_factory=list)


def read_watched(path: Path) -> Reading:
    """Read a file; a slow one twice, because other programs may have held it up."""
    reading = _read_once(path)
    if reading.seconds > SLOWEST_S:
        again = _read_once(path)
        reading.seconds = min(reading.seconds, again.seconds)
    if reading.seconds > SLOWEST_S:
        reading.faults.append(f"took {reading.seconds:.1f} s")
    return reading


def _read_once(path: Path) -> Reading:
    reading = Reading()
    with warnings.catch_warnings(record=True) as warned, _stopped_in_time():
        warnings.simplefilter("always")
        started = time.perf_counter()
        try:
            reading.faults += _impossible(read_recording(path))
        except RecordingError as error:
            reading.refusal = str(error)
            reading.faults += _unfit(reading.refusal, path)
        except (Exception, _Stopped):  # noqa: BLE001, whatever a reader lets through is a fault
            reading.faults.append(traceback.format_exc())
        reading.seconds = time.perf_counter() - started
    reading.faults += [f"warned: {one.message} ({one.filename}:{one.lineno})" for one in warned]
    return reading


def _unfit(refusal: str, path: Path) -> list[str]:
    faults = []
    if not refusal.isprintable():
        faults.append(f"a refusal is more than a line of text: {refusal!r}")
    if len(refusal) > 400:
        faults.append(f"a refusal is too long: {refusal!r}")
    if str(path.parent) in refusal:
        faults.append(f"a refusal names a folder: {refusal}")
    if not refusal.startswith(path.name) and not refusal.startswith(path.stem):
        faults.append(f"a refusal does not say which file: {refusal}")
    return faults


def _impossible(recording: Recording) -> list[str]:
    signal_mv = recording.signal_mv
    sound = (
        signal_mv.dtype == np.float64
        and signal_mv.shape == (recording.n_samples, 12)
        and recording.n_samples > 0
        and 100 <= recording.sampling_rate_hz <= 8000
        and not np.isinf(signal_mv).any()
        and recording.further_mv.shape[1] == len(recording.further_leads)
        and all(0 < steps < np.inf for steps in recording.counts_per_mv)
    )
    recording.subject.to_dict()
    return [] if sound else ["an impossible recording"]


@contextlib.contextmanager
def _stopped_in_time() -> Iterator[None]:
    if not hasattr(signal, "SIGALRM"):  # Windows
        yield
        return

    def stop(_number: int, _frame: FrameType | None) -> None:
        raise _Stopped(f"stopped after {STOPPED_AFTER_S} s")

    before = signal.signal(signal.SIGALRM, stop)
    signal.alarm(STOPPED_AFTER_S)
    try:
        yield
    finally:
        signal.alarm(0)
        signal.signal(signal.SIGALRM, before)
