"""A question with one line of text for an answer, such as the name of a file to write."""

from collections.abc import Callable
from pathlib import Path

from textual import on
from textual.app import ComposeResult
from textual.containers import Vertical
from textual.widgets import Input, Static

from ..commands import bindings_of
from ..widgets.entry import Entry
from ..widgets.lines_of_screen import KeysLine
from .base import Dialog


class Ask(Dialog[str]):
    """Gives back what was written, or None.

    `doubt` may answer a text with a line that says what is wrong or must be confirmed; a text that was
    doubted once and is entered again unchanged counts as confirmed where `confirms` says so of the line.
    """

    room = "ask"
    BINDINGS = bindings_of("ask")

    DEFAULT_CSS = """
    Ask { align: center middle; }
    Ask #box { width: 74; max-width: 96%; height: auto; border: solid $primary; background: $surface; padding: 0 1; }
    Ask #question { height: auto; text-style: bold; }
    Ask #doubt { height: auto; }
    """

    def __init__(
        self, question: str, text: str = "", doubt: Callable[[str], "Doubt | None"] = lambda text: None
    ) -> None:
        super().__init__()
        self.question, self.first_text, self.doubt = question, text, doubt
        self.confirmed = ""  # the text that was doubted

    def compose(self) -> ComposeResult:
        with Vertical(id="box"):
            yield Static(self.question, id="question", markup=False)
            yield Entry(self.first_text, compact=True, select_on_focus=False)
            yield Static("", id="doubt", markup=False)
        yield KeysLine("ask")

    def on_mount(self) -> None:
        self.set_focus(self.query_one(Input))

    @on(Input.Changed)
    def take_change(self) -> None:
        self.confirmed = ""
        self.query_one("#doubt", Static).update("")

    @on(Input.Submitted)
    def accept(self) -> None:
        """Answer, unless the text is doubted. The field itself takes Enter, in its turn after the letters."""
        text = self.query_one(Input).value.strip()
        doubt = self.doubt(text) if text else Doubt("Write something, or leave with Esc.", final=True)
        if doubt is None or (not doubt.final and self.confirmed == text):
            self.dismiss(text)
            return
        self.confirmed = text
        self.query_one("#doubt", Static).update(doubt.says)


class Doubt:
    """Why a text is not taken at once; a final one cannot be confirmed away."""

    def __init__(self, says: str, *, final: bool) -> None:
        self.says, self.final = says, final


def doubt_file(endings: tuple[str, ...]) -> Callable[[str], Doubt | None]:
    """Doubts about the name of a file to write: its ending, its folder, and whether it exists."""

    def doubt(text: str) -> Doubt | None:
        path = Path(text).expanduser()
        if path.suffix not in endings:
            return Doubt(f"The name must end in {' or '.join(endings)}.", final=True)
        if not path.parent.is_dir():
            return Doubt(f"There is no folder {path.parent}.", final=True)
        if path.is_dir():
            return Doubt(f"{path} is a folder.", final=True)
        if path.exists():
            return Doubt(f"{path} exists. Enter again replaces it; Esc leaves it.", final=False)
        return None

    return doubt
