"""Notices: what a reader of a result has to know besides the numbers."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

Severity = Literal["info", "caution", "stop"]


@dataclass(frozen=True, slots=True)
class Notice:
    """One thing to know: a stable code, how grave it is, and one sentence."""

    code: str
    severity: Severity
    text: str

    def to_dict(self) -> dict[str, str]:
        """The notice as JSON writes it."""
        return {"code": self.code, "severity": self.severity, "text": self.text}
