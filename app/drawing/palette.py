"""Colours by role. Colour never stands alone: every judgement is also a mark and a word."""

from __future__ import annotations

from dataclasses import dataclass

from PySide6.QtGui import QColor


@dataclass(frozen=True, slots=True)
class Palette:
    """One colour for each role, as #RRGGBB; bands carry their own transparency."""

    ground: str
    card: str
    line: str
    ink: str
    soft_ink: str
    earlier: str
    later: str
    reach: str
    reach_alpha: float
    noise: str
    noise_alpha: float
    grid: str
    in_reach: str
    beyond: str
    selection: str
    button: str
    button_ink: str

    def colour(self, role: str) -> QColor:
        """The colour of a role."""
        return QColor(getattr(self, role))

    def band(self, role: str) -> QColor:
        """The translucent colour of ``"reach"`` or ``"noise"``."""
        colour = QColor(getattr(self, role))
        colour.setAlphaF(getattr(self, f"{role}_alpha"))
        return colour

    def judgement(self, code: str) -> QColor:
        """The colour of a judgement's mark and word."""
        roles = {
            "beyond-reach": self.beyond,
            "in-reach-backed": self.in_reach,
            "in-reach-unbacked": self.in_reach,
        }
        return QColor(roles.get(code, self.soft_ink))


# Earlier, later, reach and noise after Okabe & Ito's colour-blind safe palette; on white the
# vermilion is a shade darker, so that words in it can be read.
LIGHT = Palette(
    ground="#FBFAF7",
    card="#FFFFFF",
    line="#DAD6CE",
    ink="#1C1B1A",
    soft_ink="#5F5E5B",
    earlier="#0072B2",
    later="#BD5200",
    reach="#E69F00",
    reach_alpha=0.18,
    noise="#8A8A8A",
    noise_alpha=0.22,
    grid="#F3DEDA",
    in_reach="#7A5A00",
    beyond="#A63D00",
    selection="#1C1B1A",
    button="#1C1B1A",
    button_ink="#FFFFFF",
)
DARK = Palette(
    ground="#171819",
    card="#1F2123",
    line="#3A3D40",
    ink="#ECEAE6",
    soft_ink="#A9A7A2",
    earlier="#56B4E9",
    later="#F08A3C",
    reach="#E69F00",
    reach_alpha=0.20,
    noise="#9A9A9A",
    noise_alpha=0.26,
    grid="#3B2E2C",
    in_reach="#E0B240",
    beyond="#FF8A5C",
    selection="#ECEAE6",
    button="#ECEAE6",
    button_ink="#171819",
)


def contrast(first: str, second: str) -> float:
    """Contrast ratio of two colours, as WCAG 2 defines it: 1 to 21."""
    lighter, darker = sorted((_luminance(first), _luminance(second)), reverse=True)
    return (lighter + 0.05) / (darker + 0.05)


def _luminance(colour: str) -> float:
    channels = [int(colour[start : start + 2], 16) / 255 for start in (1, 3, 5)]
    linear = [c / 12.92 if c <= 0.04045 else ((c + 0.055) / 1.055) ** 2.4 for c in channels]
    return 0.2126 * linear[0] + 0.7152 * linear[1] + 0.0722 * linear[2]
