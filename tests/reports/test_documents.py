"""Sheets and shortlists in every format: what is data stays data, and the same inputs give the same bytes."""

import csv
import io
import json
import os
from html.parser import HTMLParser
from pathlib import Path

import pytest

from engine.explain import explain
from engine.part import Limit, Part
from engine.rank import rank
from engine.ranking import Ranking
from engine.requirement import Requirement
from engine.shelf import Shelf
from reports.ranking_table import csv_table, markdown_table, text_table
from reports.sheet import Sheet, sheet_object
from reports.sheet_html import sheet_html
from reports.sheet_markdown import sheet_markdown
from reports.shortlist import Shortlisted, shortlist_csv, shortlist_json, shortlist_markdown
from reports.text import markdown_row, neutral
from tests.strategies import requirement_of
from tui.files import write_whole

NASTY = (
    "=1+1", "+1", "-1", "@SUM(A1)", "\tx", "\rx", "a|b", "a\nb", "<script>x</script>", 'q"u,o', "& <b>", "ÄΩ", "plain",
)  # fmt: skip
DATE = "2026-01-02"


def limits() -> tuple[Limit, ...]:
    """A sheet that suffices for 20 mA on 12 V."""
    source = "sheet <1> | p. 2"
    at = (("ib", 0.005), ("ic", 0.05))
    return (
        Limit("VCEO", max=60.0, source=source),
        Limit("VEBO", max=6.0, source=source),
        Limit("IC", max=0.8, source=source),
        Limit("TJ", max=150.0, source=source),
        Limit("RthJA", max=200.0, source=source),
        Limit("hFE", min=100.0, conditions=(("ic", 0.01), ("vce", 1.0)), source=source),
        Limit("hFE", min=100.0, conditions=(("ic", 0.15), ("vce", 1.0)), source=source),
        Limit("VCE(sat)", max=0.3, conditions=at, source=source),
        Limit("VBE(sat)", max=1.0, conditions=at, source=source),
        Limit("ICBO", max=5e-8, conditions=(("vcb", 50.0),), source=source),
    )


@pytest.fixture(scope="module")
def ranking() -> Ranking:
    values = {
        "supply.min": 11.0, "supply.max": 13.0, "load.kind": "resistive", "load.resistance": 600.0,
        "drive.high_min": 4.5, "drive.high_max": 5.0, "drive.low_max": 0.1, "drive.current_max": 0.01,
        "ambient.min": 0.0, "ambient.max": 50.0,
    }  # fmt: skip
    req = requirement_of(values)
    req = Requirement(req.duty, "=title <b> | two\nlines", req.values, req.notes)
    return rank(req, Shelf.from_parts(Part(name, "npn", name, limits=limits()) for name in NASTY))


@pytest.fixture(scope="module")
def shortlist(ranking: Ranking) -> Shortlisted:
    rows = tuple((int(i), explain(ranking.requirement, ranking.shelf, int(i))) for i in ranking.order)
    return Shortlisted(ranking, rows, DATE)


def sheet_of(ranking: Ranking, row: int) -> Sheet:
    told = explain(ranking.requirement, ranking.shelf, row)
    return Sheet(ranking.requirement, told, ranking.shelf.fingerprint, DATE, limits())


@pytest.mark.parametrize("text", [one for one in NASTY if one[0] in "=+-@\t\r"])
def test_a_cell_that_a_spreadsheet_would_run_is_neutralised(text: str) -> None:
    """The first characters that OWASP, "CSV Injection", names."""
    assert neutral(text).replace("\n", "\r") == "'" + text


@pytest.mark.parametrize("which", ["ranking", "shortlist"])
def test_the_csv_holds_text_that_runs_nowhere_and_numbers_that_stay_numbers(
    which: str, ranking: Ranking, shortlist: Shortlisted
) -> None:
    text = csv_table(ranking, range(len(NASTY))) if which == "ranking" else shortlist_csv(shortlist)
    rows = list(csv.DictReader(io.StringIO(text, newline="")))
    names = {row["part"] for row in rows}
    assert names == {("'" + one if one[0] in "=+-@\t\r" else one).replace("\r", "\n") for one in NASTY}
    for row in rows:
        for cell in row.values():
            assert not cell.startswith(("=", "+", "-", "@", "\t", "\r"))
        assert float(row["RB [Ω]"]) > 0 and float(row["TJ [°C]"]) > 50


def test_a_negative_number_stays_a_number(ranking: Ranking) -> None:
    """A junction at −40 °C is no formula."""
    bounds = {**ranking.bounds, "tj_max": ranking.bounds["tj_max"] * 0 - 40.0}
    cold = Ranking(**{name: getattr(ranking, name) for name in Ranking.__dataclass_fields__} | {"bounds": bounds})
    assert next(csv.DictReader(io.StringIO(csv_table(cold, [0]))))["TJ [°C]"] == "-40.0"


def unescaped(line: str) -> list[str]:
    """The cells of a row of a table as GitHub Flavored Markdown splits it: at every bar that no backslash escapes."""
    cells, cell, i = [], "", 0
    while i < len(line):
        if line[i] == "\\" and i + 1 < len(line):
            cell, i = cell + line[i + 1], i + 2
            continue
        if line[i] == "|":
            cells, cell = [*cells, cell], ""
        else:
            cell += line[i]
        i += 1
    return [one.strip() for one in cells[1:]]


@pytest.mark.parametrize("text", [*NASTY, "a\\|b", "a\r\nb", "a\\"])
def test_any_text_is_one_cell_of_a_markdown_table(text: str) -> None:
    row = markdown_row(["before", text, "after"])
    assert len(row.splitlines()) == 1
    cells = unescaped(row)
    assert len(cells) == 3 and (cells[0], cells[2]) == ("before", "after")
    assert "<" not in cells[1]


def test_every_markdown_table_keeps_its_columns(ranking: Ranking, shortlist: Shortlisted) -> None:
    documents = [markdown_table(ranking, range(len(NASTY))), shortlist_markdown(shortlist)]
    documents += [sheet_markdown(sheet_of(ranking, row)) for row in range(len(NASTY))]
    for document in documents:
        assert "<script>" not in document and "<b>" not in document
        width = 0
        for line in document.split("\n"):
            width = (width or len(unescaped(line))) if line.startswith("|") else 0
            assert not width or len(unescaped(line)) == width, line


class Page(HTMLParser):
    """Tags, attributes and text of a page."""

    def __init__(self, text: str) -> None:
        super().__init__()
        self.tags: set[str] = set()
        self.links: list[tuple[str, str | None]] = []
        self.text = ""
        self.feed(text)

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        self.tags.add(tag)
        self.links += [one for one in attrs if one[0] in ("src", "href", "srcset", "action", "data")]

    def handle_data(self, data: str) -> None:
        self.text += data


@pytest.mark.parametrize("row", range(len(NASTY)))
def test_the_html_sheet_shows_text_and_fetches_nothing(row: int, ranking: Ranking) -> None:
    text = sheet_html(sheet_of(ranking, row))
    page = Page(text)
    assert not page.tags & {"script", "b", "link", "img", "iframe", "object"} and not page.links
    assert "url(" not in text and "@import" not in text
    assert "sheet <1> | p. 2" in page.text and "=title <b>" in page.text
    assert NASTY[row].replace("\r", "\n") in page.text.replace("\r", "\n")


def test_the_same_inputs_give_the_same_bytes(ranking: Ranking, shortlist: Shortlisted) -> None:
    again = rank(ranking.requirement, ranking.shelf)
    rows = tuple((row, explain(again.requirement, again.shelf, row)) for row, _ in shortlist.rows)
    other = Shortlisted(again, rows, DATE)
    for write in (shortlist_csv, shortlist_json, shortlist_markdown):
        assert write(shortlist) == write(other)
    for write_sheet in (sheet_html, sheet_markdown):
        assert write_sheet(sheet_of(ranking, 3)) == write_sheet(sheet_of(again, 3))
    assert text_table(ranking, [0, 1]) == text_table(again, [0, 1])


def test_the_shortlist_json_is_the_ranking_with_its_date(shortlist: Shortlisted) -> None:
    def refuse(word: str) -> float:
        raise AssertionError(word)

    told = json.loads(shortlist_json(shortlist), parse_constant=refuse)
    assert set(told) == {"date", "program", "requirement", "policy", "shelf", "results"}
    assert told["date"] == DATE and {one["part"] for one in told["results"]} == set(NASTY)
    assert [one["rank"] for one in told["results"]] == list(range(1, len(NASTY) + 1))


def test_every_figure_of_the_sheet_has_its_evidence_and_its_origin(ranking: Ranking) -> None:
    told = sheet_object(sheet_of(ranking, ranking.index("plain")))
    assert told["verdict"] == "fits" and told["sources"]
    steps = [step for one in told["steps"].values() for step in one]
    assert len(steps) > 20
    for step in steps:
        given = () if step["relation"] else ("stated", "chosen")  # by the requirement, by the design
        assert step["evidence"] in ("guaranteed", "measured", "derived", *given), step
        assert step["result"] and (step["relation"] or step["source"] or step["meaning"]), step
        assert not step["relation"] or step["numbers"], step


def test_an_interrupted_write_leaves_the_old_file(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    path = tmp_path / "sheet.md"
    write_whole(path, b"old")
    for step in ("fsync", "replace"):

        def interrupt(*_: object) -> None:
            raise KeyboardInterrupt

        with monkeypatch.context() as patch, pytest.raises(KeyboardInterrupt):
            patch.setattr(os, step, interrupt)
            write_whole(path, b"new and longer")
        assert path.read_bytes() == b"old" and os.listdir(tmp_path) == ["sheet.md"]
    write_whole(path, b"new")
    assert path.read_bytes() == b"new"
