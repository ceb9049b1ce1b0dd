"""Record an invented person: beats, breathing, noise, and what an amplifier adds."""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from core.recordings.leads import twelve_from_independent
from core.torso.build_ensemble import SolvedBody
from sample_records.maker.heart import Conduction, Injury, Ventricles, activation_ms, potentials_mv
from sample_records.maker.people import Person
from sample_records.maker.person import Leads

# A ventricular ectopic beat: from the right ventricle's apex, outside the conduction system.
ECTOPIC = Conduction(((40.0, 4.0, 22.0),), (0.0,), wall_m_per_s=0.45, endocardium_m_per_s=0.9)
BEFORE_S, AFTER_S = 0.28, 0.62
# Of the two atria: direction in the trunk's coordinates, middle before the QRS, width.
ATRIA = (
    ((0.30, -0.50, -0.80), -0.142, 0.017, 1.0),
    ((0.85, 0.35, -0.40), -0.108, 0.019, 0.8),
)
ATRIAL_MOMENT_MV = 4.6e-4
# Between breathing out and in, the heart sinks, moves back and turns by this much.
BREATH_SINKS_M, BREATH_BACK_M, BREATH_TURNS_DEG = 0.006, 0.002, 3.0


@dataclass(frozen=True, slots=True)
class Session:
    """How one recording is made."""

    rate_per_min: float
    seed: int
    shifts_mm: NDArray[np.float64]  # (6, 2): left, up of V1 to V6
    duration_s: float = 10.0
    sampling_rate_hz: float = 500.0
    injury: Injury | None = None
    ectopic_after: int | None = None  # an ectopic beat follows this one
    noise_mv: float = 0.008
    wander_mv: float = 0.06
    hum_mv: float = 0.003


class Recorder:
    """Makes recordings of one person in one solved trunk."""

    def __init__(self, person: Person, solved: SolvedBody, heart: Ventricles) -> None:
        self.person, self.heart = person, heart
        x, y, z = person.anatomy.heart_at_m
        breath_in = replace(
            person.anatomy,
            heart_at_m=(x, y + BREATH_BACK_M, z - BREATH_SINKS_M),
            axis_down_deg=person.anatomy.axis_down_deg + BREATH_TURNS_DEG,
        )
        self.leads = [
            Leads(solved, heart, anatomy, right_share=person.right_share)
            for anatomy in (person.anatomy, breath_in)
        ]
        self.activated_ms = activation_ms(heart, person.conduction)
        self.ectopic_ms = activation_ms(heart, ECTOPIC)

    def record(self, session: Session) -> NDArray[np.float64]:
        """Twelve leads, shape (n_samples, 12), in mV."""
        rng = np.random.default_rng(session.seed)
        rate = session.sampling_rate_hz
        n = round(session.duration_s * rate)
        breath_hz = rng.uniform(0.20, 0.30)
        breath_phase = rng.uniform(0, 2 * np.pi)
        beats = self._beat_times(session, rng, breath_hz, breath_phase)
        signal = np.zeros((8, n))
        weights = [leads.voxel_weights(session.shifts_mm) for leads in self.leads]
        atrial = self.leads[0].atrial_field(session.shifts_mm)
        for time_s, rr_s, ectopic in beats:
            depth = 0.5 - 0.5 * np.cos(2 * np.pi * breath_hz * time_s + breath_phase)
            by_voxel = (1 - depth) * weights[0] + depth * weights[1]
            first = max(0, int(np.ceil((time_s - BEFORE_S) * rate)))
            last = min(n, int((time_s + AFTER_S) * rate))
            if last <= first:
                continue
            since_s = np.arange(first, last) / rate - time_s
            signal[:, first:last] += self._ventricular(by_voxel, since_s, rr_s, ectopic, session)
            if not ectopic:
                signal[:, first:last] += _atrial(atrial, since_s)
        signal *= self.person.gain
        return twelve_from_independent(signal + _disturbances(session, rng, n, breath_hz)).T

    def _beat_times(
        self, session: Session, rng: np.random.Generator, breath_hz: float, phase: float
    ) -> list[tuple[float, float, bool]]:
        """Time, preceding interval and kind of every beat, the first just before the start."""
        usual = 60.0 / session.rate_per_min
        time_s = -rng.uniform(0.1, 0.9) * usual
        beats = [(time_s, usual, False)]
        while time_s < session.duration_s + 0.5:
            breathing = 0.025 * np.sin(2 * np.pi * breath_hz * time_s + phase)
            rr = usual + breathing + rng.normal(0.0, 0.008)
            if session.ectopic_after is not None and len(beats) == session.ectopic_after + 1:
                beats.append((time_s + 0.62 * usual, 0.62 * usual, True))
                time_s, rr = time_s + 0.62 * usual, 1.38 * usual  # a compensatory pause
            time_s += rr
            beats.append((time_s, rr, False))
        return beats

    def _ventricular(
        self,
        by_voxel: NDArray[np.float64],
        since_s: NDArray[np.float64],
        rr_s: float,
        ectopic: bool,
        session: Session,
    ) -> NDArray[np.float64]:
        potential = potentials_mv(
            self.heart,
            self.ectopic_ms if ectopic else self.activated_ms,
            since_s * 1000.0,
            self.person.repolarisation,
            duration_scale=min(rr_s, 1.2) ** (1.0 / 3.0),
            injury=session.injury,
        )
        wave = by_voxel @ potential
        # An amplifier passes no steady voltage: what the resting heart gives is its zero.
        rest = potentials_mv(
            self.heart,
            self.activated_ms,
            np.array([-1000.0]),
            self.person.repolarisation,
            injury=session.injury,
        )
        return np.asarray(wave - by_voxel @ rest)


def _atrial(field: NDArray[np.float64], since_s: NDArray[np.float64]) -> NDArray[np.float64]:
    wave = np.zeros((8, since_s.size))
    for atrium, (direction, middle_s, width_s, size) in enumerate(ATRIA):
        course = np.exp(-0.5 * ((since_s - middle_s) / width_s) ** 2)
        moment = ATRIAL_MOMENT_MV * size * np.array(direction)
        wave += np.outer(field[:, atrium] @ moment, course)
    return wave


def _disturbances(
    session: Session, rng: np.random.Generator, n: int, breath_hz: float
) -> NDArray[np.float64]:
    """Muscle noise, mains hum and baseline wander of the eight leads, in mV."""
    time_s = np.arange(n) / session.sampling_rate_hz
    frequency = np.fft.rfftfreq(n, 1.0 / session.sampling_rate_hz)
    shape = np.exp(-0.5 * (np.log(np.maximum(frequency, 0.1) / 45.0) / 0.7) ** 2)
    noise = np.fft.irfft(np.fft.rfft(rng.normal(size=(8, n))) * shape, n)
    noise *= session.noise_mv / noise.std(axis=1, keepdims=True)
    hum = session.hum_mv * np.sin(
        2 * np.pi * 50.0 * time_s[None, :] + rng.uniform(0, 2 * np.pi, (8, 1))
    )
    wander = np.zeros((8, n))
    for at_hz, share in ((breath_hz, 1.0), (0.11, 0.8), (0.05, 1.2), (0.42, 0.25)):
        size = session.wander_mv * share * rng.uniform(0.3, 1.0, (8, 1))
        phase = rng.uniform(0, 2 * np.pi, (8, 1))
        wander += size * np.sin(2 * np.pi * at_hz * time_s[None, :] + phase)
    return np.asarray(noise + hum + wander)
