"""Keys that are sent faster than the screen can follow, through a real terminal."""

import os
import shutil
import subprocess
import sys
import time
import uuid
from collections.abc import Iterator
from pathlib import Path

import pytest

ROOT = Path(__file__).parents[2]
PROGRAM = "from tests.tui.support import FakeSource; from tui.app import BetafloorApp; BetafloorApp(FakeSource()).run()"

pytestmark = pytest.mark.skipif(
    shutil.which("tmux") is None or "CI" in os.environ, reason="needs tmux and a machine that is not too busy"
)


class Terminal:
    """A tmux server of its own with one window."""

    def __init__(self, size: tuple[int, int]) -> None:
        self.name = f"betafloor-{uuid.uuid4().hex[:8]}"
        self("-f", "/dev/null", "new-session", "-d", "-x", str(size[0]), "-y", str(size[1]), "-c", str(ROOT),
             "sh", "-c", '"$0" -c "$1"; echo "left with $?"; exec cat', sys.executable, PROGRAM)  # fmt: skip

    def __call__(self, *words: str) -> str:
        done = subprocess.run(["tmux", "-L", self.name, *words], capture_output=True, text=True, check=True)
        return done.stdout

    def until(self, text: str, seconds: float = 20.0) -> str:
        """The screen once `text` stands on it."""
        deadline = time.monotonic() + seconds
        while time.monotonic() < deadline:
            screen = self("capture-pane", "-p")
            if text in screen:
                return screen
        raise AssertionError(f"{text!r} is not on the screen:\n{screen}")


@pytest.fixture
def terminal() -> Iterator[Terminal]:
    one = Terminal((80, 24))
    yield one
    subprocess.run(["tmux", "-L", one.name, "kill-server"], capture_output=True, check=False)


def test_a_search_typed_ahead_loses_no_key(terminal: Terminal) -> None:
    terminal.until("10 of 10")
    for word, left in (("qx-13", "1 of 10"), ("qx-11", "6 of 10"), ("oops", "1 of 10")):
        terminal("send-keys", "-l", f"/{word}")
        assert f"Search {word}" in terminal.until(left)
        terminal("send-keys", "Enter", "x")
        terminal.until("10 of 10")


def test_keys_sent_behind_the_one_that_opens_a_screen_reach_it(terminal: Terminal) -> None:
    terminal.until("10 of 10")
    terminal("send-keys", "Enter", "2")
    terminal.until("[2 gain]")
    terminal("send-keys", "Escape", "Down")
    terminal.until("10 of 10")
    terminal("send-keys", "F3", "V", "a", "l", "v", "e")
    assert "Valve" in terminal.until("Supply, lowest")


def test_a_part_searched_and_opened_in_one_go_is_that_part(terminal: Terminal) -> None:
    terminal.until("10 of 10")
    for name, title in (("qx-130", "QX-130"), ("qx-112", "QX-112"), ("oops", "[/]oops")):
        terminal("send-keys", "/", *name, "Enter", "Enter")
        terminal.until(f"Betafloor · {title} ")
        terminal("send-keys", "Escape")
        terminal.until("1 of 10")
        terminal("send-keys", "x")
        terminal.until("10 of 10")


def test_enter_does_not_overtake_the_letters_before_it(terminal: Terminal) -> None:
    terminal.until("10 of 10")
    terminal("send-keys", "Space", "F3", "F6", "i", "r", "r", "i", "Enter")
    terminal.until("Irrigation valve solenoid")
    terminal.until("F5 form/list")
    terminal("send-keys", "F4")
    terminal.until("For: Irrigation")
    terminal("send-keys", "e", "C-u")
    terminal.until("Write the shortlist")
    terminal("send-keys", "-l", "list-of-parts.xyz")
    terminal("send-keys", "Enter")
    assert "list-of-parts.xyz" in terminal.until("must end in")


def test_a_field_cleared_and_corrected_in_one_go_holds_what_was_meant(terminal: Terminal) -> None:
    terminal.until("10 of 10")
    terminal("send-keys", "/", "o", "o", "C-u", "q", "x", "-", "9", "BSpace", "1", "3", "Left", "BSpace", "1", "Enter")
    assert "Search qx-13" in terminal.until("1 of 10")


def test_the_program_leaves_the_terminal_as_it_was(terminal: Terminal) -> None:
    terminal.until("10 of 10")
    terminal("send-keys", "C-q")
    assert "Betafloor" not in terminal.until("left with 0")
