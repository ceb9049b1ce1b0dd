"""A person weighed by one recording, and what the model says of moves of one electrode."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from core import ElectrodeMove, Recording, RecordingReport
from core.measures.report import measure
from core.placement.foretell import INDEPENDENT_ROWS
from core.placement.moved import mean_gain, usable_independent, ventricular_beat_mv
from core.placement.person import Person, shift_electrode, weigh_ensemble
from core.torso.ensemble import load_ensemble

EIGHT_DIRECTIONS = np.radians(np.arange(0, 360, 45))


@dataclass(frozen=True)
class Somebody:
    """``beat_mv`` is QRS to T of the eight leads."""

    report: RecordingReport
    beat_mv: NDArray[np.float64]
    person: Person

    @property
    def qrs_mv(self) -> NDArray[np.float64]:
        return self.report.beat_mv[INDEPENDENT_ROWS][:, self.report.points.qrs_window()]

    def lead(self, name: str) -> NDArray[np.float64]:
        return self.beat_mv[1 + int(name[1])]

    def moved(self, name: str, *, up_mm: float = 0.0, left_mm: float = 0.0) -> NDArray[np.float64]:
        move = ElectrodeMove(name, up_mm=up_mm, left_mm=left_mm)
        return self.lead(name) + mean_gain(self.person, move) @ self.beat_mv

    def moved_all_round(self, name: str, by_mm: float) -> NDArray[np.float64]:
        """The lead from eight sites around its own, shape (8, n)."""
        gains = [
            shift_electrode(
                self.person,
                variant,
                int(name[1]) - 1,
                left_mm=by_mm * np.cos(EIGHT_DIRECTIONS),
                up_mm=by_mm * np.sin(EIGHT_DIRECTIONS),
            ).gain
            for variant in self.person.variants
        ]
        return self.lead(name) + np.tensordot(self.person.weights, gains, axes=1) @ self.beat_mv

    def likeness(self, name: str, by_mm: float) -> float:
        """Correlation of a lead with itself from elsewhere, mean over eight directions."""
        moved = self.moved_all_round(name, by_mm)
        return float(np.corrcoef(self.lead(name), moved)[0, 1:].mean())


def weighed(recording: Recording) -> Somebody:
    report = measure(recording)
    beat = ventricular_beat_mv(report)
    person = weigh_ensemble(load_ensemble(), [beat], usable_independent(report.quality))
    return Somebody(report, beat, person)
