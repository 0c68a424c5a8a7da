"""The bench: a form made from the duty's fields, a ranking that follows it, reasons for the part under the cursor."""

from dataclasses import replace
from pathlib import Path

import pytest

from engine.duty import duties
from engine.ranking import Verdict
from tui.requirement_texts import examples, read
from tui.screens.bench import BenchScreen
from tui.state import Draft
from tui.widgets.form import FieldRow, Form, WordInput
from tui.widgets.lines_view import LinesView
from tui.widgets.text_view import TextView

from .support import COIL, running

SIZES = [(80, 24), (120, 40)]


def row_of(pilot, key: str) -> FieldRow:
    return next(row for row in pilot.find(Form).rows if row.field.key == key)


def ranked(pilot) -> list[str]:
    view = pilot.find(LinesView, "#ranking")
    return [str(pilot.session.shelf.names[row]) for row in view._order]


async def test_the_form_has_every_field_of_the_duty_with_its_unit(make_app) -> None:
    async with running(make_app(), (120, 40)) as pilot:
        await pilot.press("f3")
        rows = {row.field.key: row for row in pilot.find(Form).rows}
        assert [key for key in rows if key != "title"] == [field.key for field in duties()["switch"].fields]
        assert "Supply, lowest" in pilot.text and " V " in pilot.text


async def test_fields_that_are_not_asked_are_not_shown(make_app) -> None:
    async with running(make_app()) as pilot:
        await pilot.fill({"load.kind": "resistive"})
        assert not row_of(pilot, "load.inductance").display
        await pilot.fill({"load.kind": "coil", "load.clamp": "zener"})
        assert row_of(pilot, "load.inductance").display and row_of(pilot, "load.clamp_voltage").display


@pytest.mark.usefixtures("fixed_engine")
async def test_a_field_is_filled_and_the_ranking_follows_while_typing(make_app) -> None:
    texts = {key: text for key, text in COIL.items() if key != "supply.max"}
    async with running(make_app(), (120, 40)) as pilot:
        await pilot.fill(texts)
        assert pilot.session.ranking is None and "still needed: Supply, highest" in pilot.text
        pilot.app.screen.set_focus(row_of(pilot, "supply.max").input)
        await pilot.write("26.4 V")
        assert pilot.session.ranking is not None
        assert pilot.session.requirement.number("supply.max") == 26.4
        assert len(ranked(pilot)) == 10


@pytest.mark.usefixtures("fixed_engine")
async def test_a_problem_stands_under_its_field_at_once_and_the_last_ranking_stays_marked_stale(make_app) -> None:
    async with running(make_app(), (120, 40)) as pilot:
        await pilot.fill()
        before = pilot.session.ranking
        pilot.app.screen.set_focus(row_of(pilot, "supply.max").input)
        await pilot.press("end")
        await pilot.write("x")
        assert row_of(pilot, "supply.max").problem
        lines = pilot.text.splitlines()
        place = next(y for y, line in enumerate(lines) if line.startswith("▶*Supply, highest"))
        assert lines[place + 1].lstrip().startswith("!")
        assert pilot.session.ranking is before and "STALE" in pilot.text and "to mend: Supply, highest" in pilot.text
        await pilot.press("backspace")
        assert not row_of(pilot, "supply.max").problem and "STALE" not in pilot.text


async def test_words_are_chosen_by_arrows_and_by_their_letter(make_app) -> None:
    async with running(make_app()) as pilot:
        await pilot.press("f3")
        row = row_of(pilot, "load.kind")
        assert isinstance(row.input, WordInput)
        pilot.app.screen.set_focus(row.input)
        await pilot.press("right")
        first = row.text
        await pilot.press("right", "left")
        assert row.text == first == row.field.choices[0]
        await pilot.press("l")
        assert row.text == "lamp"
        assert pilot.session.draft.texts["load.kind"] == "lamp"


@pytest.mark.usefixtures("fixed_engine")
@pytest.mark.parametrize("size", SIZES)
async def test_verdicts_are_words(make_app, size: tuple[int, int]) -> None:
    async with running(make_app(), size) as pilot:
        await pilot.fill()
        if size[0] < 110:
            await pilot.press("f5")
        for verdict in Verdict:
            assert verdict.words in pilot.text
        for heading in ("type", "verdict", "room", "worst check", "RB", "TJ", "stock", "score"):
            assert heading in pilot.text


@pytest.mark.usefixtures("fixed_engine")
async def test_on_a_narrow_screen_form_and_ranking_take_turns(make_app) -> None:
    async with running(make_app(), (80, 24)) as pilot:
        await pilot.fill()
        assert "Supply, lowest" in pilot.text and "worst check" not in pilot.text
        await pilot.press("f5")
        assert "Supply, lowest" not in pilot.text and "worst check" in pilot.text
        await pilot.press("f5")
        assert "Supply, lowest" in pilot.text


@pytest.mark.usefixtures("fixed_engine")
async def test_on_a_wide_screen_both_are_seen(make_app) -> None:
    async with running(make_app(), (120, 40)) as pilot:
        await pilot.fill()
        assert "Supply, lowest" in pilot.text and "worst check" in pilot.text
        await pilot.press("f5")
        assert "Supply, lowest" in pilot.text and "worst check" in pilot.text


@pytest.mark.usefixtures("fixed_engine")
async def test_the_reasons_are_those_of_the_part_under_the_cursor(make_app) -> None:
    async with running(make_app(), (120, 40)) as pilot:
        await pilot.fill()
        await pilot.press("f5", "down", "down")
        view = pilot.find(LinesView, "#ranking")
        reasons = "\n".join(pilot.find(TextView, "#reasons").lines)
        assert reasons.startswith(str(pilot.session.shelf.names[view.row]).replace("\n", "·")[:5])
        assert reasons.index("fail ") < reasons.index("unknown") < reasons.index("pass ")
        assert "window of RB" in reasons and "caution:" in reasons and "note:" in reasons


@pytest.mark.usefixtures("fixed_engine")
async def test_only_those_that_fit(make_app) -> None:
    async with running(make_app(), (120, 40)) as pilot:
        await pilot.fill()
        await pilot.press("f5", "v")
        ranking = pilot.session.ranking
        assert len(ranked(pilot)) == ranking.count(Verdict.FITS) + ranking.count(Verdict.FITS_ON_TYPICALS)
        await pilot.press("v")
        assert len(ranked(pilot)) == 10


async def test_an_example_is_loaded_and_judged_by_the_engine(make_app) -> None:
    async with running(make_app(), (120, 40)) as pilot:
        await pilot.press("f3", "f6")
        title = next(iter(examples()))
        assert title in pilot.text
        await pilot.write(title[:6].casefold())
        await pilot.press("enter")
        assert pilot.session.draft.title == title
        assert pilot.session.ranking is not None and not pilot.session.problems


@pytest.mark.parametrize("title", sorted(examples()))
def test_every_example_fills_the_form_without_a_stranger(title: str) -> None:
    draft, _ = read(examples()[title])
    assert set(draft.texts) <= {field.key for field in duties()[draft.duty].fields}


async def test_a_file_is_loaded_and_saved_again(make_app, tmp_path: Path) -> None:
    title, text = next(iter(examples().items()))
    (tmp_path / "mine.toml").write_text(text, encoding="utf-8")
    async with running(make_app(requirement=tmp_path / "mine.toml"), (120, 40)) as pilot:
        assert isinstance(pilot.app.screen, BenchScreen)
        assert pilot.session.draft.title == title and pilot.session.ranking is not None
        pilot.app.screen.set_focus(row_of(pilot, "title").input)
        await pilot.press("f7", "down", "enter")
        await pilot.answer(str(tmp_path / "again.toml"))
    from importers.requirement_file import read_requirement

    again = read_requirement((tmp_path / "again.toml").read_text(encoding="utf-8")).requirement
    assert dict(again.values) == dict(pilot.session.requirement.values)


async def test_a_file_that_is_no_requirement_is_one_clear_line(make_app, tmp_path: Path) -> None:
    (tmp_path / "bad.toml").write_text("title = [", encoding="utf-8")
    async with running(make_app(requirement=tmp_path / "bad.toml"), (120, 40)) as pilot:
        assert "Not loaded" in pilot.told and "bad.toml" in pilot.told and len(pilot.told.splitlines()) == 1


@pytest.mark.usefixtures("fixed_engine")
async def test_saving_waits_for_a_sound_form(make_app) -> None:
    async with running(make_app(), (120, 40)) as pilot:
        await pilot.press("f3", "f7")
        assert "only a sound requirement is saved" in pilot.told


@pytest.mark.usefixtures("fixed_engine")
async def test_a_requirement_is_saved_in_the_shelf_and_comes_back(make_app, source) -> None:
    async with running(make_app(), (80, 24)) as pilot:
        await pilot.fill(title="Valve 3")
        await pilot.press("f7", "enter")
        assert list(source.requirements_kept) == ["Valve 3"]
        await pilot.fill({}, title="")
        await pilot.press("f6")
        await pilot.write("valve 3")
        await pilot.press("enter")
        assert pilot.session.draft.title == "Valve 3"
        assert pilot.session.requirement.number("supply.max") == 26.4


async def test_weights_are_shown_with_their_meaning_kept_and_refused(make_app) -> None:
    async with running(make_app(), (80, 24)) as pilot:
        await pilot.fill()
        before = pilot.session.ranking
        await pilot.press("f8")
        for criterion in before.desirability:
            assert criterion in pilot.text
        assert "(3)" in pilot.text and "tightest headroom" in pilot.text
        await pilot.write("x")
        assert "is not a number" in pilot.text
        await pilot.press("f10")
        assert not pilot.session.weights
        await pilot.press("backspace", "0", "f10")
        assert pilot.session.weights == {"electrical margin": 0.0}
        assert pilot.session.ranking is not before


async def test_the_form_of_a_duty_that_has_other_fields_is_made_from_those_fields(make_app, monkeypatch) -> None:
    """A later duty needs no change in the interface."""
    import tui.screens.bench as bench
    from engine.duty import duties as known
    from engine.requirement import Field

    switch = known()["switch"]
    other = replace(switch, name="other", fields=(*switch.fields[:3], Field("gain", "Gain", "", "Voltage gain", True)))
    monkeypatch.setattr("engine.duty.duties", lambda: {"switch": switch, "other": other})
    async with running(make_app(), (120, 40)) as pilot:
        await pilot.press("f3")
        assert row_of(pilot, "duty").display
        pilot.app.session = replace(pilot.session, draft=Draft("other", "", {}))
        await pilot.rest()
        assert [row.field.key for row in pilot.find(Form).rows] == [
            "title", "duty", *(field.key for field in other.fields),
        ]  # fmt: skip
        assert "Gain" in pilot.text
    assert bench.form_fields


async def test_ranking_can_be_stopped(make_app) -> None:
    async with running(make_app(), (120, 40)) as pilot:
        await pilot.fill()
        pilot.app.session = replace(
            pilot.session, draft=Draft("switch", "", {**COIL, "supply.max": "27 V"}), stale=True
        )
        await pilot.pilot.press("ctrl+x")
        await pilot.rest()
        assert "Traceback" not in pilot.text and pilot.session.ranking is not None


async def test_no_worker_writes_out_the_shelf_it_is_given(make_app, monkeypatch) -> None:
    """Textual writes out a worker's arguments unless the worker has a description: a second a key."""
    from engine.ranking import Ranking
    from engine.shelf import Shelf

    def refuse(self: object) -> str:
        raise AssertionError("written out")

    for kind in (Shelf, Ranking):
        monkeypatch.setattr(kind, "__repr__", refuse)
    async with running(make_app(), (120, 40)) as pilot:
        await pilot.fill()
        await pilot.press("f5", "down", "enter", "c", "escape", "escape", "space", "f4", "s")
        assert pilot.session.ranking is not None
