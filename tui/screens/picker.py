"""A list to choose one thing from; what is typed narrows it down."""

from collections.abc import Sequence
from dataclasses import dataclass

from textual import on
from textual.app import ComposeResult
from textual.containers import Vertical
from textual.widgets import Static

from ..commands import bindings_of
from ..widgets.lines_of_screen import KeysLine
from ..widgets.lines_view import Column, LinesView
from .base import Dialog


@dataclass(frozen=True, slots=True)
class Choice:
    """One thing to choose: what is given back, and what is read."""

    value: str
    words: str
    more: str = ""


_CHARACTERS = {"space": " ", "minus": "-", "full_stop": "."}


class Picker(Dialog[str]):
    """Gives back the value of the choice, or None."""

    room = "picker"
    BINDINGS = bindings_of("picker")

    DEFAULT_CSS = """
    Picker { align: center middle; }
    Picker #box { width: 74; max-width: 96%; height: auto; max-height: 80%; border: solid $primary; }
    Picker #box { background: $surface; }
    Picker #title { height: auto; text-style: bold; padding: 0 1; }
    Picker LinesView { height: auto; max-height: 16; }
    """

    def __init__(self, title: str, choices: Sequence[Choice]) -> None:
        super().__init__()
        self.question = title
        self.choices = list(choices)
        self.typed = ""

    def compose(self) -> ComposeResult:
        with Vertical(id="box"):
            yield Static(self._title(), id="title", markup=False)
            yield LinesView(id="choices", empty="Nothing has these letters; Backspace takes one back.")
        yield KeysLine("picker")

    def _title(self) -> str:
        return f"{self.question} (letters narrow the list{': ' + self.typed if self.typed else ''})"

    def on_mount(self) -> None:
        view = self.query_one(LinesView)
        self.set_focus(view)
        self._fill()

    def _fill(self) -> None:
        view = self.query_one(LinesView)
        kept = [i for i, one in enumerate(self.choices) if self.typed in f"{one.words} {one.more}".casefold()]
        longest = max((len(one.words) for one in self.choices), default=1)
        columns = [
            Column("", min(longest, 40), lambda i: self.choices[i].words),
            Column("", 0, lambda i: self.choices[i].more),
        ]
        view.show(columns, kept)
        view.styles.height = min(max(len(kept), 1) + 1, 16)
        self.query_one("#title", Static).update(self._title())

    def action_narrow(self, key: str) -> None:
        """Take a letter to the ones typed before, or take one back.

        A command, not a key event: Enter is one, and must not overtake letters typed before it.
        """
        self.typed = self.typed[:-1] if key == "backspace" else self.typed + _CHARACTERS.get(key, key)
        self._fill()

    def action_open(self) -> None:
        """Give back the choice under the cursor."""
        row = self.query_one(LinesView).row
        if row is not None:
            self.dismiss(self.choices[row].value)

    @on(LinesView.Chosen)
    def take_clicked(self) -> None:
        self.action_open()
