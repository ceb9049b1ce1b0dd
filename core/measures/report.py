"""Measure one recording: the recording report."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import NDArray

from core.beats.analyse import BeatAnalysis, analyse_beats
from core.beats.fiducials import find_fiducials
from core.conditioning.calm import calm_outside_qrs
from core.json_numbers import number_or_none, numbers_or_none
from core.measures.further import FurtherMeasures, measure_further_leads
from core.measures.intervals import corrected_qt_ms
from core.measures.lead_values import (
    Points,
    isoelectric_level,
    measure_lead_values,
    qrs_waves,
    signed_extreme,
)
from core.measures.vectors import angle_between_deg, frontal_axis_deg, kors_vector
from core.notices import Notice
from core.quality.faults import Fault, find_faults
from core.quality.lead_quality import SAMPLES_MISSING, LeadQuality, grade_leads
from core.quality.limb_algebra import limb_lead_contradiction_mv
from core.quality.right_leg import right_leg_interchange
from core.recordings.leads import (
    INDEPENDENT_LEADS,
    TWELVE_LEADS,
    independent_from_twelve,
    twelve_from_independent,
)
from core.recordings.recording import Recording
from core.settings import Settings
from core.wording import notices as say
from core.wording.caution import CAUTIONS

CONTRACT = "samespot-recording/1"


@dataclass(frozen=True, slots=True, eq=False)
class RecordingReport:
    """All that is measured on one recording.

    Attributes
    ----------
    beat_mv : ndarray, shape (12, n)
        The representative beat as it is measured and drawn: isoelectric line at 0, calmed
        outside the QRS.
    averaged_mv : ndarray, shape (12, n)
        The same beat as averaging left it.
    values : dict of name to ndarray, shape (12,)
        The compared measures of the representative beat; NaN where the wave isn't there.
    beat_values : dict of name to ndarray, shape (n_used, 12)
        The same of every beat used.
    q_mv, p_mv, noise_uv : ndarray, shape (12,)
    further : FurtherMeasures
        What is measured on leads beyond the twelve.
    """

    recording: Recording
    analysis: BeatAnalysis
    points: Points
    beat_mv: NDArray[np.float64]
    averaged_mv: NDArray[np.float64]
    values: dict[str, NDArray[np.float64]]
    beat_values: dict[str, NDArray[np.float64]]
    q_mv: NDArray[np.float64]
    p_mv: NDArray[np.float64]
    noise_uv: NDArray[np.float64]
    quality: tuple[LeadQuality, ...]
    rr_s: float
    notices: tuple[Notice, ...]
    further: FurtherMeasures

    @property
    def step_ms(self) -> float:
        """Time from one sample of the representative beat to the next."""
        return 1000.0 / self.recording.sampling_rate_hz

    @property
    def time_ms(self) -> NDArray[np.float64]:
        """Times of the samples of the representative beat, relative to R."""
        samples = np.arange(self.beat_mv.shape[1]) - self.analysis.r_index
        return np.asarray(samples * self.step_ms)

    @property
    def heart_rate_per_min(self) -> float:
        """From the mean interval between beats."""
        return 60.0 / self.rr_s

    @property
    def pr_ms(self) -> float | None:
        """From the onset of P to the onset of the QRS."""
        fiducials = self.points.fiducials
        if fiducials.p_onset is None:
            return None
        return (fiducials.qrs_onset - fiducials.p_onset) * self.step_ms

    @property
    def qrs_ms(self) -> float:
        """Duration of the QRS."""
        fiducials = self.points.fiducials
        return (fiducials.qrs_offset - fiducials.qrs_onset) * self.step_ms

    @property
    def qt_ms(self) -> float:
        """From the onset of the QRS to the end of T."""
        fiducials = self.points.fiducials
        return (fiducials.t_offset - fiducials.qrs_onset) * self.step_ms

    @property
    def qtc_ms(self) -> dict[str, float]:
        """QT corrected for rate, by formula."""
        return corrected_qt_ms(self.qt_ms, self.rr_s)

    def area_mv_ms(self, start: int, stop: int) -> NDArray[np.float64]:
        """Area of each lead from one sample to another of the representative beat."""
        return np.asarray(self.beat_mv[:, start : stop + 1].sum(axis=1) * self.step_ms)

    def axes_deg(self) -> dict[str, float | None]:
        """Frontal axes of P, QRS and T, from their areas."""
        f = self.points.fiducials
        axes: dict[str, float | None] = {"p": None}
        if f.p_onset is not None and f.p_offset is not None:
            wave = self.beat_mv[:, f.p_onset : f.p_offset + 1]
            line = np.linspace(wave[:, 0], wave[:, -1], wave.shape[1], axis=1)
            axes["p"] = _axis((wave - line).sum(axis=1) * self.step_ms)
        axes["qrs"] = _axis(self.area_mv_ms(f.qrs_onset, f.qrs_offset))
        axes["t"] = _axis(self.area_mv_ms(f.qrs_offset, f.t_offset))
        return axes

    def spatial(self) -> dict[str, Any]:
        """QRS-T angle between the mean vectors, ST vector, ventricular gradient."""
        f = self.points.fiducials
        qrs = kors_vector(independent_from_twelve(self._area(f.qrs_onset, f.qrs_offset)))
        t = kors_vector(independent_from_twelve(self._area(f.qrs_offset, f.t_offset)))
        st = kors_vector(independent_from_twelve(self.values["st_mv"][:, None]))
        return {
            "qrs_t_angle_deg": angle_between_deg(qrs[:, 0], t[:, 0]),
            "st_vector_mv": numbers_or_none(st[:, 0]),
            "ventricular_gradient_mv_ms": numbers_or_none((qrs + t)[:, 0]),
        }

    def _area(self, start: int, stop: int) -> NDArray[np.float64]:
        return self.area_mv_ms(start, stop)[:, None]

    def to_dict(self) -> dict[str, Any]:
        """The recording report of the contract."""
        recording, analysis = self.recording, self.analysis
        report = describe(recording, self.notices)
        report |= {
            "beats": [beat.to_dict() for beat in analysis.beats],
            "heart_rate_per_min": self.heart_rate_per_min,
            "pr_ms": self.pr_ms,
            "qrs_ms": self.qrs_ms,
            "qt_ms": self.qt_ms,
            "qtc_ms": self.qtc_ms,
            "axes_deg": self.axes_deg(),
            "spatial": self.spatial(),
            "fiducials_ms": self.points.fiducials.in_ms(
                analysis.r_index, recording.sampling_rate_hz
            ),
            "leads": {lead: self._lead_dict(row) for row, lead in enumerate(TWELVE_LEADS)},
            "further_measures": self.further.to_dict(),
            "representative_beat": {
                "start_ms": float(self.time_ms[0]),
                "step_ms": self.step_ms,
                "leads": {
                    lead: self.averaged_mv[row].tolist() for row, lead in enumerate(TWELVE_LEADS)
                },
            },
        }
        return report

    def _lead_dict(self, row: int) -> dict[str, Any]:
        usable = self.quality[row].usable
        numbers = {name: values[row] for name, values in self.values.items()}
        numbers |= {"q_mv": self.q_mv[row], "p_mv": self.p_mv[row]}
        lead: dict[str, Any] = {
            name: number_or_none(number) if usable else None for name, number in numbers.items()
        }
        lead["noise_uv"] = number_or_none(self.noise_uv[row])
        return lead


def describe(recording: Recording, notices: tuple[Notice, ...] = ()) -> dict[str, Any]:
    """The part of a recording report that needs no measurement, the rest null."""
    at = recording.recorded_at
    return {
        "contract": CONTRACT,
        "source": recording.source.to_dict(),
        "subject": recording.subject.to_dict(),
        "recorded_at": None if at is None else at.isoformat(),
        "sampling_rate_hz": recording.sampling_rate_hz,
        "duration_s": recording.duration_s,
        "leads_present": list(recording.leads_present),
        "leads_derived": list(recording.leads_derived),
        "further_leads": list(recording.further_leads),
        "interchange_undone": list(recording.interchange_undone),
        "filters": recording.filters.to_dict(),
        "electrode_placement": recording.electrode_placement,
        "beats": [],
        **dict.fromkeys(
            (
                "heart_rate_per_min",
                "pr_ms",
                "qrs_ms",
                "qt_ms",
                "qtc_ms",
                "axes_deg",
                "spatial",
                "fiducials_ms",
                "leads",
                "further_measures",
                "representative_beat",
            )
        ),
        "notices": [notice.to_dict() for notice in notices or recording.notices],
        "cautions": list(CAUTIONS),
    }


def measure(recording: Recording, settings: Settings | None = None) -> RecordingReport:
    """Measure a recording.

    Parameters
    ----------
    recording : Recording
    settings : Settings, optional

    Returns
    -------
    RecordingReport

    Raises
    ------
    NotEnoughBeats
        If fewer than three beats of one kind can be used.
    """
    settings = settings or Settings()
    analysis = analyse_beats(recording)
    rate = recording.sampling_rate_hz
    fiducials = find_fiducials(analysis)
    points = Points(rate, fiducials, settings.st_point_ms)

    def calmed(beats: NDArray[np.float64]) -> NDArray[np.float64]:
        return calm_outside_qrs(
            beats, fiducials.qrs_onset, fiducials.qrs_offset, sampling_rate_hz=rate
        )

    def twelve(beats: NDArray[np.float64]) -> NDArray[np.float64]:
        leads = twelve_from_independent(beats)
        return leads - isoelectric_level(leads, points)

    beat_mv = twelve(calmed(analysis.representative_mv))
    beats_mv = twelve(calmed(analysis.aligned_mv))
    residual_mv = twelve_from_independent(analysis.aligned_mv - analysis.representative_mv)
    _, _, q_mv = qrs_waves(beat_mv[:, points.qrs_window()])
    drowned = [lead for lead, lost in zip(INDEPENDENT_LEADS, analysis.drowned, strict=True) if lost]
    quality = grade_leads(recording, drowned)
    first = fiducials.qrs_onset if fiducials.p_onset is None else fiducials.p_onset
    # A lead that was lost on its way contradicts the others; one that was recorded flat does not.
    flat = None
    lost = any(grade.reason == SAMPLES_MISSING for grade in quality[:3])
    contradiction_mv = limb_lead_contradiction_mv(recording)
    if not lost and contradiction_mv is None:
        flat = right_leg_interchange(beat_mv[:3, first : fiducials.t_offset + 1])
    faults = find_faults(
        TWELVE_LEADS,
        twelve_from_independent(analysis.residual_mv),
        twelve_from_independent(analysis.wander_mv),
        twelve_from_independent(analysis.hum_mv),
        sampling_rate_hz=rate,
    )
    return RecordingReport(
        recording=recording,
        analysis=analysis,
        points=points,
        beat_mv=beat_mv,
        averaged_mv=twelve(analysis.representative_mv),
        values=measure_lead_values(beat_mv, points),
        beat_values=measure_lead_values(beats_mv, points),
        q_mv=q_mv,
        p_mv=_p_wave_mv(beat_mv, points),
        noise_uv=1000.0 * np.sqrt(np.mean(residual_mv**2, axis=(0, 2))),
        quality=quality,
        rr_s=float(np.mean(np.diff([beat.r_time_s for beat in analysis.beats]))),
        notices=(
            *recording.notices,
            *_notices(analysis, quality, points, faults, flat, contradiction_mv),
        ),
        further=measure_further_leads(recording, analysis, points),
    )


def _axis(area: NDArray[np.float64]) -> float | None:
    return frontal_axis_deg(
        float(area[TWELVE_LEADS.index("I")]), float(area[TWELVE_LEADS.index("aVF")])
    )


def _p_wave_mv(beat_mv: NDArray[np.float64], points: Points) -> NDArray[np.float64]:
    f = points.fiducials
    if f.p_onset is None or f.p_offset is None:
        return np.full(beat_mv.shape[0], np.nan)
    level = beat_mv[:, f.p_onset : f.p_onset + 1]
    return signed_extreme(beat_mv[:, f.p_onset : f.p_offset + 1] - level)


def _notices(
    analysis: BeatAnalysis,
    quality: tuple[LeadQuality, ...],
    points: Points,
    faults: tuple[Fault, ...],
    flat: tuple[str, str] | None,
    contradiction_mv: float | None,
) -> tuple[Notice, ...]:
    found = []
    left_out = [beat.why_not for beat in analysis.beats if beat.why_not is not None]
    if left_out:
        found.append(say.beats_left_out(left_out, len(analysis.beats)))
    unusable = [(grade.lead, grade.reason) for grade in quality if not grade.usable]
    if unusable:
        found.append(say.leads_unusable(unusable))
    unusable_leads = [lead for lead, _ in unusable]
    disturbed = [fault for fault in faults if fault.lead not in unusable_leads]
    if disturbed:
        found.append(say.leads_disturbed([(f.kind, f.lead, f.size_mv) for f in disturbed]))
    if contradiction_mv is not None:
        found.append(say.limb_leads_disagree(contradiction_mv))
    if points.fiducials.p_onset is None:
        found.append(say.no_p_wave())
    if analysis.paced:
        found.append(say.paced())
    if flat is not None:
        found.append(say.right_leg_interchanged(*flat))
    return tuple(found)
