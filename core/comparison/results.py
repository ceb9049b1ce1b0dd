"""The result of a comparison: frozen, complete, and the JSON of the contract."""

from __future__ import annotations

from dataclasses import dataclass, field
from datetime import datetime
from typing import Any

from core.comparison.bands import Bands
from core.comparison.further import FurtherLead
from core.comparison.laid import LaidBeats
from core.comparison.pairing import BeatPair
from core.json_numbers import number_or_none
from core.measures.report import RecordingReport
from core.notices import Notice
from core.settings import Settings
from core.version import PROGRAM_NAME, program_version
from core.wording.caution import CAUTIONS, PLACEMENT_CAVEAT

CONTRACT = "samespot-comparison/1"
# A smaller shift is within what careful staff place apart (12 mm in each direction, from
# McCann 2007), and is not worth a word.
SMALLEST_NAMED_MM = 12.0


@dataclass(frozen=True, slots=True)
class MeasureChange:
    """One measure of one lead in both recordings; None where it could not be measured.

    ``noise``, ``reach`` and ``remainder`` ranges hold `Settings.confidence` of the cases that
    they describe; see `core.comparison.compare`.
    """

    earlier: float | None
    later: float | None
    change: float | None
    noise_low: float | None
    noise_high: float | None
    reach_low: float | None
    reach_high: float | None
    expected: float | None
    remainder: float | None
    remainder_low: float | None
    remainder_high: float | None

    def to_dict(self) -> dict[str, float | None]:
        """The measure as JSON writes it."""
        return {name: number_or_none(getattr(self, name)) for name in self.__slots__}


NOTHING = MeasureChange(*[None] * 11)


@dataclass(frozen=True, slots=True)
class LeadComparison:
    """One lead: its measures, its judgement, and the numbers that decided, in a sentence."""

    measures: dict[str, MeasureChange]
    judgement: str
    reason: str

    def to_dict(self) -> dict[str, Any]:
        """The lead as JSON writes it."""
        return {
            "measures": {name: change.to_dict() for name, change in self.measures.items()},
            "judgement": self.judgement,
            "reason": self.reason,
        }


@dataclass(frozen=True, slots=True)
class ShiftRange:
    """Estimated displacement in one direction, with its range, in mm."""

    estimate: float
    low: float
    high: float

    @property
    def is_certain(self) -> bool:
        """Whether the range excludes no displacement at all."""
        return self.low > 0 or self.high < 0

    def to_dict(self) -> dict[str, float]:
        """The range as JSON writes it."""
        return {"estimate": self.estimate, "low": self.low, "high": self.high}


@dataclass(frozen=True, slots=True)
class ElectrodeShift:
    """Where one chest electrode of the later recording lies against the earlier.

    ``qrs_points_to_shift`` says whether the QRS changed more than repeat noise makes it change,
    in the way of a shift.
    """

    up_mm: ShiftRange
    left_mm: ShiftRange
    qrs_points_to_shift: bool

    def worth_naming(self) -> dict[str, ShiftRange]:
        """The directions, ``"up"`` and ``"left"``, in which the QRS surely points to a shift."""
        if not self.qrs_points_to_shift:
            return {}
        directions = {"up": self.up_mm, "left": self.left_mm}
        return {
            name: size
            for name, size in directions.items()
            if size.is_certain and abs(size.estimate) >= SMALLEST_NAMED_MM
        }

    def to_dict(self) -> dict[str, Any]:
        """The shift as JSON writes it."""
        return {
            "up_mm": self.up_mm.to_dict(),
            "left_mm": self.left_mm.to_dict(),
            "qrs_points_to_shift": self.qrs_points_to_shift,
        }


@dataclass(frozen=True, slots=True)
class Placement:
    """What the QRS says of the placement, and how rarely placement explains the rest."""

    electrodes: dict[str, ElectrodeShift | None]
    tail_probability: float | None
    model_name: str
    model_version: str
    # Skin coordinates (left of the midline, above the fourth space) where V1 to V6 belong on
    # the trunks that fit this person, for drawing.
    sites_mm: dict[str, tuple[float, float]] = field(default_factory=dict)

    def to_dict(self) -> dict[str, Any]:
        """The placement as JSON writes it."""
        return {
            "electrodes": {
                name: None if shift is None else shift.to_dict()
                for name, shift in self.electrodes.items()
            },
            "tail_probability": self.tail_probability,
            "model": {"name": self.model_name, "version": self.model_version},
        }


@dataclass(frozen=True, slots=True)
class Overall:
    """The judgement of the pair: its code, what was found, and what to do next."""

    judgement: str
    sentence: str
    next_step: str

    def to_dict(self) -> dict[str, str]:
        """The overall judgement as JSON writes it."""
        return {
            "judgement": self.judgement,
            "sentence": self.sentence,
            "next_step": self.next_step,
        }


@dataclass(frozen=True, slots=True, eq=False)
class Comparison:
    """Two recordings of one person, compared.

    ``leads`` are the twelve; ``further`` are those beyond them that either recording holds.
    """

    settings: Settings
    made_at: datetime
    earlier: RecordingReport
    later: RecordingReport
    laid: LaidBeats
    bands: Bands
    beat_pairs: tuple[BeatPair, ...]
    leads: dict[str, LeadComparison]
    further: dict[str, FurtherLead]
    placement: Placement
    overall: Overall
    notices: tuple[Notice, ...]

    def reason_of(self, lead: str) -> str:
        """The numbers of any lead, and why it is judged so or not at all, in a sentence."""
        return (self.further if lead in self.further else self.leads)[lead].reason

    def to_dict(self) -> dict[str, Any]:
        """The comparison of the contract."""
        return head(self.settings, self.made_at) | {
            "earlier": self.earlier.to_dict(),
            "later": self.later.to_dict(),
            "beat_pairs": [pair.to_dict() for pair in self.beat_pairs],
            "leads": {name: lead.to_dict() for name, lead in self.leads.items()},
            "placement": self.placement.to_dict(),
            "overall": self.overall.to_dict(),
            "notices": [notice.to_dict() for notice in self.notices],
            "caveat": PLACEMENT_CAVEAT,
            "cautions": list(CAUTIONS),
        }


def head(settings: Settings, made_at: datetime) -> dict[str, Any]:
    """What every comparison JSON starts with."""
    return {
        "contract": CONTRACT,
        "made_by": {"name": PROGRAM_NAME, "version": program_version()},
        "made_at": made_at.isoformat(timespec="seconds"),
        "settings": settings.to_dict(),
    }
