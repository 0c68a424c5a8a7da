"""The invented demo shelf, made from the tables in `tui.demo`."""

import hashlib
from importlib.resources import files
from pathlib import Path

TABLES = ("limits.csv", "stock.csv")
REQUIREMENTS = (
    "valve-solenoid.toml", "pump-relay.toml", "grow-lamp-indicator.toml", "fan-supply.toml", "soil-probe.toml",
    "heating-mat.toml",
)  # fmt: skip


def example(name: str) -> str:
    """The text of one of REQUIREMENTS."""
    return (files("tui.demo") / name).read_text(encoding="utf-8")


def write_demo(folder: Path) -> Path:
    """Make a fresh demo shelf in `folder` and give back its path."""
    from db.store import Store
    from importers.read import read_bytes

    path = folder / "demo.shelf"
    path.unlink(missing_ok=True)
    with Store.open(path) as store:
        for table in TABLES:
            data = (files("tui.demo") / table).read_bytes()
            reading = read_bytes(data, table)
            store.land(reading.arrivals, file=table, sha256=hashlib.sha256(data).hexdigest())
    return path
