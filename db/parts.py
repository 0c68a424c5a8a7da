"""Parts and their limits as records."""

import sqlite3
import uuid
from dataclasses import dataclass
from difflib import get_close_matches

from engine.part import CONDITIONS, STRUCTURES, Limit, Part
from engine.symbols import SYMBOLS

from .errors import NotFound, StoreError

BY_HAND = "entered by hand"
SETTABLE = ("structure", "package", "maker", "pin_order", "note")
COLUMNS = (
    "part", "symbol", "used", "bound_min", "typ", "bound_max", *CONDITIONS, "pulsed", "source", "note", "flag", "entered_at",
)  # fmt: skip
INSERT_LIMIT = f'INSERT INTO "limit" ({", ".join(COLUMNS)}) VALUES ({", ".join("?" * len(COLUMNS))})'
_READ = (
    f"SELECT l.part, l.id, l.symbol, l.bound_min, l.typ, l.bound_max, {', '.join(f'l.{c}' for c in CONDITIONS)}, "
    'l.pulsed, s.document, l.note, l.flag, l.entered_at FROM "limit" l JOIN source s ON s.id = l.source'
)


@dataclass(frozen=True, slots=True)
class StoredPart:
    """A part with what the file knows besides: numbers and times of its limits, in their order."""

    part: Part
    id: int
    limit_ids: tuple[int, ...]
    entered_at: tuple[str, ...]
    stock: int


@dataclass(frozen=True, slots=True)
class Summary:
    """A line about a part."""

    type_number: str
    structure: str
    package: str
    maker: str
    limits: int


def find(conn: sqlite3.Connection, type_number: str) -> int:
    """The number of a part. Raises NotFound with the nearest type numbers."""
    row = conn.execute("SELECT id FROM part WHERE type_number = ?", (type_number,)).fetchone()
    if row is not None:
        return int(row[0])
    names = [name for (name,) in conn.execute("SELECT type_number FROM part")]
    near = get_close_matches(type_number.upper(), names, n=3, cutoff=0.5)
    hint = f"nearest are {', '.join(near)}" if near else "list them with: betafloor part list"
    raise NotFound(f"no part called {type_number!r} on the shelf; {hint}")


def read(conn: sqlite3.Connection, type_number: str) -> StoredPart:
    """One part with all its limits."""
    number = find(conn, type_number)
    head = conn.execute("SELECT structure, package, maker, note FROM part WHERE id = ?", (number,)).fetchone()
    rows = conn.execute(f"{_READ} WHERE l.part = ? ORDER BY l.id", (number,)).fetchall()
    limits = tuple(limit_of(row) for row in rows)
    (stock,) = conn.execute(
        "SELECT coalesce(sum(m.quantity), 0) FROM movement m JOIN lot ON lot.id = m.lot "
        "WHERE lot.part = ? AND m.kind NOT IN ('reserve', 'release')",
        (number,),
    ).fetchone()
    part = Part(type_number, head[0], head[1], head[2], head[3], limits)
    return StoredPart(part, number, tuple(row[1] for row in rows), tuple(row[-1] for row in rows), int(stock))


def limits_of(conn: sqlite3.Connection, numbers: list[int]) -> dict[int, set[Limit]]:
    """The limits of some parts, by part."""
    found: dict[int, set[Limit]] = {number: set() for number in numbers}
    if len(numbers) > 500:
        rows = conn.execute(_READ)
    else:
        rows = conn.execute(f"{_READ} WHERE l.part IN ({','.join('?' * len(numbers))})", numbers)
    for row in rows:
        if row[0] in found:
            found[row[0]].add(limit_of(row))
    return found


def limit_of(row: tuple[object, ...]) -> Limit:
    """A row of the reading query as a record."""
    n = len(CONDITIONS)
    values = row[6 : 6 + n]
    conditions = tuple(
        sorted((name, value) for name, value in zip(CONDITIONS, values, strict=True) if value is not None)
    )
    pulsed, source, note, flag = row[6 + n : 10 + n]
    return Limit(row[2], row[3], row[4], row[5], conditions, bool(pulsed), source, note, flag)  # type: ignore[arg-type]


def limit_row(part: int, limit: Limit, source: int, at: str) -> tuple[object, ...]:
    """A record as a row of INSERT_LIMIT."""
    stated = dict(limit.conditions)
    conditions = (stated.get(name) for name in CONDITIONS)
    return (
        part, limit.symbol, int(limit.symbol in SYMBOLS), limit.min, limit.typ, limit.max, *conditions, int(limit.pulsed),
        source, limit.note, limit.flag, at,
    )  # fmt: skip


def source_id(conn: sqlite3.Connection, document: str, known: dict[str, int]) -> int:
    """The number of a source, made when it is new; `known` is filled on the way."""
    name = document or BY_HAND
    if name not in known:
        conn.execute("INSERT OR IGNORE INTO source (document) VALUES (?)", (name,))
        (known[name],) = conn.execute("SELECT id FROM source WHERE document = ?", (name,)).fetchone()
    return known[name]


def summaries(conn: sqlite3.Connection) -> list[Summary]:
    """A line a part."""
    rows = conn.execute(
        'SELECT p.type_number, p.structure, p.package, p.maker, (SELECT count(*) FROM "limit" l WHERE l.part = p.id) '
        "FROM part p ORDER BY p.type_number"
    )
    return [Summary(*row) for row in rows]


def set_field(conn: sqlite3.Connection, type_number: str, field: str, value: str) -> None:
    """Set one field of a part."""
    if field not in SETTABLE:
        raise StoreError(f"{field!r} cannot be set; set one of {', '.join(SETTABLE)}")
    if field == "structure" and value not in STRUCTURES:
        raise StoreError(f"{value!r} is not a structure; use one of {', '.join(STRUCTURES)}")
    conn.execute(f"UPDATE part SET {field} = ? WHERE id = ?", (value, find(conn, type_number)))


def add_limit(conn: sqlite3.Connection, type_number: str, limit: Limit, at: str) -> None:
    """Add one limit."""
    source = source_id(conn, limit.source, {})
    conn.execute(INSERT_LIMIT, limit_row(find(conn, type_number), limit, source, at))


def remove_limit(conn: sqlite3.Connection, type_number: str, limit_id: int) -> None:
    """Take one limit away."""
    number = find(conn, type_number)
    if conn.execute('DELETE FROM "limit" WHERE id = ? AND part = ?', (limit_id, number)).rowcount == 0:
        raise NotFound(f"{type_number} has no limit number {limit_id}; part show lists them")


def new_uuid() -> str:
    """A stable identity, so that shelves can be merged."""
    return str(uuid.uuid4())
