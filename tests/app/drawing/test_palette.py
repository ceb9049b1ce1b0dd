from __future__ import annotations

import pytest
from PySide6.QtGui import QColor

from app.drawing.palette import DARK, LIGHT, Palette, contrast
from core.wording.judgements import WORDS

PALETTES = pytest.mark.parametrize("palette", [LIGHT, DARK], ids=["light", "dark"])
# WCAG 2.2, success criteria 1.4.3 (text) and 1.4.11 (graphics that carry meaning).
TEXT, GRAPHICS = 4.5, 3.0


def on(top: QColor, under: str) -> str:
    """An opaque colour as it looks through a translucent one."""
    share, below = top.alphaF(), QColor(under)
    channels = zip(top.getRgb()[:3], below.getRgb()[:3], strict=True)  # type: ignore[index]
    mixed = [round(share * a + (1 - share) * b) for a, b in channels]
    return "#" + "".join(f"{value:02X}" for value in mixed)


def grounds_of_a_curve(palette: Palette) -> dict[str, str]:
    noise, reach = palette.band("noise"), palette.band("reach")
    return {
        "card": palette.card,
        "noise": on(noise, palette.card),
        "reach": on(reach, palette.card),
        "noise on reach": on(noise, on(reach, palette.card)),
    }


def test_contrast_is_what_wcag_defines():
    assert contrast("#000000", "#FFFFFF") == pytest.approx(21.0)
    assert contrast("#123456", "#123456") == 1.0
    # Known: the lightest grey that is enough for text on white.
    assert contrast("#767676", "#FFFFFF") >= TEXT > contrast("#777777", "#FFFFFF")


@PALETTES
@pytest.mark.parametrize("role", ["ink", "soft_ink", "earlier", "later", "in_reach", "beyond"])
def test_words_on_a_card_can_be_read(palette, role):
    assert contrast(getattr(palette, role), palette.card) >= TEXT


@PALETTES
@pytest.mark.parametrize("role", ["ink", "soft_ink"])
def test_words_beside_the_cards_can_be_read(palette, role):
    assert contrast(getattr(palette, role), palette.ground) >= TEXT


@PALETTES
def test_words_on_the_button_can_be_read(palette):
    assert contrast(palette.button_ink, palette.button) >= TEXT


@PALETTES
@pytest.mark.parametrize("role", ["earlier", "later", "ink", "in_reach"])
@pytest.mark.parametrize("ground", ["card", "noise", "reach", "noise on reach"])
def test_curves_stand_out_from_what_lies_under_them(palette, role, ground):
    assert contrast(getattr(palette, role), grounds_of_a_curve(palette)[ground]) >= GRAPHICS


@PALETTES
@pytest.mark.parametrize("code", WORDS)
def test_marks_stand_out_from_the_card(palette, code):
    assert contrast(palette.judgement(code).name(), palette.card) >= GRAPHICS


@PALETTES
@pytest.mark.parametrize("role", ["selection", "soft_ink"])
def test_the_selection_and_the_upright_lines_stand_out(palette, role):
    assert contrast(getattr(palette, role), palette.card) >= GRAPHICS


@PALETTES
def test_the_selected_cell_differs_from_the_others_by_its_border(palette):
    assert contrast(palette.selection, palette.line) >= GRAPHICS


@PALETTES
def test_bands_let_through_what_lies_under_them(palette):
    for role in ("noise", "reach"):
        assert 0.0 < palette.band(role).alphaF() < 0.5
        assert palette.band(role).name() == getattr(palette, role).lower()
