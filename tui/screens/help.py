"""Every key of every screen, made from the table of commands."""

from textual.app import ComposeResult

from ..commands import COMMANDS, EVERYWHERE, Command, bindings_of
from ..widgets.cells import wrap
from ..widgets.text_view import TextView
from .base import Room

WORDS = (
    ("fits", "every check passes on guaranteed limits, or on limits derived from them"),
    ("fits on typicals", "every check passes, but a typical value stands among the figures"),
    ("cannot say", "a figure that a check needs is not on file; the reasons name it"),
    ("fails", "a check fails at some combination the requirement allows"),
    ("headroom", "limit over demand (room): ×1 is exactly at the limit, below it fails"),
)
ROOMS = {
    "shelf": "Shelf", "bench": "Bench", "part": "Part", "sheet": "Calculation sheet", "shortlist": "Shortlist",
    "weights": "Weights", "picker": "Lists to choose from", "ask": "Questions",
}  # fmt: skip


def help_lines(here: str, width: int) -> list[str]:
    """The help text: the keys of the screen `here`, those that work everywhere, the words, the other screens."""
    lines = _keys(ROOMS[here], here, width) if here in ROOMS else []
    lines += _keys("Everywhere", EVERYWHERE, width)
    lines += ["What the words mean", ""]
    for word, meaning in WORDS:
        first, *rest = wrap(meaning, width - 20)
        lines += [f"  {word:<17} {first}", *(" " * 20 + line for line in rest)]
    lines.append("")
    for room, title in ROOMS.items():
        lines += _keys(title, room, width) if room != here else []
    return lines


def _keys(title: str, room: str, width: int) -> list[str]:
    entries = [line for one in COMMANDS if room in one.rooms for line in _entry(one, width)]
    return [title, "", *entries, ""]


def _entry(one: Command, width: int) -> list[str]:
    first, *rest = wrap(one.sentence, width - 20)
    return [f"  {one.shown:<6} {one.label:<10} {first}", *(" " * 20 + line for line in rest)]


class HelpScreen(Room):
    """A text to scroll."""

    room = "help"
    BINDINGS = bindings_of("help")

    heading = "help"

    def __init__(self, here: str) -> None:
        super().__init__()
        self.here = here

    def body(self) -> ComposeResult:
        yield TextView(id="help")

    def on_mount(self) -> None:
        super().on_mount()
        view = self.query_one(TextView)
        view.show(lambda width: help_lines(self.here, width))
        self.set_focus(view)
