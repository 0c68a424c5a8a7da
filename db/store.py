"""A shelf file: opening it safely, reading it, and the only way to write it.

A connection belongs to one thread. Writes run inside BEGIN IMMEDIATE, so that sessions wait for each other
instead of failing; whatever is raised inside takes everything back.
"""

import sqlite3
from collections.abc import Callable, Iterator, Sequence
from contextlib import contextmanager
from datetime import UTC, datetime
from pathlib import Path
from types import TracebackType

from engine.part import Arrival, Limit
from engine.shelf import Shelf

from . import backup, columns, landing, parts, shortlists, stock
from .errors import NewerShelf, NotAShelf, NotWritable, StoreError, mended
from .schema import APPLICATION_ID, VERSION, migrate

WAIT = 5.0  # seconds that a session waits for another one's write
AT_ONCE = 1 << 26  # bytes: of a longer file the limits, of which a ranking reads only the columns, are checked later


def now() -> str:
    """This moment, UTC, to the second."""
    return datetime.now(UTC).strftime("%Y-%m-%dT%H:%M:%SZ")


class Store:
    """An open shelf file. Every method raises StoreError for what its user can mend."""

    def __init__(self, path: Path, conn: sqlite3.Connection, *, read_only: bool) -> None:
        self.path, self.conn, self.read_only = path, conn, read_only
        self._limits_checked = path.stat().st_size <= AT_ONCE

    @classmethod
    def open(cls, path: Path, *, create: bool = True, wait: float = WAIT) -> "Store":
        """Open `path`, creating or migrating it; a file that is not a sound shelf is left untouched."""
        if path.is_dir():
            raise NotAShelf(f"{path} is a directory; name the shelf file in it")
        if not path.exists():
            if not create:
                raise StoreError(f"{path} does not exist; import a table to make a shelf, or name another file")
            if not path.parent.is_dir():
                raise NotWritable(f"{path.parent} does not exist; make the folder first")
        fresh = not path.exists() or path.stat().st_size == 0
        with mended(path):
            if not fresh:
                _inspect(path)
            conn, read_only = _connect(path, wait)
            try:
                if read_only:
                    return cls(path, conn, read_only=True)
                conn.execute("PRAGMA journal_mode = WAL")
                (version,) = conn.execute("PRAGMA user_version").fetchone()
                if version < VERSION:
                    migrate(conn, path)
            except BaseException:
                conn.close()
                raise
            return cls(path, conn, read_only=False)

    def close(self) -> None:
        """Close the file."""
        self.conn.close()

    def __enter__(self) -> "Store":
        return self

    def __exit__(
        self, kind: type[BaseException] | None, error: BaseException | None, trace: TracebackType | None
    ) -> None:
        self.close()

    @contextmanager
    def write(self, who: str = "") -> Iterator[sqlite3.Connection]:
        """A transaction that is whole or not at all; `who` goes into the history."""
        if self.read_only:
            raise NotWritable(f"{self.path} is open read-only; check the rights of the file and its folder")
        with mended(self.path):
            if not self._limits_checked:
                _sound(self.path, self.conn)
                self._limits_checked = True
            self.conn.execute("BEGIN IMMEDIATE")
            try:
                self.conn.execute("UPDATE actor SET who = ? WHERE id = 1", (who,))
                yield self.conn
                self.conn.execute("COMMIT")
            except BaseException:
                if self.conn.in_transaction:
                    self.conn.rollback()
                raise

    # --- the shelf

    def shelf(self) -> Shelf:
        """The parts as the engine's columns, with what is on hand now."""
        with mended(self.path):
            shelf = columns.load(self.conn)
            if shelf is None:
                shelf = columns.build(self.conn)
                if not self.read_only:
                    with self.write() as conn:
                        columns.save(conn, shelf)
            return stock.with_stock(self.conn, shelf)

    def land(
        self,
        arrivals: Sequence[Arrival],
        *,
        file: str,
        sha256: str,
        dry_run: bool = False,
        at: str = "",
        progress: Callable[[int, int], None] = lambda done, total: None,
        cancelled: Callable[[], bool] = lambda: False,
    ) -> landing.Landing:
        """Land a file's rows in one transaction; see `landing`."""
        try:
            with self.write(f"import of {file}") as conn:
                landed = landing.land(conn, arrivals, file, sha256, at or now(), progress, cancelled)
                if dry_run:
                    raise _DryRun(landed)
                if landed.changed:
                    columns.touch(conn)
                    columns.save(conn, columns.build(conn))
        except _DryRun as done:
            return done.landed
        return landed

    # --- parts

    def part(self, type_number: str) -> parts.StoredPart:
        """One part with all its limits. Raises NotFound, naming the nearest type numbers."""
        with mended(self.path):
            return parts.read(self.conn, type_number)

    def parts(self) -> list[parts.Summary]:
        """A line a part, in order of type number."""
        with mended(self.path):
            return parts.summaries(self.conn)

    def set_part(self, type_number: str, field: str, value: str, *, who: str = "") -> None:
        """Set structure, package, maker, pin_order or note of a part."""
        with self.write(who) as conn:
            parts.set_field(conn, type_number, field, value)
            columns.touch(conn)

    def add_limit(self, type_number: str, limit: Limit, *, who: str = "", at: str = "") -> None:
        """Add one limit, "entered by hand" unless it names a source."""
        with self.write(who) as conn:
            parts.add_limit(conn, type_number, limit, at or now())
            columns.touch(conn)

    def remove_limit(self, type_number: str, limit_id: int, *, who: str = "") -> None:
        """Take one limit away; the history keeps it."""
        with self.write(who) as conn:
            parts.remove_limit(conn, type_number, limit_id)
            columns.touch(conn)

    # --- stock

    def move(self, kind: str, type_number: str, quantity: int, *, location: str = "", job: str = "", note: str = "",
             who: str = "", at: str = "", unit_cost: float | None = None) -> stock.Line:  # fmt: skip
        """Enter a movement in the ledger and give back the part's new line. Raises StoreError."""
        with self.write(who) as conn:
            entry = stock.Movement(kind, type_number, quantity, location, job, note, who, at or now(), unit_cost)
            return stock.move(conn, entry)

    def stock(self) -> list[stock.Line]:
        """On hand, reserved and free of every part that has a lot."""
        with mended(self.path):
            return stock.lines(self.conn)

    # --- requirements and shortlists

    def save_requirement(self, title: str, toml: str, *, at: str = "") -> int:
        """Keep a requirement file's text; the same text is kept once."""
        with self.write() as conn:
            return shortlists.save_requirement(conn, title, toml, at or now())

    def requirements(self) -> list[shortlists.SavedRequirement]:
        """Saved requirements, newest first."""
        with mended(self.path):
            return shortlists.requirements(self.conn)

    def save_shortlist(self, requirement: int, policy: str, program: str, fingerprint: str,
                       entries: Sequence[shortlists.Entry], *, at: str = "") -> int:  # fmt: skip
        """Freeze a shortlist; gives back its number."""
        with self.write() as conn:
            head = (requirement, policy, program, fingerprint, at or now())
            return shortlists.save(conn, head, entries)

    def shortlists(self) -> list[shortlists.Shortlist]:
        """Saved shortlists with their entries, newest first."""
        with mended(self.path):
            return shortlists.all_of(self.conn)

    # --- keeping it

    def backup(self, target: Path) -> None:
        """Write a verified copy while others go on working."""
        backup.write(self.path, self.conn, target)

    def check(self) -> list[str]:
        """What is wrong with the file, one line each; empty when it is sound."""
        with mended(self.path):
            return backup.problems(self.conn)


class _DryRun(Exception):
    """Takes a landing back once it is known what it would do."""

    def __init__(self, landed: landing.Landing) -> None:
        super().__init__()
        self.landed = landed


def _connect(path: Path, wait: float) -> tuple[sqlite3.Connection, bool]:
    """A connection, and whether it can only read."""
    import os

    readable_only = path.exists() and not os.access(path, os.W_OK)
    uri = f"{path.absolute().as_uri()}?mode=ro&immutable=1" if readable_only else f"{path.absolute().as_uri()}"
    conn = sqlite3.connect(uri, uri=True, timeout=wait, isolation_level=None)
    conn.execute("PRAGMA synchronous = NORMAL")
    conn.execute("PRAGMA foreign_keys = ON")
    return conn, readable_only


def _inspect(path: Path) -> None:
    """Refuse what is not a sound shelf, without writing a byte."""
    with path.open("rb") as file:
        head = file.read(16)
    if head != b"SQLite format 3\0":
        raise NotAShelf(f"{path} is not a shelf file; name another file, or import it with: betafloor import {path}")
    probe = sqlite3.connect(f"{path.absolute().as_uri()}?mode=ro", uri=True, timeout=WAIT)
    try:
        (owner,) = probe.execute("PRAGMA application_id").fetchone()
        (version,) = probe.execute("PRAGMA user_version").fetchone()
        (filled,) = probe.execute("SELECT count(*) FROM sqlite_schema").fetchone()
        if owner != APPLICATION_ID and (owner or filled):
            raise NotAShelf(f"{path} is another program's database (application id {owner:#x}); name another file")
        if version > VERSION:
            raise NewerShelf(
                f"{path} was written by a newer version (schema {version}, this one knows {VERSION}); update"
            )
        tables: list[str] = []
        if path.stat().st_size > AT_ONCE:
            names = probe.execute("SELECT name FROM sqlite_schema WHERE type = 'table' AND name <> 'limit'")
            tables = [name for (name,) in names]
        _sound(path, probe, tables)
    finally:
        probe.close()


def _sound(path: Path, conn: sqlite3.Connection, tables: Sequence[str] = ()) -> None:
    """Refuse a file with damaged pages, in some tables or anywhere."""
    for which in tables or ("1",):
        (verdict,) = conn.execute(f"PRAGMA quick_check({which})").fetchone()
        if verdict != "ok":
            raise NotAShelf(f"{path} is damaged ({verdict}); restore a backup; the file was left as it is")
