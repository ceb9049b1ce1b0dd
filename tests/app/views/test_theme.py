from __future__ import annotations

import pytest
from PySide6.QtCore import Qt
from PySide6.QtGui import QPalette

from app.drawing.palette import DARK, LIGHT, contrast
from app.views.theme import current_palette, dress, screen_style, use_scheme

SCHEMES = pytest.mark.parametrize(
    ("scheme", "palette"),
    [(Qt.ColorScheme.Light, LIGHT), (Qt.ColorScheme.Dark, DARK)],
    ids=["light", "dark"],
)
ROLE = QPalette.ColorRole
TEXTS = [
    (ROLE.WindowText, ROLE.Window),
    (ROLE.Text, ROLE.Base),
    (ROLE.ButtonText, ROLE.Button),
    (ROLE.ToolTipText, ROLE.ToolTipBase),
    (ROLE.PlaceholderText, ROLE.Base),
    (ROLE.HighlightedText, ROLE.Highlight),
    (ROLE.Link, ROLE.Base),
]


@pytest.fixture
def dressed(qapp, light, scheme):
    use_scheme(scheme)
    dress(qapp)
    return qapp


@SCHEMES
def test_the_scheme_that_is_asked_for_is_worn(dressed, palette):
    assert current_palette() is palette
    assert screen_style().palette is palette
    assert dressed.palette().color(ROLE.Window).name() == palette.ground.lower()


@SCHEMES
@pytest.mark.parametrize("pair", TEXTS, ids=lambda pair: pair[0].name)
def test_words_of_every_role_can_be_read(dressed, palette, pair):
    colours = [dressed.palette().color(role).name() for role in pair]
    assert contrast(*colours) >= 4.5  # WCAG 2.2, 1.4.3


def test_an_unknown_scheme_of_the_system_is_taken_for_light(qapp):
    use_scheme(Qt.ColorScheme.Unknown)
    try:
        assert current_palette() is LIGHT
    finally:
        use_scheme(None)
