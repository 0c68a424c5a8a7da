"""The first line of a screen and its last: what is shown, and which keys work here."""

from textual.content import Content
from textual.widget import Widget

from ..commands import EVERYWHERE, Command, commands_of
from .cells import fit


class TitleLine(Widget):
    """One line at the top: the screen's name on the left, facts on the right."""

    DEFAULT_CSS = """
    TitleLine { dock: top; height: 1; background: $panel; color: $foreground; text-style: bold; }
    """

    def __init__(self, name: str) -> None:
        super().__init__()
        self.screen_name = name
        self.facts = ""

    def say(self, facts: str, name: str | None = None) -> None:
        """Show other facts, and another name if one is given."""
        self.facts, self.screen_name = facts, name or self.screen_name
        self.refresh()

    def render(self) -> Content:
        facts = fit(self.facts, min(len(self.facts), max(self.size.width - 2, 0)))
        left = fit(f" Betafloor · {self.screen_name}", max(self.size.width - len(facts) - 2, 0))
        return Content(f"{left} {facts} ")


class KeysLine(Widget):
    """The keys of the screen at the bottom, over as many lines as they need."""

    DEFAULT_CSS = """
    KeysLine { dock: bottom; height: auto; background: $panel; color: $foreground; }
    """

    def __init__(self, room: str) -> None:
        super().__init__()
        own = commands_of(room)
        general = commands_of(EVERYWHERE) if room not in ("ask", "picker") else ()
        self._commands: tuple[Command, ...] = (*own, *general)

    @property
    def commands(self) -> tuple[Command, ...]:
        """The commands whose keys work where the cursor is."""
        return tuple(one for one in self._commands if self.screen.check_action(one.action, ()))

    def get_content_height(self, container: object, viewport: object, width: int) -> int:
        return len(key_lines(self.commands, width))

    def render(self) -> Content:
        return Content("\n").join(
            Content("  ").join(Content.assemble((shown, "bold reverse"), " " + label) for shown, label in line)
            for line in key_lines(self.commands, self.size.width)
        )


def key_lines(commands: tuple[Command, ...], width: int) -> list[list[tuple[str, str]]]:
    """Keys with their words, broken into lines of `width` cells."""
    lines: list[list[tuple[str, str]]] = [[]]
    used = 0
    for one in commands:
        size = len(one.shown) + 1 + len(one.label)
        if lines[-1] and used + 2 + size > width:
            lines.append([])
            used = 0
        used += size + (2 if lines[-1] else 0)
        lines[-1].append((one.shown, one.label))
    return lines
