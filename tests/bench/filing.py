"""From file to first ranking, and into the file, against SQLite's own executemany."""

import sqlite3
import tempfile
from pathlib import Path

from db.store import Store
from engine.part import Arrival, Limit, Part
from engine.rank import rank

from .measure import once, say, seconds
from .shelves import COIL, requirement

PARTS = 100_000
STATED = 12


def arrivals(n: int) -> list[Arrival]:
    """One row a limit, as a long table gives them."""
    found = []
    for i in range(n):
        ic = 0.1 * (1 + i % 50)
        limits = [
            Limit("VCEO", max=30.0 + i % 70), Limit("IC", max=ic), Limit("VEBO", max=5.0), Limit("TJ", max=150.0),
            Limit("RthJA", max=200.0), Limit("PD", max=0.6, conditions=(("ta", 25.0),)),
            Limit("ICBO", max=1e-7, conditions=(("vcb", 30.0),)),
            *(Limit("hFE", min=60.0 + i % 40, conditions=(("ic", ic * share), ("vce", 1.0))) for share in (0.01, 0.1, 0.5)),
            Limit("VCE(sat)", max=0.4, conditions=(("ib", ic / 20), ("ic", ic / 2))),
            Limit("VBE(sat)", max=1.1, conditions=(("ib", ic / 20), ("ic", ic / 2))),
        ]  # fmt: skip
        assert len(limits) == STATED
        name, structure = f"P{i:07d}", ("npn", "pnp")[i % 2]
        found += [Arrival(2 + i * STATED + k, Part(name, structure, limits=(one,))) for k, one in enumerate(limits)]
    return found


def run() -> None:
    """Print the ratios."""
    wanted = requirement(COIL)
    with tempfile.TemporaryDirectory() as folder:
        path = Path(folder, "big.shelf")
        rows = arrivals(PARTS)
        with Store.open(path) as store:
            landed = once(lambda: store.land(rows, file="big.csv", sha256="0"))
        plain = once(lambda: _plain(Path(folder, "plain.sqlite"), rows))
        say(f"land {len(rows):,} limits", landed, "executemany of the same rows", plain)

        def file_to_ranking() -> None:
            with Store.open(path) as store:
                rank(wanted, store.shelf())

        say(f"file to first ranking of {PARTS:,} parts", seconds(file_to_ranking, 3), "one read of the file",
            seconds(path.read_bytes))  # fmt: skip


def _plain(path: Path, rows: list[Arrival]) -> None:
    conn = sqlite3.connect(path)
    conn.execute("CREATE TABLE x (part TEXT, symbol TEXT, low REAL, high REAL, a REAL, b REAL, c REAL)")
    values = []
    for row in rows:
        (one,) = row.part.limits
        numbers = [value for _, value in one.conditions] + [None] * (3 - len(one.conditions))
        values.append((row.part.type_number, one.symbol, one.min, one.max, *numbers))
    with conn:
        conn.executemany("INSERT INTO x VALUES (?, ?, ?, ?, ?, ?, ?)", values)
    conn.close()
