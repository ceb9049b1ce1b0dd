"""The bench: the main window, top to bottom from the question to the evidence."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path

from PySide6.QtCore import QEvent
from PySide6.QtGui import QCloseEvent, QDragEnterEvent, QDropEvent
from PySide6.QtWidgets import (
    QHBoxLayout,
    QMainWindow,
    QPushButton,
    QSizePolicy,
    QStackedWidget,
    QVBoxLayout,
    QWidget,
)

from app.jobs.compare_job import CompareRequest, CompareRunner
from app.state.bench_state import BenchState, Phase
from app.views import dialogs
from app.views.actions import Actions
from app.views.caution_bar import CautionBar
from app.views.chest_panel import ChestPanel
from app.views.exports import write_csv, write_json, write_pdf
from app.views.lead_depth import LeadDepth
from app.views.lead_wall import LeadWall
from app.views.notices_panel import NoticesPanel
from app.views.recording_card import RecordingCard
from app.views.start_view import StartView
from app.views.theme import BODY, current_palette
from app.views.verdict_panel import VerdictPanel
from app.views.wall_scroll import WallScroll
from app.views.working_view import WorkingView
from core import Settings
from core.comparison.results import Comparison
from core.errors import TableIncomplete
from core.version import PROGRAM_NAME, program_version
from core.wording.caution import CAUTION, KNOWN_LIMITS
from core.wording.judgements import MARKS, MEANINGS, WORDS


class BenchWindow(QMainWindow):
    """Opens pairs, has them compared, shows and exports the result."""

    def __init__(self, runner: CompareRunner | None = None) -> None:
        super().__init__()
        self.setWindowTitle(PROGRAM_NAME)
        self.setAcceptDrops(True)
        self.resize(1440, 900)
        self.state: BenchState = BenchState()
        self.runner = runner or CompareRunner()
        self._order_by_time = False
        self._lifted_stops: tuple[str, ...] = ()
        self.actions_list = Actions(self)
        self._lay_out()
        self.runner.progressed.connect(self.state.advance)
        self.runner.ordered.connect(self.state.set_order)
        self.runner.finished.connect(self.state.finish)
        self.runner.failed.connect(self.state.refuse)
        self.runner.unstated.connect(self.ask_unstated)
        self.verdict.cancelled.connect(self.stop_comparing)
        self.verdict.lift_wanted.connect(self.lift_stops)
        self.start_view.pair_wanted.connect(self.open_pair)
        self.state.phase_changed.connect(self._follow_phase)
        self._follow_phase()

    def _lay_out(self) -> None:
        self.verdict = VerdictPanel(self.state)
        self.wall, self.lead_depth = LeadWall(self.state), LeadDepth(self.state)
        self.start_view, self._working = StartView(), WorkingView(self.state)
        self.swap_button = QPushButton("⇄")
        self.swap_button.setFixedWidth(34)
        self.swap_button.setToolTip("Swap earlier and later")
        self.swap_button.setAccessibleName("Swap earlier and later")
        self.swap_button.clicked.connect(self.swap)
        self.report_button = QPushButton("Write the comparison report")
        self.report_button.setSizePolicy(QSizePolicy.Policy.Minimum, QSizePolicy.Policy.Preferred)
        self.report_button.clicked.connect(self.export_pdf)

        cards = QHBoxLayout()
        cards.setSpacing(8)
        cards.addWidget(RecordingCard(self.state, "earlier"), 1)
        cards.addWidget(self.swap_button)
        cards.addWidget(RecordingCard(self.state, "later"), 1)
        cards.addWidget(self.report_button)
        side = QVBoxLayout()
        side.setSpacing(8)
        side.addWidget(ChestPanel(self.state), 3)
        side.addWidget(NoticesPanel(self.state), 2)
        evidence = QWidget()
        across = QHBoxLayout(evidence)
        across.setContentsMargins(0, 0, 0, 0)
        across.setSpacing(8)
        across.addWidget(WallScroll(self.wall, self.state), 34)
        across.addWidget(self.lead_depth, 37)
        across.addLayout(side, 29)
        self.middle = QStackedWidget()
        self.middle.addWidget(self.start_view)
        self.middle.addWidget(self._working)
        self.middle.addWidget(evidence)
        self._evidence = evidence

        central = QWidget()
        down = QVBoxLayout(central)
        down.setContentsMargins(12, 10, 12, 8)
        down.setSpacing(8)
        down.addLayout(cards)
        down.addWidget(self.verdict)
        down.addWidget(self.middle, 1)
        down.addWidget(CautionBar(self.state))
        self.setCentralWidget(central)
        self._colour_button()

    def _colour_button(self) -> None:
        palette = current_palette()
        self.report_button.setStyleSheet(
            f"QPushButton {{ background: {palette.button}; color: {palette.button_ink}; border: 0; "
            f"padding: 8px 18px; font-size: {BODY}px; font-weight: bold; }}"
            f"QPushButton:disabled {{ background: {palette.line}; color: {palette.soft_ink}; }}"
            f"QPushButton:focus {{ border: 2px solid {palette.earlier}; }}"
        )

    def _follow_phase(self) -> None:
        state = self.state
        pages = {Phase.WORKING: self._working, Phase.JUDGED: self._evidence}
        self.middle.setCurrentWidget(pages.get(state.phase, self.start_view))
        self.report_button.setEnabled(state.has_comparison)
        self.swap_button.setEnabled(state.has_pair)
        self.actions_list.refresh()

    def open_pair(self, earlier: Path, later: Path, *, order_by_time: bool = False) -> None:
        """Choose a pair and compare it."""
        earlier, later = Path(earlier), Path(later)
        self.state.forget(earlier, later)
        self.state.choose(earlier, later)
        self._compare(order_by_time=order_by_time)

    def _compare(self, *, order_by_time: bool = False, lifted_stops: tuple[str, ...] = ()) -> None:
        earlier, later = self.state.earlier, self.state.later
        if earlier is None or later is None:
            return
        self._order_by_time, self._lifted_stops = order_by_time, lifted_stops
        self.state.begin()
        settings = Settings(lifted_stops=lifted_stops)
        self.runner.start(
            CompareRequest(earlier, later, settings, order_by_time, dict(self.state.stated))
        )

    def ask_unstated(self, error: TableIncomplete) -> None:
        """Ask for what a table does not say, and compare again; else it stays refused."""
        self.state.refuse(str(error))
        stated = dialogs.ask_unstated(self, error)
        if stated is not None:
            self.state.remember(error.path, stated)
            self._compare(order_by_time=self._order_by_time, lifted_stops=self._lifted_stops)

    def lift_stops(self) -> None:
        """Compare in spite of what stopped this pair, this once."""
        self._compare(order_by_time=self._order_by_time, lifted_stops=self.state.liftable_stops)

    def stop_comparing(self) -> None:
        """End the running comparison; the pair stays chosen."""
        self.runner.cancel()
        self.state.stop()

    def swap(self) -> None:
        """Exchange earlier and later and compare again."""
        if self.state.has_pair:
            self.state.choose(self.state.later, self.state.earlier)
            self._compare()

    def choose_stretch(self, role: str) -> None:
        """Ask which part of the earlier or the later recording to use, and compare again."""
        path: Path | None = getattr(self.state, role)
        if path is None:
            return
        stated = dialogs.ask_stretch(self, path.name)
        if stated is not None:
            self.state.remember(path, stated)
            self._compare(lifted_stops=self._lifted_stops)

    def choose_recording(self, role: str) -> None:
        """Ask for the earlier or the later recording; compare once both are there."""
        path = dialogs.ask_recording(self, f"Open the {role} recording")
        if path is not None:
            self._open_one(role, path)

    def _open_one(self, role: str, path: Path) -> None:
        chosen = {"earlier": self.state.earlier, "later": self.state.later, role: path}
        self.runner.cancel()
        self.state.forget(path)
        self.state.choose(chosen["earlier"], chosen["later"])
        self._compare()

    def dragEnterEvent(self, event: QDragEnterEvent) -> None:
        """Take files of this machine."""
        if _local_paths(event):
            event.acceptProposedAction()

    def dropEvent(self, event: QDropEvent) -> None:
        """Two files are a pair, ordered by time; one is whichever is missing, else the later."""
        paths = _local_paths(event)
        event.acceptProposedAction()
        self.open_dropped(paths)

    def open_dropped(self, paths: list[Path]) -> None:
        """Open what was dropped."""
        paths = _records(paths)
        if len(paths) > 2:
            self.runner.cancel()
            self.state.refuse(
                f"{len(paths)} recordings were dropped; a comparison takes two. "
                "Drop the two that are to be compared."
            )
        elif len(paths) == 2:
            self.open_pair(*paths, order_by_time=True)
        elif len(paths) == 1:
            self._open_one("earlier" if self.state.earlier is None else "later", paths[0])

    def export_pdf(self) -> None:
        """Write the comparison report."""
        self._export("comparison.pdf", "PDF (*.pdf)", write_pdf)

    def export_json(self) -> None:
        """Write the comparison as JSON."""
        self._export("comparison.json", "JSON (*.json)", write_json)

    def export_csv(self) -> None:
        """Write the table of measures."""
        self._export("comparison.csv", "CSV (*.csv)", write_csv)

    def _export(
        self, suggestion: str, kind: str, write: Callable[[Path, Comparison], None]
    ) -> None:
        comparison = self.state.comparison
        if comparison is None:
            return
        path = dialogs.ask_file_to_write(self, "Export", suggestion, kind)
        if path is None:
            return
        try:
            write(path, comparison)
        except OSError as error:
            reason = error.strerror or str(error)
            self.statusBar().showMessage(f"{path.name} could not be written: {reason}.")
        else:
            self.statusBar().showMessage(f"Wrote {path.name}.", 8000)

    def explain_judgements(self) -> None:
        """Say what each judgement means."""
        meanings = "\n\n".join(
            f"{MARKS[code]}  {WORDS[code]}: {meaning}" for code, meaning in MEANINGS.items()
        )
        dialogs.tell(self, "What the judgements mean", f"{meanings}\n\n{KNOWN_LIMITS}\n\n{CAUTION}")

    def about(self) -> None:
        """Say what this program is."""
        dialogs.tell(self, PROGRAM_NAME, f"{PROGRAM_NAME} {program_version()}\n\n{CAUTION}")

    def leave(self) -> None:
        """Close the window."""
        self.close()

    def closeEvent(self, event: QCloseEvent) -> None:
        """Leave no thread behind."""
        self.runner.shut_down()
        super().closeEvent(event)

    def changeEvent(self, event: QEvent) -> None:
        """Follow a change of the system's light or dark scheme."""
        super().changeEvent(event)
        if event.type() == event.Type.PaletteChange and hasattr(self, "report_button"):
            self._colour_button()


def _local_paths(event: QDragEnterEvent | QDropEvent) -> list[Path]:
    return [Path(url.toLocalFile()) for url in event.mimeData().urls() if url.isLocalFile()]


def _records(paths: list[Path]) -> list[Path]:
    """One path a recording: the header of a WFDB record stands for its signal files."""
    headers = {path.stem for path in paths if path.suffix == ".hea"}
    return [path for path in paths if path.suffix == ".hea" or path.stem not in headers]
