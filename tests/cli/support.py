"""The command line as a user calls it, on the invented demo shelf."""

import os
import subprocess
import sys
from pathlib import Path

ROOT = Path(__file__).parents[2]


def betafloor(*arguments: str | Path, shelf: Path | None = None) -> subprocess.CompletedProcess[str]:
    """Run the command in a process of its own."""
    environment = {**os.environ, "PYTHONPATH": str(ROOT), "PYTHONIOENCODING": "utf-8"}
    environment.pop("BETAFLOOR_SHELF", None)
    where = ["--shelf", str(shelf)] if shelf else []
    command = [sys.executable, "-m", "tui.cli", *where, *map(str, arguments)]
    return subprocess.run(command, text=True, capture_output=True, env=environment, timeout=120, check=False)
