"""The cautions and the settings that shaped the result, always in view."""

from __future__ import annotations

from PySide6.QtWidgets import QVBoxLayout, QWidget

from app.state.bench_state import BenchState
from app.views.labels import label
from app.views.theme import CAPTION
from core.wording.caution import CAUTION, PLACEMENT_CAVEAT


class CautionBar(QWidget):
    """Caveat, cautions, model and settings."""

    def __init__(self, state: BenchState) -> None:
        super().__init__()
        self._state = state
        self.caution = label(CAUTION, size=CAPTION, wrap=True)
        self.caveat = label(PLACEMENT_CAVEAT, size=CAPTION, wrap=True)
        self.made_with = label(size=CAPTION)
        layout = QVBoxLayout(self)
        layout.setContentsMargins(2, 0, 2, 0)
        layout.setSpacing(2)
        for line in (self.caution, self.caveat, self.made_with):
            layout.addWidget(line)
        state.phase_changed.connect(self._refresh)
        self._refresh()

    def _refresh(self) -> None:
        comparison = self._state.comparison
        self.caveat.setVisible(comparison is not None)
        self.made_with.setVisible(comparison is not None)
        if comparison is None:
            return
        settings, model = comparison.settings, comparison.placement
        self.made_with.setText(
            f"Model: {model.model_name} {model.model_version} · spread "
            f"{settings.spread_mm.up:g} mm up, {settings.spread_mm.left:g} mm left · "
            f"ST at J+{settings.st_point_ms:g} ms"
        )
