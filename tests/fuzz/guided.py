"""Damaged files that reach new lines of a parser are damaged further, through atheris.

Nothing of the program is imported before `run`: a module is instrumented when it is imported.
"""

from __future__ import annotations

import contextlib
import os
import re
import sys
from collections.abc import Callable
from pathlib import Path
from typing import NoReturn

ROOT = Path(__file__).resolve().parents[2]
PACKAGES = {"scp": "core.recordings.scp", "aecg": "core.recordings.aecg"}
LONGEST_INPUT = 20_000
# Time and memory are watched here; two files crossed are seldom a file.
_OPTIONS = ["-timeout=0", "-rss_limit_mb=0", "-cross_over=0"]
LONGEST_WORD = 200
# Values of attributes, and texts.
_WORDS = re.compile(rb'(?<==")[^"<]*(?=")|(?<=>)[^<]+(?=<)')
_NO_WORD = bytes(byte for byte in range(256) if not 32 <= byte < 127 or byte in b'<>&"')
_COVERAGE = re.compile(rb"cov: (\d+)")


def run(name: str, *, n_files: int, seed: int, seconds: float) -> NoReturn:
    """Read so many files, or as many as the time allows, and end the process."""
    import atheris

    if "core" in sys.modules:
        raise RuntimeError("core was imported before it could be instrumented")
    with atheris.instrument_imports(include=["core"], exclude=_all_but(PACKAGES[name])):
        import core  # noqa: F401
    from tests.fuzz.tally import Tally, fast_folder, output_watched
    from tests.helpers.watched import read_watched

    sound, prepared = _seeds(name)
    rooms = contextlib.ExitStack()
    folder, corpus = (rooms.enter_context(fast_folder()) for _ in range(2))
    for number, content in enumerate(sound):
        (corpus / str(number)).write_bytes(content)
    path = folder / f"damaged.{name}"
    printed = rooms.enter_context(output_watched())
    tally = Tally(f"{name} guided by coverage")
    said = b""

    def read(data: bytes) -> None:
        nonlocal said
        said = (said + printed.take())[-1000:]  # by the fuzzer, which tells of its progress
        path.write_bytes(prepared(data))
        tally.add(tally.n_files, folder, read_watched(path), printed.take())
        if tally.n_files >= n_files or tally.is_enough or tally.seconds > seconds:
            rooms.close()
            reached = _COVERAGE.findall(said)
            tally.said.append(f"places of the code reached: {int(reached[-1]) if reached else 0}")
            os._exit(tally.report())  # the fuzzer knows no other end

    options = [f"-seed={seed + 1}", f"-max_len={LONGEST_INPUT}", *_OPTIONS]
    atheris.Setup(["fuzz", *options, str(corpus)], read, custom_mutator=_mutator(name))
    atheris.Fuzz()
    raise AssertionError("the fuzzer ended by itself")


def _all_but(package: str) -> list[str]:
    """Every module of core outside a package, by its full name."""
    names = []
    for path in (ROOT / "core").rglob("*.py"):
        parts = path.relative_to(ROOT).with_suffix("").parts
        name = ".".join(parts[:-1] if parts[-1] == "__init__" else parts)
        if not f"{name}.".startswith(f"{package}."):
            names.append(name)
    return names


def _seeds(name: str) -> tuple[list[bytes], Callable[[bytes], bytes]]:
    """Sound files, and what is done to a damaged one before it is read."""
    from tests.helpers import damage, scp_files

    if name == "scp":
        # A checksum would stop nearly every damage at the door.
        return [scp_files.record(made) for made in damage.scp_sections()], scp_files.sealed
    return damage.annotated_ecgs(), bytes


def _mutator(name: str) -> Callable[[bytes, int, int], bytes]:
    """Half of the damage by the helpers of the other campaigns, half by the fuzzer itself.

    The fuzzer knows no XML, and nearly all that it makes of a document is none any more: it is
    mostly given one attribute or one text.
    """
    import atheris
    import numpy as np

    from tests.helpers.aecg_damage import reworded
    from tests.helpers.mutate import mutated

    def changed(data: bytes, longest: int, seed: int) -> bytes:
        # Looked up at every call: atheris replaces its own Mutate when it is set up.
        rng = np.random.default_rng(seed)
        kind = rng.random()
        if name == "scp":
            return mutated(data, rng)[:longest] if kind < 0.5 else atheris.Mutate(data, longest)
        try:
            if kind < 0.5:
                return reworded(data, rng)[:longest]
        except UnicodeDecodeError:  # no text any more
            return atheris.Mutate(data, longest)
        words = list(_WORDS.finditer(data))
        if kind > 0.98 or not words:
            return atheris.Mutate(data, longest)
        first, last = words[int(rng.integers(len(words)))].span()
        word = atheris.Mutate(data[first:last], LONGEST_WORD).translate(None, _NO_WORD)
        return (data[:first] + word + data[last:])[:longest]

    return changed
