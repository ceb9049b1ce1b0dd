"""Intervals of the beat and the QT corrected for rate."""

from __future__ import annotations


def corrected_qt_ms(qt_ms: float, rr_s: float) -> dict[str, float]:
    """QTc by four published formulas, in ms.

    Bazett QT/sqrt(RR), Fridericia QT/cbrt(RR), Framingham QT + 154 (1 - RR),
    Hodges QT + 1.75 (rate - 60); QT in ms, RR in s.
    """
    return {
        "bazett": float(qt_ms / rr_s**0.5),
        "fridericia": float(qt_ms / rr_s ** (1.0 / 3.0)),
        "framingham": qt_ms + 154.0 * (1.0 - rr_s),
        "hodges": qt_ms + 1.75 * (60.0 / rr_s - 60.0),
    }
