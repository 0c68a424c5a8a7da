"""Several sessions at once, sessions that are killed, and what a plain start imports."""

import os
import signal
import subprocess
import sys
import time
from pathlib import Path

import pytest

from db.store import Store
from tests.db.support import arrivals

ROOT = Path(__file__).parents[2]


def python(code: str, *arguments: str) -> subprocess.Popen[str]:
    environment = {**os.environ, "PYTHONPATH": str(ROOT)}
    return subprocess.Popen(
        [sys.executable, "-c", code, *arguments], text=True, stdout=subprocess.PIPE, env=environment
    )


MOVE = """
import sys
from pathlib import Path
from db.store import Store
for _ in range(200):
    with Store.open(Path(sys.argv[1])) as store:
        store.move("receive", "ZQ-00000", 1)
"""


def test_two_sessions_lose_no_movement(tmp_path: Path) -> None:
    path = tmp_path / "s.shelf"
    with Store.open(path) as store:
        store.land(arrivals(1, 1), file="t", sha256="x")
    sessions = [python(MOVE, str(path)) for _ in range(2)]
    assert [one.wait(60) for one in sessions] == [0, 0]
    with Store.open(path) as store:
        assert store.stock()[0].on_hand == 400


OPEN = "import sys; from pathlib import Path; from db.store import Store; Store.open(Path(sys.argv[1])).close()"


def test_sessions_that_make_the_file_at_once_all_succeed(tmp_path: Path) -> None:
    sessions = [python(OPEN, str(tmp_path / "s.shelf")) for _ in range(4)]
    assert [one.wait(60) for one in sessions] == [0] * 4


LAND = """
import sys
from pathlib import Path
from db.store import Store
from tests.db.support import arrivals
rows = arrivals(400, 8)
print("ready", flush=True)
for run in range(1000):
    with Store.open(Path(sys.argv[1])) as store:
        for row in rows:
            object.__setattr__(row.part, "type_number", f"R{run}-{row.row}")
        store.land(rows, file=f"run {run}", sha256="x")
    print(run, flush=True)
"""


@pytest.mark.parametrize("delay", [0.02, 0.11, 0.2, 0.37, 0.5, 0.71])
def test_killing_an_import_loses_nothing_that_was_reported(tmp_path: Path, delay: float) -> None:
    path = tmp_path / "s.shelf"
    session = python(LAND, str(path))
    assert session.stdout is not None and session.stdout.readline() == "ready\n"
    end = time.monotonic() + delay
    while time.monotonic() < end:
        os.sched_yield()
    session.send_signal(signal.SIGKILL)
    reported = [int(line) for line in session.stdout.read().split()]
    session.wait(10)
    with Store.open(path) as store:
        runs = store.conn.execute("SELECT file, accepted FROM import_run ORDER BY id").fetchall()
        assert [name for name, _ in runs[: len(reported)]] == [f"run {one}" for one in reported]
        assert len(runs) - len(reported) in (0, 1)  # one more may have been done and not yet reported
        assert len(store.parts()) == 3200 * len(runs)  # whole runs only
        assert store.check() == []


def test_killing_a_migration_leaves_nothing_half_there(tmp_path: Path) -> None:
    for attempt in range(12):
        path = tmp_path / f"{attempt}.shelf"
        session = python(OPEN, str(path))
        end = time.monotonic() + 0.05 * attempt
        while time.monotonic() < end:
            os.sched_yield()
        session.kill()
        session.wait(10)
        with Store.open(path) as store:
            assert store.check() == [] and store.parts() == []


def test_reading_a_shelf_imports_neither_sqlite_utils_nor_pandas(tmp_path: Path) -> None:
    path = tmp_path / "s.shelf"
    with Store.open(path) as store:
        store.land(arrivals(), file="t", sha256="x")
    code = (
        "import sys; from pathlib import Path; from db.store import Store\n"
        "with Store.open(Path(sys.argv[1])) as store: store.shelf()\n"
        "print([name for name in ('sqlite_utils', 'pandas', 'pint', 'textual') if name in sys.modules])"
    )
    session = python(code, str(path))
    out, _ = session.communicate(timeout=30)
    assert out.strip() == "[]"
