"""The rooms and what may be imported where."""

import importlib.util
import pkgutil
import subprocess
import sys
from pathlib import Path

import pytest

ROOT = Path(__file__).parents[2]
ROOMS = ("engine", "db", "importers", "reports", "tui")
MOST_LINES = 400
HEAVY = ("pandas", "pint", "sqlite_utils", "textual", "scipy")


def modules(room: str) -> list[str]:
    spec = importlib.util.find_spec(room)
    assert spec is not None and spec.submodule_search_locations
    return sorted(one.name for one in pkgutil.walk_packages(spec.submodule_search_locations, f"{room}."))


def python(code: str) -> subprocess.CompletedProcess[str]:
    return subprocess.run([sys.executable, "-c", code], cwd=ROOT, capture_output=True, text=True, check=False)


@pytest.mark.parametrize("room", ROOMS)
def test_every_module_of_a_room_can_be_the_first(room: str) -> None:
    """No module leans on another one having been imported before it."""
    code = f"""
import importlib, sys
before = set(sys.modules)
for name in {modules(room)!r}:
    for one in set(sys.modules) - before:
        if one.split('.')[0] in {ROOMS!r}:
            del sys.modules[one]
    try:
        importlib.import_module(name)
    except ImportError as error:
        sys.exit(f"{{name}}: {{error}}")
"""
    done = python(code)
    assert done.returncode == 0, done.stderr


@pytest.mark.parametrize(
    "name", ["engine.rank", "engine.explain", "db.store", "importers.read", "reports.sheet", "tui.cli"]
)
def test_nothing_heavy_is_imported_before_it_is_needed(name: str) -> None:
    done = python(f"import sys, {name}; print([one for one in {HEAVY!r} if one in sys.modules])")
    assert done.stdout.strip() == "[]", done.stderr


def test_imports_run_one_way() -> None:
    done = subprocess.run(
        [Path(sys.executable).with_name("lint-imports")], cwd=ROOT, capture_output=True, text=True, check=False
    )
    assert done.returncode == 0, done.stdout


def test_no_file_is_longer_than_a_reader_keeps_in_mind() -> None:
    for file in ROOT.glob("*/**/*.py"):
        if ".venv" not in file.parts:
            assert len(file.read_text(encoding="utf-8").splitlines()) <= MOST_LINES, file
