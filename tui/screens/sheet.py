"""The calculation sheet of one part: every formula with its numbers, to read and to write to a file."""

from typing import TYPE_CHECKING

from textual import work
from textual.app import ComposeResult

from ..commands import bindings_of
from ..source import SourceError
from ..state import Session
from ..widgets.lines_of_screen import TitleLine
from ..widgets.text_view import TextView
from .base import Room

if TYPE_CHECKING:
    from ..exports import Sheet


class SheetScreen(Room):
    """A text to scroll."""

    room = "sheet"
    BINDINGS = bindings_of("sheet")

    heading = "calculation sheet"

    def __init__(self, row: int) -> None:
        super().__init__()
        self.row = row
        self._sheet: Sheet | None = None

    def body(self) -> ComposeResult:
        yield TextView(id="sheet")

    def on_mount(self) -> None:
        super().on_mount()
        view = self.query_one(TextView)
        view.show(["Writing the sheet …"])
        self.set_focus(view)
        self._write()

    @work(thread=True, exclusive=True, group="sheet", description="sheet")
    def _write(self) -> None:
        from ..exports import make_sheet

        ranking = self.session.ranking
        if ranking is None:
            return
        try:
            part = self.desk.source.part(str(ranking.shelf.names[self.row]))
        except SourceError as trouble:
            self.app.call_from_thread(self.query_one(TextView).show, [str(trouble)])
            return
        self.app.call_from_thread(self._fill, make_sheet(ranking, self.row, part))

    def _fill(self, sheet: "Sheet") -> None:
        self._sheet = sheet
        self.query_one(TextView).show(sheet.lines)
        stale = "STALE, of the last sound requirement · " if self.session.stale else ""
        demo = "invented demo data" if self.session.demo else ""
        self.query_one(TitleLine).say(f"{stale}{demo}", f"calculation sheet · {sheet.part}")

    def show(self, session: Session, old: Session | None) -> None:
        if old is not None and session.ranking is not old.ranking:
            self._write()

    async def action_export_sheet(self) -> None:
        """Write the sheet to a file."""
        from ..exports import SHEET_ENDINGS
        from .load import ask_and_write, file_stem

        sheet = self._sheet
        if sheet is not None:
            name = f"{file_stem(sheet.part)}-sheet.md"
            await ask_and_write(self.desk, "Write the sheet as", name, SHEET_ENDINGS, sheet.content)
