"""Run every check in one go: style, types, import directions, tests."""

from __future__ import annotations

import subprocess
import sys
import time
from pathlib import Path

ROOT = Path(__file__).resolve().parent.parent
CHECKS = (
    ("style", ["-m", "ruff", "check", "."]),
    ("format", ["-m", "ruff", "format", "--check", "."]),
    ("types", ["-m", "mypy"]),
    (
        "import directions",
        ["-c", "from importlinter.cli import lint_imports_command as run; run()"],
    ),
    ("tests", ["-m", "pytest"]),
)


def main() -> int:
    """Run the checks in order, all of them, and answer 1 if any failed."""
    failed = []
    for name, arguments in CHECKS:
        sys.stdout.write(f"== {name}\n")
        sys.stdout.flush()
        started = time.monotonic()
        if subprocess.run([sys.executable, *arguments], cwd=ROOT, check=False).returncode != 0:
            failed.append(name)
        sys.stdout.write(f"   {time.monotonic() - started:.0f} s\n")
    sys.stdout.write(f"failed: {', '.join(failed)}\n" if failed else "all checks passed\n")
    return 1 if failed else 0


if __name__ == "__main__":
    sys.exit(main())
