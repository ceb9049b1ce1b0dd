"""The installed wheel works from any folder, with its resources and samples."""

from __future__ import annotations

import json
import os
import shutil
import subprocess
import sys
import sysconfig
import venv
import zipfile
from pathlib import Path

import pytest

from tests.helpers.schemas import validate

ROOT = Path(__file__).resolve().parents[2]
SOURCES = ("app", "core", "resources", "sample_records", "README.md", "pyproject.toml")


@pytest.fixture(scope="module")
def wheel(tmp_path_factory) -> Path:
    """Built from a copy, so that the checkout stays as it is."""
    copy = tmp_path_factory.mktemp("source")
    for name in SOURCES:
        source = ROOT / name
        if source.is_dir():
            shutil.copytree(source, copy / name, ignore=shutil.ignore_patterns("__pycache__"))
        else:
            shutil.copy(source, copy / name)
    command = [sys.executable, "-m", "build", "--wheel", "--no-isolation", str(copy)]
    done = subprocess.run(command, capture_output=True, text=True, check=False)
    assert done.returncode == 0, done.stderr
    (built,) = (copy / "dist").glob("*.whl")
    return built


@pytest.fixture(scope="module")
def program(wheel, tmp_path_factory) -> Path:
    """The command of a fresh environment that shares nothing but the dependencies.

    Those are reached by a path that stands after the environment's own packages; the checkout,
    which an editable installation would add, is not on it.
    """
    folder = tmp_path_factory.mktemp("environment")
    venv.create(folder, with_pip=False)
    paths = {"base": str(folder), "platbase": str(folder)}
    packages = Path(sysconfig.get_path("purelib", vars=paths))
    scripts = Path(sysconfig.get_path("scripts", vars=paths))
    dependencies = {sysconfig.get_path("purelib"), sysconfig.get_path("platlib")}
    (packages / "zz_dependencies.pth").write_text("\n".join(sorted(dependencies)))
    python = scripts / ("python.exe" if os.name == "nt" else "python")
    install = [sys.executable, "-m", "pip", "--python", str(python), "install", "--no-deps"]
    done = subprocess.run(
        [*install, "--no-index", "--ignore-installed", "--quiet", str(wheel)],
        capture_output=True,
        text=True,
        check=False,
    )
    assert done.returncode == 0, done.stderr
    return scripts / "samespot"


def test_the_wheel_holds_resources_samples_and_licences(wheel):
    names = zipfile.ZipFile(wheel).namelist()
    for part in (
        "core/shipped/resources/torso_ensemble.npz",
        "core/shipped/resources/fonts/OpenSans-Regular.ttf",
        "core/shipped/resources/licences/MIT.txt",
        "core/shipped/sample_records/records/raised-later.dat",
    ):
        assert part in names
    assert not [name for name in names if name.startswith("tests/") or "maker" in name]


def test_the_demo_runs_from_any_folder(program, tmp_path):
    elsewhere = tmp_path / "elsewhere"
    elsewhere.mkdir()
    plain = {k: v for k, v in os.environ.items() if k not in ("PYTHONPATH", "QT_QPA_PLATFORM")}
    done = subprocess.run(
        [str(program), "demo", "--no-window", "--out", "out"],
        cwd=elsewhere,
        env=plain,
        capture_output=True,
        text=True,
        check=False,
    )
    assert done.returncode == 0, done.stderr
    validate("comparison", json.loads((elsewhere / "out" / "comparison.json").read_text()))
    assert (elsewhere / "out" / "comparison.pdf").read_bytes().startswith(b"%PDF")


def test_it_runs_its_own_code(program, tmp_path):
    python = program.with_name("python")
    done = subprocess.run(
        [str(python), "-c", "import core, app; print(core.__file__); print(app.__file__)"],
        cwd=tmp_path,
        env={k: v for k, v in os.environ.items() if k != "PYTHONPATH"},
        capture_output=True,
        text=True,
        check=True,
    )
    environment = program.parent.parent.resolve()
    for line in done.stdout.splitlines():
        assert environment in Path(line).resolve().parents, line
