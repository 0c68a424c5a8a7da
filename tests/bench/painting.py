"""The first paint beside a bare app of the same toolkit, and a page of the long lists."""

import asyncio
import os
import pty
import select
import signal
import statistics
import subprocess
import sys
import time
from pathlib import Path

from tests.tui.support import BigSource, Pilot, running
from tui.app import BetafloorApp
from tui.widgets.lines_view import LinesView

from .measure import say

ROOT = Path(__file__).parents[2]
BARE = """
from textual.app import App
from textual.widgets import Static
class Bare(App):
    def compose(self):
        yield Static("Betafloor")
Bare().run()
"""
OURS = """
from pathlib import Path
from tui.app import run
run(Path("none.sqlite"))
"""
RUNS = 7
MANY = 100_000


def run() -> None:
    """Print the ratios."""
    _seconds_to_paint(OURS)  # compiles what is not compiled yet
    pairs = [(_seconds_to_paint(OURS), _seconds_to_paint(BARE)) for _ in range(RUNS)]
    ours, bare = (statistics.median(times) for times in zip(*pairs, strict=True))
    say("first paint", ours, "a bare app", bare)
    for name in ("#parts", "#ranking"):
        short, long = (asyncio.run(_a_page(n, name)) for n in (2000, MANY))
        say(f"a page of {MANY:,} lines in {name}", long, "a page of 2,000 lines", short)


def _seconds_to_paint(code: str) -> float:
    """From starting Python to the first line with the program's name, on a terminal of 80×24."""
    parent, child = pty.openpty()
    begun = time.perf_counter()
    environment = {**os.environ, "TERM": "xterm-256color", "COLUMNS": "80", "LINES": "24"}
    process = subprocess.Popen(
        [sys.executable, "-c", code], stdin=child, stdout=child, stderr=child, cwd=ROOT, env=environment,
        start_new_session=True,
    )  # fmt: skip
    os.close(child)
    seen = b""
    try:
        while b"Betafloor" not in seen:
            if select.select([parent], [], [], 30.0)[0]:
                seen += os.read(parent, 65536)
        return time.perf_counter() - begun
    finally:
        os.killpg(process.pid, signal.SIGKILL)
        process.wait()
        os.close(parent)


async def _a_page(n: int, name: str) -> float:
    """Processor time of one page down on a screen of 120×40, without what the pilot takes to ask every widget."""
    async with running(BetafloorApp(BigSource(n)), (120, 40)) as pilot:
        if name == "#ranking":
            await pilot.fill()
            await pilot.press("f5")
        view = pilot.find(LinesView, name)
        moved, idle = [], []
        for _ in range(25):
            moved.append(await _taken(pilot, view))
            idle.append(await _taken(pilot, None))
        return statistics.median(moved) - statistics.median(idle)


async def _taken(pilot: Pilot, view: LinesView | None) -> float:
    begun = time.process_time()
    if view is not None:
        view.action_page(1)
    await pilot.pilot.pause()
    return time.process_time() - begun
