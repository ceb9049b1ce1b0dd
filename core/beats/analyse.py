"""From a recording to its conditioned signal, its beats and its representative beat.

Wander and beats need each other: the wander is what is left when the beats are taken away,
the beats are cleanest when the wander is. A few rounds settle both.
"""

from __future__ import annotations

from dataclasses import dataclass, field, replace

import numpy as np
from numpy.typing import NDArray

from core.beats.alignment import cut_windows, lags_to_template, shifted, top_of_parabola
from core.beats.detection import detect_beats, slope_power, stands_out, telling_of
from core.beats.drowned import drowned_leads
from core.beats.kinds import SAME_SHAPE, dominant_beat, premature, shape_correlation
from core.beats.representative import beat_locked_part, representative_of
from core.conditioning.gaps import bridge_gaps
from core.conditioning.mains import estimate_mains
from core.conditioning.pacing import bridge_spikes, find_spikes
from core.conditioning.wander import estimate_wander
from core.errors import NotEnoughBeats
from core.recordings.leads import independent_from_twelve
from core.recordings.recording import Recording

FEWEST_BEATS = 3
FEWEST_SPIKES = 3
QRS_HALF_S = 0.07  # half of the stretch that is compared and aligned
LARGEST_LAG_S = 0.06
LARGEST_LATER_LAG_S = 0.012  # once the beats lie on one another
ROUNDS = 3
# Window of the representative beat: these shares of the usual interval, at most so long.
BEFORE_SHARE, LONGEST_BEFORE_S = 0.38, 0.40
AFTER_SHARE, LONGEST_AFTER_S = 0.62, 0.66
# A beat whose distance from the representative is this many times the usual is noisy.
NOISY_TIMES = 3.0
# Stretch around a beat of another kind that tells nothing of the wander.
FOREIGN_BEFORE_S, FOREIGN_AFTER_S = 0.25, 0.60


@dataclass(frozen=True, slots=True)
class Beat:
    """One QRS: where its R is, whether it is in the representative beat, and why not."""

    r_time_s: float
    used: bool
    why_not: str | None

    def to_dict(self) -> dict[str, float | bool | str | None]:
        """The beat as JSON writes it."""
        return {"r_time_s": self.r_time_s, "used": self.used, "why_not": self.why_not}


@dataclass(frozen=True, slots=True, eq=False)
class BeatAnalysis:
    """Beats of one recording, of its eight independent leads.

    Attributes
    ----------
    signal_mv : ndarray, shape (8, n_samples)
        Wander and mains interference taken out.
    wander_mv, hum_mv : ndarray, shape (8, n_samples)
        What was taken out.
    residual_mv : ndarray, shape (8, n_samples)
        The recording less the representative beat laid at every beat; straight lines where
        that says nothing.
    beats : tuple of Beat
        Every QRS found, in order.
    aligned_mv : ndarray, shape (n_used, 8, n)
        The beats used, each moved by a fraction of a sample so that they lie on one another.
    representative_mv : ndarray, shape (8, n)
    r_index : int
        Sample of R in the representative beat.
    spikes : ndarray of int
        Samples of the pacing spikes that were bridged.
    drowned : ndarray of bool, shape (8,)
        Leads in which no QRS can be told from the noise; the others alone decide on beats.
    """

    sampling_rate_hz: float
    signal_mv: NDArray[np.float64]
    wander_mv: NDArray[np.float64]
    hum_mv: NDArray[np.float64]
    residual_mv: NDArray[np.float64]
    beats: tuple[Beat, ...]
    aligned_mv: NDArray[np.float64]
    representative_mv: NDArray[np.float64]
    r_index: int
    drowned: NDArray[np.bool_]
    spikes: NDArray[np.int64] = field(default_factory=lambda: np.empty(0, dtype=np.int64))

    @property
    def paced(self) -> bool:
        """Whether the recording holds pacing spikes, rather than a stray artefact or two."""
        return self.spikes.size >= FEWEST_SPIKES

    @property
    def telling_mv(self) -> NDArray[np.float64]:
        """The representative beat in the leads that are not drowned."""
        return np.asarray(self.representative_mv[~self.drowned])

    @property
    def used(self) -> tuple[int, ...]:
        """Indices of the beats that are in the representative beat."""
        return tuple(index for index, beat in enumerate(self.beats) if beat.used)


def analyse_beats(recording: Recording) -> BeatAnalysis:
    """Find the beats of a recording and the beat that stands for them.

    Raises
    ------
    NotEnoughBeats
        If fewer than three beats of one kind, clear of the ends, are found.
    """
    name, rate = recording.source.name, recording.sampling_rate_hz
    raw = independent_from_twelve(recording.signal_mv.T)
    missing = np.isnan(raw)
    raw = bridge_gaps(np.where(missing, 0.0, raw), missing)
    # A lead that holds nothing at all is a matter of its own grade, not of every beat.
    gap = np.asarray(missing[~missing.all(axis=1)].any(axis=0))
    # Hum is a row of spikes; a lead with pacing spikes stands out whatever else it holds.
    spikes = find_spikes(raw[telling_of(stands_out(slope_power(raw, rate)))], rate)
    raw = bridge_spikes(raw, spikes, rate)

    centres = detect_beats(raw, rate)
    if centres.size < FEWEST_BEATS:
        raise NotEnoughBeats(_too_few(name, recording.duration_s, centres.size))
    drowned = drowned_leads(raw, centres, rate)
    return replace(_Rounds(name, rate, raw, gap, centres, drowned).settle(), spikes=spikes)


def _too_few(name: str, duration_s: float, n: int) -> str:
    beats = "no beat" if n == 0 else f"only {n} usable beat{'s' if n > 1 else ''}"
    return (
        f"{name}: {beats} found in {duration_s:.1f} s; at least {FEWEST_BEATS} of one kind are "
        "needed. Record 10 s with all electrodes well attached."
    )


class _Rounds:
    """The rounds of one analysis; everything they share."""

    def __init__(
        self,
        name: str,
        rate: float,
        raw: NDArray[np.float64],
        gap: NDArray[np.bool_],
        centres: NDArray[np.int64],
        drowned: NDArray[np.bool_],
    ) -> None:
        self.name, self.rate, self.raw, self.gap = name, rate, raw, gap
        self.drowned, self.telling = drowned, ~drowned
        self.n_samples = raw.shape[1]
        usual_rr_s = float(np.median(np.diff(centres))) / rate
        self.before = round(min(BEFORE_SHARE * usual_rr_s, LONGEST_BEFORE_S) * rate)
        self.after = round(min(AFTER_SHARE * usual_rr_s, LONGEST_AFTER_S) * rate)
        self.half = min(round(QRS_HALF_S * rate), self.before, self.after - 1)
        self.lag, self.later_lag = (
            max(2, round(lag_s * rate)) for lag_s in (LARGEST_LAG_S, LARGEST_LATER_LAG_S)
        )
        self.centres = centres.astype(np.float64)
        self.signal = raw

    def settle(self) -> BeatAnalysis:
        qrs = cut_windows(self.raw, self._whole(), self.half, self.half)
        template = qrs[dominant_beat(qrs[:, self.telling])]
        for _ in range(2):
            self._align(template, self.lag)
            qrs = self._aligned(self.half, self.half, np.arange(self.centres.size))
            alike = self._likeness(qrs, template) >= SAME_SHAPE
            if not alike.any():
                raise NotEnoughBeats(_too_few(self.name, self.n_samples / self.rate, 0))
            template = np.median(qrs[alike], axis=0)
        self._put_r_at_largest(template)
        template = np.median(self._aligned(self.half, self.half, np.flatnonzero(alike)), axis=0)

        for _ in range(ROUNDS):
            why_not = self._reasons(template)
            used = self._enough(why_not)
            aligned = self._aligned(self.before, self.after, used)
            representative = representative_of(aligned)
            self._take_out_wander(representative)
            template = representative[:, self.before - self.half : self.before + self.half]
            self._align(template, self.later_lag)
        self._take_out_mains(representative, used)

        aligned = self._aligned(self.before, self.after, used)
        representative = representative_of(aligned)
        for index in used[self._noisy(aligned, representative)]:
            why_not[index] = "noisy"
        used = self._enough(why_not)
        aligned = self._aligned(self.before, self.after, used)
        return BeatAnalysis(
            sampling_rate_hz=self.rate,
            signal_mv=self.signal,
            wander_mv=self.wander,
            hum_mv=self.hum,
            residual_mv=bridge_gaps(*self._residual(representative)),
            beats=tuple(
                Beat(float(centre / self.rate), reason is None, reason)
                for centre, reason in zip(self.centres, why_not, strict=True)
            ),
            aligned_mv=aligned,
            representative_mv=representative_of(aligned),
            r_index=self.before,
            drowned=self.drowned,
        )

    def _whole(self) -> NDArray[np.int64]:
        return np.rint(self.centres).astype(np.int64)

    def _aligned(self, before: int, after: int, chosen: NDArray[np.int64]) -> NDArray[np.float64]:
        whole = self._whole()[chosen]
        windows = cut_windows(self.signal, whole, before, after)
        return shifted(windows, self.centres[chosen] - whole)

    def _align(self, template: NDArray[np.float64], lag: int) -> None:
        """Move every centre to where the template fits best."""
        whole = self._whole()
        reach = self.half + lag
        windows = cut_windows(self.signal[self.telling], whole, reach, reach)
        moved = whole + lags_to_template(windows, template[self.telling], lag)
        self.centres = np.clip(moved, 0, self.n_samples - 1)

    def _likeness(
        self, qrs: NDArray[np.float64], template: NDArray[np.float64]
    ) -> NDArray[np.float64]:
        return shape_correlation(qrs[:, self.telling], template[self.telling])

    def _put_r_at_largest(self, template: NDArray[np.float64]) -> None:
        """R is where the template's leads together are largest, to a fraction of a sample."""
        level = np.median(template[:, [0, -1]], axis=1, keepdims=True)
        power = np.mean((template - level)[self.telling] ** 2, axis=0)
        top = int(np.clip(np.argmax(power), 1, power.size - 2))
        fraction = top_of_parabola(*power[top - 1 : top + 2])
        self.centres = np.clip(self.centres + top + fraction - self.half, 0, self.n_samples - 1)

    def _reasons(self, template: NDArray[np.float64]) -> list[str | None]:
        """Why each beat is left out of the representative beat; None where it is used."""
        whole = self._whole()
        qrs = self._aligned(self.half, self.half, np.arange(whole.size))
        same = self._likeness(qrs, template)
        early = premature(self.centres / self.rate)
        reasons: list[str | None] = []
        for index, centre in enumerate(whole):
            start, end = centre - self.before, centre + self.after
            if same[index] < SAME_SHAPE:
                reasons.append("another shape")
            elif early[index]:
                reasons.append("premature")
            elif start < 0 or end > self.n_samples:
                reasons.append("cut off by the end of the recording")
            elif self.gap[start:end].any():
                reasons.append("samples missing")
            else:
                reasons.append(None)
        self.foreign_beats = np.array([reason == "another shape" for reason in reasons])
        return reasons

    def _enough(self, why_not: list[str | None]) -> NDArray[np.int64]:
        used = np.array([i for i, reason in enumerate(why_not) if reason is None], dtype=np.int64)
        if used.size < FEWEST_BEATS:
            raise NotEnoughBeats(_too_few(self.name, self.n_samples / self.rate, used.size))
        return used

    def _residual(
        self, representative: NDArray[np.float64]
    ) -> tuple[NDArray[np.float64], NDArray[np.bool_]]:
        """The recording less its beat-locked part, and where that part does not hold."""
        whole = self._whole()
        order = np.argsort(whole, kind="stable")
        locked = beat_locked_part(representative, self.before, whole[order], self.n_samples)
        foreign = self.gap.copy()
        for centre in whole[self.foreign_beats]:
            start = max(0, centre - round(FOREIGN_BEFORE_S * self.rate))
            foreign[start : centre + round(FOREIGN_AFTER_S * self.rate)] = True
        return self.raw - locked, foreign

    def _take_out_wander(self, representative: NDArray[np.float64]) -> None:
        residual, foreign = self._residual(representative)
        self.wander = estimate_wander(residual, foreign, sampling_rate_hz=self.rate)
        self.signal = self.raw - self.wander

    def _take_out_mains(self, representative: NDArray[np.float64], used: NDArray[np.int64]) -> None:
        whole = self._whole()
        order = np.sort(whole)

        def less_locked_part(signals: NDArray[np.float64]) -> NDArray[np.float64]:
            windows = cut_windows(signals, whole[used], self.before, self.after)
            mean = windows.mean(axis=0)
            return signals - beat_locked_part(mean, self.before, order, self.n_samples)

        residual, foreign = self._residual(representative)
        self.hum = estimate_mains(residual, foreign, less_locked_part, sampling_rate_hz=self.rate)
        self.signal = self.signal - self.hum

    def _noisy(
        self, aligned: NDArray[np.float64], representative: NDArray[np.float64]
    ) -> NDArray[np.bool_]:
        """Beats that lie much farther from the representative than beats usually do."""
        away = np.sqrt(np.mean((aligned - representative)[:, self.telling] ** 2, axis=(1, 2)))
        noisy = away > NOISY_TIMES * np.median(away)
        return noisy if aligned.shape[0] - noisy.sum() >= FEWEST_BEATS else np.zeros_like(noisy)
