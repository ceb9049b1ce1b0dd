"""What the lines of a WFDB header must say, because the wfdb package fills in what they do not.

It takes 250 samples a second for a rate that it cannot read, and 200 steps in a millivolt for a
gain that is zero, which the standard has stand for a signal that was never calibrated.
"""

from __future__ import annotations

import math
import re

from core.errors import RecordingError
from core.recordings.leads import lead_of_label
from core.recordings.shown import shown

_NUMBER = r"(?:\d+\.?\d*|\.\d+)"
# Name (and segments), signals, rate (counter frequency, its base), samples, time, date.
_RECORD = re.compile(
    rf"[-\w]+(?:/\d+)?\s+\d+"
    rf"(?:\s+{_NUMBER}(?:/-?{_NUMBER}(?:\(-?{_NUMBER}\))?)?"
    rf"(?:\s+\d+(?:\s+[\d:.]+(?:\s+\d+/\d+/\d+)?)?)?)?",
    re.ASCII,
)
_GAIN = re.compile(rf"(-?{_NUMBER}(?:e[+-]?\d+)?)(?:\(-?\d+\))?(?:/\S*)?", re.ASCII)
# A signal's line: file, storage form, gain, resolution, zero, first value, checksum, block; name.
_GAIN_AT, _LABEL_AT = 2, 8


def check_record_line(where: str, line: str) -> None:
    """Refuse a record line of which a part would be passed over.

    Raises
    ------
    RecordingError
        If it isn't written as the standard has it.
    """
    if not _RECORD.fullmatch(line):
        raise RecordingError(
            f"{where} does not state numbers of signals and samples and a rate, as in "
            "'name 12 500 5000'. Correct it, or export the record again."
        )


def check_signal_line(where: str, line: str) -> None:
    """Refuse a lead without a gain.

    Raises
    ------
    RecordingError
        If the line is that of a lead, and its gain is zero or no number.
    """
    words = line.split()
    found = lead_of_label(" ".join(words[_LABEL_AT:]))
    if found is None:
        return
    gain = _GAIN.fullmatch(words[_GAIN_AT])
    steps = 0.0 if gain is None else float(gain[1])
    if steps == 0 or not math.isfinite(steps):
        raise RecordingError(
            f"{where} states the gain '{shown(words[_GAIN_AT])}' for lead {found[0]}, which tells "
            "no voltage. Export the record with its calibration, as in '1000/mV'."
        )
