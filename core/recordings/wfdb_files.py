"""The files that a WFDB header names, checked before the wfdb package opens any of them.

The package takes a header at its word: it follows segments into each other, makes room for every
sample that is claimed, and its time grows with the square of a line's length.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from pathlib import Path

from core.errors import RecordingError
from core.recordings.shown import shown
from core.recordings.wfdb_lines import check_record_line, check_signal_line

LARGEST_HEADER_BYTES = 1_000_000
# Longer than any line of a signal or a segment; comments may be longer.
LONGEST_LINE = 500
# Signals of one record, or segments that it is joined from. An ECG has twelve leads and some
# more; to read one segment takes some ms.
MOST_LINES = 100
# Signals of all segments, a segment that comes again counted again: each is read several times.
MOST_LINES_IN_ALL = 1500
# Stands for a stretch, or a signal, without a file.
NO_FILE = "~"
# A file's name as the standard has it: letters, digits, "_" and "-", and one ending.
_FILE_NAME = re.compile(r"[-\w]+(?:\.\w*)?", re.ASCII)
_SEGMENT_NAME = re.compile(r"[-\w]+", re.ASCII)
_SEGMENTED = re.compile(r"[^\s/]+/\d")
# After the record's name: its segments, where it has some, and its signals.
_COUNTS = re.compile(r"[^\s/]+(?:/(\d{1,9}))?\s+(\d{1,9})(?!\d)")


@dataclass(frozen=True, slots=True)
class _Header:
    """Lines of a header that are no comments, and their numbers."""

    path: Path
    lines: list[tuple[int, str]]

    @property
    def is_segmented(self) -> bool:
        return _SEGMENTED.match(self.lines[0][1]) is not None


def files_of_record(header_path: Path) -> list[Path]:
    """The header, the headers of its segments, and the signal files, each once.

    Raises
    ------
    RecordingError
        If a header is too long, names a file that isn't beside it, or a record as its own part.
    OSError
        If a header cannot be opened.
    """
    name = header_path.name
    whole = _header(name, header_path)
    headers = [whole]
    if whole.is_segmented:
        headers += _segments(name, whole)
    paths = [header.path for header in headers]
    for header in headers[1:] if whole.is_segmented else headers:
        for number, line in header.lines[1:]:
            file_name, where = line.split()[0], _where(name, header, number)
            if file_name == NO_FILE:
                continue
            check_signal_line(where, line)
            if not _FILE_NAME.fullmatch(file_name):
                raise _not_beside(where, file_name, "signal file")
            path = header_path.with_name(file_name)
            if not path.is_file():
                raise RecordingError(
                    f"{where} names the signal file {shown(path.name)}, which is not beside the "
                    "header. Copy it into the same folder."
                )
            paths.append(path)
    return list(dict.fromkeys(paths))


def _header(name: str, path: Path) -> _Header:
    with path.open("rb") as file:
        content = file.read(LARGEST_HEADER_BYTES + 1)
    if len(content) > LARGEST_HEADER_BYTES:
        raise _damaged(f"{name}: the WFDB header is larger than {LARGEST_HEADER_BYTES} bytes")
    # Bytes that are no ASCII are passed over, and lines parted, as the wfdb package does it.
    lines = [
        (number, line.strip())
        for number, line in enumerate(content.decode("ascii", "ignore").splitlines(), 1)
        if line.strip() and not line.strip().startswith("#")
    ]
    header = _Header(path, lines)
    for number, line in lines:
        if len(line) > LONGEST_LINE:
            where = _where(name, header, number)
            raise _damaged(f"{where} is longer than {LONGEST_LINE} characters")
    if not lines:
        raise _damaged(f"{name}: the WFDB header {shown(path.name)} has no line of a record")
    if len(lines) - 1 > MOST_LINES:
        raise RecordingError(
            f"{name}: the WFDB header names {len(lines) - 1} signals or segments; {MOST_LINES} can "
            "be read. Export a shorter stretch as one record."
        )
    check_record_line(_where(name, header, lines[0][0]), lines[0][1])
    _refuse_fewer_lines(name, header)
    return header


def _refuse_fewer_lines(name: str, header: _Header) -> None:
    number, line = header.lines[0]
    counts = _COUNTS.match(line)
    stated = 0 if counts is None else int(counts[1] or counts[2])
    what = "segments" if header.is_segmented else "signals"
    if counts is None or stated > len(header.lines) - 1:
        raise _damaged(
            f"{_where(name, header, number)} states {stated} {what}, and {len(header.lines) - 1} "
            "lines follow"
        )


def _segments(name: str, whole: _Header) -> list[_Header]:
    """The headers of the segments, each once."""
    found: dict[str, _Header] = {}
    n_lines = 0
    for number, line in whole.lines[1:]:
        segment = line.split()[0]
        if segment in found:
            n_lines += len(found[segment].lines)
        if n_lines > MOST_LINES_IN_ALL:
            raise RecordingError(
                f"{name}: the segments of the WFDB record name more than {MOST_LINES_IN_ALL} "
                "signals. Export a shorter stretch as one record."
            )
        if segment == NO_FILE or segment in found:
            continue
        where = _where(name, whole, number)
        if not _SEGMENT_NAME.fullmatch(segment):
            raise _not_beside(where, segment, "segment")
        path = whole.path.with_name(f"{segment}.hea")
        if path == whole.path:
            raise _damaged(f"{where} names the record itself as its segment")
        if not path.is_file():
            raise RecordingError(
                f"{where} names the segment {shown(path.stem)}, whose header is not beside this "
                "one. Copy the whole record into one folder."
            )
        found[segment] = _header(name, path)
        n_lines += len(found[segment].lines)
        if found[segment].is_segmented:
            raise _damaged(
                f"{where} names the segment {shown(path.stem)}, which has segments itself"
            )
    return list(found.values())


def _where(name: str, header: _Header, number: int) -> str:
    inside = "" if header.path.name == name else f" of the segment {shown(header.path.stem)}"
    return f"{name}: line {number} of the WFDB header{inside}"


def _not_beside(where: str, named: str, what: str) -> RecordingError:
    return RecordingError(
        f"{where} names the {what} '{shown(named)}'; only plain names of files beside the header "
        "are read. Copy the whole record into one folder, and name its files without one."
    )


def _damaged(what: str) -> RecordingError:
    return RecordingError(f"{what}. Copy the record again from where it is stored, or export it.")
