"""The whole job: from a table of published limits to a shortlist that someone else can check."""

import csv
import io
import json
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
DATA = ROOT / "tests" / "data"
COIL = ROOT / "tests" / "requirements" / "coil-24v-low-side.toml"  # why 2N3019 fits is worked out by hand in that file


def betafloor(shelf: Path, *arguments: str | Path) -> subprocess.CompletedProcess[str]:
    command = [sys.executable, "-m", "tui.cli", "--shelf", str(shelf), *map(str, arguments)]
    environment = {**os.environ, "PYTHONPATH": str(ROOT), "PYTHONIOENCODING": "utf-8"}
    return subprocess.run(command, capture_output=True, text=True, env=environment, timeout=120, check=False)


@pytest.fixture
def shelf(tmp_path: Path) -> Path:
    """A fresh shelf with the registered types."""
    path = tmp_path / "fresh.shelf"
    for file, said in (("registered-structures.csv", "structure"), ("registered-types.csv", "406 accepted")):
        done = betafloor(path, "import", DATA / file)
        assert done.returncode == 0 and not done.stderr, done.stderr
        assert said in done.stdout + file
    assert "the shelf holds 20 parts" in done.stdout
    return path


def test_on_the_command_line(shelf: Path, tmp_path: Path) -> None:
    ranked = json.loads(betafloor(shelf, "rank", COIL, "--json", "--all").stdout)["results"]
    first = next(one for one in ranked if one["part"] == "2N3019")
    assert first["verdict"] == "fits" and len(ranked) == 20
    network = f"rb={first['network']['rb']}"
    if first["network"]["rbe"] is not None:
        network += f",rbe={first['network']['rbe']}"
    judged = betafloor(shelf, "judge", COIL, "--part", "2N3019", "--network", network, "--json")
    (again,) = json.loads(judged.stdout)["results"]
    assert judged.returncode == 0 and again["verdict"] == "fits" and again["bounds"] == first["bounds"]
    weak = betafloor(shelf, "judge", COIL, "--part", "2N3019", "--network", "rb=100000", "--json")
    assert weak.returncode == 1 and json.loads(weak.stdout)["results"][0]["verdict"] == "fails"
    sheet = betafloor(shelf, "sheet", "2N3019", COIL, "--markdown")
    assert sheet.returncode == 0 and "2N3019" in sheet.stdout and "MIL-PRF-19500" in sheet.stdout
    for form in ("csv", "json", "markdown"):
        file = tmp_path / f"list.{form}"
        done = betafloor(shelf, "shortlist", "export", COIL, "--part", "2N3019", f"--{form}", "--output", file)
        assert done.returncode == 0, done.stderr
        assert "2N3019" in file.read_text()
    (row,) = csv.DictReader(io.StringIO((tmp_path / "list.csv").read_text()))
    assert (row["part"], row["verdict"]) == ("2N3019", "fits")
    assert float(row["RB [Ω]"]) == pytest.approx(first["network"]["rb"])


class Terminal:
    """A tmux server of its own with the program in its one window."""

    def __init__(self, shelf: Path) -> None:
        self.name = f"betafloor-{uuid.uuid4().hex[:8]}"
        program = [sys.executable, "-m", "tui.cli", "--shelf", str(shelf)]
        self("-f", "/dev/null", "new-session", "-d", "-x", "120", "-y", "40", "-c", str(ROOT),
             "sh", "-c", '"$@"; echo "left with $?"; exec cat', "sh", *program)  # fmt: skip

    def __call__(self, *words: str) -> str:
        done = subprocess.run(["tmux", "-L", self.name, *words], capture_output=True, text=True, check=True)
        return done.stdout

    def type(self, *keys: str) -> None:
        self("send-keys", *keys)

    def write(self, text: str) -> None:
        self("send-keys", "-l", text)

    def until(self, text: str, seconds: float = 30.0) -> str:
        """The screen once `text` stands on it."""
        deadline = time.monotonic() + seconds
        screen = ""
        while time.monotonic() < deadline:
            screen = self("capture-pane", "-p")
            if text in screen:
                return screen
        raise AssertionError(f"{text!r} is not on the screen:\n{screen}")


@pytest.fixture
def terminal(shelf: Path) -> Iterator[Terminal]:
    one = Terminal(shelf)
    yield one
    subprocess.run(["tmux", "-L", one.name, "kill-server"], capture_output=True, check=False)


@pytest.mark.skipif(shutil.which("tmux") is None, reason="needs tmux, which is not installed")
def test_in_a_terminal(terminal: Terminal, shelf: Path) -> None:
    terminal.until("20 of 20")
    terminal.write("/3019")
    assert "2N3019" in terminal.until("1 of 20")
    terminal.type("Enter", "F3")
    terminal.until("Supply, lowest")
    terminal.type("F6")
    terminal.until("Load a requirement")
    terminal.write("a fil")
    terminal.type("Enter")
    terminal.until("Name of the requirement file")
    terminal.write(str(COIL))
    terminal.until(COIL.name)
    terminal.type("Enter")
    terminal.until("22.8 V")
    terminal.type("F5")  # at 80 columns the ranking has a screen of its own
    ranked = terminal.until("1 fits")
    assert any("2N3019" in line and "fits" in line for line in ranked.splitlines())
    terminal.type("Enter")
    assert "2N3019" in terminal.until("VCEO  ").splitlines()[0]
    terminal.type("c")
    assert "Fits" in terminal.until("calculation sheet · 2N3019")
    terminal.type("Escape")
    terminal.until("VCEO  ")
    terminal.type("Space")
    terminal.until("marked")
    terminal.type("F4")
    terminal.until("For: 24 V coil, 110 mA, low side")
    terminal.type("s")
    terminal.until("Saved as shortlist 1")
    terminal.type("C-q")
    terminal.until("left with 0")
    saved = betafloor(shelf, "shortlist", "list", "--json")
    assert "24 V coil, 110 mA, low side" in saved.stdout
