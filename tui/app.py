"""The interface: it opens the shelf after the first paint, holds the session and leads from screen to screen."""

import os
from collections.abc import Callable
from dataclasses import replace
from pathlib import Path
from typing import ClassVar

from textual import on, work
from textual.app import App
from textual.reactive import var
from textual.screen import Screen

from .commands import EVERYWHERE, bindings_of
from .messages import ShelfOpened, ShelfTrouble
from .screens.base import WIDE, key_is_free
from .screens.shelf import ShelfScreen
from .source import Source, SourceError
from .state import Session


def _bench() -> Screen[None]:
    from .screens.bench import BenchScreen

    return BenchScreen()


def _shortlist() -> Screen[None]:
    from .screens.shortlist import ShortlistScreen

    return ShortlistScreen()


def _provider() -> type:
    from .palette import Palette

    return Palette


class BetafloorApp(App[int]):
    """Screens and the one session that they show."""

    TITLE = "Betafloor"
    CSS_PATH = "style.tcss"
    HORIZONTAL_BREAKPOINTS = [(0, "-narrow"), (WIDE, "-wide")]  # noqa: RUF012  Textual declares it so
    MODES: ClassVar[dict[str, str | Callable[[], Screen[None]]]] = {
        "shelf": ShelfScreen,
        "bench": _bench,
        "shortlist": _shortlist,
    }
    DEFAULT_MODE = "shelf"
    COMMANDS: ClassVar = {_provider}
    BINDINGS = bindings_of(EVERYWHERE)

    session: var[Session] = var(Session, always_update=True)

    def __init__(self, source: Source, *, demo: bool = False, requirement: Path | None = None) -> None:
        colourless = "NO_COLOR" in os.environ
        super().__init__(ansi_color=True if colourless else None)
        if colourless:
            self.theme = "ansi-dark"
        self.source = source
        self.first_requirement = requirement
        self.session = Session(shelf_name=source.name, demo=demo)

    def on_mount(self) -> None:
        self.call_after_refresh(self._open_shelf)

    # --- the shelf

    @work(thread=True, group="shelf", description="shelf")
    def _open_shelf(self) -> None:
        try:
            shelf = self.source.shelf()
        except SourceError as trouble:
            self.post_message(ShelfTrouble(str(trouble)))
            return
        self.post_message(ShelfOpened(shelf))

    @on(ShelfOpened)
    async def take_shelf(self, message: ShelfOpened) -> None:
        self.session = replace(self.session, shelf=message.shelf, trouble="")
        if self.first_requirement is not None:
            await self.action_open_bench()
        else:
            self._warm()

    @on(ShelfTrouble)
    def take_trouble(self, message: ShelfTrouble) -> None:
        self.session = replace(self.session, trouble=message.says)

    @work(thread=True, group="warm", description="warm")
    def _warm(self) -> None:
        """Import what the bench will need while the user looks at the shelf."""
        from .judge import warm

        warm()

    def tell(self, words: str, *, title: str = "", wrong: bool = False) -> None:
        """Tell the user something in passing; the words are data, not markup."""
        self.notify(words, title=title, severity="error" if wrong else "information", timeout=8, markup=False)

    # --- from screen to screen

    async def action_open_shelf(self) -> None:
        await self._go("shelf")

    async def action_open_bench(self) -> None:
        await self._go("bench")

    async def action_open_shortlist(self) -> None:
        await self._go("shortlist")

    async def _go(self, mode: str) -> None:
        while len(self.screen_stack) > 1:
            await self.pop_screen()
        if mode != self.current_mode:
            await self.switch_mode(mode)

    async def open_part(self, row: int) -> None:
        """Show one part of the shelf in full."""
        from .screens.part import PartScreen

        await self.push_screen(PartScreen(row))

    async def open_sheet(self, row: int) -> None:
        """Show the calculation sheet of one part under the requirement that was last judged."""
        if self.session.ranking is None:
            self.tell("State a requirement first: F3 goes to the bench.", title="No sheet yet")
            return
        from .screens.sheet import SheetScreen

        await self.push_screen(SheetScreen(row))

    async def action_help(self) -> None:
        from .screens.help import HelpScreen

        if not isinstance(self.screen, HelpScreen):
            await self.push_screen(HelpScreen(getattr(self.screen, "room", "")))

    def action_palette(self) -> None:
        self.action_command_palette()

    def check_action(self, action: str, parameters: tuple[object, ...]) -> bool | None:
        if self.screen_stack and self.screen.is_modal and action in _AWAY:
            return False
        return key_is_free(self.focused, action)


_AWAY = {"open_shelf", "open_bench", "open_shortlist", "help", "palette"}


def run(
    shelf_path: Path,
    demo: bool = False,
    requirement: Path | None = None,
    prepare: Callable[[], object] | None = None,
) -> int:
    """Show the interface on a shelf file, with a requirement file loaded if one is given. Gives the exit code.

    `prepare` makes the file first, in a thread after the first paint: a demo shelf takes a second or two.
    """
    from .store_source import StoreSource

    app = BetafloorApp(StoreSource(shelf_path, prepare), demo=demo, requirement=requirement)
    return app.run() or app.return_code or 0
