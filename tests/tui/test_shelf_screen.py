"""The shelf screen by keys alone."""

import pytest

from engine.symbols import SYMBOLS
from tui.screens.part import PartScreen
from tui.screens.shelf import ShelfScreen
from tui.shelf_table import ShelfTable, gain_floor
from tui.state import ShelfFilter
from tui.widgets.lines_view import LinesView

from .support import PARTS, FakeSource, running, shelf_of


def shown(pilot) -> list[str]:
    view = pilot.find(LinesView, "#parts")
    return [str(pilot.session.shelf.names[row]) for row in view._order]


async def test_the_shelf_opens_after_the_first_paint_and_says_what_to_do_next(make_app) -> None:
    async with running(make_app()) as pilot:
        assert "10 parts" in pilot.text and "invented demo data" in pilot.text
        assert "Next: F3 states a requirement" in pilot.text
        assert len(shown(pilot)) == len(PARTS)


async def test_demo_data_is_only_claimed_for_demo_data(make_app) -> None:
    async with running(make_app(demo=False)) as pilot:
        assert "demo" not in pilot.text


async def test_a_shelf_that_cannot_be_opened_is_one_clear_line(make_app) -> None:
    says = "mine.sqlite: made by a newer version of this program; update it."
    async with running(make_app(FakeSource(trouble=says))) as pilot:
        assert says in pilot.text and "Traceback" not in pilot.text
        await pilot.press("enter", "1", "space", "t", "f3")
        assert pilot.app.is_running


async def test_names_that_look_like_markup_or_control_characters_survive(make_app) -> None:
    async with running(make_app()) as pilot:
        assert "[/]oops" in pilot.text and "line·break" in pilot.text and "\x1b" not in pilot.text
        await pilot.press("slash")
        await pilot.write("[/]oops")
        assert shown(pilot) == ["[/]oops"]
        await pilot.press("enter", "enter")
        assert isinstance(pilot.app.screen, PartScreen)
        assert "[/]oops" in pilot.text and "[red]SOT-23[/red]" in pilot.text


async def test_search_filters_as_typed_and_clear_shows_all(make_app) -> None:
    async with running(make_app()) as pilot:
        await pilot.press("slash")
        await pilot.write("qx sot")
        assert shown(pilot) == ["QX-112"]
        await pilot.write("zzz")
        assert shown(pilot) == [] and "No part is left" in pilot.text
        await pilot.press("escape", "x")
        assert len(shown(pilot)) == len(PARTS)


async def test_a_slash_can_be_typed_into_the_search(make_app) -> None:
    async with running(make_app()) as pilot:
        await pilot.press("slash")
        await pilot.write("a/b")
        assert pilot.session.filter.search == "a/b"


async def test_letters_are_text_in_the_search_and_commands_in_the_list(make_app) -> None:
    async with running(make_app()) as pilot:
        await pilot.press("slash", "i", "t", "1")
        assert pilot.session.filter == ShelfFilter(search="it1")
        await pilot.press("enter", "x", "i")
        assert pilot.session.filter == ShelfFilter(in_stock=True)


async def test_structure_and_package_are_picked_from_what_is_there(make_app) -> None:
    async with running(make_app()) as pilot:
        await pilot.press("t")
        await pilot.write("pnp")
        await pilot.press("enter")
        assert shown(pilot) == ["QX-111"]
        await pilot.press("x", "p")
        await pilot.write("126")
        await pilot.press("enter")
        assert shown(pilot) == ["QX-130"]


async def test_a_digit_sorts_and_the_same_again_turns_round(make_app) -> None:
    async with running(make_app()) as pilot:
        await pilot.press("4")
        assert shown(pilot)[0] == "QX-114"
        await pilot.press("4")
        assert shown(pilot)[0] == "QX-130"
        assert "▼" in pilot.text


async def test_the_cursor_stays_on_its_part_when_the_order_changes(make_app) -> None:
    async with running(make_app()) as pilot:
        await pilot.press("down", "down")
        view = pilot.find(LinesView, "#parts")
        row = view.row
        await pilot.press("4", "4")
        assert view.row == row


async def test_space_marks_and_takes_off(make_app) -> None:
    async with running(make_app()) as pilot:
        await pilot.press("space", "space", "up", "space")
        assert pilot.session.marks == ("QX-110",)
        assert "1 marked" in pilot.text


@pytest.mark.parametrize("size", [(80, 24), (120, 40), (40, 12), (200, 60)])
async def test_the_cursor_line_is_marked_by_a_sign(make_app, size: tuple[int, int]) -> None:
    async with running(make_app(), size) as pilot:
        await pilot.press("end")
        assert sum(line.startswith("▶") for line in pilot.text.splitlines()) == 1
        await pilot.press("pageup", "home", "pagedown")
        assert sum(line.startswith("▶") for line in pilot.text.splitlines()) == 1


async def test_the_screen_says_where_it_is(make_app) -> None:
    async with running(make_app()) as pilot:
        assert isinstance(pilot.app.screen, ShelfScreen)
        assert pilot.text.splitlines()[0].startswith(" Betafloor · shelf")


def test_silent_values_come_last_in_either_direction() -> None:
    table = ShelfTable(shelf_of())
    silent = table.shelf.index("QX-190")
    for descending in (False, True):
        assert table.order(ShelfFilter(sort=5, descending=descending))[-1] == silent


def test_the_gain_floor_is_the_lowest_stated_minimum() -> None:
    shelf = shelf_of()
    for row, part in enumerate(PARTS):
        stated = [one.min for one in part.limits if one.symbol == "hFE" and one.min is not None]
        assert gain_floor(shelf)[row] == min(stated) if stated else gain_floor(shelf)[row] != gain_floor(shelf)[row]
    assert "hFE" in SYMBOLS
