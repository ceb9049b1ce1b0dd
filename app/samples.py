"""The sample pairs that ship with the program."""

from __future__ import annotations

from dataclasses import dataclass
from pathlib import Path

from core.shipped_files import samples_folder


@dataclass(frozen=True, slots=True)
class SamplePair:
    """Two invented recordings and what the reader may ask of them."""

    title: str
    story: str
    earlier_name: str
    later_name: str

    @property
    def earlier(self) -> Path:
        """The earlier file or record."""
        return samples_folder() / self.earlier_name

    @property
    def later(self) -> Path:
        """The later file or record."""
        return samples_folder() / self.later_name


SAMPLE_PAIRS = (
    SamplePair(
        "T waves gone in V1 and V2",
        "A month apart, two wards.",
        "raised-earlier.hea",
        "raised-later.hea",
    ),
    SamplePair(
        "New ST elevation below",
        "A week apart, now with chest pain.",
        "inferior-earlier.hea",
        "inferior-later.hea",
    ),
    SamplePair(
        "A faster, noisier tracing",
        "Half a year apart, a routine visit.",
        "steady-earlier.hea",
        "steady-later.hea",
    ),
    SamplePair(
        "A taller T wave in V6",
        "Eleven days apart, two technicians.",
        "medial-earlier.dcm",
        "medial-later.dcm",
    ),
)
