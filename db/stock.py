"""The stock ledger: what is on hand is always the sum of movements that are never changed."""

import sqlite3
from dataclasses import dataclass

import numpy as np

from engine.shelf import Shelf

from . import parts
from .errors import StoreError

KINDS = ("receive", "issue", "count", "scrap", "reserve", "release")
_SUMS = (
    "SELECT lot.part, lot.location, lot.unit_cost, "
    "coalesce(sum(CASE WHEN m.kind NOT IN ('reserve', 'release') THEN m.quantity END), 0), "
    "coalesce(sum(CASE WHEN m.kind IN ('reserve', 'release') THEN m.quantity END), 0) "
    "FROM lot LEFT JOIN movement m ON m.lot = lot.id"
)


@dataclass(frozen=True, slots=True)
class Movement:
    """One entry of the ledger as a person states it: a positive number of pieces (for a count: those found)."""

    kind: str
    type_number: str
    quantity: int
    location: str
    job: str
    note: str
    who: str
    at: str
    unit_cost: float | None = None


@dataclass(frozen=True, slots=True)
class Lot:
    """A batch of one part."""

    location: str
    on_hand: int
    unit_cost: float | None


@dataclass(frozen=True, slots=True)
class Line:
    """What is on hand of one part."""

    part: str
    on_hand: int
    reserved: int
    lots: tuple[Lot, ...]

    @property
    def free(self) -> int:
        return self.on_hand - self.reserved


def with_stock(conn: sqlite3.Connection, shelf: Shelf) -> Shelf:
    """The shelf with today's stock; the parts of a shelf are in the order of their numbers."""
    ids = np.array([row[0] for row in conn.execute("SELECT id FROM part ORDER BY id")], dtype=np.int64)
    on_hand, reserved = np.zeros(len(ids), np.int64), np.zeros(len(ids), np.int64)
    cost = np.full(len(ids), np.nan)
    for part, _, unit_cost, quantity, held in conn.execute(f"{_SUMS} GROUP BY lot.id"):
        row = int(np.searchsorted(ids, part))
        on_hand[row] += quantity
        reserved[row] += held
        if unit_cost is not None:
            cost[row] = unit_cost if np.isnan(cost[row]) else max(cost[row], unit_cost)
    return shelf.with_stock(on_hand, reserved, cost)


def lines(conn: sqlite3.Connection) -> list[Line]:
    """A line for every part that has a lot, in order of type number."""
    names = dict(conn.execute("SELECT id, type_number FROM part"))
    lots: dict[str, list[tuple[Lot, int]]] = {}
    for part, location, cost, quantity, held in conn.execute(f"{_SUMS} GROUP BY lot.id ORDER BY lot.id"):
        lots.setdefault(names[part], []).append((Lot(location, quantity, cost), held))
    return [_line(name, found) for name, found in sorted(lots.items())]


def _line(name: str, lots: list[tuple[Lot, int]]) -> Line:
    on_hand = sum(lot.on_hand for lot, _ in lots)
    return Line(name, on_hand, sum(held for _, held in lots), tuple(lot for lot, _ in lots))


def ledger(conn: sqlite3.Connection, part: int) -> int | None:
    """On hand of one part; None where it has no movement yet."""
    row = conn.execute(
        "SELECT count(m.id), coalesce(sum(CASE WHEN m.kind NOT IN ('reserve', 'release') THEN m.quantity END), 0) "
        "FROM lot JOIN movement m ON m.lot = lot.id WHERE lot.part = ?",
        (part,),
    ).fetchone()
    return int(row[1]) if row[0] else None


def receive(conn: sqlite3.Connection, part: int, entry: Movement) -> None:
    """Enter a receipt in a lot of its own."""
    lot = conn.execute(
        "INSERT INTO lot (uuid, part, location, unit_cost) VALUES (?, ?, ?, ?)",
        (parts.new_uuid(), part, entry.location, entry.unit_cost),
    ).lastrowid
    _enter(conn, int(lot or 0), entry.quantity, entry)


def move(conn: sqlite3.Connection, entry: Movement) -> Line:
    """Enter a movement; refuses what is not there. Gives back the part's line afterwards."""
    if entry.kind not in KINDS:
        raise StoreError(f"{entry.kind!r} is no movement; use one of {', '.join(KINDS)}")
    if entry.quantity < 0 or (entry.quantity == 0 and entry.kind != "count"):
        raise StoreError(f"quantity {entry.quantity} is not above zero; state the number of pieces")
    part = parts.find(conn, entry.type_number)
    if entry.kind == "receive":
        receive(conn, part, entry)
    else:
        _from_lots(conn, part, entry)
    found = [(Lot(loc, qty, cost), held) for _, loc, cost, qty, held in
             conn.execute(f"{_SUMS} WHERE lot.part = ? GROUP BY lot.id", (part,))]  # fmt: skip
    return _line(entry.type_number, found)


def _from_lots(conn: sqlite3.Connection, part: int, entry: Movement) -> None:
    """Take from, add to or hold in the lots of a part, oldest first (at one location, where it is named)."""
    lots = [one for one in _lots(conn, part) if not entry.location or one[1] == entry.location]
    if not lots:
        where = f" at {entry.location!r}" if entry.location else ""
        raise StoreError(f"{entry.type_number} has no lot{where}; receive some first")
    if entry.kind == "count":
        difference = entry.quantity - sum(quantity for _, _, quantity, _ in lots)
        _enter(conn, lots[0][0], difference, entry)
        return
    room = {lot: (held if entry.kind == "release" else quantity - held) for lot, _, quantity, held in lots}
    if sum(room.values()) < entry.quantity:
        what = "reserved" if entry.kind == "release" else "free"
        raise StoreError(
            f"{entry.type_number}: {entry.quantity} asked, {sum(room.values())} {what}; state no more than that"
        )
    left = entry.quantity
    for lot, available in room.items():
        share = min(left, max(available, 0))
        if share:
            _enter(conn, lot, share if entry.kind == "reserve" else -share, entry)
            left -= share


def _lots(conn: sqlite3.Connection, part: int) -> list[tuple[int, str, int, int]]:
    """Number, location, on hand and reserved of each lot of a part, oldest first."""
    query = _SUMS.replace("SELECT lot.part, lot.location, lot.unit_cost,", "SELECT lot.id, lot.location,")
    return conn.execute(f"{query} WHERE lot.part = ? GROUP BY lot.id ORDER BY lot.id", (part,)).fetchall()


def _enter(conn: sqlite3.Connection, lot: int, quantity: int, entry: Movement) -> None:
    conn.execute(
        "INSERT INTO movement (uuid, lot, quantity, kind, job, who, at, note) VALUES (?, ?, ?, ?, ?, ?, ?, ?)",
        (parts.new_uuid(), lot, quantity, entry.kind, entry.job, entry.who, entry.at, entry.note),
    )
