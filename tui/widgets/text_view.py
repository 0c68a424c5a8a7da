"""Lines of text that scroll; broken to the width of the view where a function makes them."""

from collections.abc import Callable, Sequence
from typing import ClassVar

from rich.segment import Segment
from textual.binding import Binding, BindingType
from textual.geometry import Size
from textual.scroll_view import ScrollView
from textual.strip import Strip

from .cells import fit

Lines = Sequence[str] | Callable[[int], Sequence[str]]


class TextView(ScrollView, can_focus=True):
    """Text that is data: shown as it is, cut at the right edge."""

    DEFAULT_CSS = "TextView { scrollbar-size-vertical: 1; scrollbar-gutter: stable; overflow-x: hidden; height: 1fr; }"
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("up", "scroll_up", show=False),
        Binding("down", "scroll_down", show=False),
        Binding("pageup", "page_up", show=False),
        Binding("pagedown", "page_down", show=False),
        Binding("home", "scroll_home", show=False),
        Binding("end", "scroll_end", show=False),
    ]

    def __init__(self, *, id: str | None = None) -> None:
        super().__init__(id=id)
        self._source: Lines = ()
        self.lines: Sequence[str] = ()

    def show(self, lines: Lines) -> None:
        """Show other text, from its top."""
        self._source = lines
        self._lay_out()
        self.scroll_to(y=0, animate=False, immediate=True)

    def on_resize(self) -> None:
        self._lay_out()

    def _lay_out(self) -> None:
        width = self.scrollable_content_region.width
        if width:
            self.lines = self._source(width) if callable(self._source) else self._source
        self.virtual_size = Size(0, len(self.lines))
        self.refresh()

    def render_line(self, y: int) -> Strip:
        width = self.scrollable_content_region.width
        place = y + int(self.scroll_offset.y)
        text = self.lines[place] if place < len(self.lines) else ""
        return Strip([Segment(fit(text, width), self.rich_style)], width)
