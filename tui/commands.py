"""Every command once: its keys, its word in the footer and the sentence that tells what it does.

Footer, help screen, command palette, key bindings and the key table of the documentation are all made
from `COMMANDS`; a command named `open-bench` is handled by a method `action_open_bench` of its screen,
or of the app where its room is `everywhere`.
"""

import string
from dataclasses import dataclass

from textual.binding import Binding, BindingType

EVERYWHERE = "everywhere"


@dataclass(frozen=True, slots=True)
class Command:
    """One thing a user can ask for by a key."""

    name: str
    rooms: tuple[str, ...]  # names of screens, or EVERYWHERE
    keys: tuple[str, ...]  # as Textual names them
    shown: str  # the keys as a person reads them
    label: str  # one or two words for the footer
    sentence: str  # for help, palette and documentation
    typing: bool = False  # also while text is being typed into a field
    argument: bool = False  # the handler is told which of the keys it was
    own: bool = False  # the widget under the cursor answers it itself; here for footer and help only

    @property
    def action(self) -> str:
        """The name of the handler, without `action_`."""
        return self.name.replace("-", "_")


_LISTS = ("shelf", "bench", "shortlist", "part", "picker", "sheet", "help")

COMMANDS: tuple[Command, ...] = (
    Command("help", (EVERYWHERE,), ("f1",), "F1", "help", "Show every key of every screen", typing=True),
    Command("open-shelf", (EVERYWHERE,), ("f2",), "F2", "shelf", "Go to the shelf: every part on file", typing=True),
    Command("open-bench", (EVERYWHERE,), ("f3",), "F3", "bench",
            "Go to the bench: state a requirement and see which parts are certain to meet it", typing=True),
    Command("open-shortlist", (EVERYWHERE,), ("f4",), "F4", "shortlist",
            "Go to the shortlist: the parts you have marked", typing=True),
    Command("palette", (EVERYWHERE,), ("ctrl+p",), "^P", "palette", "Find a command by its words", typing=True),
    Command("quit", (EVERYWHERE,), ("ctrl+q",), "^Q", "quit", "Leave the program", typing=True),
    # --- shelf
    Command("search", ("shelf",), ("slash",), "/", "search",
            "Search the shelf: every word must occur in type, package or structure; Enter goes to the list"),
    Command("structure", ("shelf",), ("t",), "t", "structure", "Show one structure only (npn, pnp, ...)"),
    Command("package", ("shelf",), ("p",), "p", "package", "Show one package only"),
    Command("stock", ("shelf",), ("i",), "i", "in stock", "Show only parts that are in stock, or all again"),
    Command("sort", ("shelf",), ("1", "2", "3", "4", "5", "6", "7", "8"), "1-8", "sort",
            "Sort by that column; the same digit again turns the order round", argument=True),
    Command("clear", ("shelf",), ("x",), "x", "show all", "Take off the search and every filter"),
    # --- bench
    Command("other-pane", ("bench",), ("f5",), "F5", "form/list",
            "Go from the form to the ranking and back", typing=True),
    Command("load", ("bench",), ("f6",), "F6", "load", "Load a requirement: an example, a saved one or a file",
            typing=True),
    Command("save-requirement", ("bench",), ("f7",), "F7", "save",
            "Save the requirement in the shelf or as a TOML file", typing=True),
    Command("weights", ("bench",), ("f8",), "F8", "weights", "Weigh the criteria of the score", typing=True),
    Command("verdicts", ("bench",), ("v",), "v", "verdicts", "Show all parts, or only those that fit"),
    Command("stop", ("bench",), ("ctrl+x",), "^X", "stop", "Stop the ranking that is being worked out", typing=True),
    # --- part
    Command("section", ("part",), ("1", "2", "3"), "1-3", "section",
            "Show the limits, the gain floor over IC, or the checks with their headroom", argument=True),
    Command("ascii", ("part",), ("a",), "a", "ascii", "Draw charts and bars in plain characters, or finely again"),
    # --- sheet
    Command("export-sheet", ("sheet",), ("e",), "e", "export", "Write the calculation sheet to a file"),
    # --- shortlist
    Command("save-shortlist", ("shortlist",), ("s",), "s", "save", "Save the shortlist in the shelf file"),
    Command("export-shortlist", ("shortlist",), ("e",), "e", "export",
            "Write the shortlist to a CSV, JSON or Markdown file"),
    # --- weights
    Command("keep-weights", ("weights",), ("f10",), "F10", "keep", "Use these weights and go back", typing=True),
    Command("default-weights", ("weights",), ("f9",), "F9", "defaults", "Set the weights to their defaults",
            typing=True),
    # --- several screens
    Command("open", ("shelf", "bench", "shortlist", "picker"), ("enter",), "Enter", "open",
            "Open what is under the cursor; from the search field go to the list", typing=True),
    Command("mark", ("shelf", "bench", "shortlist", "part"), ("space",), "Space", "mark",
            "Mark the part for the shortlist, or take the mark off"),
    Command("calculation", ("bench", "part", "shortlist"), ("c",), "c", "sheet", "Open the calculation sheet"),
    Command("next-field", ("bench", "weights"), ("tab", "shift+tab"), "Tab", "field",
            "Go to the next field; with Shift to the one before. Up and Down do the same", own=True, typing=True),
    Command("change-word", ("bench",), ("left", "right"), "←→", "word",
            "In a field of fixed words: the word before or after", own=True, typing=True),
    Command("move", _LISTS, ("up", "down"), "↑↓", "move", "Move the cursor or scroll; PgUp, PgDn, Home and End as well",
            own=True),
    Command("back", ("shelf", "bench", "part", "sheet", "shortlist", "weights", "help", "picker", "ask"), ("escape",),
            "Esc", "back", "Leave this field or screen", typing=True),
    Command("narrow", ("picker",), (*string.ascii_lowercase, *string.digits, "space", "minus", "full_stop", "backspace"),
            "a-z", "narrow", "Letters narrow the list; Backspace takes one back", argument=True),
    Command("accept", ("ask",), ("enter",), "Enter", "do it", "Do what is asked", typing=True,
            own=True),
)  # fmt: skip


def commands_of(room: str) -> tuple[Command, ...]:
    """The commands that work in `room`, its own first."""
    return tuple(one for one in COMMANDS if room in one.rooms)


def bindings_of(room: str) -> list[BindingType]:
    """Textual's bindings of `room`.

    They take priority over the focused widget and are refused by `check_action` where a key is to be
    typed: a key that opens a field or a screen must have done so before the next key is handed out, or
    keys that are typed ahead are lost.
    """
    return [
        Binding(key, f"{one.action}({key!r})" if one.argument else one.action, one.label, show=False, priority=True)
        for one in commands_of(room)
        if not one.own
        for key in one.keys
    ]


def command_of(action: str) -> Command | None:
    """The command that a handler belongs to."""
    return next((one for one in COMMANDS if one.action == action), None)
