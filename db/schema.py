"""The schema as numbered steps; step N brings version N-1 to N in one transaction, after a copy of the file."""

import sqlite3
from pathlib import Path

from engine.part import CONDITIONS

APPLICATION_ID = 0x42464C52  # "BFLR"

_CONDITION_COLUMNS = ", ".join(f"{name} REAL" for name in CONDITIONS)

_FIRST = f"""
-- a row per fact about the file: 'revision' counts every change of parts and limits
CREATE TABLE meta (key TEXT PRIMARY KEY, value INTEGER NOT NULL) STRICT;

-- a row per document that limits were read from; 'entered by hand' is one
CREATE TABLE source (id INTEGER PRIMARY KEY, document TEXT NOT NULL UNIQUE, revision TEXT, page TEXT, kind TEXT) STRICT;

-- a row per transistor type; structure '' while nobody has stated it
CREATE TABLE part (
  id INTEGER PRIMARY KEY, uuid TEXT NOT NULL UNIQUE, type_number TEXT NOT NULL UNIQUE, maker TEXT NOT NULL DEFAULT '',
  structure TEXT NOT NULL DEFAULT '', package TEXT NOT NULL DEFAULT '', pin_order TEXT NOT NULL DEFAULT '',
  note TEXT NOT NULL DEFAULT '', status TEXT NOT NULL DEFAULT 'active') STRICT;

-- a row per value of a letter symbol, SI and °C; a bound or condition that the sheet does not state is NULL;
-- used 0: the symbol is not one this program knows, kept with its own words
CREATE TABLE "limit" (
  id INTEGER PRIMARY KEY, part INTEGER NOT NULL REFERENCES part(id) ON DELETE CASCADE, symbol TEXT NOT NULL,
  used INTEGER NOT NULL, bound_min REAL, typ REAL, bound_max REAL, {_CONDITION_COLUMNS}, pulsed INTEGER NOT NULL,
  source INTEGER NOT NULL REFERENCES source(id), note TEXT NOT NULL, flag TEXT NOT NULL, entered_at TEXT NOT NULL) STRICT;

-- for the limits of one part
CREATE INDEX limit_of_part ON "limit" (part);

-- a row per batch in a drawer; unit_cost NULL when not known
CREATE TABLE lot (
  id INTEGER PRIMARY KEY, uuid TEXT NOT NULL UNIQUE, part INTEGER NOT NULL REFERENCES part(id), location TEXT NOT NULL,
  date_code TEXT NOT NULL DEFAULT '', supplier_ref TEXT NOT NULL DEFAULT '', unit_cost REAL) STRICT;

-- for the lots of one part
CREATE INDEX lot_of_part ON lot (part);

-- a row per entry in the stock ledger; quantity is signed: what it does to on hand, or to reserved for reserve and release
CREATE TABLE movement (
  id INTEGER PRIMARY KEY, uuid TEXT NOT NULL UNIQUE, lot INTEGER NOT NULL REFERENCES lot(id), quantity INTEGER NOT NULL,
  kind TEXT NOT NULL CHECK (kind IN ('receive', 'issue', 'count', 'scrap', 'reserve', 'release')),
  job TEXT NOT NULL, who TEXT NOT NULL, at TEXT NOT NULL, note TEXT NOT NULL) STRICT;

-- for the sum of one lot
CREATE INDEX movement_of_lot ON movement (lot);

CREATE TRIGGER movement_stays BEFORE UPDATE ON movement BEGIN SELECT raise(ABORT, 'the ledger is never changed'); END;

CREATE TRIGGER movement_kept BEFORE DELETE ON movement BEGIN SELECT raise(ABORT, 'the ledger is never changed'); END;

-- a row per saved requirement, as its file's text
CREATE TABLE requirement (
  id INTEGER PRIMARY KEY, uuid TEXT NOT NULL UNIQUE, title TEXT NOT NULL, toml TEXT NOT NULL, at TEXT NOT NULL) STRICT;

-- a row per frozen shortlist
CREATE TABLE shortlist (
  id INTEGER PRIMARY KEY, uuid TEXT NOT NULL UNIQUE, requirement INTEGER NOT NULL REFERENCES requirement(id),
  policy TEXT NOT NULL, program TEXT NOT NULL, shelf_fingerprint TEXT NOT NULL, at TEXT NOT NULL) STRICT;

-- a row per part of a shortlist, with what was judged then as JSON
CREATE TABLE entry (
  shortlist INTEGER NOT NULL REFERENCES shortlist(id), rank INTEGER NOT NULL, part TEXT NOT NULL, verdict TEXT NOT NULL,
  snapshot TEXT NOT NULL, PRIMARY KEY (shortlist, rank)) STRICT;

-- a row per file that was imported
CREATE TABLE import_run (
  id INTEGER PRIMARY KEY, file TEXT NOT NULL, sha256 TEXT NOT NULL, accepted INTEGER NOT NULL, unchanged INTEGER NOT NULL,
  set_aside INTEGER NOT NULL, at TEXT NOT NULL) STRICT;

-- a row per change of a part, and per limit that was taken away
CREATE TABLE history (
  id INTEGER PRIMARY KEY, at TEXT NOT NULL DEFAULT (strftime('%Y-%m-%dT%H:%M:%SZ', 'now')), who TEXT NOT NULL,
  "table" TEXT NOT NULL, row INTEGER NOT NULL, "column" TEXT NOT NULL, old TEXT, new TEXT) STRICT;

-- the one row says who writes: the triggers read it
CREATE TABLE actor (id INTEGER PRIMARY KEY CHECK (id = 1), who TEXT NOT NULL) STRICT;

-- a row per column of the shelf as the engine reads it, derived from the tables above at a revision
CREATE TABLE column_cache (
  name TEXT PRIMARY KEY, dtype TEXT NOT NULL, rows INTEGER NOT NULL, revision INTEGER NOT NULL, data BLOB NOT NULL) STRICT;

INSERT INTO meta VALUES ('revision', 0);

INSERT INTO actor VALUES (1, '');
"""

_WATCHED = ("type_number", "maker", "structure", "package", "pin_order", "note", "status")

_TRIGGERS = [
    f"CREATE TRIGGER part_{column} AFTER UPDATE OF {column} ON part WHEN old.{column} IS NOT new.{column} BEGIN "
    f'INSERT INTO history (who, "table", row, "column", old, new) '
    f"SELECT who, 'part', old.id, '{column}', old.{column}, new.{column} FROM actor; END"
    for column in _WATCHED
] + [
    'CREATE TRIGGER limit_gone AFTER DELETE ON "limit" BEGIN INSERT INTO history (who, "table", row, "column", old, new) '
    "SELECT who, 'limit', old.part, old.symbol, "
    "coalesce(old.bound_min, '') || ' / ' || coalesce(old.typ, '') || ' / ' || coalesce(old.bound_max, ''), NULL "
    "FROM actor; END"
]

STEPS: tuple[tuple[str, ...], ...] = (
    (*(one.strip() for one in _FIRST.replace("END;", "END ;").split(";\n\n")), *_TRIGGERS),
)
"""The statements of each step; step N brings version N-1 to N."""

VERSION = len(STEPS)


def migrate(conn: sqlite3.Connection, path: Path) -> None:
    """Bring the file to VERSION in one transaction; a file that held data is copied beside itself first."""
    from sqlite_utils import Database

    (found,) = conn.execute("PRAGMA user_version").fetchone()
    if 0 < found < VERSION:
        copy = path.with_name(f"{path.name}.before-{VERSION}")
        with sqlite3.connect(copy) as target:
            conn.backup(target)
        target.close()
    conn.execute("BEGIN IMMEDIATE")
    try:
        (found,) = conn.execute("PRAGMA user_version").fetchone()  # another session may have been quicker
        database = Database(conn)
        for step in STEPS[found:]:
            for statement in step:
                database.conn.execute(statement)
        conn.execute(f"PRAGMA application_id = {APPLICATION_ID}")
        conn.execute(f"PRAGMA user_version = {VERSION}")
        conn.execute("COMMIT")
    except BaseException:
        conn.rollback()
        raise
