"""The rooms behind the screens: session, files, requirement texts, sheet lines, the shelf file."""

import os
from pathlib import Path

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from rich.cells import cell_len

from db.store import Store
from engine.part import Arrival
from reports.sheet import Bullets, Grid, Heading, Paragraph
from tui.files import why, write_whole
from tui.part_words import conditions_words, in_sheet_order, limit_sentence
from tui.requirement_texts import RequirementTextError, read, read_file
from tui.sheet_lines import sheet_lines
from tui.source import SourceError
from tui.state import Session, ShelfFilter
from tui.store_source import StoreSource
from tui.widgets.reasons import reasons, without_headroom

from .fixed import explanation_of, ranking_of
from .support import COIL, PARTS, shelf_of


def test_a_mark_is_set_and_taken_off_and_the_order_is_kept() -> None:
    session = Session().marked("B").marked("A").marked("C").marked("A")
    assert session.marks == ("B", "C")


def test_a_filter_says_what_it_keeps() -> None:
    assert not ShelfFilter().narrows
    assert ShelfFilter(package="TO-92", in_stock=True).words() == "structure any · package TO-92 · in stock only"


# --- files


def test_a_file_is_written_whole_and_keeps_its_rights(tmp_path: Path) -> None:
    path = tmp_path / "list.csv"
    path.write_text("old", encoding="utf-8")
    path.chmod(0o640)
    write_whole(path, b"new")
    assert path.read_bytes() == b"new" and path.stat().st_mode & 0o777 == 0o640
    assert [one.name for one in tmp_path.iterdir()] == ["list.csv"]


def test_what_stood_there_stays_when_writing_fails(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    path = tmp_path / "list.csv"
    path.write_text("old", encoding="utf-8")

    def full(descriptor: int) -> None:
        raise OSError(28, "No space left on device", str(path))

    monkeypatch.setattr(os, "fsync", full)
    with pytest.raises(OSError, match="No space left") as told:
        write_whole(path, b"new")
    assert path.read_text(encoding="utf-8") == "old" and len(list(tmp_path.iterdir())) == 1
    assert why(told.value) == f"{path}: No space left on device"


# --- requirement texts


def test_a_requirement_file_is_taken_as_it_is_written() -> None:
    draft, weights = read(
        'title = "T"\nduty = "switch"\nposition = "low side"\n[supply]\nmin = "21,6 V"\nmax = 26.4\n'
        '[choice]\npackages = ["TO-92", "SOT-23"]\nquantity = 2\n[weights]\nstock = 3\n'
    )
    assert (draft.duty, draft.title, weights) == ("switch", "T", {"stock": 3.0})
    assert draft.texts == {
        "position": "low side", "supply.min": "21,6 V", "supply.max": "26.4", "choice.packages": "TO-92, SOT-23",
        "choice.quantity": "2",
    }  # fmt: skip


@pytest.mark.parametrize("content", [b"title = [", b"\xff\xfe", b"a = 1\na = 2"])
def test_a_file_that_is_none_is_named_in_one_line(tmp_path: Path, content: bytes) -> None:
    (tmp_path / "bad.toml").write_bytes(content)
    with pytest.raises(RequirementTextError, match=r"bad\.toml") as told:
        read_file(tmp_path / "bad.toml")
    assert len(str(told.value).splitlines()) == 1
    with pytest.raises(RequirementTextError, match=r"none\.toml"):
        read_file(tmp_path / "none.toml")


# --- words about a part


def test_conditions_are_words_with_units() -> None:
    hfe = next(one for one in PARTS[0].limits if one.symbol == "hFE" and one.pulsed)
    assert conditions_words(hfe) == "IC 150 mA, VCE 1 V, pulsed"
    assert "static forward current gain" in limit_sentence(hfe) and "source: invented sheet, rev 2" in limit_sentence(
        hfe
    )


def test_no_limit_is_left_out() -> None:
    assert sorted(map(repr, in_sheet_order(PARTS[0]))) == sorted(map(repr, PARTS[0].limits))


def test_reasons_keep_to_the_width_and_tell_every_check() -> None:
    told = explanation_of(shelf_of(), 0)
    for width in (30, 60, 100):
        lines = reasons(told, width)
        assert all(cell_len(line) <= max(width, 40) for line in lines)
        words = " ".join(" ".join(lines).split())
        assert all(check.name.split()[0] in words for check in told.checks)


def test_the_headroom_is_only_taken_off_the_end() -> None:
    assert without_headroom("IB 1 A, must be at least 2 A (×0.50)") == "IB 1 A, must be at least 2 A"
    assert without_headroom("VCE(sat) is missing") == "VCE(sat) is missing"


_words = st.text(st.characters(codec="utf-8"), max_size=60)


@given(
    st.lists(
        st.one_of(
            st.builds(Heading, st.integers(1, 3), _words),
            st.builds(Paragraph, _words),
            st.builds(Bullets, st.lists(_words, max_size=3).map(tuple)),
            st.builds(Grid, st.just(("what", "value")), st.lists(st.tuples(_words, _words), max_size=3).map(tuple)),
        ),
        min_size=1,
        max_size=4,
    ),
    st.integers(30, 120),
)
@settings(max_examples=80, deadline=None)
def test_a_sheet_keeps_to_the_width(blocks: list[Heading | Paragraph | Bullets | Grid], width: int) -> None:
    assert all(cell_len(line) <= width and (line.isprintable()) for line in sheet_lines(blocks, width))


# --- the shelf file


@pytest.fixture
def file(tmp_path: Path) -> Path:
    path = tmp_path / "mine.sqlite"
    arrivals = [Arrival(row, part, stock=3) for row, part in enumerate(PARTS, 2) if part.type_number.startswith("QX")]
    with Store.open(path) as store:
        store.land(arrivals, file="mine.csv", sha256="0" * 64)
    return path


def test_a_shelf_file_gives_its_parts(file: Path) -> None:
    source = StoreSource(file)
    shelf = source.shelf()
    assert source.name == "mine.sqlite" and shelf.stock[shelf.index("QX-110")] == 3
    part = source.part("QX-110")
    assert len(part.limits) == len(PARTS[0].limits) and part.maker == "Quillbrook"


def test_requirements_and_shortlists_are_kept_in_the_file(file: Path) -> None:
    from importers.requirement_file import parse_fields, read_requirement

    source = StoreSource(file)
    requirement = parse_fields("switch", COIL, title="Valve 3")
    ranking = ranking_of(source.shelf(), requirement)
    assert "shortlist 1" in source.keep_shortlist(ranking, [1, 0], {"stock": 3.0})
    with Store.open(file) as store:
        (kept,) = store.shortlists()
    assert [entry.part for entry in kept.entries] == [str(ranking.shelf.names[1]), str(ranking.shelf.names[0])]
    assert kept.fingerprint == ranking.shelf.fingerprint
    again = read_requirement(source.requirements()["Valve 3"])
    assert dict(again.requirement.values) == dict(requirement.values) and again.weights == {"stock": 3.0}


def test_what_is_no_shelf_is_one_clear_line(tmp_path: Path) -> None:
    (tmp_path / "notes.sqlite").write_text("shopping", encoding="utf-8")
    for path in (tmp_path / "notes.sqlite", tmp_path, tmp_path / "nowhere" / "mine.sqlite"):
        with pytest.raises(SourceError) as told:
            StoreSource(path).shelf()
        assert str(path.parent) in str(told.value) and len(str(told.value).splitlines()) == 1
