"""A form made from a duty's list of fields: one line a field, its problem under it as soon as there is one."""

from collections.abc import Iterable, Mapping, Sequence
from typing import TYPE_CHECKING, ClassVar

from textual import events, on
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.containers import VerticalScroll
from textual.content import Content
from textual.message import Message
from textual.widget import Widget
from textual.widgets import Input, Static

from .cells import fit, wrap
from .entry import Entry

if TYPE_CHECKING:
    from engine.requirement import Field, Problem

_LABEL, _INPUT, _UNIT = 20, 34, 4  # cells; of the field itself the most
UNSTATED = "–"


class WordInput(Widget, can_focus=True):
    """One word out of a few: Left and Right go through them, a letter jumps to the next word that starts with it."""

    DEFAULT_CSS = """
    WordInput { height: 1; background: $surface; }
    WordInput:focus { background: $boost; text-style: underline; }
    """
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("left", "turn(-1)", show=False),
        Binding("right", "turn(1)", show=False),
    ]

    class Changed(Message):
        """Another word was chosen."""

    def __init__(self, choices: Sequence[str], default: str, *, id: str | None = None) -> None:
        super().__init__(id=id)
        self.choices = ("", *choices)  # "" states nothing
        self.default = default
        self.value = ""

    def put(self, value: str) -> None:
        """Show a word without telling anyone; a word that is not known is shown as it is."""
        if value not in self.choices:
            self.choices = (*self.choices, value)
        self.value = value
        self.refresh()

    def action_turn(self, by: int) -> None:
        shown = self.value or (self.default if self.default in self.choices else "")
        self._choose(self.choices[(self.choices.index(shown) + by) % len(self.choices)])

    def _choose(self, word: str) -> None:
        self.put("" if word == self.default else word)
        self.post_message(self.Changed())

    def on_key(self, event: events.Key) -> None:
        letter = event.character
        if letter is None or not event.is_printable or letter == " ":
            return
        event.stop()
        now = self.choices.index(self.value or (self.default if self.default in self.choices else ""))
        after = [*self.choices[now + 1 :], *self.choices[: now + 1]]
        found = next((word for word in after if word.casefold().startswith(letter.casefold())), None)
        if found:
            self._choose(found)

    def on_click(self) -> None:
        self.action_turn(1)

    def render(self) -> Content:
        word = self.value or (f"({self.default})" if self.default else UNSTATED)
        return Content(f"‹ {fit(word, max(self.size.width - 4, 1)).rstrip()} ›")


class FieldRow(Widget):
    """Label, field and unit on one line, drawn around the field; under it the problem, where there is one."""

    DEFAULT_CSS = f"""
    FieldRow {{ height: 1; }}
    FieldRow > Input, FieldRow > WordInput {{ margin: 0 {_UNIT + 1} 0 {_LABEL + 2}; width: 1fr; max-width: {_INPUT}; }}
    FieldRow.-hidden {{ display: none; }}
    """

    def __init__(self, field: "Field") -> None:
        super().__init__()
        self.field = field
        self.problem = ""
        default = default_text(field)
        self.input: Input | WordInput
        if field.words and field.choices:
            self.input = WordInput(field.choices, default)
        else:
            placeholder = f"({default})" if default else "needed" if field.required else ""
            self.input = Entry(placeholder=placeholder, compact=True, select_on_focus=False)

    def compose(self) -> ComposeResult:
        yield self.input

    @property
    def text(self) -> str:
        """What is stated; empty when nothing is."""
        return self.input.value.strip()

    def put(self, text: str) -> None:
        """Show a text without telling anyone."""
        if isinstance(self.input, WordInput):
            self.input.put(text)
        else:
            with self.input.prevent(Input.Changed):
                self.input.value = text

    def say(self, problem: str) -> None:
        """Show what is wrong with the field, or nothing."""
        if problem != self.problem:
            self.problem = problem
            self._measure()

    def _measure(self) -> None:
        self.styles.height = 1 + len(self._problem_lines())
        self.refresh(layout=True)

    def on_resize(self) -> None:
        if self.problem:
            self._measure()

    def _problem_lines(self) -> list[str]:
        return wrap(self.problem, max(self.size.width - 6, 20)) if self.problem else []

    def render(self) -> Content:
        sign = "▶" if self.input.has_focus else "!" if self.problem else " "
        star = "*" if self.field.required else " "
        gap = " " * min(max(self.size.width - _LABEL - 2 - _UNIT - 1, 0), _INPUT)
        first = f"{sign}{star}{fit(self.field.label, _LABEL - 1)} {gap} {fit(self.field.unit, _UNIT)}"
        return Content("\n".join([first, *(f"   ! {line}" if i == 0 else f"     {line}"
                                           for i, line in enumerate(self._problem_lines()))]))  # fmt: skip

    def on_descendant_focus(self) -> None:
        self.refresh()

    def on_descendant_blur(self) -> None:
        self.refresh()


class Form(VerticalScroll, can_focus=False):
    """The fields of one duty. Says `Form.Edited` whenever a text changes."""

    DEFAULT_CSS = """
    Form { height: 1fr; scrollbar-size-vertical: 1; }
    Form .form--group { height: 1; text-style: bold; color: $text-muted; }
    """
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("down", "step(1)", show=False),
        Binding("up", "step(-1)", show=False),
    ]

    class Edited(Message):
        """A text has changed."""

    class Entered(Message):
        """Another field has the cursor."""

        def __init__(self, field: "Field") -> None:
            super().__init__()
            self.field = field

    def __init__(self, fields: "Sequence[Field]", *, id: str | None = None) -> None:
        super().__init__(id=id)
        self.rows = [FieldRow(field) for field in fields]
        self._last: Widget | None = None  # the field that had the cursor

    def compose(self) -> ComposeResult:
        group = ""
        for row in self.rows:
            head, _, tail = row.field.key.partition(".")
            if tail and head != group:
                group = head
                yield Static(f" {group}", classes="form--group", markup=False)
            yield row

    async def rebuild(self, fields: "Sequence[Field]") -> None:
        """Show other fields: those of another duty."""
        self._last = None
        self.rows = [FieldRow(field) for field in fields]
        await self.remove_children()
        await self.mount_all(self.compose())

    def on_mount(self) -> None:
        self._show_what_is_asked()

    # --- texts

    def texts(self) -> dict[str, str]:
        """Texts by field, only of the fields that are asked and stated."""
        return {row.field.key: row.text for row in self.rows if row.text and not row.has_class("-hidden")}

    def put(self, texts: Mapping[str, str]) -> None:
        """Show texts without telling anyone."""
        for row in self.rows:
            row.put(texts.get(row.field.key, ""))
        self._show_what_is_asked()

    def say(self, problems: "Iterable[Problem]") -> None:
        """Show the problems under their fields; gives nothing back for those that belong to no field."""
        said: dict[str, str] = {}
        for one in problems:
            said.setdefault(one.key, f"{one.says}. {one.mend}.".replace("..", "."))
        for row in self.rows:
            row.say(said.get(row.field.key, ""))

    def _show_what_is_asked(self) -> None:
        stated = {row.field.key: row.text or default_text(row.field) for row in self.rows}
        hidden: set[str] = set()
        for row in self.rows:
            asked = row.field.shown_if
            unseen = asked is not None and (asked[0] in hidden or stated.get(asked[0]) not in asked[1])
            row.set_class(unseen, "-hidden")
            if unseen:
                hidden.add(row.field.key)

    # --- what happens

    @on(Input.Changed)
    @on(WordInput.Changed)
    def take_change(self, message: Message) -> None:
        message.stop()
        self._show_what_is_asked()
        self.post_message(self.Edited())

    def on_descendant_focus(self, event: events.DescendantFocus) -> None:
        row = event.widget.parent
        if isinstance(row, FieldRow):
            self._last = event.widget
            self.post_message(self.Entered(row.field))

    def enter(self) -> None:
        """Put the cursor into the first field, or back into the one that had it."""
        wanted = next((row for row in self.rows if row.input is self._last), self.rows[0])
        self.screen.set_focus(wanted.input)

    def action_step(self, by: int) -> None:
        """To the next field that is asked."""
        seen = [row for row in self.rows if not row.has_class("-hidden")]
        here = next((i for i, row in enumerate(seen) if row.input.has_focus), 0)
        row = seen[min(max(here + by, 0), len(seen) - 1)]
        self.screen.set_focus(row.input)


def meaning_of(field: "Field") -> str:
    """What a field means, with its default: what stands in brackets holds where nothing is written."""
    default = default_text(field)
    return f"{field.meaning}. Where nothing is written: {default}" if default else field.meaning


def default_text(field: "Field") -> str:
    """The default of a field as a person would write it; empty where there is none."""
    from engine import show

    value = field.default
    if value is None or value == ():
        return ""
    if isinstance(value, tuple):
        return ", ".join(value)
    return value if isinstance(value, str) else show.quantity(float(value), field.unit)
