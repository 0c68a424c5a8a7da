"""A table that draws the lines in view and nothing else, so that its length costs nothing."""

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from typing import ClassVar, Protocol, SupportsInt

from rich.segment import Segment
from textual import events
from textual.binding import Binding, BindingType
from textual.geometry import Size
from textual.message import Message
from textual.scroll_view import ScrollView
from textual.strip import Strip

from .cells import fit

LEAST_ELASTIC = 11  # cells that the elastic column keeps


class Rows(Protocol):
    """Row numbers in the order they are shown: a list, a range or an array."""

    def __len__(self) -> int: ...

    def __getitem__(self, place: int, /) -> SupportsInt: ...


@dataclass(frozen=True, slots=True)
class Column:
    """One column: its heading, its width and the text of a row's cell."""

    title: str
    width: int  # in cells; 0 for the one elastic column, which takes what is left
    cell: Callable[[int], str]  # row number of the data → text
    right: bool = False
    most: int = 0  # what an elastic column takes at most; 0 for no limit
    spare: int = 0  # where the view is too narrow, the largest number gives way first, and 0 never


class LinesView(ScrollView, can_focus=True):
    """Rows of text cells under a heading, with a cursor line marked by a sign.

    `show` takes columns and the order of the rows; the cells are asked for when they come into view.
    """

    COMPONENT_CLASSES: ClassVar[set[str]] = {"lines--row", "lines--heading", "lines--cursor", "lines--marked"}
    DEFAULT_CSS = """
    LinesView { height: 1fr; scrollbar-size-vertical: 1; scrollbar-gutter: stable; overflow-x: hidden; }
    LinesView > .lines--heading { text-style: bold underline; color: $text-muted; }
    LinesView > .lines--cursor { text-style: none; }
    LinesView:focus > .lines--cursor { text-style: reverse; }
    LinesView > .lines--marked { text-style: bold; }
    """
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("up", "move(-1)", show=False),
        Binding("down", "move(1)", show=False),
        Binding("pageup", "page(-1)", show=False),
        Binding("pagedown", "page(1)", show=False),
        Binding("home", "to(0)", show=False),
        Binding("end", "to(-1)", show=False),
    ]

    class Moved(Message):
        """The cursor stands on another row (or on another part of the same place)."""

        def __init__(self, view: "LinesView", row: int | None) -> None:
            super().__init__()
            self.view = view
            self.row = row  # of the data; None where nothing is shown

        @property
        def control(self) -> "LinesView":
            return self.view

    class Chosen(Message):
        """A row was clicked a second time."""

        def __init__(self, view: "LinesView", row: int) -> None:
            super().__init__()
            self.view = view
            self.row = row

        @property
        def control(self) -> "LinesView":
            return self.view

    def __init__(self, *, id: str | None = None, empty: str = "") -> None:
        super().__init__(id=id)
        self.empty = empty  # what is said where there are no rows
        self._columns: tuple[Column, ...] = ()
        self._order: Rows = ()
        self._emphasis: Callable[[int], bool] = lambda row: False
        self._layout: tuple[int, tuple[tuple[Column, int], ...]] = (-1, ())
        self.cursor = 0  # place in the order

    # --- what is shown

    def show(
        self,
        columns: Sequence[Column],
        order: Rows,
        *,
        cursor: int = 0,
        emphasis: Callable[[int], bool] = lambda row: False,
    ) -> None:
        """Show the rows of `order`; the cursor goes to the place `cursor`. Rows in `emphasis` are bold."""
        self._columns, self._order, self._emphasis = tuple(columns), order, emphasis
        self._layout = (-1, ())
        self.virtual_size = Size(0, len(order) + 1)
        self._go(cursor)
        self.refresh()

    def redraw(self) -> None:
        """Draw the same rows again: a cell has changed."""
        self.refresh()

    @property
    def row(self) -> int | None:
        """The row of the data under the cursor."""
        return int(self._order[self.cursor]) if 0 <= self.cursor < len(self._order) else None

    def _widths(self) -> tuple[tuple[Column, int], ...]:
        room = self.scrollable_content_region.width - 2
        if self._layout[0] != room:
            self._layout = (room, tuple(layout(self._columns, room)))
        return self._layout[1]

    def render_line(self, y: int) -> Strip:
        if y == 0:
            return self._strip("  ", [c.title for c, _ in self._widths()], "lines--heading")
        place = y - 1 + int(self.scroll_offset.y)
        if place >= len(self._order):
            return self._plain(f"  {self.empty}" if place == 0 else "")
        row = int(self._order[place])
        here = place == self.cursor
        look = "lines--cursor" if here else "lines--marked" if self._emphasis(row) else "lines--row"
        return self._strip("▶ " if here else "  ", [c.cell(row) for c, _ in self._widths()], look)

    def _strip(self, sign: str, cells: list[str], look: str) -> Strip:
        widths = self._widths()
        shown = zip(cells, widths, strict=True)
        line = sign + " ".join(fit(cell, width, right=column.right) for cell, (column, width) in shown)
        style = self.get_component_rich_style(look)  # Textual remembers these, but works out `rich_style` each time
        known = len(sign) + sum(width for _, width in widths) + len(widths) - 1
        return Strip([Segment(line, style)], known).adjust_cell_length(self.scrollable_content_region.width, style)

    def _plain(self, line: str) -> Strip:
        width = self.scrollable_content_region.width
        return Strip([Segment(fit(line, width), self.rich_style)], width)

    # --- the cursor

    def _go(self, place: int) -> None:
        last = max(len(self._order) - 1, 0)
        self.cursor = min(max(place, 0), last)
        page = max(self.scrollable_content_region.height - 1, 1)
        top = int(self.scroll_offset.y)
        if self.cursor < top:
            self.scroll_to(y=self.cursor, animate=False, immediate=True)
        elif self.cursor >= top + page:
            self.scroll_to(y=self.cursor - page + 1, animate=False, immediate=True)
        self.refresh()
        self.post_message(self.Moved(self, self.row))

    def on_resize(self, event: events.Resize) -> None:
        self._go(self.cursor)

    def action_move(self, by: int) -> None:
        self._go(self.cursor + by)

    def action_page(self, by: int) -> None:
        self._go(self.cursor + by * max(self.scrollable_content_region.height - 2, 1))

    def action_to(self, place: int) -> None:
        self._go(place if place >= 0 else len(self._order) - 1)

    def on_click(self, event: events.Click) -> None:
        place = event.y - 1 + int(self.scroll_offset.y)
        if event.y == 0 or place >= len(self._order):
            return
        if place == self.cursor and self.row is not None:
            self.post_message(self.Chosen(self, self.row))
        self._go(place)


def layout(columns: Sequence[Column], room: int) -> list[tuple[Column, int]]:
    """The columns that fit into `room` cells with a blank between two, each with its width."""
    shown = list(columns)
    while _needed(shown) > room and any(c.spare for c in shown):
        shown.remove(max(shown, key=lambda c: c.spare))
    elastic = LEAST_ELASTIC + max(room - _needed(shown), 0)
    return [(c, c.width or (min(elastic, c.most) if c.most else elastic)) for c in shown]


def _needed(columns: Sequence[Column]) -> int:
    return sum(c.width or LEAST_ELASTIC for c in columns) + len(columns) - 1
