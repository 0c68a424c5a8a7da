"""What every screen shares: its room's keys, the title line, the footer, and the app's session."""

import asyncio
from typing import TYPE_CHECKING, TypeVar, cast

from textual.app import ComposeResult
from textual.screen import ModalScreen, Screen
from textual.widget import Widget
from textual.widgets import Input

from ..commands import command_of
from ..state import Session
from ..widgets.lines_of_screen import KeysLine, TitleLine

if TYPE_CHECKING:
    from ..app import BetafloorApp

Result = TypeVar("Result")
WIDE = 110  # cells from which a screen shows its panes side by side


def key_is_free(focused: Widget | None, action: str) -> bool | None:
    """Whether a command may act now: a letter belongs to the field that is being typed into."""
    command = command_of(action)
    return not (command is not None and not command.typing and isinstance(focused, Input))


class Room(Screen[None]):
    """A screen with a name in `COMMANDS`."""

    room: str
    heading: str
    AUTO_FOCUS = ""

    @property
    def desk(self) -> "BetafloorApp":
        """The app, with its session."""
        return cast("BetafloorApp", self.app)

    @property
    def session(self) -> Session:
        return self.desk.session

    def compose(self) -> ComposeResult:
        yield TitleLine(self.heading)
        yield from self.body()
        yield KeysLine(self.room)

    def body(self) -> ComposeResult:
        """The widgets between title and footer."""
        yield from ()

    def on_mount(self) -> None:
        self._shown: Session | None = None
        self.watch(self.app, "session", self._take_session)

    def _take_session(self, session: Session) -> None:
        if self.app.screen is self:
            self._show_if_new(session)

    def on_screen_resume(self) -> None:
        self._show_if_new(self.session)

    def _show_if_new(self, session: Session) -> None:
        if session is not self._shown:
            old, self._shown = self._shown, session
            self.query_one(TitleLine).say(session.facts())
            self.show(session, old)

    def show(self, session: Session, old: Session | None) -> None:
        """Show a session; `old` is the one that was shown here before."""

    def check_action(self, action: str, parameters: tuple[object, ...]) -> bool | None:
        return key_is_free(self.focused, action)

    async def typed_out(self) -> None:
        """Wait until what was typed into the focused field has arrived at the screen.

        A command is answered by the app at once; letters pass through the queues of the field and of what
        is around it. Without this, Enter would act on a search that is not yet written to its end.
        """
        for node in self.focused.ancestors_with_self if self.focused else ():
            if node is self.app:
                break
            arrived = asyncio.Event()
            node.call_later(arrived.set)
            await arrived.wait()

    def on_descendant_focus(self) -> None:
        self.query_one(KeysLine).refresh(layout=True)

    def action_back(self) -> None:
        """Leave this screen."""
        self.dismiss()


class Dialog(ModalScreen[Result]):
    """A small screen over another one, which it leaves with an answer or with None."""

    DEFAULT_CSS = "Dialog KeysLine { min-height: 3; }"  # covers the keys of the screen below

    room: str
    AUTO_FOCUS = ""

    def check_action(self, action: str, parameters: tuple[object, ...]) -> bool | None:
        return key_is_free(self.focused, action)

    def action_back(self) -> None:
        """Leave without an answer."""
        self.dismiss(None)
