"""Where a time and a voltage lie in a plot."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray
from PySide6.QtCore import QRectF


@dataclass(frozen=True, slots=True)
class Scale:
    """A linear map from time (ms) and voltage (mV) to a rectangle."""

    rect: QRectF
    first_ms: float
    last_ms: float
    low_mv: float
    high_mv: float

    def x(self, time_ms: ArrayLike) -> NDArray[np.float64]:
        """Horizontal positions."""
        share = (np.asarray(time_ms) - self.first_ms) / (self.last_ms - self.first_ms)
        return self.rect.left() + share * self.rect.width()

    def y(self, millivolts: ArrayLike) -> NDArray[np.float64]:
        """Vertical positions; up is positive."""
        share = (np.asarray(millivolts) - self.low_mv) / (self.high_mv - self.low_mv)
        return self.rect.bottom() - share * self.rect.height()


def voltage_range(
    *curves: NDArray[np.float64], least_mv: float, margin: float = 0.06
) -> tuple[float, float]:
    """Range that holds all curves and 0, at least *least_mv* high."""
    low = min([0.0, *(float(np.nanmin(curve)) for curve in curves if not np.isnan(curve).all())])
    high = max([0.0, *(float(np.nanmax(curve)) for curve in curves if not np.isnan(curve).all())])
    missing = max(0.0, least_mv - (high - low))
    low, high = low - missing / 2, high + missing / 2
    room = margin * (high - low)
    return low - room, high + room
