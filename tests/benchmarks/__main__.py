"""How long the steps of a comparison take: ``python -m tests.benchmarks``.

Machines differ and are noisy, so every time is also given as a multiple of a fixed piece of
array work done in the same run.
"""

from __future__ import annotations

import subprocess
import sys
import tempfile
import time
from collections.abc import Callable
from pathlib import Path

import numpy as np
from pydicom.data import get_testdata_file
from scipy.signal import butter, sosfiltfilt

from core import Recording, compare, measure, read_recording
from core.shipped_files import samples_folder

REPEATS = 5
YARDSTICK_SIZE = 400


def least_seconds(work: Callable[[], object]) -> float:
    """The quickest of a few runs: what the machine adds is never negative."""
    times = []
    for _ in range(REPEATS):
        started = time.process_time()
        work()
        times.append(time.process_time() - started)
    return min(times)


def yardstick() -> object:
    """A singular value decomposition of a fixed matrix."""
    return np.linalg.svd(np.random.default_rng(0).normal(size=(YARDSTICK_SIZE, YARDSTICK_SIZE)))


def filter_pass() -> object:
    """One zero-phase band-pass of twelve leads of ten seconds at 1000 Hz."""
    sections = butter(4, (0.05, 150.0), "bandpass", fs=1000.0, output="sos")
    return sosfiltfilt(sections, np.random.default_rng(0).normal(size=(12, 10_000)))


def recording_at_1000_hz() -> Recording:
    """The recording that pydicom ships."""
    return read_recording(str(get_testdata_file("waveform_ecg.dcm")))


def cold_start_seconds(earlier: Path, later: Path) -> float:
    """Processor time of a whole ``samespot compare --json`` in a process of its own."""
    import resource

    with tempfile.TemporaryDirectory() as folder:
        before = resource.getrusage(resource.RUSAGE_CHILDREN)
        program = "import sys; from app.command_line.main import main; sys.exit(main())"
        command = [sys.executable, "-c", program, "compare", str(earlier), str(later)]
        subprocess.run([*command, "--json", str(Path(folder) / "out.json")], check=True)
        after = resource.getrusage(resource.RUSAGE_CHILDREN)
    return after.ru_utime + after.ru_stime - before.ru_utime - before.ru_stime


def main() -> None:
    """Print the table."""
    paths = [samples_folder() / f"raised-{which}.hea" for which in ("earlier", "later")]
    earlier, later = (read_recording(path) for path in paths)
    compare(earlier, later)  # loads the torso ensemble
    unit = least_seconds(yardstick)
    rows = {
        "read one recording": least_seconds(lambda: read_recording(paths[0])),
        "measure one recording": least_seconds(lambda: measure(earlier)),
        "compare two recordings": least_seconds(lambda: compare(earlier, later)),
        "samespot compare, cold, to JSON": cold_start_seconds(*paths),
    }
    size = f"{YARDSTICK_SIZE} x {YARDSTICK_SIZE}"
    sys.stdout.write(f"processor time; the unit is one SVD of a {size} matrix ({unit:.3f} s)\n")
    for name, seconds in rows.items():
        sys.stdout.write(f"{name:34} {seconds:7.3f} s  {seconds / unit:7.1f} units\n")
    recording = recording_at_1000_hz()
    once, measured = least_seconds(filter_pass), least_seconds(lambda: measure(recording))
    sys.stdout.write(
        f"measure, 12 leads x 10 s at 1000 Hz: {measured:.3f} s, {measured / once:.1f} times one "
        f"band-pass of the same samples ({once:.4f} s)\n"
    )


if __name__ == "__main__":
    main()
