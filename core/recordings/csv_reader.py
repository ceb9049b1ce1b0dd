"""Tables of samples: a header row of lead names, one row a sample (CSV, TSV, semicolons).

Units come from the headings (``I (mV)``), a row of units, a comment (``# unit: mV``) or the
caller; the rate from a time column, a comment (``# sampling_rate_hz: 500``) or the caller.
Neither is guessed.
"""

from __future__ import annotations

import re
from dataclasses import replace
from pathlib import Path

import numpy as np
from numpy.typing import NDArray

from core.errors import RecordingError, TableIncomplete, Unstated
from core.recordings.assemble import (
    SAMPLING_RATE_RANGE_HZ,
    Channel,
    assemble_recording,
    refuse_missing_leads,
)
from core.recordings.comments import Comments
from core.recordings.csv_header import (
    LeadColumn,
    header_of_line,
    is_comment,
    millivolts_per,
)
from core.recordings.csv_table import Table, encoding_of, encoding_of_mark, read_table
from core.recordings.csv_times import TimeError, agree, decimals_of, rate_of_times_hz
from core.recordings.fingerprint import sha256_of_files
from core.recordings.leads import LIMB_LEADS, can_derive_limb_leads
from core.recordings.recording import Recording, Source
from core.recordings.refusing import refusing
from core.recordings.shown import shown
from core.wording import notices as say

FORMAT_NAME = "CSV"
# A table shows only how many decimals were written. Copies of it are kept no coarser than 1 µV
# and no finer than 1 nV, which 32 bits hold up to 2 V.
COUNTS_PER_MV_RANGE = (1e3, 1e6)
_ROWS_FOR_DECIMALS = 10_000


def looks_like_csv(start: bytes) -> bool:
    """Whether the first bytes of a file are text whose first row names three leads or more."""
    encoding = encoding_of_mark(start)
    if encoding is None and b"\0" in start:
        return False
    # The start may end within a character; names of leads are ASCII in any encoding.
    text = start.decode(encoding or "utf-8", errors="replace")
    for line in re.split(r"[\r\n]+", text):
        if line.strip() and not is_comment(line):
            return header_of_line(line) is not None
    return False


def read_csv(
    path: Path, *, unit: str | None = None, sampling_rate_hz: float | None = None
) -> Recording:
    """Read a table of samples.

    Parameters
    ----------
    path : Path
        Text in UTF-8, UTF-16 with a byte order mark, or Latin-1. An empty cell is a missing
        sample (NaN).
    unit : str, optional
        Unit of the leads for which the file states none: ``"mV"``, ``"uV"``, ``"V"`` or ``"nV"``.
    sampling_rate_hz : float, optional
        Where the file has neither a time column nor a comment that states it.

    Raises
    ------
    TableIncomplete
        If a unit or the rate is neither in the file nor given.
    RecordingError
        If it is both and differs; if the time column is uneven, or a cell is no number; if the
        leads are not those of a 12-lead ECG.
    OSError
        If the file cannot be opened.
    """
    name = path.name
    unreadable = RecordingError(
        f"{name}: the table cannot be read. Save it again as plain text in UTF-8, with a header "
        "row of lead names and one row a sample."
    )
    with refusing(unreadable):
        try:
            with path.open(encoding=encoding_of(path)) as stream:
                table = read_table(name, stream)
        except UnicodeError as error:
            raise RecordingError(
                f"{name}: the file begins as UTF-16 text and does not go on as such. "
                "Export the table again as plain text in UTF-8."
            ) from error
        return _recording(path, table, unit, sampling_rate_hz)


def _recording(path: Path, table: Table, unit: str | None, given_hz: float | None) -> Recording:
    name, comments = path.name, Comments(table.comments)
    columns = _measured(table, comments)
    # What a caller is asked to state must not be asked in vain.
    refuse_missing_leads(name, {column.lead for column in columns})
    unitless = [column.lead for column in columns if not _stated_unit(column, table, comments)]
    no_rate = comments.sampling_rate_hz is None and table.header.time is None
    _refuse_incomplete(path, unitless if unit is None else [], no_rate=no_rate and given_hz is None)
    rate_hz = _rate_hz(name, table, comments, given_hz)
    recording = assemble_recording(
        _channels(name, table, comments, columns, unit),
        sampling_rate_hz=rate_hz,
        source=Source(name, FORMAT_NAME, sha256_of_files([path])),
        subject=comments.subject(comments.recorded_at),
        recorded_at=comments.recorded_at,
        filters=comments.filters,
        electrode_placement=comments.electrode_placement,
    )
    stated = [f"the unit {unit}"] if unitless else []
    stated += [f"{rate_hz:g} samples a second"] if no_rate else []
    if not stated:
        return recording
    return replace(recording, notices=(*recording.notices, say.stated_by_user(stated)))


def _refuse_incomplete(path: Path, unitless: list[str], *, no_rate: bool) -> None:
    """Refuse a table for what is neither in it nor given, all of it at once."""
    missing: list[Unstated] = []
    lacks, mends = [], []
    if unitless:
        missing.append("unit")
        lacks.append(f"does not say in which unit lead {unitless[0]} is")
        mends.append(f"write the unit into the header row, as in '{unitless[0]} (mV)'")
    if no_rate:
        missing.append("rate")
        lacks.append("has no time column and states no sampling rate")
        mends.append("add a line '# sampling_rate_hz: 500' above the header row")
    if missing:
        raise TableIncomplete(path, tuple(missing), ", ".join(lacks), " and ".join(mends))


def _rate_hz(name: str, table: Table, comments: Comments, given_hz: float | None) -> float:
    low_hz, high_hz = SAMPLING_RATE_RANGE_HZ
    if given_hz is not None and not low_hz <= given_hz <= high_hz:
        raise RecordingError(
            f"{name}: its rate was given as {given_hz:g} samples a second; {low_hz:g} to "
            f"{high_hz:g} can be read. Give the rate at which it was recorded."
        )
    in_comment_hz = comments.sampling_rate_hz
    stated = [rate for rate in (in_comment_hz, given_hz) if rate is not None]
    time = table.header.time
    shown_hz = None
    if time is not None and table.line_numbers.size > 1:
        try:
            shown_hz = rate_of_times_hz(table.columns[time.place], time.seconds_per_unit)
        except TimeError as error:
            raise RecordingError(
                f"{name}: the time column is not evenly spaced: line "
                f"{table.line_numbers[error.row]} {error}. Export the recording again at a fixed "
                "rate, with empty cells where samples are missing and no rounding of the times."
            ) from error
    if not stated and shown_hz is None:
        raise RecordingError(
            f"{name}: the table has fewer than two rows. Export the recording again."
        )
    claims = [*stated, *([] if shown_hz is None else [shown_hz])]
    if not all(agree(claims[0], claim) for claim in claims):
        raise RecordingError(
            f"{name}: the sampling rate is stated as {claims[0]:g} Hz and as "
            f"{next(claim for claim in claims if not agree(claims[0], claim)):g} Hz. "
            "Correct the one that is wrong."
        )
    return claims[0]


def _channels(
    name: str,
    table: Table,
    comments: Comments,
    columns: list[LeadColumn],
    given_unit: str | None,
) -> list[Channel]:
    steps = _stated_steps(table, comments)
    channels = []
    for column in columns:
        unit_mv = _unit_mv(name, column, _stated_unit(column, table, comments), given_unit)
        values = table.columns.pop(column.place)
        counts_per_mv = steps.get(column.lead) or _counts_per_mv(values, unit_mv)
        channels.append(Channel(column.lead, values * (unit_mv * column.sign), counts_per_mv))
    return channels


def _measured(table: Table, comments: Comments) -> list[LeadColumn]:
    """The columns that hold leads as recorded, not as computed from others of the table."""
    derived = set(comments.leads_derived) & set(LIMB_LEADS)
    kept = [
        column
        for column in table.header.leads
        if column.is_judged
        or millivolts_per(_stated_unit(column, table, comments) or "mV") is not None
    ]
    measured = [column for column in kept if column.lead not in derived]
    return measured if can_derive_limb_leads({column.lead for column in measured}) else kept


def _stated_unit(column: LeadColumn, table: Table, comments: Comments) -> str | None:
    """What the file says: the heading, else the row of units, else a comment for all leads."""
    return column.unit or table.units.get(column.place) or comments.unit


def _unit_mv(name: str, column: LeadColumn, stated: str | None, given: str | None) -> float:
    given_mv = None if given is None else millivolts_per(given)
    if given is not None and given_mv is None:
        raise RecordingError(
            f"{name}: '{shown(given)}' is no unit of voltage. Give mV, uV, V or nV."
        )
    stated = stated or given or ""
    stated_mv = millivolts_per(stated)
    if stated_mv is None:
        raise RecordingError(
            f"{name}: lead {column.lead} is in the unit '{shown(stated)}', which is no voltage. "
            "Export the table in mV."
        )
    if given_mv is not None and given_mv != stated_mv:
        raise RecordingError(
            f"{name}: the file states '{shown(stated)}' for lead {column.lead}, not "
            f"'{shown(given or '')}'. Correct the file, or give no unit."
        )
    return stated_mv


def _stated_steps(table: Table, comments: Comments) -> dict[str, float]:
    """Steps of the quantisation in one mV, where a comment states one for all leads or each."""
    leads = [column.lead for column in table.header.leads]
    counts = comments.counts_per_mv
    if len(counts) == 1:
        counts = counts * len(leads)
    return dict(zip(leads, counts, strict=True)) if len(counts) == len(leads) else {}


def _counts_per_mv(values: NDArray[np.float64], unit_mv: float) -> float:
    coarsest, finest = COUNTS_PER_MV_RANGE
    written = 10.0 ** decimals_of(values[:_ROWS_FOR_DECIMALS]) / unit_mv
    return min(max(written, coarsest), finest)
