"""A recording: twelve simultaneous leads in mV and what the file said of them."""

from __future__ import annotations

from dataclasses import dataclass, field, replace
from datetime import date, datetime, timedelta

import numpy as np
from numpy.typing import NDArray

from core.notices import Notice
from core.recordings.leads import TWELVE_LEADS


@dataclass(frozen=True, slots=True)
class Source:
    """Where a recording came from: a name without its folder, and a fingerprint."""

    name: str
    format: str
    sha256: str

    def __post_init__(self) -> None:
        # A file's name may hold bytes that are no text; they cannot be written anywhere.
        readable = self.name.encode("utf-8", "replace").decode()
        object.__setattr__(self, "name", readable)

    def to_dict(self) -> dict[str, str]:
        """The source as JSON writes it."""
        return {"name": self.name, "format": self.format, "sha256": self.sha256}


@dataclass(frozen=True, slots=True)
class Filters:
    """Cutoffs that the file states for its signal, in Hz; None where it says nothing."""

    high_pass_hz: float | None = None
    low_pass_hz: float | None = None
    notch_hz: float | None = None

    def to_dict(self) -> dict[str, float | None]:
        """The filters as JSON writes them."""
        return {
            "high_pass_hz": self.high_pass_hz,
            "low_pass_hz": self.low_pass_hz,
            "notch_hz": self.notch_hz,
        }


@dataclass(frozen=True, slots=True)
class Subject:
    """What the file said of the person; None where it said nothing."""

    id: str | None = None
    name: str | None = None
    sex: str | None = None  # "female", "male" or None
    age_years: float | None = None
    born_on: date | None = None

    def to_dict(self) -> dict[str, str | float | None]:
        """The subject as JSON writes it: name and birth date stay out."""
        return {"id": self.id, "sex": self.sex, "age_years": self.age_years}


@dataclass(frozen=True, slots=True, eq=False)
class Recording:
    """One 12-lead recording.

    Attributes
    ----------
    signal_mv : ndarray, shape (n_samples, 12)
        Columns in the order of `leads`; NaN where the file holds no sample.
    sampling_rate_hz : float
    leads_present, leads_derived : tuple of str
        Which of the twelve the file held, and which were computed from two limb leads.
    counts_per_mv : tuple of float, length 12
        Steps of the file's own quantisation in one mV; a written copy keeps them.
    filters : Filters
        What the file states; nothing is done about them here.
    electrode_placement : str, optional
        Code of the placement that the file states (DICOM CID 3263).
    interchange_undone : tuple of str
        Electrodes whose interchange was undone; empty where the leads are as recorded.
    further_leads : tuple of str
        Leads beyond the twelve that the file held: right and posterior chest leads, X, Y, Z.
    further_mv : ndarray, shape (n_samples, n_further)
        Columns in the order of `further_leads`.
    """

    signal_mv: NDArray[np.float64]
    sampling_rate_hz: float
    leads_present: tuple[str, ...]
    leads_derived: tuple[str, ...]
    counts_per_mv: tuple[float, ...]
    source: Source
    subject: Subject = field(default_factory=Subject)
    recorded_at: datetime | None = None
    notices: tuple[Notice, ...] = ()
    filters: Filters = field(default_factory=Filters)
    electrode_placement: str | None = None
    interchange_undone: tuple[str, ...] = ()
    further_leads: tuple[str, ...] = ()
    further_mv: NDArray[np.float64] = field(default_factory=lambda: np.empty((0, 0)))

    @property
    def leads(self) -> tuple[str, ...]:
        """The twelve leads, in the order of the columns."""
        return TWELVE_LEADS

    @property
    def n_samples(self) -> int:
        """Samples in each lead."""
        return int(self.signal_mv.shape[0])

    @property
    def duration_s(self) -> float:
        """Length of the recording."""
        return self.n_samples / self.sampling_rate_hz

    def with_signal(self, signal_mv: NDArray[np.float64], *, name: str) -> Recording:
        """The same recording with another signal, under another source name."""
        return replace(self, signal_mv=signal_mv, source=replace(self.source, name=name))

    def stretch(self, start_s: float, stop_s: float) -> Recording:
        """A part of the recording, from one time to another."""
        first, last = (round(at * self.sampling_rate_hz) for at in (start_s, stop_s))
        return replace(
            self,
            signal_mv=self.signal_mv[first:last],
            further_mv=self.further_mv[first:last],
            recorded_at=None
            if self.recorded_at is None
            else self.recorded_at + timedelta(seconds=start_s),
        )
