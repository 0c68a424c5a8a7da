"""Copies that are known to open, and a look for damage."""

import os
import sqlite3
from pathlib import Path

import numpy as np

from . import columns
from .errors import NotWritable, StoreError, mended


def write(path: Path, conn: sqlite3.Connection, target: Path) -> None:
    """Copy the open file to `target` while others go on working; the copy is opened and checked before it counts."""
    if target.is_dir():
        raise StoreError(f"{target} is a directory; name the file of the backup")
    if not target.parent.is_dir():
        raise NotWritable(f"{target.parent} does not exist; make the folder first")
    if target.exists() and os.path.samefile(path, target):
        raise StoreError(f"{target} is the shelf itself; name another file")
    half = target.with_name(f".{target.name}.half")
    try:
        with mended(half):
            copy = sqlite3.connect(half)
            try:
                conn.backup(copy)
                (verdict,) = copy.execute("PRAGMA integrity_check(1)").fetchone()
            finally:
                copy.close()
        if verdict != "ok":
            raise StoreError(f"the copy of {path} is damaged ({verdict}); check the disk; no backup was written")
        os.replace(half, target)
    finally:
        half.unlink(missing_ok=True)


def problems(conn: sqlite3.Connection) -> list[str]:
    """What is wrong with the file, one line each."""
    found = [f"damage: {says}" for (says,) in conn.execute("PRAGMA integrity_check") if says != "ok"]
    found += [
        f"{row[0]}, row {row[1]}: points to a row of {row[2]} that is gone"
        for row in conn.execute("PRAGMA foreign_key_check")
    ]
    kept = columns.load(conn)
    if kept is not None:
        fresh = columns.build(conn)
        if kept.fingerprint != fresh.fingerprint or not np.array_equal(kept.names, fresh.names):
            found.append("the derived columns do not agree with the limits; any edit rebuilds them")
    return found
