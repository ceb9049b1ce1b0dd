"""A report read back, page by page."""

from __future__ import annotations

import io
from itertools import groupby

from pypdf import PdfReader

from tests.app.drawing.readback import Piece, pieces_of, words

POINTS_PER_MM = 72.0 / 25.4


def open_pdf(content: bytes) -> PdfReader:
    return PdfReader(io.BytesIO(content))


def texts(content: bytes) -> list[str]:
    """The words of each page."""
    return [words(pieces_of(page)) for page in open_pdf(content).pages]


def rows_of(pieces: list[Piece]) -> list[list[str]]:
    """Runs that stand on one baseline, from left to right; from top to bottom."""
    lines = sorted(pieces, key=lambda piece: (round(piece.baseline, 1), piece.left))
    return [
        [piece.text for piece in line]
        for _, line in groupby(lines, key=lambda piece: round(piece.baseline, 1))
    ]
