"""The command palette, made from the table of commands."""

from collections.abc import Callable
from functools import partial

from textual.command import DiscoveryHit, Hit, Hits, Provider

from .commands import EVERYWHERE, Command, commands_of


class Palette(Provider):
    """Every command that works on the screen below, by its words."""

    def _commands(self) -> list[tuple[Command, Callable[[], object]]]:
        room = getattr(self.screen, "room", "")
        found: list[tuple[Command, Callable[[], object]]] = []
        for one in (*commands_of(room), *commands_of(EVERYWHERE)):
            if not (one.own or one.argument or one.name in ("palette", "back")):
                place = "app" if EVERYWHERE in one.rooms else "screen"
                found.append((one, partial(self._do, f"{place}.{one.action}")))
        return found

    async def _do(self, action: str) -> None:
        await self.app.run_action(action, self.screen)

    async def discover(self) -> Hits:
        for one, act in self._commands():
            yield DiscoveryHit(f"{one.sentence}  ({one.shown})", act)

    async def search(self, query: str) -> Hits:
        matcher = self.matcher(query)
        for one, act in self._commands():
            words = f"{one.sentence}  ({one.shown})"
            score = matcher.match(words)
            if score > 0:
                yield Hit(score, matcher.highlight(words), act)
