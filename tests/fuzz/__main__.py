"""Read damaged files of one format by the thousand: ``python -m tests.fuzz FORMAT``."""

from __future__ import annotations

import argparse
import math
import sys

# Written out: a guided campaign must see the readers' first import.
FORMATS = ("wfdb-header", "wfdb-signal", "dicom", "edf", "csv", "scp", "aecg")
GUIDED = ("scp", "aecg")


def main() -> int:
    """Run the campaign; 1 if a file did what no file may do."""
    parser = argparse.ArgumentParser(prog="python -m tests.fuzz", description=__doc__)
    parser.add_argument("format", choices=FORMATS)
    parser.add_argument("--files", type=int, default=100_000, help="how many files")
    parser.add_argument("--seed", type=int, default=0, help="another seed makes other files")
    parser.add_argument("--seconds", type=float, default=math.inf, help="stop after so long")
    parser.add_argument("--guided", action="store_true", help=f"by coverage: {', '.join(GUIDED)}")
    said = parser.parse_args()
    if said.guided:
        if said.format not in GUIDED:
            parser.error(f"only {' and '.join(GUIDED)} can be guided by coverage")
        from tests.fuzz import guided

        return guided.run(said.format, n_files=said.files, seed=said.seed, seconds=said.seconds)
    from tests.fuzz import campaign

    return campaign.run(
        said.format, n_files=said.files, seed=said.seed, seconds=said.seconds
    ).report()


if __name__ == "__main__":
    sys.exit(main())
