"""Landing a file's rows: what is new, what is there already, what contradicts.

A row is unchanged when its part says nothing new and all its limits are there with the same values, conditions
and source. A row that states another structure than the part has is refused as a whole: a sheet does not turn
an NPN into a PNP; an empty package or maker is filled in, another one is left as it is. A stock figure is
received only by a part that has no ledger yet: from then on the ledger says what is on hand.
"""

import sqlite3
from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace

from engine.part import Arrival, Limit, Part

from . import parts, stock


class Cancelled(Exception):
    """The caller no longer wants the file; everything is taken back."""


@dataclass(frozen=True, slots=True)
class Landing:
    """What became of a file's rows. accepted + unchanged + set_aside + len(refused) = rows."""

    accepted: int
    unchanged: int
    set_aside: int
    refused: tuple[tuple[int, str], ...]  # row, says
    notices: tuple[tuple[int, str], ...]  # rows that landed, with something to know
    parts: int  # on the shelf afterwards
    changed: bool  # whether parts or limits changed


def land(
    conn: sqlite3.Connection,
    arrivals: Sequence[Arrival],
    file: str,
    sha256: str,
    at: str,
    progress: Callable[[int, int], None],
    cancelled: Callable[[], bool],
) -> Landing:
    """Land rows inside the caller's transaction."""
    run = _Run(conn, arrivals, at)
    for done, arrival in enumerate(arrivals):
        if done % 5000 == 0:
            progress(done, len(arrivals))
            if cancelled():
                raise Cancelled
        run.take(arrival)
    run.finish()
    progress(len(arrivals), len(arrivals))
    (count,) = conn.execute("SELECT count(*) FROM part").fetchone()
    conn.execute(
        "INSERT INTO import_run (file, sha256, accepted, unchanged, set_aside, at) VALUES (?, ?, ?, ?, ?, ?)",
        (file, sha256, run.accepted, run.unchanged, run.set_aside, at),
    )
    return Landing(
        run.accepted, run.unchanged, run.set_aside, tuple(run.refused), tuple(run.notices), count, run.changed
    )


class _Run:
    """One file on its way in."""

    def __init__(self, conn: sqlite3.Connection, arrivals: Sequence[Arrival], at: str) -> None:
        self.conn, self.at = conn, at
        self.heads = self._heads({arrival.part.type_number for arrival in arrivals})
        self.limits = parts.limits_of(conn, [number for number, _ in self.heads.values()])
        self.sources: dict[str, int] = {}
        self.rows: list[tuple[object, ...]] = []
        self.accepted = self.unchanged = self.set_aside = 0
        self.refused: list[tuple[int, str]] = []
        self.notices: list[tuple[int, str]] = []
        self.changed = False

    def _heads(self, names: set[str]) -> dict[str, tuple[int, Part]]:
        """Number and head of the file's parts that are on the shelf already."""
        rows = self.conn.execute("SELECT id, type_number, structure, package, maker, note FROM part")
        return {row[1]: (row[0], Part(*row[1:])) for row in rows if row[1] in names}

    def take(self, arrival: Arrival) -> None:
        part = arrival.part
        known = self.heads.get(part.type_number)
        if known is not None and part.structure and known[1].structure not in ("", part.structure):
            says = (
                f"{part.type_number} is {known[1].structure} on the shelf, the row says {part.structure}; correct the row, or "
                f"the shelf with: betafloor part set {part.type_number} structure {part.structure}"
            )
            self.refused.append((arrival.row, says))
            return
        news = self._part(part)
        number = self.heads[part.type_number][0]
        for limit in part.limits:
            news |= self._limit(number, limit)
        self.changed |= news
        news |= self._stock(arrival, number)
        if arrival.set_aside:
            self.set_aside += 1
        elif news:
            self.accepted += 1
        else:
            self.unchanged += 1

    def _part(self, part: Part) -> bool:
        """Make the part, or fill in what was not known of it; whether anything was new."""
        known = self.heads.get(part.type_number)
        if known is None:
            cursor = self.conn.execute(
                "INSERT INTO part (uuid, type_number, structure, package, maker, note) VALUES (?, ?, ?, ?, ?, ?)",
                (parts.new_uuid(), part.type_number, part.structure, part.package, part.maker, part.note),
            )
            number = int(cursor.lastrowid or 0)
            self.heads[part.type_number] = (number, replace(part, limits=()))
            self.limits[number] = set()
            return True
        number, head = known
        filled = {
            field: getattr(part, field)
            for field in ("structure", "package", "maker", "note")
            if getattr(part, field) and not getattr(head, field)
        }
        for field, value in filled.items():
            self.conn.execute(f"UPDATE part SET {field} = ? WHERE id = ?", (value, number))
        if filled:
            self.heads[part.type_number] = (number, replace(head, **filled))
        return bool(filled)

    def _limit(self, number: int, limit: Limit) -> bool:
        limit = limit if limit.source else replace(limit, source=parts.BY_HAND)
        if limit in self.limits[number]:
            return False
        self.limits[number].add(limit)
        source = parts.source_id(self.conn, limit.source, self.sources)
        self.rows.append(parts.limit_row(number, limit, source, self.at))
        if len(self.rows) >= 20_000:
            self.finish()
        return True

    def _stock(self, arrival: Arrival, number: int) -> bool:
        if arrival.stock is None:
            return False
        name = arrival.part.type_number
        on_hand = stock.ledger(self.conn, number)
        if on_hand is None:
            entry = stock.Movement("receive", name, arrival.stock, "", "", "from a table", "", self.at, arrival.cost)
            stock.receive(self.conn, number, entry)
            return True
        if on_hand != arrival.stock:
            says = (
                f"{name}: the ledger says {on_hand} on hand, the row {arrival.stock}; enter a count if the row is right"
            )
            self.notices.append((arrival.row, says))
        return False

    def finish(self) -> None:
        """Write the limits that are waiting."""
        self.conn.executemany(parts.INSERT_LIMIT, self.rows)
        self.rows.clear()
