"""The rows of a table of samples, read a block of lines at a time."""

from __future__ import annotations

import codecs
import math
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field
from pathlib import Path
from typing import TextIO

import numpy as np
from numpy.typing import NDArray

from core.errors import RecordingError
from core.recordings.csv_header import Header, cells_of, header_of_line, is_comment, millivolts_per
from core.recordings.shown import shown
from core.recordings.size_limit import MOST_VALUES

BLOCK_CHARACTERS = 1 << 20
LONGEST_LINE = 1 << 16
MOST_COMMENTS = 1000
# Words that writers put where there is no sample. `float` knows "nan" itself.
_MISSING = {"", "-", "na", "n/a", "nan", "null", "none"}
# Past any sample in nV and any time in µs since 1970.
LARGEST_NUMBER = 1e18


@dataclass(slots=True, eq=False)
class Table:
    """The columns that the header row names, as numbers, and what was said beside them.

    Attributes
    ----------
    columns : dict of int to ndarray, shape (n_rows,)
        By place in the header row; NaN where a cell is empty.
    line_numbers : ndarray of int, shape (n_rows,)
        Line of the file that each row stands on, from 1.
    units : dict of int to str
        From a row of units below the header row, where there is one.
    """

    header: Header
    comments: list[str]
    columns: dict[int, NDArray[np.float64]] = field(default_factory=dict)
    line_numbers: NDArray[np.int64] = field(default_factory=lambda: np.empty(0, dtype=np.int64))
    units: dict[int, str] = field(default_factory=dict)


def encoding_of(path: Path) -> str:
    """UTF-8 or UTF-16 by a byte order mark; else UTF-8 where all bytes agree, else Latin-1."""
    decoder = codecs.getincrementaldecoder("utf-8")()
    with path.open("rb") as file:
        marked = encoding_of_mark(file.read(4))
        if marked is not None:
            return marked
        file.seek(0)
        try:
            while block := file.read(BLOCK_CHARACTERS):
                decoder.decode(block)
            decoder.decode(b"", final=True)
        except UnicodeDecodeError:
            return "latin-1"
    return "utf-8"


def encoding_of_mark(start: bytes) -> str | None:
    """The encoding that a byte order mark states; None where there is none."""
    if start.startswith(codecs.BOM_UTF8):
        return "utf-8-sig"
    marked = start.startswith((codecs.BOM_UTF16_LE, codecs.BOM_UTF16_BE))
    return "utf-16" if marked else None


def read_table(name: str, stream: TextIO) -> Table:
    """Read all rows.

    Raises
    ------
    RecordingError
        If there is no header row of leads, a row has more or fewer cells, a cell that should be a
        number is none, or there are more numbers than fit into memory.
    """
    comments: list[str] = []
    rows: _Rows | None = None
    for first, lines in _blocks(name, stream):
        numbers: list[int] = []
        kept: list[str] = []
        for number, line in enumerate(lines, first):
            if line.isspace() or not line:
                continue
            if is_comment(line):
                if len(comments) < MOST_COMMENTS:
                    comments.append(line)
            elif rows is None:
                rows = _Rows(name, _header(name, number, line))
            else:
                numbers.append(number)
                kept.append(line)
        if rows is not None and kept:
            rows.add(numbers, kept)
    if rows is None:
        raise _no_header(name)
    return rows.table(comments)


def _header(name: str, number: int, line: str) -> Header:
    header = header_of_line(line)
    if header is None:
        raise _no_header(name)
    seen: set[str] = set()
    for column in header.leads:
        if column.lead in seen:
            raise RecordingError(
                f"{name}: lead {column.lead} stands in two columns of line {number}. "
                "Remove one of them."
            )
        seen.add(column.lead)
    return header


def _no_header(name: str) -> RecordingError:
    return RecordingError(
        f"{name}: the table has no header row that names its leads. Write one above the first "
        "row, as in 'time (s),I (mV),II (mV), ...'."
    )


def _blocks(name: str, stream: TextIO) -> Iterator[tuple[int, list[str]]]:
    """Whole lines without their ends, and the number of the first."""
    number, begun = 1, ""
    while block := stream.read(BLOCK_CHARACTERS):
        lines = (begun + block).split("\n")
        begun = lines.pop()
        if len(begun) > LONGEST_LINE or max(map(len, lines), default=0) > LONGEST_LINE:
            raise RecordingError(
                f"{name}: a line of the file is longer than {LONGEST_LINE} characters. "
                "Export the recording again, with one row a sample."
            )
        yield number, lines
        number += len(lines)
    if begun:
        yield number, [begun]


class _Rows:
    """Rows turned into columns of numbers, block by block."""

    def __init__(self, name: str, header: Header) -> None:
        self._name = name
        self._header = header
        self._headings = {column.place: column.heading for column in header.leads}
        if header.time is not None:
            self._headings[header.time.place] = header.time.heading
        self._parts: dict[int, list[NDArray[np.float64]]] = {place: [] for place in self._headings}
        self._line_numbers: list[NDArray[np.int64]] = []
        self._n_values = 0
        self._units: dict[int, str] | None = None
        self._decimal_mark: str | None = None

    def add(self, numbers: list[int], lines: list[str]) -> None:
        """Take the rows of a block; *numbers* are those of their lines."""
        self._refuse_too_many(len(lines))
        cells = self._cells(numbers, lines)
        if self._units is None:
            self._units = self._units_of_row(cells[: self._header.n_cells])
            if self._units:
                numbers, cells = numbers[1:], cells[self._header.n_cells :]
        for place in self._headings:
            column = cells[place :: self._header.n_cells]
            self._parts[place].append(self._numbers(place, numbers, column))
        self._line_numbers.append(np.array(numbers, dtype=np.int64))

    def table(self, comments: list[str]) -> Table:
        """All rows taken so far; empties itself, to hold them only once."""
        table = Table(self._header, comments, units=self._units or {})
        for place in self._headings:
            parts = self._parts.pop(place)
            table.columns[place] = np.concatenate(parts) if parts else np.empty(0)
        if self._line_numbers:
            table.line_numbers = np.concatenate(self._line_numbers)
        return table

    def _refuse_too_many(self, n_rows: int) -> None:
        self._n_values += n_rows * len(self._headings)
        if self._n_values > MOST_VALUES:
            raise RecordingError(
                f"{self._name}: the table has more than {MOST_VALUES // len(self._headings)} rows, "
                "too many to hold in memory. Cut out a stretch and open that."
            )

    def _cells(self, numbers: list[int], lines: list[str]) -> list[str]:
        """The cells of all rows, one row after the other."""
        delimiter, n_cells = self._header.delimiter, self._header.n_cells
        joined = delimiter.join(lines)
        if '"' not in joined:
            between = n_cells - 1
            if all(line.count(delimiter) == between for line in lines):
                return joined.split(delimiter)
        cells: list[str] = []
        for number, line in zip(numbers, lines, strict=True):
            row = cells_of(line, delimiter)
            # Some writers end every row with a delimiter.
            if len(row) == n_cells + 1 and not row[-1].strip():
                row.pop()
            if len(row) != n_cells:
                raise self._ragged(number, len(row))
            cells += row
        return cells

    def _ragged(self, number: int, n_found: int) -> RecordingError:
        n_cells = self._header.n_cells
        mend = "Export the table again, whole."
        if self._header.delimiter == "," and n_found > n_cells:
            mend = "If its decimal mark is a comma, separate the cells by semicolons."
        return RecordingError(
            f"{self._name}: line {number} has {n_found} cells where the header row has {n_cells}. "
            f"{mend}"
        )

    def _units_of_row(self, row: Sequence[str]) -> dict[int, str]:
        """Units by place, if the first row holds one in each of the twelve leads; else nothing."""
        words = {column.place: row[column.place].strip(" ()[]") for column in self._header.leads}
        judged = [words[column.place] for column in self._header.leads if column.is_judged]
        return words if all(millivolts_per(word) is not None for word in judged) else {}

    def _numbers(self, place: int, numbers: list[int], cells: list[str]) -> NDArray[np.float64]:
        joined = "\n".join(cells)
        # Python's own digit groups, as in 1_000, mean nothing to other programs.
        plain = "_" not in joined and self._decimal(joined) == "."
        values = None
        if plain:
            try:
                values = np.array(list(map(float, cells)), dtype=np.float64)
            except ValueError:
                values = None
        if values is None:
            values = self._numbers_one_by_one(place, numbers, cells)
        impossible = np.flatnonzero(np.abs(values) > LARGEST_NUMBER)
        if impossible.size:
            raise self._no_number(place, numbers, cells, int(impossible[0]))
        return values

    def _decimal(self, joined: str) -> str:
        """The decimal mark of the table; a comma only where cells aren't separated by commas."""
        if self._decimal_mark is None and self._header.delimiter != ",":
            if "," in joined:
                self._decimal_mark = ","
            elif "." in joined:
                self._decimal_mark = "."
        return self._decimal_mark or "."

    def _numbers_one_by_one(
        self, place: int, numbers: list[int], cells: list[str]
    ) -> NDArray[np.float64]:
        mark = self._decimal_mark or "."
        values = np.empty(len(cells))
        for row, cell in enumerate(cells):
            text = cell.strip()
            if text.lower() in _MISSING:
                values[row] = math.nan
                continue
            if "_" in text or (mark == "," and "." in text):
                raise self._no_number(place, numbers, cells, row)
            try:
                values[row] = float(text.replace(",", ".") if mark == "," else text)
            except ValueError:
                raise self._no_number(place, numbers, cells, row) from None
        return values

    def _no_number(
        self, place: int, numbers: list[int], cells: list[str], row: int
    ) -> RecordingError:
        heading, held = shown(self._headings[place]), shown(cells[row])
        return RecordingError(
            f"{self._name}: line {numbers[row]}, column '{heading}' holds '{held}', which is no "
            "number of this table. Write a number there, with the same decimal mark as elsewhere, "
            "or leave the cell empty where a sample is missing."
        )
