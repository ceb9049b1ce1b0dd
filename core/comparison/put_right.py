"""Limb leads put right where the other recording shows that the cables were interchanged."""

from __future__ import annotations

from dataclasses import replace

from core.comparison.laid import lay_beats
from core.comparison.witness import chest_interchange_between, limb_interchange_between
from core.measures.report import RecordingReport, measure
from core.placement.moved import usable_independent
from core.placement.own_evidence import rise_by_undoing
from core.quality.interchange import Interchange, with_interchange_undone
from core.settings import Settings
from core.torso.ensemble import load_ensemble
from core.wording import notices as say


def put_right(
    earlier: RecordingReport, later: RecordingReport, settings: Settings
) -> tuple[RecordingReport, RecordingReport, Interchange | None]:
    """Both reports, limb leads put right if need be, and the chest interchange found.

    Which recording holds a limb interchange is told by the torso ensemble: undoing it raises the
    evidence of the faulty recording and lowers that of the other. Chest leads stay as recorded.
    """
    if not (usable_independent(earlier.quality) & usable_independent(later.quality)).all():
        return earlier, later, None  # a lead without a tracing cannot bear witness
    laid = lay_beats(earlier, later, by_chest=True)
    limb = limb_interchange_between(laid.waves_of(laid.earlier_mv), laid.waves_of(laid.later_mv))
    if limb is not None:
        ensemble = load_ensemble()
        rise_earlier, rise_later = (
            rise_by_undoing(report, ensemble, (one,))[0]
            for report, one in ((earlier, limb.reversed), (later, limb))
        )
        if rise_earlier > rise_later:
            earlier = _remeasured(earlier, limb.reversed, settings)
        else:
            later = _remeasured(later, limb, settings)
    laid = lay_beats(earlier, later)
    chest = chest_interchange_between(laid.waves_of(laid.earlier_mv), laid.waves_of(laid.later_mv))
    return earlier, later, chest


def _remeasured(report: RecordingReport, one: Interchange, settings: Settings) -> RecordingReport:
    right = measure(with_interchange_undone(report.recording, one), settings)
    return replace(right, notices=(*right.notices, say.interchanged(one.electrodes)))
