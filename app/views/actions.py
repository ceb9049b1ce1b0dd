"""One list of actions: menus, shortcuts and tests read it."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from typing import TYPE_CHECKING

from PySide6.QtGui import QAction, QKeySequence

if TYPE_CHECKING:
    from app.views.bench_window import BenchWindow


@dataclass(frozen=True, slots=True)
class Entry:
    """One thing a reader can do."""

    id: str
    menu: str
    text: str
    call: Callable[[BenchWindow], None]
    enabled_when: Callable[[BenchWindow], bool] = lambda window: True
    shortcut: QKeySequence.StandardKey | str | None = None


ENTRIES = (
    Entry(
        "open.earlier",
        "&File",
        "Open the &earlier recording…",
        lambda window: window.choose_recording("earlier"),
        shortcut=QKeySequence.StandardKey.Open,
    ),
    Entry(
        "open.later",
        "&File",
        "Open the &later recording…",
        lambda window: window.choose_recording("later"),
        shortcut="Ctrl+Shift+O",
    ),
    Entry(
        "pair.swap",
        "&File",
        "&Swap earlier and later",
        lambda window: window.swap(),
        lambda window: window.state.has_pair,
    ),
    Entry(
        "stretch.earlier",
        "&File",
        "Use a s&tretch of the earlier recording…",
        lambda window: window.choose_stretch("earlier"),
        lambda window: window.state.earlier is not None,
    ),
    Entry(
        "stretch.later",
        "&File",
        "Use a stretch of the later recor&ding…",
        lambda window: window.choose_stretch("later"),
        lambda window: window.state.later is not None,
    ),
    Entry(
        "export.pdf",
        "&File",
        "Write the comparison &report…",
        lambda window: window.export_pdf(),
        lambda window: window.state.has_comparison,
        QKeySequence.StandardKey.Save,
    ),
    Entry(
        "export.json",
        "&File",
        "Export as &JSON…",
        lambda window: window.export_json(),
        lambda window: window.state.has_comparison,
    ),
    Entry(
        "export.csv",
        "&File",
        "Export the table as &CSV…",
        lambda window: window.export_csv(),
        lambda window: window.state.has_comparison,
    ),
    Entry(
        "quit",
        "&File",
        "&Quit",
        lambda window: window.leave(),
        shortcut=QKeySequence.StandardKey.Quit,
    ),
    Entry(
        "help.judgements",
        "&Help",
        "What the &judgements mean",
        lambda window: window.explain_judgements(),
        shortcut=QKeySequence.StandardKey.HelpContents,
    ),
    Entry("help.about", "&Help", "&About", lambda window: window.about()),
)


class Actions:
    """The entries as actions of one window's menus."""

    def __init__(self, window: BenchWindow) -> None:
        self._window = window
        self.by_id: dict[str, QAction] = {}
        menus = {name: window.menuBar().addMenu(name) for name in ("&File", "&Help")}
        for entry in ENTRIES:
            action = QAction(entry.text, window)
            action.triggered.connect(lambda _=False, entry=entry: entry.call(window))
            if entry.shortcut is not None:
                action.setShortcut(QKeySequence(entry.shortcut))
            menus[entry.menu].addAction(action)
            self.by_id[entry.id] = action

    def refresh(self) -> None:
        """Enable what can be done now."""
        for entry in ENTRIES:
            self.by_id[entry.id].setEnabled(entry.enabled_when(self._window))
