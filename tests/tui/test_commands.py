"""Each command is declared once, has a handler, a key of its own and a place in the footer."""

import inspect

import pytest

from tui.app import BetafloorApp
from tui.commands import COMMANDS, EVERYWHERE, Command, commands_of
from tui.screens.ask import Ask
from tui.screens.bench import BenchScreen
from tui.screens.help import HelpScreen, help_lines
from tui.screens.part import PartScreen
from tui.screens.picker import Picker
from tui.screens.sheet import SheetScreen
from tui.screens.shelf import ShelfScreen
from tui.screens.shortlist import ShortlistScreen
from tui.screens.weights import WeightsScreen
from tui.widgets.cells import wrap
from tui.widgets.lines_of_screen import key_lines

SCREENS: tuple[type, ...] = (
    ShelfScreen, BenchScreen, PartScreen, SheetScreen, ShortlistScreen, WeightsScreen, HelpScreen, Picker, Ask,
)  # fmt: skip
HOME: dict[str, type] = {EVERYWHERE: BetafloorApp, **{screen.room: screen for screen in SCREENS}}  # type: ignore[attr-defined]


def test_every_room_of_a_command_is_a_screen() -> None:
    assert {room for one in COMMANDS for room in one.rooms} == set(HOME)


@pytest.mark.parametrize("command", COMMANDS, ids=lambda one: one.name)
def test_every_command_has_a_handler_in_each_of_its_rooms(command: Command) -> None:
    for room in command.rooms:
        if not command.own:
            handler = getattr(HOME[room], f"action_{command.action}", None)
            assert callable(handler), f"{HOME[room].__name__}.action_{command.action}"
            takes = len(inspect.signature(handler).parameters) - 1
            assert takes == (1 if command.argument else 0)


@pytest.mark.parametrize("room", sorted(HOME))
def test_no_key_means_two_things_on_one_screen(room: str) -> None:
    here = commands_of(room) if room == EVERYWHERE else (*commands_of(room), *commands_of(EVERYWHERE))
    keys = [key for one in here if not one.own for key in one.keys]
    assert len(keys) == len(set(keys)), keys


def test_every_command_has_words() -> None:
    for one in COMMANDS:
        assert one.label and one.shown and one.sentence
        assert len(one.sentence) > 10 and one.sentence[0].isupper() and not one.sentence.endswith(".")


def test_names_are_not_used_twice_in_one_room() -> None:
    for room in HOME:
        names = [one.name for one in commands_of(room)]
        assert len(names) == len(set(names))


@pytest.mark.parametrize("room", sorted(set(HOME) - {EVERYWHERE}))
def test_the_footer_needs_at_most_three_lines_at_80_cells(room: str) -> None:
    assert len(key_lines((*commands_of(room), *commands_of(EVERYWHERE)), 80)) <= 3


@pytest.mark.parametrize("width", [40, 80, 120])
def test_help_tells_every_command(width: int) -> None:
    text = " ".join(" ".join(help_lines("bench", width)).split())
    for one in COMMANDS:
        assert one.shown in text
        for line in wrap(one.sentence, width - 20):
            assert line in text
