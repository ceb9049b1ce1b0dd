"""Lists in words."""

from __future__ import annotations

from collections.abc import Sequence

_CHEST = ("V1", "V2", "V3", "V4", "V5", "V6")


def joined(items: Sequence[str]) -> str:
    """``"V1"``, ``"V1 and V2"``, ``"V1, V2 and V3"``."""
    if len(items) < 2:
        return "".join(items)
    return f"{', '.join(items[:-1])} and {items[-1]}"


def named(leads: Sequence[str]) -> str:
    """Leads as `joined`, with three or more neighbours on the chest as ``"V2 to V6"``."""
    words: list[str] = []
    run: list[str] = []
    for lead in [*leads, ""]:
        follows = run and lead in _CHEST and _CHEST.index(lead) == _CHEST.index(run[-1]) + 1
        if not follows:
            words += [f"{run[0]} to {run[-1]}"] if len(run) > 2 else run
            run = []
        if lead in _CHEST:
            run.append(lead)
        elif lead:
            words.append(lead)
    return joined(words)
