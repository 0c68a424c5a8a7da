"""How much each criterion counts in the score, and what each of them gives the part under the cursor."""

from collections.abc import Mapping
from dataclasses import replace

from textual import on
from textual.app import ComposeResult
from textual.containers import VerticalScroll
from textual.widgets import Static

from ..commands import bindings_of
from ..state import Session
from ..widgets.form import Form
from .base import Room

TELLS = (
    "The score orders the parts that fit; it never makes a part fit. It is the weighted geometric mean of the "
    "criteria below, each between 0 and 1. A weight of 0 leaves a criterion out."
)
MEANINGS: Mapping[str, str] = {
    "electrical margin": "the tightest headroom of the electrical checks; 1 from ×2 up",
    "junction margin": "the tightest headroom of temperature and power; 1 from ×2 up",
    "not oversized": "collector current rated over the current needed; less is better",
    "stock": "free pieces over pieces wanted; 1 from five times up",
    "cost": "of one piece; cheaper is better",
    "evidence": "how far the verdict rests on guaranteed limits",
}


class WeightsScreen(Room):
    """One field a criterion."""

    room = "weights"
    BINDINGS = bindings_of("weights")

    heading = "weights"

    DEFAULT_CSS = """
    WeightsScreen #tells { height: auto; padding: 0 1 1 1; }
    WeightsScreen #example { height: auto; padding: 1 1 0 1; }
    """

    def body(self) -> ComposeResult:
        from engine.requirement import Field

        fields = tuple(
            Field(name, name, "", MEANINGS.get(name, ""), default=weight, low=0, high=1000)
            for name, weight in default_weights().items()
        )
        with VerticalScroll(can_focus=False):
            yield Static(TELLS, id="tells", markup=False)
            yield Form(fields, id="weights")
            yield Static("", id="meaning", markup=False)

    def on_mount(self) -> None:
        super().on_mount()
        form = self.query_one(Form)
        form.styles.height = len(form.rows) + 1
        form.enter()

    def show(self, session: Session, old: Session | None) -> None:
        if old is None:
            self.query_one(Form).put({name: f"{weight:g}" for name, weight in session.weights.items()})

    @on(Form.Entered)
    def tell_meaning(self, message: Form.Entered) -> None:
        self.query_one("#meaning", Static).update(f" {message.field.label}: {message.field.meaning}")

    @on(Form.Edited)
    def take_edit(self) -> None:
        self._read()

    def _read(self) -> dict[str, float] | None:
        """The weights that differ from the defaults; None while a text is no weight, which is said under it."""
        from engine.requirement import Problem

        form = self.query_one(Form)
        weights: dict[str, float] = {}
        problems = []
        for name, text in form.texts().items():
            try:
                weights[name] = float(text.replace(",", "."))
            except ValueError:
                problems.append(Problem(name, text, f"{text!r} is not a number", "Write a weight such as 2"))
                continue
            if not 0 <= weights[name] <= 1000:
                problems.append(Problem(name, text, "not between 0 and 1000", "Write a weight such as 2"))
        total = sum({**default_weights(), **weights}.values())
        if not problems and not total > 0:
            problems.append(Problem(next(iter(weights)), "0", "every weight is 0", "Leave one above 0"))
        form.say(problems)
        return None if problems else weights

    async def action_keep_weights(self) -> None:
        """Use these weights."""
        await self.typed_out()
        weights = self._read()
        if weights is not None:
            self.desk.session = replace(self.session, weights=weights)
            self.dismiss()

    def action_default_weights(self) -> None:
        """The defaults again."""
        self.query_one(Form).put({})
        self._read()


def default_weights() -> Mapping[str, float]:
    """Criterion → weight, as the engine has them."""
    from engine.rank import DEFAULT_WEIGHTS

    return DEFAULT_WEIGHTS
