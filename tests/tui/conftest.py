"""Fixtures of the interface's tests."""

from collections.abc import Callable
from typing import Any

import pytest

from tui.app import BetafloorApp
from tui.judge import Outcome
from tui.source import Source
from tui.state import Draft

from .fixed import explanation_of, ranking_of
from .support import FakeSource


@pytest.fixture
def source() -> FakeSource:
    return FakeSource()


@pytest.fixture(autouse=True)
def no_colour_wish(monkeypatch: pytest.MonkeyPatch) -> None:
    """Whoever runs the tests may have asked for no colour."""
    monkeypatch.delenv("NO_COLOR", raising=False)


@pytest.fixture
def fixed_engine(monkeypatch: pytest.MonkeyPatch) -> None:
    """Judging and explaining with made-up figures; reading the form is real."""
    import engine.explain
    import tui.judge
    from engine.requirement import RequirementError
    from importers.requirement_file import parse_fields

    def judge(draft: Draft, shelf: Any, weights: Any, stopped: Any, progress: Any = None) -> Outcome:
        try:
            requirement = parse_fields(draft.duty, dict(draft.texts), title=draft.title)
        except RequirementError as error:
            return Outcome(problems=error.problems)
        return Outcome(requirement=requirement, ranking=ranking_of(shelf, requirement))

    monkeypatch.setattr(tui.judge, "judge", judge)
    monkeypatch.setattr(engine.explain, "explain", lambda requirement, shelf, row: explanation_of(shelf, row))


@pytest.fixture
def make_app(source: FakeSource) -> Callable[..., BetafloorApp]:
    def make(other: Source | None = None, **options: Any) -> BetafloorApp:
        return BetafloorApp(other or source, demo=options.pop("demo", True), **options)

    return make
