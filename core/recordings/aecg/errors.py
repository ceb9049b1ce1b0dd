"""What is wrong with an annotated ECG, before the file's name is put to it."""

from __future__ import annotations

EXPORT_AGAIN = "Export it again from where it is stored."


class AecgError(ValueError):
    """The file cannot be used.

    Attributes
    ----------
    what : str
        A clause that follows "the annotated ECG", such as ``"holds no rhythm"``.
    mend : str
        A whole sentence.
    """

    def __init__(self, what: str, mend: str = EXPORT_AGAIN) -> None:
        super().__init__(what)
        self.what = what
        self.mend = mend
