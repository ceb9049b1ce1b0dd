"""What a campaign counts, and the files that it keeps."""

from __future__ import annotations

import os
import resource
import shutil
import sys
import tempfile
import time
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path

from tests.helpers.watched import Reading

MOST_MB = 500.0
# More of the same say nothing new.
MOST_KEPT = 20


def peak_mb() -> float:
    """The most that this process held in memory so far; Linux counts in kB, macOS in bytes."""
    peak = resource.getrusage(resource.RUSAGE_SELF).ru_maxrss
    return peak / (1024**2 if sys.platform == "darwin" else 1024)


class Tally:
    """Counts of one campaign."""

    def __init__(self, name: str) -> None:
        self._name = name
        self._n_read = self._n_refused = self._n_kept = 0
        self._slowest_s = 0.0
        self._most_mb = max(MOST_MB, peak_mb())
        self._started = time.monotonic()
        self._kept: Path | None = None
        self.said: list[str] = []

    @property
    def n_files(self) -> int:
        """Files so far."""
        return self._n_read + self._n_refused

    @property
    def is_enough(self) -> bool:
        """Whether so many files were kept that going on would be useless."""
        return self._n_kept >= MOST_KEPT

    @property
    def seconds(self) -> float:
        """Since the start."""
        return time.monotonic() - self._started

    def add(self, number: int, folder: Path, reading: Reading, printed: bytes) -> None:
        """Count a reading; keep the folder where it did what it must not do."""
        if reading.refusal is None:
            self._n_read += 1
        else:
            self._n_refused += 1
        self._slowest_s = max(self._slowest_s, reading.seconds)
        faults = list(reading.faults)
        if printed:
            faults.append(f"printed: {printed[:500]!r}")
        if peak_mb() > self._most_mb:
            self._most_mb = peak_mb()
            faults.append(f"took {self._most_mb:.0f} MB")
        if not faults:
            return
        if self._kept is None:
            self._kept = Path(tempfile.mkdtemp(prefix=f"fuzz-{self._name}-"))
        kept = self._kept / str(number)
        shutil.copytree(folder, kept)
        (kept / "faults.txt").write_text("\n".join(faults))
        self._n_kept += 1
        self.said.append(f"file {number}: {faults[0].strip().splitlines()[-1]}")

    def report(self) -> int:
        """Print the counts; the exit status."""
        lines = [
            *self.said,
            f"{self._name}: {self.n_files} files in {self.seconds:.0f} s: {self._n_read} read, "
            f"{self._n_refused} refused; slowest {self._slowest_s:.3f} s; "
            f"peak {peak_mb():.0f} MB",
        ]
        if self._kept is not None:
            lines.append(f"{self._n_kept} files that did what no file may do: {self._kept}")
        sys.stdout.write("\n".join(lines) + "\n")
        sys.stdout.flush()
        return 1 if self._kept is not None else 0


class Printed:
    """What was written to standard output and error, by C libraries too, since last asked."""

    def __init__(self, descriptor: int) -> None:
        self._descriptor = descriptor

    def take(self) -> bytes:
        """The bytes, once."""
        sys.stdout.flush()
        sys.stderr.flush()
        size = os.fstat(self._descriptor).st_size
        if not size:
            return b""
        os.lseek(self._descriptor, 0, os.SEEK_SET)
        said = os.read(self._descriptor, size)
        os.ftruncate(self._descriptor, 0)
        os.lseek(self._descriptor, 0, os.SEEK_SET)
        return said


@contextmanager
def output_watched() -> Iterator[Printed]:
    """Take both outputs of the process away from the screen."""
    sys.stdout.flush()
    sys.stderr.flush()
    screen = [os.dup(number) for number in (1, 2)]
    with tempfile.TemporaryFile() as file:
        for number in (1, 2):
            os.dup2(file.fileno(), number)
        try:
            yield Printed(file.fileno())
        finally:
            sys.stdout.flush()
            sys.stderr.flush()
            for number, kept in zip((1, 2), screen, strict=True):
                os.dup2(kept, number)
                os.close(kept)


@contextmanager
def fast_folder() -> Iterator[Path]:
    """A folder for files that live for a moment: in memory where the system offers that."""
    memory = Path("/dev/shm")
    with tempfile.TemporaryDirectory(dir=memory if memory.is_dir() else None) as folder:
        yield Path(folder)
