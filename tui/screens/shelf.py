"""The shelf: every part on file, to search, filter, sort and mark."""

from dataclasses import replace
from typing import TYPE_CHECKING

from textual import on
from textual.app import ComposeResult
from textual.containers import Horizontal
from textual.widgets import Input, Static

from ..commands import bindings_of
from ..state import Session, ShelfFilter
from ..widgets.entry import Entry
from ..widgets.lines_view import LinesView
from .base import Room

if TYPE_CHECKING:
    from ..shelf_table import ShelfTable

HINT = "Next: F3 states a requirement and ranks these parts; Enter opens a part."


class ShelfScreen(Room):
    """The first screen."""

    room = "shelf"
    BINDINGS = bindings_of("shelf")

    heading = "shelf"

    DEFAULT_CSS = """
    ShelfScreen #filters { height: 1; }
    ShelfScreen #filters Static { width: auto; padding: 0 1; }
    ShelfScreen #search { width: 1fr; min-width: 12; }
    ShelfScreen #hint { height: auto; color: $text-muted; padding: 0 1; }
    """

    def __init__(self) -> None:
        super().__init__()
        self._table: ShelfTable | None = None

    def body(self) -> ComposeResult:
        with Horizontal(id="filters"):
            yield Static("Search", markup=False)
            yield Entry(placeholder="press / and type", id="search", compact=True, select_on_focus=False)
            yield Static("", id="kept", markup=False)
        yield LinesView(id="parts", empty="Opening the shelf …")
        yield Static(HINT, id="hint", markup=False)

    def on_mount(self) -> None:
        super().on_mount()
        self.set_focus(self.query_one("#parts"))

    # --- showing

    def show(self, session: Session, old: Session | None) -> None:
        view = self.query_one("#parts", LinesView)
        if session.trouble:
            view.empty = session.trouble
            self.query_one("#hint", Static).update("Nothing else can be done here without a shelf; ^Q leaves.")
            view.redraw()
        if session.shelf is None:
            return
        new_shelf = old is None or session.shelf is not old.shelf
        if new_shelf or (old and session.filter != old.filter):
            self._fill(view, session, self._same_place(view, session) if not new_shelf else 0)
        elif old and session.marks != old.marks:
            view.redraw()

    def _fill(self, view: LinesView, session: Session, cursor: int) -> None:
        from ..shelf_table import ShelfTable

        if session.shelf is None:
            return
        if self._table is None or self._table.shelf is not session.shelf:
            self._table = ShelfTable(session.shelf)
        wanted = session.filter
        order = self._table.order(wanted)
        columns = self._table.columns(wanted.sort, wanted.descending, lambda name: name in self.session.marks)
        if len(session.shelf) == 0:
            view.empty = "The shelf is empty. Leave with ^Q and run: betafloor import FILE"
        else:
            view.empty = "No part is left. x takes off the search and every filter."
        view.show(columns, order, cursor=cursor)
        said = f"{len(order):,} of {len(session.shelf):,} · {wanted.words()}"
        self.query_one("#kept", Static).update(said)

    def _same_place(self, view: LinesView, session: Session) -> int:
        """Where the part under the cursor stands in the new order; the top if it is filtered away."""
        from ..shelf_table import ShelfTable

        if session.shelf is None or view.row is None:
            return 0
        table = self._table or ShelfTable(session.shelf)
        found = (table.order(session.filter) == view.row).nonzero()[0]
        return int(found[0]) if len(found) else 0

    def _filter(self, **changes: object) -> None:
        wanted: ShelfFilter = replace(self.session.filter, **changes)  # type: ignore[arg-type]
        self.desk.session = replace(self.session, filter=wanted)

    # --- keys

    def action_search(self) -> None:
        """Type into the search field."""
        self.set_focus(self.query_one("#search"))

    @on(Input.Changed, "#search")
    def take_search(self, message: Input.Changed) -> None:
        self._filter(search=message.value)

    def action_back(self) -> None:
        """From the search field to the list."""
        self.set_focus(self.query_one("#parts"))

    async def action_structure(self) -> None:
        """Pick a structure."""
        if self._table is not None:
            await self._pick("structure", self._table.structures())

    async def action_package(self) -> None:
        """Pick a package."""
        if self._table is not None:
            await self._pick("package", self._table.packages())

    async def _pick(self, field: str, words: list[str]) -> None:
        from .picker import Choice, Picker

        def take(answer: str | None) -> None:
            if answer is not None:
                self._filter(**{field: answer})

        choices = [Choice("", "any"), *(Choice(word, word) for word in words)]
        await self.app.push_screen(Picker(f"Show only this {field}", choices), take)

    def action_stock(self) -> None:
        """In stock only, or all."""
        self._filter(in_stock=not self.session.filter.in_stock)

    def action_sort(self, key: str) -> None:
        """By that column; again turns round."""
        column = int(key) - 1
        now = self.session.filter
        self._filter(sort=column, descending=not now.descending if column == now.sort else False)

    def action_clear(self) -> None:
        """Show all parts."""
        now = self.session.filter
        with self.prevent(Input.Changed):
            self.query_one("#search", Input).value = ""
        self._filter(**{**_CLEAR, "sort": now.sort, "descending": now.descending})

    async def action_open(self) -> None:
        """Open the part under the cursor; from the search field go to the list."""
        if isinstance(self.focused, Input):
            await self.typed_out()
            self.action_back()
            return
        row = self.query_one("#parts", LinesView).row
        if row is not None:
            await self.desk.open_part(row)

    def action_mark(self) -> None:
        """Mark the part under the cursor and go on to the next."""
        view = self.query_one("#parts", LinesView)
        if view.row is not None and self.session.shelf is not None:
            self.desk.session = self.session.marked(str(self.session.shelf.names[view.row]))
            view.action_move(1)

    @on(LinesView.Chosen, "#parts")
    async def open_clicked(self) -> None:
        await self.action_open()


_CLEAR = {"search": "", "structure": "", "package": "", "in_stock": False}
