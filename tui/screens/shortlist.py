"""The shortlist: the marked parts under the requirement, to save in the shelf and to write to a file."""

from textual import on, work
from textual.app import ComposeResult
from textual.widgets import Static

from ..commands import bindings_of
from ..source import SourceError
from ..state import Session
from ..widgets.lines_view import LinesView
from .base import Room

NOTHING = "No part is marked. Space marks the part under the cursor, on the shelf and on the bench."


class ShortlistScreen(Room):
    """Marked parts, in ranked order once there is a ranking."""

    room = "shortlist"
    BINDINGS = bindings_of("shortlist")

    heading = "shortlist"

    DEFAULT_CSS = """
    ShortlistScreen #standing { height: auto; padding: 0 1; text-style: bold; }
    """

    def body(self) -> ComposeResult:
        yield Static("", id="standing", markup=False)
        yield LinesView(id="marked", empty=NOTHING)

    def on_mount(self) -> None:
        super().on_mount()
        self.set_focus(self.query_one("#marked"))

    def show(self, session: Session, old: Session | None) -> None:
        if old is None or session.marks != old.marks or session.ranking is not old.ranking:
            self._fill(session, self.query_one("#marked", LinesView))
        if session.ranking is None:
            says = "Not judged yet: F3 states the requirement that the parts are wanted for."
        else:
            stale = " (STALE: the form has changed since)" if session.stale else ""
            says = f"For: {session.ranking.requirement.title or 'requirement without a title'}{stale}"
        self.query_one("#standing", Static).update(says)

    def _fill(self, session: Session, view: LinesView) -> None:
        if session.shelf is None:
            return
        rows = self.rows(session)

        def marked(name: str) -> bool:
            return name in self.session.marks

        if session.ranking is not None:
            from ..ranking_table import columns

            view.show(columns(session.ranking, marked), rows, cursor=view.cursor)
        else:
            from ..shelf_table import ShelfTable

            view.show(ShelfTable(session.shelf).columns(-1, False, marked), rows, cursor=view.cursor)

    @staticmethod
    def rows(session: Session) -> list[int]:
        """Rows of the marked parts, in ranked order or else in the order they were marked."""
        if session.shelf is None:
            return []
        rows = [session.shelf.index(name) for name in session.marks]
        if session.ranking is None:
            return rows
        place = {int(row): i for i, row in enumerate(session.ranking.order)}
        return sorted(rows, key=lambda row: place.get(row, len(place)))

    # --- keys

    @property
    def _row(self) -> int | None:
        return self.query_one("#marked", LinesView).row

    async def action_open(self) -> None:
        """Open the part under the cursor."""
        if self._row is not None:
            await self.desk.open_part(self._row)

    @on(LinesView.Chosen, "#marked")
    async def open_clicked(self) -> None:
        await self.action_open()

    async def action_calculation(self) -> None:
        """Open its calculation sheet."""
        if self._row is not None:
            await self.desk.open_sheet(self._row)

    def action_mark(self) -> None:
        """Take the mark off."""
        if self._row is not None and self.session.shelf is not None:
            self.desk.session = self.session.marked(str(self.session.shelf.names[self._row]))

    def action_back(self) -> None:
        """To the bench where there is a ranking, else to the shelf."""
        desk = self.desk
        self.call_later(desk.action_open_shelf if self.session.ranking is None else desk.action_open_bench)

    def _ready(self) -> bool:
        session = self.session
        if not session.marks:
            self.desk.tell(NOTHING, title="Nothing to keep", wrong=True)
        elif session.ranking is None or session.stale:
            self.desk.tell("State a sound requirement first (F3): a shortlist is kept with it.", wrong=True)
        return bool(session.marks) and session.ranking is not None and not session.stale

    def action_save_shortlist(self) -> None:
        """Save the shortlist in the shelf file."""
        if self._ready():
            self._save(self.session, self.rows(self.session))

    @work(thread=True, exclusive=True, group="save", description="save")
    def _save(self, session: Session, rows: list[int]) -> None:
        if session.ranking is None:
            return
        try:
            says = self.desk.source.keep_shortlist(session.ranking, rows, session.weights)
        except SourceError as trouble:
            self.app.call_from_thread(self.desk.tell, str(trouble), title="Not saved", wrong=True)
            return
        self.app.call_from_thread(self.desk.tell, says)

    async def action_export_shortlist(self) -> None:
        """Write the shortlist to a file."""
        from ..exports import SHORTLIST_ENDINGS, shortlist_content
        from .load import ask_and_write, file_stem

        ranking = self.session.ranking
        if not self._ready() or ranking is None:
            return
        rows = self.rows(self.session)
        await ask_and_write(
            self.desk,
            "Write the shortlist as",
            f"{file_stem(ranking.requirement.title)}-shortlist.csv",
            SHORTLIST_ENDINGS,
            lambda path: shortlist_content(ranking, rows, path.suffix),
        )
