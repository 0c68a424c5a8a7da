"""Limits as the engine's columns: derived blobs in the file, rebuilt whenever they are not of today's revision."""

import sqlite3
from collections.abc import Mapping
from typing import Any

import numpy as np
from numpy.typing import NDArray

from engine.part import CONDITIONS
from engine.shelf import POINTS, SYMBOL_CODES, LimitTable, Shelf

_TEXT = "text"
_VALUES = ("bound_min", "typ", "bound_max", *CONDITIONS)


def load(conn: sqlite3.Connection) -> Shelf | None:
    """The shelf from the blobs, without stock; None where they are missing or stale."""
    (revision,) = conn.execute("SELECT value FROM meta WHERE key = 'revision'").fetchone()
    rows = conn.execute("SELECT name, dtype, rows, data FROM column_cache WHERE revision = ?", (revision,))
    found = {name: _array(dtype, k, data) for name, dtype, k, data in rows}
    if "fingerprint" not in found:
        return None
    points: dict[str, Mapping[str, NDArray[np.float64]]] = {
        group: {name: found[f"point {group} {name}"] for name in fields} for group, (_, fields) in POINTS.items()
    }
    ratings = {name.removeprefix("rating "): column for name, column in found.items() if name.startswith("rating ")}
    return Shelf(
        found["names"], found["structure"], found["package"], ratings, points, fingerprint=str(found["fingerprint"][0])
    )


def _array(dtype: str, rows: int, data: bytes) -> NDArray[Any]:
    if dtype == _TEXT:
        words = data.decode("utf-8").split("\n") if data else []
        column = np.empty(len(words), dtype=object)
        column[:] = words
        return column
    flat = np.frombuffer(data, dtype=dtype)
    return flat.reshape(rows, -1) if rows else flat


def build(conn: sqlite3.Connection) -> Shelf:
    """The shelf from the tables, without stock."""
    parts = conn.execute("SELECT id, type_number, structure, package FROM part ORDER BY id").fetchall()
    ids = np.array([row[0] for row in parts], dtype=np.int64)
    conn.execute("CREATE TEMP TABLE IF NOT EXISTS code (symbol TEXT PRIMARY KEY, code INTEGER)")
    conn.executemany("INSERT OR REPLACE INTO temp.code VALUES (?, ?)", SYMBOL_CODES.items())
    cursor = conn.execute(
        f'SELECT part, code, {", ".join(_VALUES)} FROM "limit" JOIN temp.code USING (symbol) WHERE used = 1 ORDER BY part'
    )
    numbers = np.fromiter(cursor, dtype=np.dtype((np.float64, len(_VALUES) + 2)))
    numbers = numbers.reshape(-1, len(_VALUES) + 2)
    columns: dict[str, NDArray[np.float64]] = {
        name: np.ascontiguousarray(numbers[:, i + 2]) for i, name in enumerate(_VALUES)
    }
    columns["min"], columns["max"] = columns.pop("bound_min"), columns.pop("bound_max")
    owner = np.searchsorted(ids, numbers[:, 0].astype(np.int64))
    table = LimitTable(owner.astype(np.int64), numbers[:, 1].astype(np.int64), columns)
    return Shelf.from_table([row[1] for row in parts], [row[2] for row in parts], [row[3] for row in parts], table)


def save(conn: sqlite3.Connection, shelf: Shelf) -> None:
    """Keep the shelf's columns as blobs of today's revision; part of the caller's transaction."""
    (revision,) = conn.execute("SELECT value FROM meta WHERE key = 'revision'").fetchone()
    rows: list[tuple[str, str, int, int, bytes]] = [
        ("names", _TEXT, 0, revision, "\n".join(shelf.names).encode()),
        ("package", _TEXT, 0, revision, "\n".join(shelf.package).encode()),
        ("fingerprint", _TEXT, 0, revision, shelf.fingerprint.encode()),
        ("structure", "int8", 0, revision, shelf.structure.tobytes()),
    ]
    rows += [(f"rating {name}", "float64", 0, revision, column.tobytes()) for name, column in shelf.ratings.items()]
    for group, fields in shelf.points.items():
        for name, column in fields.items():
            rows.append((f"point {group} {name}", "float64", len(column), revision, column.tobytes()))
    conn.execute("DELETE FROM column_cache")
    conn.executemany("INSERT INTO column_cache VALUES (?, ?, ?, ?, ?)", rows)


def touch(conn: sqlite3.Connection) -> None:
    """Count a change of parts or limits: from here on the blobs are stale."""
    conn.execute("UPDATE meta SET value = value + 1 WHERE key = 'revision'")
