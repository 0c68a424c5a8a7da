"""The shelf file keeps what it was given, refuses what is not its own, and never writes by halves."""

import sqlite3
from pathlib import Path

import numpy as np
import pytest

from db import columns
from db.errors import Busy, NewerShelf, NotAShelf, NotFound, NotWritable, StoreError
from db.landing import Cancelled
from db.schema import APPLICATION_ID, VERSION
from db.shortlists import Entry
from db.store import Store
from engine.part import Arrival, Limit, Part
from engine.shelf import Shelf

from .support import arrivals


@pytest.fixture
def path(tmp_path: Path) -> Path:
    return tmp_path / "s.shelf"


def land(store: Store, rows: list[Arrival], **options: bool) -> tuple[int, int, int]:
    landed = store.land(rows, file="t.csv", sha256="x", **options)  # type: ignore[arg-type]
    return landed.accepted, landed.unchanged, landed.set_aside


def same(a: Shelf, b: Shelf) -> bool:
    ratings = all(np.array_equal(a.ratings[k], b.ratings[k], equal_nan=True) for k in a.ratings)
    points = all(np.array_equal(a.points[g][f], b.points[g][f], equal_nan=True) for g in a.points for f in a.points[g])
    return ratings and points and a.fingerprint == b.fingerprint and list(a.names) == list(b.names)


# --- landing


def test_landing_twice_changes_nothing(path: Path) -> None:
    with Store.open(path) as store:
        assert land(store, arrivals()) == (12, 0, 0)
        assert land(store, arrivals()) == (0, 12, 0)
        assert len(store.part("ZQ-00000").part.limits) == 4


def test_a_dry_run_writes_nothing(path: Path) -> None:
    with Store.open(path) as store:
        assert land(store, arrivals(), dry_run=True) == (12, 0, 0)
        assert store.parts() == []


def test_a_contradicting_structure_is_refused_and_named(path: Path) -> None:
    with Store.open(path) as store:
        land(store, arrivals(1, 1))
        landed = store.land([Arrival(7, Part("ZQ-00000", "pnp"))], file="t", sha256="y")
        assert (landed.accepted, landed.unchanged, [row for row, _ in landed.refused]) == (0, 0, [7])
        assert store.part("ZQ-00000").part.structure == "npn"


def test_an_empty_field_is_filled_in_and_the_history_knows(path: Path) -> None:
    with Store.open(path) as store:
        land(store, [Arrival(2, Part("ZQ-1"))])
        land(store, [Arrival(2, Part("ZQ-1", "npn", "TO-92"))])
        store.set_part("ZQ-1", "structure", "pnp", who="me")
        found = store.conn.execute('SELECT who, "column", old, new FROM history ORDER BY id').fetchall()
    assert ("import of t.csv", "structure", "", "npn") in found
    assert found[-1] == ("me", "structure", "npn", "pnp")


def test_stock_of_a_table_is_received_once(path: Path) -> None:
    with Store.open(path) as store:
        land(store, arrivals(1, 1, stock=12))
        landed = store.land(arrivals(1, 1, stock=15), file="t", sha256="z")
        assert [line.on_hand for line in store.stock()] == [12]
        assert "ledger says 12" in landed.notices[0][1]


def test_cancelling_takes_everything_back(path: Path) -> None:
    with Store.open(path) as store:
        with pytest.raises(Cancelled):
            store.land(arrivals(2000, 3), file="t", sha256="x", cancelled=lambda: True)
        assert store.parts() == []


def test_limits_by_hand_come_and_go_and_stay_in_the_history(path: Path) -> None:
    with Store.open(path) as store:
        land(store, arrivals(1, 1))
        store.add_limit("ZQ-00000", Limit("VCEO", max=60.0))
        assert store.shelf().ratings["vceo"][0] == 60
        stored = store.part("ZQ-00000")
        assert stored.part.limits[1].source == "entered by hand" and stored.entered_at[1]
        store.remove_limit("ZQ-00000", stored.limit_ids[1])
        assert np.isnan(store.shelf().ratings["vceo"][0])
        assert store.conn.execute("SELECT count(*) FROM history WHERE \"column\" = 'VCEO'").fetchone()[0] == 1


# --- columns


def test_the_kept_columns_equal_a_fresh_build(path: Path) -> None:
    with Store.open(path) as store:
        land(store, arrivals(50, 6))
        kept = columns.load(store.conn)
        assert kept is not None and same(kept, columns.build(store.conn))
        store.set_part("ZQ-00003", "package", "SOT-23")
        assert columns.load(store.conn) is None  # stale: never trusted
        assert store.shelf().package[3] == "SOT-23"
        assert columns.load(store.conn) is not None  # and rebuilt


def test_columns_equal_those_of_the_records(path: Path) -> None:
    rows = arrivals(7, 5)
    with Store.open(path) as store:
        land(store, rows)
        names = [one.type_number for one in store.parts()]
        assert same(store.shelf(), Shelf.from_parts(store.part(name).part for name in names))


# --- files that are not a sound shelf


def test_another_programs_database_is_left_alone(path: Path) -> None:
    conn = sqlite3.connect(path)
    conn.execute("CREATE TABLE t (x)")
    conn.execute("PRAGMA application_id = 77")
    conn.commit()
    conn.close()
    before = path.read_bytes()
    with pytest.raises(NotAShelf, match="another program"):
        Store.open(path)
    assert path.read_bytes() == before


def test_a_newer_shelf_is_left_alone(path: Path) -> None:
    Store.open(path).close()
    conn = sqlite3.connect(path)
    conn.execute(f"PRAGMA user_version = {VERSION + 1}")
    conn.commit()
    conn.close()
    with pytest.raises(NewerShelf):
        Store.open(path)


@pytest.mark.parametrize("content", [b"hello, this is a text\n" * 20, b"SQLite format 3\0" + b"\7" * 5000])
def test_what_is_no_database_is_left_alone(path: Path, content: bytes) -> None:
    path.write_bytes(content)
    with pytest.raises(NotAShelf) as error:
        Store.open(path)
    assert path.read_bytes() == content and "\n" not in str(error.value)


def test_a_damaged_shelf_is_left_alone(path: Path) -> None:
    with Store.open(path) as store:
        land(store, arrivals(300, 6))
    data = bytearray(path.read_bytes())
    data[len(data) // 2 : len(data) // 2 + 9000] = b"\x55" * 9000
    path.write_bytes(data)
    with pytest.raises(NotAShelf):
        Store.open(path)
    assert path.read_bytes() == bytes(data)


def test_a_directory_and_a_missing_folder_are_named(tmp_path: Path) -> None:
    for bad in (tmp_path, tmp_path / "none" / "s.shelf"):
        with pytest.raises(StoreError, match=str(bad.name if bad == tmp_path else "none")):
            Store.open(bad)
    with pytest.raises(StoreError, match="does not exist"):
        Store.open(tmp_path / "missing.shelf", create=False)


def test_the_file_says_whose_it_is(path: Path) -> None:
    Store.open(path).close()
    conn = sqlite3.connect(path)
    assert conn.execute("PRAGMA application_id").fetchone() == (APPLICATION_ID,)
    assert conn.execute("PRAGMA user_version").fetchone() == (VERSION,)
    assert conn.execute("PRAGMA journal_mode").fetchone() == ("wal",)
    strict = conn.execute(
        "SELECT name FROM pragma_table_list WHERE schema='main' AND strict=0 AND name NOT LIKE 'sqlite_%'"
    )
    assert strict.fetchall() == []
    conn.close()


# --- busy and read-only


def every_write(store: Store) -> list[object]:
    """A call of every method that writes."""
    return [
        lambda: store.land(arrivals(), file="t", sha256="x"),
        lambda: store.set_part("ZQ-00000", "note", "x"),
        lambda: store.add_limit("ZQ-00000", Limit("VCEO", max=1.0)),
        lambda: store.remove_limit("ZQ-00000", 1),
        lambda: store.move("receive", "ZQ-00000", 1),
        lambda: store.save_requirement("t", "x"),
        lambda: store.save_shortlist(1, "none", "p", "f", [Entry(1, "p", "fits", "{}")]),
    ]


def test_a_busy_file_is_said_to_be_busy(path: Path) -> None:
    with Store.open(path) as store:
        land(store, arrivals())
    other = sqlite3.connect(path, isolation_level=None)
    other.execute("BEGIN IMMEDIATE")
    with Store.open(path, wait=0.02) as store:
        for call in every_write(store):
            with pytest.raises(Busy):
                call()  # type: ignore[operator]
        assert len(store.shelf()) == 3 and store.part("ZQ-00001") and store.parts() and store.stock() == []
        assert store.requirements() == [] and store.shortlists() == [] and store.check() == []
    other.execute("ROLLBACK")
    other.close()


def test_a_file_opened_read_only_says_so(path: Path) -> None:
    with Store.open(path) as store:
        land(store, arrivals())
        store.conn.execute("PRAGMA journal_mode = DELETE")
    conn = sqlite3.connect(f"file:{path}?mode=ro&immutable=1", uri=True, isolation_level=None)
    with Store(path, conn, read_only=True) as store:
        assert len(store.shelf()) == 3
        for call in every_write(store):
            with pytest.raises(NotWritable):
                call()  # type: ignore[operator]


# --- stock


def test_the_ledger_only_grows(path: Path) -> None:
    with Store.open(path) as store:
        land(store, arrivals(1, 1, stock=5))
        for statement in ("UPDATE movement SET quantity = 9", "DELETE FROM movement"):
            with pytest.raises(sqlite3.IntegrityError, match="never changed"):
                store.conn.execute(statement)


def test_movements_add_up_and_what_is_not_there_is_refused(path: Path) -> None:
    with Store.open(path) as store:
        land(store, arrivals(1, 1))
        store.move("receive", "ZQ-00000", 10, location="A1")
        store.move("receive", "ZQ-00000", 5, location="B2")
        store.move("reserve", "ZQ-00000", 12, job="board")
        with pytest.raises(StoreError, match="3 free"):
            store.move("issue", "ZQ-00000", 4)
        line = store.move("release", "ZQ-00000", 12)
        assert (line.on_hand, line.reserved, line.free) == (15, 0, 15)
        assert store.move("issue", "ZQ-00000", 11).on_hand == 4
        assert store.move("count", "ZQ-00000", 3, location="B2").on_hand == 3
        shelf = store.shelf()
        assert (shelf.stock[0], shelf.reserved[0]) == (3, 0)
        for kind, quantity in (("issue", 0), ("receive", -1), ("lend", 1)):
            with pytest.raises(StoreError):
                store.move(kind, "ZQ-00000", quantity)


def test_an_unknown_part_is_answered_with_the_nearest(path: Path) -> None:
    with Store.open(path) as store:
        land(store, arrivals())
        with pytest.raises(NotFound, match="ZQ-00001"):
            store.part("ZQ-0001")


# --- shortlists and backup


def test_shortlists_keep_their_requirement_and_order(path: Path) -> None:
    with Store.open(path) as store:
        number = store.save_requirement("Valve", "duty = 'switch'", at="2026-01-01T00:00:00Z")
        assert store.save_requirement("Valve", "duty = 'switch'") == number
        entries = [Entry(1, "B", "fits", "{}"), Entry(2, "A", "cannot say", "{}")]
        store.save_shortlist(number, "none", "betafloor", "abc", entries, at="2026-01-02T00:00:00Z")
        (kept,) = store.shortlists()
        assert (kept.title, kept.at, [one.part for one in kept.entries]) == (
            "Valve",
            "2026-01-02T00:00:00Z",
            ["B", "A"],
        )


def test_a_backup_opens_and_holds_the_same(path: Path, tmp_path: Path) -> None:
    with Store.open(path) as store:
        land(store, arrivals(20, 3, stock=4))
        store.backup(tmp_path / "copy.shelf")
        with pytest.raises(StoreError, match="itself"):
            store.backup(path)
        with Store.open(tmp_path / "copy.shelf") as copy:
            assert same(copy.shelf(), store.shelf()) and copy.stock() == store.stock() and copy.check() == []
    assert sorted(one.name for one in tmp_path.iterdir() if one.name.startswith(".")) == []


def test_damaged_limits_of_a_long_file_are_found_before_a_write(path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """A ranking reads the columns only; the rows behind them are checked before anything is written."""
    with Store.open(path) as store:
        land(store, arrivals(400, 1))
        store.shelf()
        (root,) = store.conn.execute("SELECT rootpage FROM sqlite_schema WHERE name = 'limit'").fetchone()
        (size,) = store.conn.execute("PRAGMA page_size").fetchone()
        store.conn.execute("PRAGMA wal_checkpoint(TRUNCATE)")
    data = bytearray(path.read_bytes())
    data[(root - 1) * size : (root - 1) * size + 200] = b"\xff" * 200
    path.write_bytes(data)
    with pytest.raises(NotAShelf, match="damaged"):
        Store.open(path)
    monkeypatch.setattr("db.store.AT_ONCE", 1000)
    with Store.open(path) as store:
        assert len(store.shelf()) == 400
        with pytest.raises(NotAShelf, match="damaged"):
            store.move("receive", "ZQ-00000", 3)
    assert path.read_bytes() == bytes(data)
