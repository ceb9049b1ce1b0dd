"""The state of the bench. Views write to it and listen to it; none knows another."""

from __future__ import annotations

from enum import Enum
from pathlib import Path

from PySide6.QtCore import QObject, Signal

from app.state.stated import Stated
from core.comparison.judge import BY_WEIGHT, STEADY
from core.comparison.results import Comparison
from core.recordings.leads import TWELVE_LEADS


class Phase(Enum):
    """What the bench is doing."""

    EMPTY = "empty"
    WORKING = "working"
    JUDGED = "judged"
    REFUSED = "refused"


class BenchState(QObject):
    """Which pair is open, how far its comparison is, and which lead is looked at."""

    phase_changed = Signal()
    pair_changed = Signal()
    progress_changed = Signal()
    lead_changed = Signal()

    def __init__(self) -> None:
        super().__init__()
        self.phase = Phase.EMPTY
        self.earlier: Path | None = None
        self.later: Path | None = None
        self.stated: dict[Path, Stated] = {}
        self.comparison: Comparison | None = None
        self.refusal = ""
        self.liftable_stops: tuple[str, ...] = ()
        self.progress = 0.0
        self.steps: list[str] = []
        self.lead = "V2"

    @property
    def has_comparison(self) -> bool:
        """Whether there is a result to look at and to export."""
        return self.phase is Phase.JUDGED

    @property
    def has_pair(self) -> bool:
        """Whether both recordings are chosen."""
        return self.earlier is not None and self.later is not None

    @property
    def progress_words(self) -> str:
        """The step that is being done, in words."""
        return self.steps[-1] if self.steps else ""

    def choose(self, earlier: Path | None, later: Path | None) -> None:
        """Choose recordings; a comparison of others is put away.

        What was stated of a table holds as long as it is one of the two.
        """
        self.earlier, self.later = earlier, later
        self.stated = {
            path: stated for path, stated in self.stated.items() if path in (earlier, later)
        }
        self.comparison = None
        self.refusal, self.liftable_stops = "", ()
        self._enter(Phase.EMPTY)
        self.pair_changed.emit()

    def remember(self, table: Path, stated: Stated) -> None:
        """The reader said what one of the two does not say of itself, or what is wanted of it."""
        self.stated[table] = self.stated.get(table, Stated()).joined(stated)

    def forget(self, *opened: Path) -> None:
        """Files that are opened anew are asked anew."""
        for path in opened:
            self.stated.pop(path, None)

    def set_order(self, earlier: Path, later: Path) -> None:
        """Which of the two chosen recordings is the earlier has been told by their times."""
        self.earlier, self.later = earlier, later
        self.pair_changed.emit()

    def begin(self) -> None:
        """The comparison of the chosen pair has started."""
        self.comparison = None
        self.progress, self.steps = 0.0, ["reading the recordings"]
        self._enter(Phase.WORKING)
        self.progress_changed.emit()

    def advance(self, share: float, words: str) -> None:
        """The comparison has come so far."""
        self.progress = share
        if words != self.progress_words:
            self.steps.append(words)
        self.progress_changed.emit()

    def finish(self, comparison: Comparison) -> None:
        """The comparison is done; the lead that matters most comes into view."""
        self.comparison = comparison
        # Before any view looks: the lead that was in view may not be in this pair.
        before, self.lead = self.lead, weightiest_lead(comparison)
        self._enter(Phase.JUDGED)
        if self.lead != before:
            self.lead_changed.emit()

    def refuse(self, reason: str, liftable_stops: tuple[str, ...] = ()) -> None:
        """The pair cannot be compared, unless the reader lifts what stops it."""
        self.comparison = None
        self.refusal, self.liftable_stops = reason, liftable_stops
        self._enter(Phase.REFUSED)

    def stop(self) -> None:
        """The reader stopped the comparison."""
        self._enter(Phase.EMPTY)

    def select_lead(self, lead: str) -> None:
        """Look at one of the twelve leads, or at a further one of the pair."""
        further = () if self.comparison is None else self.comparison.further
        if (lead in TWELVE_LEADS or lead in further) and lead != self.lead:
            self.lead = lead
            self.lead_changed.emit()

    def _enter(self, phase: Phase) -> None:
        self.phase = phase
        self.phase_changed.emit()


def weightiest_lead(comparison: Comparison) -> str:
    """The lead of the weightiest judgement that changed most for its noise; V2 if all steady."""

    def weight(lead: str) -> tuple[int, float]:
        result = comparison.leads[lead]
        changes = [
            abs(m.change) / m.noise_high
            for m in (result.measures["st_mv"], result.measures["t_mv"])
            if m.change is not None and m.noise_high
        ]
        return -BY_WEIGHT.index(result.judgement), max(changes, default=0.0)

    best = max(comparison.leads, key=weight)
    return "V2" if comparison.leads[best].judgement == STEADY else best
