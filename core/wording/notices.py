"""Notices, worded once for window, PDF, terminal and JSON."""

from __future__ import annotations

from collections.abc import Sequence

from core.notices import Notice
from core.wording.lists import joined


def limb_leads_derived(derived: Sequence[str]) -> Notice:
    """Some limb leads were computed, not recorded."""
    return Notice(
        "limb-leads-derived",
        "info",
        f"{joined(derived)} not in the file; computed from two recorded limb leads.",
    )


def beats_left_out(reasons: Sequence[str], n_beats: int) -> Notice:
    """Some beats are not in the representative beat."""
    counted = [f"{reasons.count(reason)} {reason}" for reason in dict.fromkeys(reasons)]
    return Notice(
        "beats-left-out",
        "info",
        f"{len(reasons)} of {n_beats} beats left out of the representative beat: "
        f"{joined(counted)}.",
    )


def leads_unusable(unusable: Sequence[tuple[str, str | None]]) -> Notice:
    """Some leads hold no usable tracing."""
    named = [f"{lead} ({reason})" for lead, reason in unusable]
    return Notice(
        "leads-unusable",
        "caution",
        f"No usable tracing in {joined(named)}. Check the electrodes and record again.",
    )


def no_p_wave() -> Notice:
    """No P wave stands out before the QRS."""
    return Notice(
        "no-p-wave",
        "info",
        "No P wave stands out before the QRS; PR and P are not measured.",
    )


def another_person(what: str) -> Notice:
    """The two recordings may not be of one person."""
    return Notice(
        "person-differs",
        "caution",
        f"The two files state different {what}. Make sure that both are of one person; "
        "otherwise the comparison means nothing.",
    )


def time_unknown() -> Notice:
    """A file does not say when it was recorded."""
    return Notice(
        "time-unknown",
        "info",
        "At least one file does not say when it was recorded; the order is the one given.",
    )


def order_reversed() -> Notice:
    """The later recording is older than the earlier."""
    return Notice(
        "order-reversed",
        "caution",
        "The recording given as later is the older one. Swap the two.",
    )


def not_adult() -> Notice:
    """The torso model is of adults."""
    return Notice(
        "not-adult",
        "caution",
        "The person is under 16; the torso model is of adults, so reach and shift do not hold.",
    )


def rates_differ(earlier_per_min: float, later_per_min: float) -> Notice:
    """The heart rates are far apart."""
    return Notice(
        "rate-differs",
        "caution",
        f"Heart rate {earlier_per_min:.0f} against {later_per_min:.0f} a minute: rate alone "
        "changes ST and T.",
    )


def qrs_differs(earlier_ms: float, later_ms: float) -> Notice:
    """The QRS durations are far apart."""
    return Notice(
        "qrs-duration-differs",
        "caution",
        f"QRS {earlier_ms:.0f} against {later_ms:.0f} ms: a change of conduction changes ST and "
        "T, and the shift estimate does not hold.",
    )


def limb_leads_disagree(largest_mv: float) -> Notice:
    """Limb leads that do not satisfy their algebra."""
    return Notice(
        "limb-leads-disagree",
        "caution",
        f"The limb leads contradict each other by up to {largest_mv:.2f} mV: the file was rescaled "
        "lead by lead or filtered unevenly. Export the recording again without rescaling.",
    )


def paced() -> Notice:
    """The heart was paced."""
    return Notice(
        "paced",
        "caution",
        "Pacing spikes: paced beats have their own ST and T, and a change of pacing changes them. "
        "Compare only if both recordings are paced in the same way.",
    )
