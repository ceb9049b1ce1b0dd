"""Read and compare a pair in a worker thread; the newest request wins."""

from __future__ import annotations

import logging
import threading
import traceback
from collections.abc import Callable, Mapping
from dataclasses import dataclass, field, replace
from pathlib import Path

from PySide6.QtCore import QObject, QRunnable, QThreadPool, Signal

from app.state.stated import Stated
from core import Comparison, Recording, Settings, compare, read_recording
from core.errors import NotComparable, SamespotError, Stopped, TableIncomplete

log = logging.getLogger(__name__)

Work = Callable[["CompareRequest", Callable[[float, str], None], Callable[[], bool]], Comparison]


@dataclass(frozen=True, slots=True)
class CompareRequest:
    """What to compare, and how."""

    earlier: Path
    later: Path
    settings: Settings
    # Of two files dropped at once, nobody said which is the earlier.
    order_by_time: bool = False
    stated: Mapping[Path, Stated] = field(default_factory=dict)

    def read(self, path: Path) -> Recording:
        """Read one of the two, by what was stated of it."""
        stated = self.stated.get(path, Stated())
        return read_recording(
            path,
            unit=stated.unit,
            sampling_rate_hz=stated.sampling_rate_hz,
            stretch_s=stated.stretch_s,
        )


def compare_files(
    request: CompareRequest,
    report_progress: Callable[[float, str], None],
    should_stop: Callable[[], bool],
) -> Comparison:
    """Read both recordings and compare them."""
    report_progress(0.0, "reading the recordings")
    return compare(
        request.read(request.earlier),
        request.read(request.later),
        request.settings,
        report_progress=report_progress,
        should_stop=should_stop,
    )


def in_order(request: CompareRequest) -> CompareRequest:
    """The request with the older recording as the earlier, where both say when they were made."""
    first, second = (request.read(path).recorded_at for path in (request.earlier, request.later))
    if first is None or second is None or first <= second:
        return request
    return replace(request, earlier=request.later, later=request.earlier)


class CompareRunner(QObject):
    """Runs one comparison at a time and tells how it went.

    A new request ends the one before it, whose result, if it still comes, is dropped.
    """

    progressed = Signal(float, str)
    ordered = Signal(object, object)  # paths of the earlier and the later, once told by time
    finished = Signal(object)
    failed = Signal(str, tuple)  # the reason, and the stops that may be lifted
    unstated = Signal(object)  # the TableIncomplete of the one that does not say all
    _came = Signal(object, str, object)

    def __init__(self, work: Work = compare_files) -> None:
        super().__init__()
        self._work = work
        self._pool = QThreadPool()
        self._pool.setMaxThreadCount(1)
        self._current: _Task | None = None
        self._came.connect(self._pass_on)

    def start(self, request: CompareRequest) -> None:
        """Compare a pair, instead of whatever is being compared."""
        self.cancel()
        self._current = _Task(request, self._work, self._came.emit)
        self._pool.start(self._current)

    def cancel(self) -> None:
        """End the comparison that is running; nothing more is heard of it."""
        if self._current is not None:
            self._current.stop.set()
            self._current = None

    def shut_down(self) -> None:
        """End the comparison that is running and wait until its thread has left it."""
        self.cancel()
        self._pool.waitForDone()

    def _pass_on(self, task: object, kind: str, content: object) -> None:
        if task is not self._current:
            return
        if kind == "progress":
            self.progressed.emit(*content)  # type: ignore[misc]
            return
        if kind == "order":
            self.ordered.emit(*content)  # type: ignore[misc]
            return
        self._current = None
        if kind == "result":
            self.finished.emit(content)
        elif kind == "unstated":
            self.unstated.emit(content)
        else:
            self.failed.emit(*content)  # type: ignore[misc]


class _Task(QRunnable):
    """One comparison in the worker thread."""

    def __init__(
        self, request: CompareRequest, work: Work, tell: Callable[[object, str, object], None]
    ) -> None:
        super().__init__()
        self.stop = threading.Event()
        self._request, self._work, self._tell = request, work, tell

    def run(self) -> None:
        """Do the work, if it is still wanted; whatever happens becomes one message."""
        if self.stop.is_set():
            return
        try:
            request = self._request
            if request.order_by_time:
                request = in_order(request)
                self._tell(self, "order", (request.earlier, request.later))
            result = self._work(request, self._report, self.stop.is_set)
        except Stopped:
            return
        except TableIncomplete as error:
            self._tell(self, "unstated", error)
        except NotComparable as error:
            self._tell(self, "failure", (str(error), error.stops))
        except SamespotError as error:
            self._tell(self, "failure", (str(error), ()))
        except Exception as error:  # noqa: BLE001, a window must outlive any fault of the engine
            # Where it happened, without the message, which may name a file or a person.
            where = "".join(traceback.format_tb(error.__traceback__))
            log.error("a comparison failed by %s\n%s", type(error).__name__, where)  # noqa: TRY400
            reason = (
                f"The comparison failed by a fault of the program ({type(error).__name__}). "
                "The recordings are untouched; please report it with the details that the "
                "program printed."
            )
            self._tell(self, "failure", (reason, ()))
        else:
            self._tell(self, "result", result)

    def _report(self, share: float, words: str) -> None:
        self._tell(self, "progress", (share, words))
