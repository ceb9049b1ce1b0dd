"""Notices, worded once for window, PDF, terminal and JSON."""

from __future__ import annotations

from collections.abc import Sequence

from core.notices import Notice


def joined(items: Sequence[str]) -> str:
    """``"V1"``, ``"V1 and V2"``, ``"V1, V2 and V3"``."""
    if len(items) < 2:
        return "".join(items)
    return f"{', '.join(items[:-1])} and {items[-1]}"


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
