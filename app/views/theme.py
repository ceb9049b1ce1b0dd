"""The palette of the window, light or dark as the system is, and its four sizes of type."""

from __future__ import annotations

from PySide6.QtCore import Qt
from PySide6.QtGui import QColor, QFontDatabase, QGuiApplication, QPalette
from PySide6.QtWidgets import QApplication

from app.drawing.fonts import report_family
from app.drawing.palette import DARK, LIGHT, Palette
from app.drawing.pen import Style

CAPTION, BODY, HEADING, SENTENCE = 12, 13, 16, 17


class _Scheme:
    """The scheme that was asked for, None to follow the system."""

    asked: Qt.ColorScheme | None = None


def use_scheme(scheme: Qt.ColorScheme | None) -> None:
    """Ask for the light or the dark palette, whatever the system's is; None follows it."""
    _Scheme.asked = scheme


def current_palette() -> Palette:
    """Dark where the system is dark, unless another scheme was asked for."""
    scheme = _Scheme.asked or QGuiApplication.styleHints().colorScheme()
    return DARK if scheme is Qt.ColorScheme.Dark else LIGHT


def screen_style() -> Style:
    """How pictures are drawn on the screen."""
    return Style(
        palette=current_palette(),
        unit=1.0,
        family=QApplication.font().family(),
        caption=CAPTION,
        body=BODY,
        heading=HEADING,
    )


def dress(application: QApplication) -> None:
    """Give an application our colours; the type is the platform's, or ours where it has none."""
    application.setStyle("Fusion")
    if not QFontDatabase.families():
        font = application.font()
        font.setFamily(report_family())
        application.setFont(font)
    palette = current_palette()
    roles = {
        QPalette.ColorRole.Window: palette.ground,
        QPalette.ColorRole.WindowText: palette.ink,
        QPalette.ColorRole.Base: palette.card,
        QPalette.ColorRole.AlternateBase: palette.ground,
        QPalette.ColorRole.Text: palette.ink,
        QPalette.ColorRole.PlaceholderText: palette.soft_ink,
        QPalette.ColorRole.Button: palette.card,
        QPalette.ColorRole.ButtonText: palette.ink,
        QPalette.ColorRole.ToolTipBase: palette.card,
        QPalette.ColorRole.ToolTipText: palette.ink,
        QPalette.ColorRole.Highlight: palette.earlier,
        QPalette.ColorRole.HighlightedText: palette.card,
        QPalette.ColorRole.Link: palette.earlier,
    }
    colours = QPalette()
    for role, colour in roles.items():
        colours.setColor(role, QColor(colour))
    for role in (
        QPalette.ColorRole.Text,
        QPalette.ColorRole.ButtonText,
        QPalette.ColorRole.WindowText,
    ):
        colours.setColor(QPalette.ColorGroup.Disabled, role, QColor(palette.soft_ink))
    application.setPalette(colours)
