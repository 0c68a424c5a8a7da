"""Saved requirements and frozen shortlists."""

import sqlite3
from collections.abc import Sequence
from dataclasses import dataclass

from . import parts


@dataclass(frozen=True, slots=True)
class SavedRequirement:
    """A requirement file's text under its title."""

    id: int
    title: str
    toml: str
    at: str


@dataclass(frozen=True, slots=True)
class Entry:
    """A part of a shortlist, with what was judged then as JSON."""

    rank: int
    part: str
    verdict: str
    snapshot: str


@dataclass(frozen=True, slots=True)
class Shortlist:
    """A frozen shortlist."""

    id: int
    title: str
    toml: str
    policy: str
    program: str
    fingerprint: str
    at: str
    entries: tuple[Entry, ...]


def save_requirement(conn: sqlite3.Connection, title: str, toml: str, at: str) -> int:
    """Keep a requirement; the same title and text are kept once."""
    row = conn.execute("SELECT id FROM requirement WHERE title = ? AND toml = ?", (title, toml)).fetchone()
    if row is not None:
        return int(row[0])
    values = (parts.new_uuid(), title, toml, at)
    cursor = conn.execute("INSERT INTO requirement (uuid, title, toml, at) VALUES (?, ?, ?, ?)", values)
    return int(cursor.lastrowid or 0)


def requirements(conn: sqlite3.Connection) -> list[SavedRequirement]:
    """Saved requirements, newest first."""
    rows = conn.execute("SELECT id, title, toml, at FROM requirement ORDER BY id DESC")
    return [SavedRequirement(*row) for row in rows]


def save(conn: sqlite3.Connection, head: tuple[int, str, str, str, str], entries: Sequence[Entry]) -> int:
    """Freeze a shortlist; `head` is requirement, policy, program, fingerprint and time."""
    cursor = conn.execute(
        "INSERT INTO shortlist (uuid, requirement, policy, program, shelf_fingerprint, at) VALUES (?, ?, ?, ?, ?, ?)",
        (parts.new_uuid(), *head),
    )
    number = int(cursor.lastrowid or 0)
    rows = [(number, one.rank, one.part, one.verdict, one.snapshot) for one in entries]
    conn.executemany("INSERT INTO entry (shortlist, rank, part, verdict, snapshot) VALUES (?, ?, ?, ?, ?)", rows)
    return number


def all_of(conn: sqlite3.Connection) -> list[Shortlist]:
    """Saved shortlists with their entries, newest first."""
    heads: list[tuple[int, str, str, str, str, str, str]] = conn.execute(
        "SELECT s.id, r.title, r.toml, s.policy, s.program, s.shelf_fingerprint, s.at FROM shortlist s "
        "JOIN requirement r ON r.id = s.requirement ORDER BY s.id DESC"
    ).fetchall()
    return [Shortlist(*head, _entries(conn, head[0])) for head in heads]


def _entries(conn: sqlite3.Connection, shortlist: int) -> tuple[Entry, ...]:
    rows = conn.execute(
        "SELECT rank, part, verdict, snapshot FROM entry WHERE shortlist = ? ORDER BY rank", (shortlist,)
    )
    return tuple(Entry(*row) for row in rows)
