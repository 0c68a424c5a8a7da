"""Documents: what stands in them is data, what they say is traceable, the same inputs give the same bytes."""

import csv
import io
import json
import re
from dataclasses import replace
from html.parser import HTMLParser
from pathlib import Path

import numpy as np
import pytest

from engine.explain import explain
from engine.part import Limit, Part
from engine.physics.sources import SOURCES
from engine.rank import rank
from engine.ranking import Ranking, Verdict
from engine.shelf import Shelf
from importers.requirement_file import parse_fields
from reports.ranking_table import csv_table, markdown_table
from reports.sheet import Sheet, sheet_object
from reports.sheet_html import sheet_html
from reports.sheet_markdown import sheet_markdown
from reports.shortlist import Shortlisted, shortlist_csv, shortlist_json, shortlist_markdown
from reports.text import markdown_cell, neutral
from tests.tui.support import COIL, PARTS, shelf_of
from tui.files import write_whole

NASTY = (
    '=HYPERLINK("http://x")',
    "+1|2",
    "@SUM(A1)",
    "-3\n| a | b |",
    "\t=1",
    "<script>alert(1)</script>",
    "\r=2",
    "a`b*c_d",
)
FORMULA = ("=", "+", "-", "@", "\t", "\r")  # what spreadsheets run: OWASP, CSV injection


def nasty_shelf() -> Shelf:
    """Parts that fit, with names and sources that would be code elsewhere."""
    good = next(part for part in PARTS if part.type_number == "QX-112")
    limits = tuple(replace(one, source=NASTY[i % len(NASTY)]) for i, one in enumerate(good.limits))
    return Shelf.from_parts([replace(good, type_number=name, package=name[::-1], limits=limits) for name in NASTY])


def ranking(shelf: Shelf | None = None, title: str = "Valve | <b>1</b>") -> Ranking:
    return rank(parse_fields("switch", COIL, title=title), shelf or shelf_of())


def sheet(found: Ranking, row: int, limits: tuple[Limit, ...] = ()) -> Sheet:
    told = explain(found.requirement, found.shelf, row)
    return Sheet(found.requirement, told, found.shelf.fingerprint, "2026-01-02", limits)


def shortlisted(found: Ranking, rows: list[int]) -> Shortlisted:
    return Shortlisted(found, tuple((row, explain(found.requirement, found.shelf, row)) for row in rows), "2026-01-02")


class Shape(HTMLParser):
    """The tags of a document and whether they close in order."""

    def __init__(self) -> None:
        super().__init__(convert_charrefs=True)
        self.open: list[str] = []
        self.tags: set[str] = set()
        self.text = ""

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        self.tags.add(tag)
        if tag != "meta":
            self.open.append(tag)
        assert not any(name.startswith("on") or name in ("src", "href") for name, _ in attrs)

    def handle_endtag(self, tag: str) -> None:
        assert self.open.pop() == tag

    def handle_data(self, data: str) -> None:
        self.text += data


def test_html_holds_data_as_data_and_nothing_from_elsewhere() -> None:
    found = ranking(nasty_shelf())
    for row, name in enumerate(NASTY):
        page = sheet_html(sheet(found, row))
        shape = Shape()
        shape.feed(page)
        assert not shape.open and "script" not in shape.tags and "b" not in shape.tags
        assert " ".join(name.split()) in " ".join(shape.text.split())
        assert not re.search(r"(src|href)=|url\(|@import", page)


def cells(line: str) -> list[str]:
    """The cells of a Markdown table row; an escaped bar is no border (GitHub Flavored Markdown, 4.10)."""
    return re.split(r"(?<!\\)\|", line)[1:-1]


@pytest.mark.parametrize("name", NASTY)
def test_a_markdown_table_keeps_its_shape(name: str) -> None:
    cell = markdown_cell(name)
    assert "\n" not in cell and "<" not in cell
    assert len(cells(f"| {cell} | x |")) == 2


def test_markdown_documents_keep_their_tables_whole() -> None:
    found = ranking(nasty_shelf())
    rows = list(range(len(NASTY)))
    for text in (
        markdown_table(found, rows),
        shortlist_markdown(shortlisted(found, rows)),
        sheet_markdown(sheet(found, 1)),
    ):
        width = 0
        for line in text.splitlines():
            if line.startswith("|"):
                width = width or len(cells(line))
                assert len(cells(line)) == width, line
            else:
                width = 0


def test_a_spreadsheet_shows_what_it_would_run() -> None:
    found = ranking(nasty_shelf())
    for text in (csv_table(found, range(len(NASTY))), shortlist_csv(shortlisted(found, [0, 1]))):
        for row in csv.reader(io.StringIO(text, newline="")):
            for cell in row:
                assert not cell.startswith(FORMULA) or re.fullmatch(r"-?[\d.e+-]+", cell), cell
    assert neutral("QX-110") == "QX-110"
    assert float(next(csv.DictReader(io.StringIO(csv_table(found, [0]), newline="")))["headroom"]) > 1


def test_the_same_inputs_give_the_same_bytes() -> None:
    one, other = ranking(), ranking()
    rows = [int(row) for row in one.order[:3]]
    for make in (shortlist_json, shortlist_csv, shortlist_markdown):
        assert make(shortlisted(one, rows)) == make(shortlisted(other, rows))
    for paint in (sheet_html, sheet_markdown):
        assert paint(sheet(one, rows[0])) == paint(sheet(other, rows[0]))


def test_json_knows_no_nan() -> None:
    found = ranking()
    every = list(range(len(found.shelf)))
    told = json.loads(shortlist_json(shortlisted(found, every)), parse_constant=pytest.fail)
    assert told["date"] == "2026-01-02" and len(told["results"]) == len(every)
    json.dumps(sheet_object(sheet(found, 3)), allow_nan=False)


def test_every_figure_of_a_sheet_says_what_it_rests_on() -> None:
    """Numbers of the working: put into the relation they give the result; each is stated, looked up or worked out."""
    found = ranking()
    row = next(int(row) for row in found.order if found.verdict[row] == Verdict.FITS)
    told = explain(found.requirement, found.shelf, row)
    steps = [step for one in told.checks for step in one.steps]
    assert len(steps) > 40
    for step in steps:
        assert step.evidence in ("stated", "chosen", "guaranteed", "derived", "measured", "typical", "missing", "")
        assert step.relation or step.source, step
    assert set(told.sources) <= set(SOURCES.values())
    assert len(told.sources) >= 8
    text = sheet_markdown(sheet(found, row, PARTS[row].limits))
    for limit in PARTS[row].limits:
        assert f"| {limit.symbol} |" in text and limit.source in text
    for caution in told.cautions:
        assert caution in text


def test_a_part_that_is_unknown_says_what_is_missing() -> None:
    bare = Part("QZ-1", "npn", limits=(Limit("VCEO", max=60.0), Limit("IC", max=1.0)))
    found = ranking(Shelf.from_parts([bare]))
    text = sheet_markdown(sheet(found, 0))
    assert found.verdict[0] == Verdict.CANNOT_SAY
    for symbol in ("VCE(sat)", "VBE(sat)"):
        assert symbol in text
    assert "nan" not in text.lower().replace("quench", "")


def test_a_file_is_written_whole_or_not_at_all(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    target = tmp_path / "list.csv"
    write_whole(target, b"old")

    def full(*_: object) -> None:
        raise OSError(28, "No space left on device")

    monkeypatch.setattr("tui.files.os.replace", full)
    with pytest.raises(OSError, match="No space"):
        write_whole(target, b"new")
    assert target.read_bytes() == b"old"
    assert list(tmp_path.iterdir()) == [target]


def test_stock_and_rank_stand_in_the_table() -> None:
    found = ranking()
    (line,) = csv.DictReader(io.StringIO(csv_table(found, [int(found.order[0])]), newline=""))
    row = int(found.order[0])
    assert int(float(line["free"])) == int(found.shelf.stock[row] - found.shelf.reserved[row])
    assert np.isclose(float(line["score"]), found.score[row])
