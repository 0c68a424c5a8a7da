"""Part, calculation sheet, shortlist, help and palette by keys alone."""

import csv
import json
from pathlib import Path

import pytest

from tui.screens.help import HelpScreen
from tui.screens.part import PartScreen
from tui.screens.sheet import SheetScreen
from tui.screens.shelf import ShelfScreen
from tui.screens.shortlist import ShortlistScreen
from tui.widgets.lines_view import LinesView
from tui.widgets.text_view import TextView

from .support import running

SIZES = [(80, 24), (120, 40)]


@pytest.mark.parametrize("size", SIZES)
async def test_a_part_shows_limits_with_conditions_and_sources(make_app, size) -> None:
    async with running(make_app(), size) as pilot:
        await pilot.press("enter")
        assert isinstance(pilot.app.screen, PartScreen)
        assert "QX-110" in pilot.text and "not judged" in pilot.text
        await pilot.press(*["down"] * 9)
        words = " ".join(pilot.text.split())
        assert "IC 10 mA" in words and "hFE: static forward current gain (characteristic)" in words
        assert "source: invented sheet, rev 2" in words


@pytest.mark.usefixtures("fixed_engine")
async def test_on_a_narrow_screen_a_digit_goes_to_a_section(make_app) -> None:
    async with running(make_app(), (80, 24)) as pilot:
        await pilot.fill()
        await pilot.press("f5", "enter")
        assert "[1 limits]" in pilot.text and "VCEO" in pilot.text
        await pilot.press("2")
        assert "hFE over IC" in pilot.text and "needs 31 at 89 mA" in pilot.text and "VCBO" not in pilot.text
        await pilot.press("3")
        assert "headroom" in pilot.text and "×0.62" in pilot.text and "hFE over IC" not in pilot.text
        await pilot.press("a")
        assert "x0.62" in pilot.text and "#" in pilot.text


@pytest.mark.usefixtures("fixed_engine")
async def test_on_a_wide_screen_everything_is_seen_at_once(make_app) -> None:
    async with running(make_app(), (120, 40)) as pilot:
        await pilot.fill()
        await pilot.press("f5", "enter")
        for words in ("VCEO", "hFE over IC", "guaranteed minimum", "base drive", "fail", "unknown", "pass"):
            assert words in pilot.text


@pytest.mark.usefixtures("fixed_engine")
async def test_the_sheet_opens_scrolls_and_is_written(make_app, tmp_path: Path) -> None:
    async with running(make_app(), (80, 24)) as pilot:
        await pilot.fill()
        await pilot.press("f5", "c")
        assert isinstance(pilot.app.screen, SheetScreen)
        assert "calculation sheet · QX-110" in pilot.text and "invented demo data" in pilot.text
        view = pilot.find(TextView)
        assert any("(VOH min − VBE max) ÷ RB max" in line for line in view.lines)
        assert all(len(line) <= view.size.width for line in view.lines)
        await pilot.press("end")
        assert view.scroll_offset.y > 0
        for ending in (".md", ".html", ".json"):
            await pilot.press("e")
            await pilot.answer(str(tmp_path / f"sheet{ending}"))
            assert "QX-110" in (tmp_path / f"sheet{ending}").read_text(encoding="utf-8")
        await pilot.press("escape")
        assert not isinstance(pilot.app.screen, SheetScreen)


async def test_without_a_requirement_there_is_no_sheet_and_the_way_to_one_is_told(make_app) -> None:
    async with running(make_app()) as pilot:
        await pilot.press("enter", "c")
        assert isinstance(pilot.app.screen, PartScreen) and "F3" in pilot.told


@pytest.mark.usefixtures("fixed_engine")
async def test_marked_parts_are_saved_and_written(make_app, source, tmp_path: Path) -> None:
    async with running(make_app(), (80, 24)) as pilot:
        await pilot.press("space", "space")
        await pilot.fill()
        await pilot.press("f4")
        assert isinstance(pilot.app.screen, ShortlistScreen) and "For: Valve" in pilot.text
        await pilot.press("s")
        assert source.shortlists == [["QX-110", "QX-111"]] and "Saved: 2 parts" in pilot.told
        for ending in (".csv", ".json", ".md"):
            await pilot.press("e")
            await pilot.answer(str(tmp_path / f"list{ending}"))
    with (tmp_path / "list.csv").open(encoding="utf-8", newline="") as file:
        assert [row["part"] for row in csv.DictReader(file)] == ["QX-110", "QX-111"]
    written = json.loads((tmp_path / "list.json").read_text(encoding="utf-8"))
    assert [one["part"] for one in written["results"]] == ["QX-110", "QX-111"]
    assert "QX-111" in (tmp_path / "list.md").read_text(encoding="utf-8")


@pytest.mark.usefixtures("fixed_engine")
async def test_a_file_is_only_replaced_when_that_is_confirmed(make_app, tmp_path: Path) -> None:
    path = tmp_path / "list.csv"
    path.write_text("mine", encoding="utf-8")
    async with running(make_app(), (80, 24)) as pilot:
        await pilot.press("space")
        await pilot.fill()
        await pilot.press("f4", "e")
        await pilot.answer(str(path))
        assert "exists" in pilot.text and path.read_text(encoding="utf-8") == "mine"
        await pilot.press("escape")
        assert path.read_text(encoding="utf-8") == "mine"
        await pilot.press("e")
        await pilot.answer(str(path))
        await pilot.press("enter")
        assert "QX-110" in path.read_text(encoding="utf-8")


@pytest.mark.usefixtures("fixed_engine")
@pytest.mark.parametrize("name", ["list.xls", "nowhere/list.csv"])
async def test_a_name_that_cannot_be_written_is_told_and_nothing_is_written(
    make_app, tmp_path: Path, name: str
) -> None:
    async with running(make_app(), (80, 24)) as pilot:
        await pilot.press("space")
        await pilot.fill()
        await pilot.press("f4", "e")
        await pilot.answer(str(tmp_path / name))
        await pilot.press("enter")
        assert "must end in" in pilot.text or "There is no folder" in pilot.text
    assert list(tmp_path.iterdir()) == []


async def test_an_empty_shortlist_says_how_to_fill_it(make_app, source) -> None:
    async with running(make_app()) as pilot:
        await pilot.press("f4", "s", "e")
        assert "Space marks the part" in pilot.told and source.shortlists == []


async def test_help_leads_with_the_screen_it_was_asked_on_and_goes_back(make_app) -> None:
    async with running(make_app()) as pilot:
        await pilot.press("f1")
        assert isinstance(pilot.app.screen, HelpScreen)
        lines = list(pilot.find(TextView).lines)
        assert lines[0] == "Shelf" and lines.index("Everywhere") < lines.index("Bench")
        await pilot.press("f1", "escape")
        assert isinstance(pilot.app.screen, ShelfScreen)


async def test_every_screen_is_reached_and_left_by_function_keys(make_app) -> None:
    async with running(make_app()) as pilot:
        for key, name in (("f3", "bench"), ("f4", "shortlist"), ("f2", "shelf"), ("f3", "bench"), ("f2", "shelf")):
            await pilot.press(key)
            assert f"Betafloor · {name}" in pilot.text
        await pilot.press("enter", "f1", "f3")
        assert "Betafloor · bench" in pilot.text


async def test_a_screen_is_not_left_from_within_a_question(make_app) -> None:
    async with running(make_app()) as pilot:
        await pilot.press("t", "f3")
        assert "Show only this structure" in pilot.text
        await pilot.press("escape", "f3")
        assert "Betafloor · bench" in pilot.text


async def test_the_palette_finds_a_command_by_its_words(make_app) -> None:
    async with running(make_app()) as pilot:
        await pilot.press("ctrl+p")
        await pilot.write("in stock")
        await pilot.pilot.pause(0.5)
        await pilot.press("enter")
        await pilot.rest()
        assert pilot.session.filter.in_stock


async def test_a_resize_keeps_the_cursor_in_view(make_app) -> None:
    async with running(make_app(), (120, 40)) as pilot:
        await pilot.press("end")
        await pilot.pilot.resize_terminal(60, 12)
        await pilot.rest()
        view = pilot.find(LinesView, "#parts")
        assert view.cursor == 9
        assert any(line.startswith("▶") for line in pilot.text.splitlines())
