"""How long until something is on the terminal, beside a bare app of the same toolkit in the same minute."""

import os
import pty
import select
import signal
import statistics
import subprocess
import sys
import time
from pathlib import Path

import pytest

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
run(Path({path!r}))
"""
RUNS = 5

pytestmark = pytest.mark.skipif("CI" in os.environ, reason="a machine shared with others tells no times")


def seconds_to_paint(code: str) -> float:
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
            assert time.perf_counter() - begun < 30, seen[-500:]
            if select.select([parent], [], [], 1.0)[0]:
                seen += os.read(parent, 65536)
        return time.perf_counter() - begun
    finally:
        os.killpg(process.pid, signal.SIGKILL)
        process.wait()
        os.close(parent)


def test_the_first_paint_takes_at_most_half_as_long_again_as_a_bare_app(tmp_path: Path) -> None:
    path = tmp_path / "none.sqlite"
    seconds_to_paint(OURS.format(path=str(path)))  # compiles what is not compiled yet
    pairs = [(seconds_to_paint(BARE), seconds_to_paint(OURS.format(path=str(path)))) for _ in range(RUNS)]
    bare, ours = (statistics.median(times) for times in zip(*pairs, strict=True))
    print(f"bare {bare:.3f} s, ours {ours:.3f} s")
    assert ours <= 1.5 * bare
