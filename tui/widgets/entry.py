"""A text field in which keys take effect in the order they were pressed."""

from textual import events
from textual.binding import Binding
from textual.widgets import Input

_EDITING = {
    key: one.action
    for one in Input.BINDINGS
    if isinstance(one, Binding)
    for key in one.key.split(",")
    if key != "enter"
}


class Entry(Input):
    """An input that runs its own editing keys itself.

    The toolkit writes a letter at once but looks a key such as Backspace up only when it has passed every queue
    on the way to the app: typed quickly, it would come after the letters that follow it. Enter is left to the
    screen.
    """

    async def _on_key(self, event: events.Key) -> None:
        if event.key in _EDITING:
            event.stop()
            event.prevent_default()
            await self.run_action(_EDITING[event.key])
