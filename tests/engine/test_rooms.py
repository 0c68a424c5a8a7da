"""Each room stays in its room, and each module stands on its own feet."""

import subprocess
import sys
from pathlib import Path

import pytest

ROOT = Path(__file__).parents[2]
ROOMS = ("engine", "db", "importers", "reports", "tui")
NOT_THE_ENGINES = (
    "sqlite3", "csv", "pandas", "pint", "sqlite_utils", "logging", "textual", "rich", "click", "db", "importers", "reports",
    "tui",
)  # fmt: skip
HEAVY = ("pandas", "pint", "sqlite_utils", "textual", "scipy")
MOST_LINES = 400


def modules(room: str) -> list[str]:
    """Every module of a room, by its dotted name."""
    files = sorted((ROOT / room).rglob("*.py"))
    found = [".".join(one.relative_to(ROOT).with_suffix("").parts).removesuffix(".__init__") for one in files]
    assert found
    return found


@pytest.mark.parametrize("room", ROOMS)
def test_each_module_can_be_the_first_to_be_imported(room: str) -> None:
    """Each in a child of its own, forked before anything of ours is loaded: no circle hides behind another module."""
    code = f"""
import importlib, os, sys, traceback
import numpy
for name in {modules(room)!r}:
    child = os.fork()
    if not child:
        try:
            importlib.import_module(name)
        except BaseException:
            traceback.print_exc()
            os._exit(1)
        os._exit(0)
    if os.waitpid(child, 0)[1]:
        sys.exit(name)
"""
    done = subprocess.run([sys.executable, "-c", code], cwd=ROOT, capture_output=True, text=True, check=False)
    assert done.returncode == 0, done.stderr


def test_the_engine_loads_nothing_that_is_not_its_own() -> None:
    code = f"import importlib, sys\nbefore = set(sys.modules)\n[importlib.import_module(m) for m in {modules('engine')!r}]\n"
    code += "print(*(set(sys.modules) - before))"
    done = subprocess.run([sys.executable, "-c", code], cwd=ROOT, capture_output=True, text=True, check=True)
    loaded = set(done.stdout.split())
    assert "engine.rank" in loaded and "numpy" in loaded
    # numpy itself loads csv, and threads load logging
    assert not (loaded & set(NOT_THE_ENGINES)) - {"csv", "logging"}


def test_the_import_contracts_hold() -> None:
    command = [Path(sys.executable).with_name("lint-imports"), "--no-cache"]
    done = subprocess.run(command, cwd=ROOT, capture_output=True, text=True, check=False)
    assert done.returncode == 0, done.stdout + done.stderr
    assert "3 kept, 0 broken" in done.stdout


@pytest.mark.parametrize(
    "name", ["engine.rank", "engine.explain", "db.store", "importers.read", "reports.sheet", "tui.cli"]
)
def test_nothing_heavy_is_imported_before_it_is_needed(name: str) -> None:
    code = f"import sys, {name}; print([one for one in {HEAVY!r} if one in sys.modules])"
    done = subprocess.run([sys.executable, "-c", code], cwd=ROOT, capture_output=True, text=True, check=True)
    assert done.stdout.strip() == "[]"


def test_no_file_is_longer_than_a_reader_keeps_in_mind() -> None:
    for file in (file for room in (*ROOMS, "tests") for file in (ROOT / room).rglob("*.py")):
        assert len(file.read_text(encoding="utf-8").splitlines()) <= MOST_LINES, file
