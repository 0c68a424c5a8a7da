"""The bench: a requirement in a form, the shelf ranked by it while it is written, and the reasons."""

from dataclasses import replace
from functools import partial
from typing import TYPE_CHECKING

from textual import on, work
from textual.app import ComposeResult
from textual.containers import Horizontal, Vertical
from textual.timer import Timer
from textual.widgets import Static
from textual.worker import get_current_worker

from ..commands import bindings_of
from ..messages import Progress, Ranked, Refused
from ..state import Draft, Session
from ..widgets.cells import wrap
from ..widgets.form import Form, meaning_of
from ..widgets.lines_view import LinesView
from ..widgets.text_view import TextView
from .base import WIDE, Room

if TYPE_CHECKING:
    from engine.ranking import Explanation
    from engine.requirement import Field

PATIENCE = 0.08  # s without a key before the shelf is ranked again, or reasons are given
_OF_RANKING = ("open", "mark", "calculation", "verdicts", "move")
_OF_FORM = ("next_field", "change_word")
THEN = "Next: Enter opens a part, c its calculation sheet, Space marks it; F5 is the form."
NEXT = "F6 loads an example; or fill in the fields with a star. The ranking follows as you type."


class BenchScreen(Room):
    """Form left, ranking right, reasons below; on a narrow screen form or ranking."""

    room = "bench"
    BINDINGS = bindings_of("bench")

    heading = "bench"

    DEFAULT_CSS = """
    BenchScreen #panes { height: 1fr; }
    BenchScreen #left, BenchScreen #right { width: 1fr; height: 1fr; }
    BenchScreen.-narrow #meaning { height: 2; }
    BenchScreen.-wide #left { width: 41; border-right: solid $primary; }
    BenchScreen #meaning { height: 3; color: $text-muted; padding: 0 1; }
    BenchScreen #standing { height: auto; min-height: 1; padding: 0 1; text-style: bold; }
    BenchScreen #reasons { height: 7; border-top: solid $primary; }
    BenchScreen.-wide #reasons { height: 12; }
    """

    def __init__(self) -> None:
        super().__init__()
        self._timer: Timer | None = None
        self._explain_timer: Timer | None = None
        self._duty = ""  # whose fields the form shows
        self._progress = ""
        self._ranking_shown = False  # rather than the form, where there is no room for both
        self._explained: Explanation | None = None

    def body(self) -> ComposeResult:
        with Horizontal(id="panes"):
            with Vertical(id="left"):
                self._duty = self.session.draft.duty
                yield Form(form_fields(self.session.draft.duty), id="form")
                yield Static("", id="meaning", markup=False)
            with Vertical(id="right"):
                yield Static(NEXT, id="standing", markup=False)
                yield LinesView(id="ranking", empty=NEXT)
                yield TextView(id="reasons")

    def on_mount(self) -> None:
        super().on_mount()
        self._arrange(ranking=False)
        self.query_one(Form).enter()
        path, self.desk.first_requirement = self.desk.first_requirement, None
        if path is not None:
            from .load import load_file

            load_file(self.desk, path)
            self.action_other_pane()

    # --- showing

    def show(self, session: Session, old: Session | None) -> None:
        form = self.query_one(Form)
        if session.draft.duty != self._duty:
            self._duty = session.draft.duty
            self.call_later(self._change_duty, session)
        elif old is None or session.draft is not old.draft:
            if form_texts(session.draft) != form.texts():
                form.put(form_texts(session.draft))
            self._judge_soon()
        elif session.weights is not old.weights or session.shelf is not old.shelf:
            self._judge_soon()
        if old is None or session.problems is not old.problems:
            form.say(one for one in session.problems if one.value)
        new = old is None or session.ranking is not old.ranking or session.only_fitting != old.only_fitting
        if new and session.ranking is not None:
            self._fill(session)
        elif old and session.marks != old.marks:
            self.query_one("#ranking", LinesView).redraw()
        self._say_standing()

    async def _change_duty(self, session: Session) -> None:
        """Another circuit has other fields."""
        form = self.query_one(Form)
        await form.rebuild(form_fields(session.draft.duty))
        form.put(form_texts(session.draft))
        form.enter()
        self._judge_soon()

    def _fill(self, session: Session) -> None:
        from ..ranking_table import columns, rows

        if session.ranking is None:
            return
        view = self.query_one("#ranking", LinesView)
        order = rows(session.ranking, only_fitting=session.only_fitting)
        view.empty = "No part fits; v shows all of them again." if session.only_fitting else "The shelf is empty."
        view.show(columns(session.ranking, lambda name: name in self.session.marks), order)

    def _say_standing(self) -> None:
        self.query_one("#standing", Static).update(standing(self.session, self._progress))

    # --- judging

    @on(Form.Edited)
    def take_edit(self) -> None:
        texts = self.query_one(Form).texts()
        title, duty = texts.pop("title", ""), texts.pop("duty", self.session.draft.duty)
        self.desk.session = replace(
            self.session, draft=Draft(duty, title, texts), stale=self.session.ranking is not None
        )

    @property
    def waiting(self) -> bool:
        """Whether a ranking or reasons are due soon."""
        return self._timer is not None or self._explain_timer is not None

    def _judge_soon(self) -> None:
        if self._timer is not None:
            self._timer.stop()
        self._timer = self.set_timer(PATIENCE, self._judge)

    def _judge(self) -> None:
        self._timer = None
        session = self.session
        if session.shelf is not None and session.draft.texts:
            self._judge_in_thread(session)

    @work(thread=True, exclusive=True, group="judge", description="judge")
    def _judge_in_thread(self, session: Session) -> None:
        from ..judge import judge

        worker = get_current_worker()
        if session.shelf is None:
            return

        def progress(share: float) -> None:
            if share:
                self.post_message(Progress(f"ranking, {share:.0%} done", share))

        outcome = judge(session.draft, session.shelf, session.weights, lambda: worker.is_cancelled, progress)
        if outcome is None or worker.is_cancelled:
            return
        if outcome.requirement is not None and outcome.ranking is not None:
            self.post_message(Ranked(outcome.requirement, outcome.ranking))
        else:
            self.post_message(Refused(outcome.problems))

    @on(Ranked)
    def take_ranking(self, message: Ranked) -> None:
        self._progress = ""
        self.desk.session = replace(
            self.session, requirement=message.requirement, ranking=message.ranking, problems=(), stale=False
        )

    @on(Refused)
    def take_problems(self, message: Refused) -> None:
        self._progress = ""
        self.desk.session = replace(self.session, problems=message.problems)

    @on(Progress)
    def take_progress(self, message: Progress) -> None:
        self._progress = message.words
        self._say_standing()

    def action_stop(self) -> None:
        """Stop ranking; the last ranking stays."""
        self.workers.cancel_group(self, "judge")
        self._progress = "stopped; the next change ranks again" if self.session.stale else ""
        self._say_standing()

    # --- the part under the cursor

    @on(LinesView.Moved, "#ranking")
    def take_cursor(self, message: LinesView.Moved) -> None:
        if self._explain_timer is not None:
            self._explain_timer.stop()
        if message.row is None:
            self.query_one("#reasons", TextView).show([])
        else:  # once the cursor rests: a page through the list must not pay for reasons nobody reads
            self._explain_timer = self.set_timer(PATIENCE, partial(self._explain_row, message.row))

    def _explain_row(self, row: int) -> None:
        self._explain_timer = None
        if self.session.ranking is not None:
            self._explain(self.session, row)

    @work(thread=True, exclusive=True, group="explain", description="explain")
    def _explain(self, session: Session, row: int) -> None:
        from engine.explain import explain

        worker = get_current_worker()
        if session.ranking is None:
            return
        told = explain(session.ranking.requirement, session.ranking.shelf, row)
        if not worker.is_cancelled:
            self.app.call_from_thread(self._show_reasons, told)

    def _show_reasons(self, told: "Explanation") -> None:
        from ..widgets.reasons import reasons

        self._explained = told
        view = self.query_one("#reasons", TextView)
        view.show(lambda width: reasons(told, width))

    # --- keys

    def action_other_pane(self) -> None:
        """From the form to the ranking and back."""
        to_ranking = self.query_one("#left") in (self.focused.ancestors if self.focused else ())
        self._arrange(ranking=to_ranking)
        if to_ranking:
            self.set_focus(self.query_one("#ranking"))
        else:
            self.query_one(Form).enter()

    def _arrange(self, *, ranking: bool) -> None:
        """On a narrow screen show either pane. (By `display`: a class would style the whole form anew.)"""
        wide = self.app.size.width >= WIDE
        self._ranking_shown = ranking
        self.query_one("#left").display = wide or not ranking
        self.query_one("#right").display = wide or ranking

    def on_resize(self) -> None:
        self._arrange(ranking=self._ranking_shown)

    def action_back(self) -> None:
        """From the form to the ranking; from the ranking to the shelf."""
        if self.focused is self.query_one("#ranking"):
            self.call_later(self.desk.action_open_shelf)
        else:
            self.action_other_pane()

    @on(Form.Entered)
    def tell_meaning(self, message: Form.Entered) -> None:
        lines = wrap(meaning_of(message.field), max(self.query_one("#meaning").size.width - 2, 20))
        self.query_one("#meaning", Static).update("\n".join(lines[:3]))

    def action_verdicts(self) -> None:
        """All parts, or those that fit."""
        self.desk.session = replace(self.session, only_fitting=not self.session.only_fitting)

    def action_mark(self) -> None:
        """Mark the part under the cursor and go on."""
        view, ranking = self.query_one("#ranking", LinesView), self.session.ranking
        if view.row is not None and ranking is not None:
            self.desk.session = self.session.marked(str(ranking.shelf.names[view.row]))
            view.action_move(1)

    async def action_open(self) -> None:
        """Open the part under the cursor."""
        row = self.query_one("#ranking", LinesView).row
        if row is not None:
            await self.desk.open_part(row)

    async def action_calculation(self) -> None:
        """Open its calculation sheet."""
        row = self.query_one("#ranking", LinesView).row
        if row is not None:
            await self.desk.open_sheet(row)

    async def action_load(self) -> None:
        """Load a requirement."""
        from .load import pick_requirement

        await pick_requirement(self.desk)

    async def action_save_requirement(self) -> None:
        """Save the requirement as a file."""
        from .load import save_requirement

        await save_requirement(self.desk)

    async def action_weights(self) -> None:
        """Weigh the criteria."""
        from .weights import WeightsScreen

        await self.app.push_screen(WeightsScreen())

    def check_action(self, action: str, parameters: tuple[object, ...]) -> bool | None:
        in_ranking = self.focused is not None and self.focused is self.query_one("#ranking")
        in_form = self.query_one("#left") in (self.focused.ancestors if self.focused else ())
        if action in _OF_RANKING and not in_ranking:
            return False
        if action in _OF_FORM and not in_form:
            return False
        return super().check_action(action, parameters)


def form_fields(duty: str) -> "tuple[Field, ...]":
    """The fields of a duty with its title before them, and the choice of a duty where there are several."""
    from engine.duty import duties
    from engine.requirement import Field

    known = duties()
    head = [Field("title", "Title", "", "A name for the requirement", words=True)]
    if len(known) > 1:
        head.append(Field("duty", "Duty", "", "The kind of circuit", default=duty, choices=tuple(known), words=True))
    return (*head, *known[duty].fields)


def form_texts(draft: Draft) -> dict[str, str]:
    """The texts of the form for a draft."""
    return {**draft.texts, **({"title": draft.title} if draft.title else {})}


def standing(session: Session, progress: str) -> str:
    """How the ranking stands, in one or two lines."""
    from ..ranking_table import summary

    said = progress and f"{progress}  (^X stops)"
    if session.ranking is not None:
        counts = summary(session.ranking)
        kept = "; only those that fit are shown (v)" if session.only_fitting else ""
        if not session.stale and not session.problems:
            return (said or counts + kept) + ("" if session.marks else f"\n{THEN}")
        counts = f"STALE, of the last sound requirement: {counts}{kept}"
        return f"{said or problems_line(session)}\n{counts}"
    return said or problems_line(session) or NEXT


def problems_line(session: Session) -> str:
    """What keeps the draft from being judged."""
    labels = {one.key: one.label for one in form_fields(session.draft.duty)}
    missing = [labels.get(one.key, one.key) for one in session.problems if not one.value]
    wrong = [labels.get(one.key, one.key) for one in session.problems if one.value]
    said = [f"to mend: {', '.join(wrong)}"] if wrong else []
    said += [f"still needed: {', '.join(dict.fromkeys(missing))}"] if missing else []
    return "; ".join(said)
