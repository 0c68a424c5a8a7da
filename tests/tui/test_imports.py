"""What is imported before the first paint, proved in a fresh process."""

import subprocess
import sys
from pathlib import Path

import pytest

ROOT = Path(__file__).parents[2]
HEAVY = ("pandas", "pint", "sqlite_utils", "scipy", "matplotlib", "openpyxl", "numpy", "engine.rank", "importers", "db")


def loaded_after(code: str) -> set[str]:
    """Names of the modules that a fresh Python has loaded after running `code`."""
    tail = "\nimport sys\nprint('\\n'.join(sys.modules))"
    done = subprocess.run([sys.executable, "-c", code + tail], cwd=ROOT, capture_output=True, text=True, check=True)
    return set(done.stdout.split())


@pytest.mark.parametrize("heavy", HEAVY)
def test_nothing_heavy_is_imported_with_the_app(heavy: str, modules_of_the_app: set[str]) -> None:
    assert heavy not in modules_of_the_app


@pytest.fixture(scope="module")
def modules_of_the_app() -> set[str]:
    found = loaded_after("import tui.app, tui.screens.shelf, tui.store_source")
    assert "textual.app" in found
    return found


def test_nothing_heavy_is_imported_by_the_first_paint() -> None:
    """The shelf is only asked for once something has been painted."""
    code = """
import asyncio, sys
from tui.app import BetafloorApp
class Source:
    name = "none"
    def shelf(self):
        seen.append([m for m in ("numpy", "pandas", "pint", "sqlite_utils") if m in sys.modules])
        painted.append(any("Betafloor" in s.text for strip in app.screen._compositor.render_strips() for s in strip))
        from tui.source import SourceError
        raise SourceError("that is all")
seen, painted = [], []
app = BetafloorApp(Source())
async def main():
    async with app.run_test() as pilot:
        while not painted:
            await pilot.pause()
asyncio.run(main())
assert seen == [[]], seen
assert painted == [True]
"""
    loaded_after(code)
