"""Every setting that shapes a result, with its unit, default and source."""

from __future__ import annotations

from dataclasses import asdict, dataclass, field
from typing import Any


@dataclass(frozen=True, slots=True)
class Spread:
    """How far electrodes are off their sites: standard deviation in each direction, mm.

    The default puts 64 % of electrodes within 31.75 mm of their sites, as measured for 30
    technicians on 8 subjects (Wenger & Kligfield 1996, J Electrocardiol 29).
    """

    left: float = 22.0
    up: float = 22.0

    def __post_init__(self) -> None:
        if not (0 <= self.left <= 100 and 0 <= self.up <= 100):
            raise ValueError(f"the spread must be 0 to 100 mm, got {self.left} and {self.up}")


@dataclass(frozen=True, slots=True)
class RepeatFloor:
    """Least 95 % half-width of a measure's change from one recording to the next.

    ``fixed`` in the measure's unit; ``share`` of the measure's root mean square over the
    twelve leads, for what another posture, breath and day do to an unchanged heart: the dipole
    turned by a few degrees and scaled by a few per cent.
    """

    fixed: float
    share: float


def _floors() -> dict[str, RepeatFloor]:
    # ST: 95 % day-to-day range of the ST vector magnitude is +-24 uV (Norgaard 1999). Waves:
    # coefficients of variation of 6 % within minutes (McLaughlin 1998) and 9 % over a week
    # with the electrodes' share least (van den Hoogen 1992), as 95 % half-widths, are 12-18 %.
    return {
        "j_mv": RepeatFloor(0.030, 0.12),
        "st_mv": RepeatFloor(0.025, 0.12),
        "st_slope_mv_per_s": RepeatFloor(0.30, 0.15),
        "t_mv": RepeatFloor(0.040, 0.15),
        "r_mv": RepeatFloor(0.060, 0.12),
        "s_mv": RepeatFloor(0.060, 0.12),
        "qrs_net_mv_ms": RepeatFloor(2.0, 0.12),
    }


@dataclass(frozen=True, slots=True)
class Settings:
    """Settings of a measurement and a comparison."""

    spread_mm: Spread = field(default_factory=Spread)
    st_point_ms: float = 60.0  # after J
    confidence: float = 0.95  # of every range
    draws: int = 2000  # electrode shifts drawn for the reach
    seed: int = 1
    lifted_stops: tuple[str, ...] = ()  # codes of notices that would end a comparison
    repeat_floor: dict[str, RepeatFloor] = field(default_factory=_floors)

    def __post_init__(self) -> None:
        if not 0 <= self.st_point_ms <= 120:
            raise ValueError(f"the ST point must be 0 to 120 ms after J, got {self.st_point_ms}")
        if not 0.5 <= self.confidence <= 0.999:
            raise ValueError(f"confidence must be 0.5 to 0.999, got {self.confidence}")
        if self.draws < 200:
            raise ValueError(f"at least 200 draws are needed, got {self.draws}")

    def to_dict(self) -> dict[str, Any]:
        """The settings as JSON writes them."""
        return asdict(self) | {"lifted_stops": list(self.lifted_stops)}
