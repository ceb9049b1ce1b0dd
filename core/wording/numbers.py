"""Numbers as readers see them: signed, rounded, with their unit."""

from __future__ import annotations

MINUS = "\N{MINUS SIGN}"
NONE = "\N{EN DASH}"  # stands where a value could not be measured
NARROW = "\N{NO-BREAK SPACE}"


def signed(value: float | None, digits: int = 2) -> str:
    """``"+0.12"``, ``"−0.03"``, ``"0.00"``; a dash for None."""
    if value is None:
        return NONE
    rounded = round(value, digits)
    if rounded == 0:
        return f"{0:.{digits}f}"
    return f"{'+' if rounded > 0 else MINUS}{abs(rounded):.{digits}f}"


def plain(value: float | None, digits: int = 0) -> str:
    """Unsigned unless negative; a dash for None."""
    if value is None:
        return NONE
    rounded = round(value, digits)
    text = f"{abs(rounded):.{digits}f}"
    return f"{MINUS}{text}" if rounded < 0 else text


def signed_range(low: float | None, high: float | None, digits: int = 2) -> str:
    """``"−0.10 to +0.12"``; one dash where there is no range."""
    if low is None and high is None:
        return NONE
    return f"{signed(low, digits)} to {signed(high, digits)}"


def millivolts(value: float | None, digits: int = 2) -> str:
    """``"+0.12 mV"``."""
    return f"{signed(value, digits)}{NARROW}mV"


def digits_apart(value: float, *limits: float | None) -> int:
    """Two digits, or as many more as keep a value from looking like one of its limits."""
    known = [limit for limit in limits if limit is not None and limit != value]
    return next(
        (n for n in range(2, 6) if all(round(value, n) != round(limit, n) for limit in known)), 6
    )


def clock(seconds: float) -> str:
    """Hours, minutes and seconds from a recording's start: ``"0:02:50"``."""
    minutes, rest = divmod(round(seconds), 60)
    return f"{minutes // 60}:{minutes % 60:02d}:{rest:02d}"


def lasting(seconds: float) -> str:
    """A length of time in the unit that suits it: ``"45 s"``, ``"6 min"``, ``"24.0 h"``."""
    if seconds < 120:
        return f"{seconds:.0f} s"
    return f"{seconds / 60:.0f} min" if seconds < 7200 else f"{seconds / 3600:.1f} h"
