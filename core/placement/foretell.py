"""What displacements of one chest electrode would do to the measures of its lead."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from core.measures.lead_values import COMPARED, measure_lead_values
from core.measures.report import RecordingReport
from core.placement.person import Person, shift_electrode
from core.recordings.leads import INDEPENDENT_LEADS, TWELVE_LEADS

FIRST_CHEST_ROW = 2  # of the eight independent leads
INDEPENDENT_ROWS = [TWELVE_LEADS.index(lead) for lead in INDEPENDENT_LEADS]


@dataclass(frozen=True, slots=True, eq=False)
class Displacements:
    """Draws of one electrode's displacement, each in a variant of the ensemble.

    Attributes
    ----------
    variant : ndarray of int, shape (n,)
        Position among the person's variants.
    left_mm, up_mm : ndarray, shape (n,)
    """

    variant: NDArray[np.int64]
    left_mm: NDArray[np.float64]
    up_mm: NDArray[np.float64]


@dataclass(frozen=True, slots=True, eq=False)
class Foretold:
    """Foretold changes of a lead's measures for many displacements.

    Attributes
    ----------
    change : dict of measure to ndarray, shape (n,)
        NaN where the moved lead lacks the wave.
    model_sd : dict of measure to ndarray, shape (n,)
        Standard deviation of what the model doesn't know of that change.
    gain : ndarray, shape (n, 8)
        Change of the lead at every instant = gain @ the eight leads.
    """

    change: dict[str, NDArray[np.float64]]
    model_sd: dict[str, NDArray[np.float64]]
    gain: NDArray[np.float64]


def foretell_measures(
    person: Person, report: RecordingReport, electrode: int, draws: Displacements
) -> Foretold:
    """Measure a lead as if its electrode had been displaced.

    Parameters
    ----------
    report : RecordingReport
        Of the recording whose electrode is displaced.
    electrode : int
        0 for V1 to 5 for V6.
    """
    points = report.points
    start = points.isoelectric_window().start
    beat = report.beat_mv[INDEPENDENT_ROWS, start : points.fiducials.t_offset + 1]
    anchors = _anchor_vectors(report, electrode)
    n = draws.variant.size
    gain = np.empty((n, 8))
    model_sd = {name: np.empty(n) for name in COMPARED}
    for position, variant in enumerate(person.variants):
        chosen = np.flatnonzero(draws.variant == position)
        if chosen.size == 0:
            continue
        shift = shift_electrode(
            person,
            variant,
            electrode,
            left_mm=draws.left_mm[chosen],
            up_mm=draws.up_mm[chosen],
        )
        gain[chosen] = shift.gain
        for name, anchor in anchors.items():
            scale = person.source_scale(variant, anchor)
            model_sd[name][chosen] = scale * np.sqrt(shift.variance)

    lead = FIRST_CHEST_ROW + electrode
    cut = points.starting_at(start)
    moved = measure_lead_values(beat[lead] + gain @ beat, cut)
    unmoved = measure_lead_values(beat[lead], cut)
    return Foretold({name: moved[name] - unmoved[name] for name in COMPARED}, model_sd, gain)


def _anchor_vectors(report: RecordingReport, electrode: int) -> dict[str, NDArray[np.float64]]:
    """The eight leads' values that a measure of one lead hangs on: their source's size."""
    beat = report.beat_mv[INDEPENDENT_ROWS]
    points = report.points
    qrs = beat[:, points.qrs_window()]
    lead = qrs[FIRST_CHEST_ROW + electrode]
    anchors = {
        name: report.values[name][INDEPENDENT_ROWS]
        for name in ("j_mv", "st_mv", "st_slope_mv_per_s", "qrs_net_mv_ms")
    }
    anchors["t_mv"] = beat[:, points.fiducials.t_peak]
    anchors["r_mv"] = qrs[:, int(np.argmax(lead))]
    anchors["s_mv"] = qrs[:, int(np.argmin(lead))]
    return anchors
