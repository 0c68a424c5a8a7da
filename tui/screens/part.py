"""One part in full: its limits with their sources, its gain floor, and every check with its headroom."""

from typing import TYPE_CHECKING

from textual import on, work
from textual.app import ComposeResult
from textual.containers import Horizontal, Vertical
from textual.widgets import Static

from ..commands import bindings_of
from ..source import SourceError
from ..state import Session
from ..widgets.cells import wrap
from ..widgets.lines_of_screen import TitleLine
from ..widgets.lines_view import LinesView
from ..widgets.text_view import TextView
from .base import Room

if TYPE_CHECKING:
    from engine.part import Limit, Part
    from engine.ranking import Explanation

SECTIONS = ("limits", "gain", "checks")
COLD = -40.0  # °C, where no requirement states the coldest ambient


class PartScreen(Room):
    """On a wide screen all three sections, on a narrow one the chosen one."""

    room = "part"
    BINDINGS = bindings_of("part")

    heading = "part"

    DEFAULT_CSS = """
    PartScreen #says { height: auto; padding: 0 1; text-style: bold; }
    PartScreen #sections { height: 1fr; }
    PartScreen #limits-pane, PartScreen #right { width: 1fr; height: 1fr; }
    PartScreen #gain, PartScreen #checks { height: 1fr; }
    PartScreen.-wide #limits-pane { width: 64; border-right: solid $primary; }
    PartScreen.-wide #checks { border-top: solid $primary; }
    PartScreen #limit { height: 3; color: $text-muted; padding: 0 1; }
    PartScreen #tabs { height: 1; padding: 0 1; }
    PartScreen.-wide #tabs { display: none; }
    PartScreen.-narrow .-away { display: none; }
    """

    def __init__(self, row: int) -> None:
        super().__init__()
        self.row = row
        self.plain = False
        self.section = 0
        self._limits: list[Limit] = []
        self._told: Explanation | None = None

    def body(self) -> ComposeResult:
        yield Static("", id="says", markup=False)
        yield Static("", id="tabs", markup=False)
        with Horizontal(id="sections"):
            with Vertical(id="limits-pane"):
                yield LinesView(id="limits", empty="Reading the limits …")
                yield Static("", id="limit", markup=False)
            with Vertical(id="right", classes="-away"):
                yield TextView(id="gain")
                yield TextView(id="checks")

    def on_mount(self) -> None:
        super().on_mount()
        self._show_section()
        self._read()

    @property
    def type_number(self) -> str:
        """The name of the part."""
        return str(self.session.shelf.names[self.row]) if self.session.shelf is not None else ""

    @work(thread=True, exclusive=True, group="part", description="part")
    def _read(self) -> None:
        session = self.session
        try:
            part = self.desk.source.part(self.type_number)
        except SourceError as trouble:
            self.app.call_from_thread(self._say_trouble, str(trouble))
            return
        told = None
        if session.ranking is not None:
            from engine.explain import explain

            told = explain(session.ranking.requirement, session.ranking.shelf, self.row)
        self.app.call_from_thread(self._fill, part, told)

    def _say_trouble(self, says: str) -> None:
        view = self.query_one("#limits", LinesView)
        view.empty = says
        view.redraw()

    def _fill(self, part: "Part", told: "Explanation | None") -> None:
        from ..part_words import in_sheet_order, limit_columns

        self._told = told
        self._limits = in_sheet_order(part)
        view = self.query_one("#limits", LinesView)
        view.empty = "No limit of this part is on file."
        view.show(limit_columns(self._limits), range(len(self._limits)))
        said = told.says if told else "not judged: F3 states a requirement"
        stale = " (STALE: of the last sound requirement)" if told and self.session.stale else ""
        self.query_one("#says", Static).update("\n".join(wrap(said + stale, max(self.size.width - 2, 20))))
        facts = [part.structure or "structure not stated", part.package, part.maker, part.note]
        self.query_one(TitleLine).say(self._facts(), f"{part.type_number} · {', '.join(f for f in facts if f)}")
        self._draw()

    def _facts(self) -> str:
        shelf = self.session.shelf
        stock = int(shelf.stock[self.row]) if shelf is not None else 0
        mark = "marked · " if self.type_number in self.session.marks else ""
        return f"{mark}{stock} in stock" + (" · invented demo data" if self.session.demo else "")

    def _draw(self) -> None:
        """The chart and the bars, in dots or in plain characters."""
        from ..part_words import gain_chart
        from ..widgets.bars import check_lines
        from ..widgets.reasons import reasons

        shelf, told, plain = self.session.shelf, self._told, self.plain
        if shelf is None:
            return
        requirement = self.session.requirement
        cold = requirement.number("ambient.min") if requirement is not None else COLD
        gain, checks = self.query_one("#gain", TextView), self.query_one("#checks", TextView)
        gain.show(lambda width: gain_chart(shelf, self.row, told, cold, width, gain.size.height, plain=plain))
        if told is None:
            checks.show(["Checks are made under a requirement: F3 states one."])
            return
        checks.show(
            lambda width: [*check_lines(told.checks, width, plain=plain), "", *reasons(told, width)],
        )

    def show(self, session: Session, old: Session | None) -> None:
        self.query_one(TitleLine).say(self._facts())
        if old is not None and session.ranking is not old.ranking:
            self._read()

    @on(LinesView.Moved, "#limits")
    def tell_limit(self, message: LinesView.Moved) -> None:
        from ..part_words import limit_sentence

        if message.row is not None:
            place = self.query_one("#limit", Static)
            lines = wrap(limit_sentence(self._limits[message.row]), max(place.size.width - 2, 20))
            place.update("\n".join(lines[:3]))

    # --- keys

    def _show_section(self) -> None:
        words = [f"[{i + 1} {name}]" if i == self.section else f" {i + 1} {name} " for i, name in enumerate(SECTIONS)]
        self.query_one("#tabs", Static).update(" ".join(words))
        self.query_one("#limits-pane").set_class(self.section != 0, "-away")
        self.query_one("#right").set_class(self.section == 0, "-away")
        self.query_one("#gain").set_class(self.section == 2, "-away")
        self.query_one("#checks").set_class(self.section == 1, "-away")
        self.set_focus(self.query_one(f"#{SECTIONS[self.section]}"))

    def action_section(self, key: str) -> None:
        """Go to a section."""
        self.section = int(key) - 1
        self._show_section()

    def action_ascii(self) -> None:
        """Plain characters, or dots again."""
        self.plain = not self.plain
        self._draw()

    def action_mark(self) -> None:
        """Mark this part."""
        self.desk.session = self.session.marked(self.type_number)

    async def action_calculation(self) -> None:
        """Open the calculation sheet."""
        await self.desk.open_sheet(self.row)
