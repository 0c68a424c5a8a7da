"""Cells show data as it is, in the width they have."""

from hypothesis import given, settings
from hypothesis import strategies as st
from rich.cells import cell_len

from tui.widgets.cells import clean, fit, wrap
from tui.widgets.lines_view import Column, layout


@given(st.text(max_size=40), st.integers(0, 30), st.booleans())
@settings(max_examples=150, deadline=None)
def test_a_cell_is_as_wide_as_asked_and_has_no_control_characters(text: str, width: int, right: bool) -> None:
    cell = fit(text, width, right=right)
    assert cell_len(cell) == width
    assert cell.isprintable()


@given(st.text(st.characters(codec="utf-8"), max_size=120), st.integers(4, 40))
@settings(max_examples=150, deadline=None)
def test_wrapping_loses_nothing_and_keeps_the_width(text: str, width: int) -> None:
    lines = wrap(text, width)
    assert all(cell_len(line) <= width for line in lines)
    assert "".join("".join(lines).split()) == "".join(clean(text).split())


def test_markup_is_text() -> None:
    assert fit("[/]oops", 9) == "[/]oops  "
    assert fit("[red]X[/red]", 12) == "[red]X[/red]"


def _cell(row: int) -> str:
    return str(row)


def test_columns_fill_the_room_and_the_dispensable_ones_go_first() -> None:
    columns = [
        Column("a", 5, _cell),
        Column("b", 0, _cell),
        Column("c", 8, _cell, spare=1),
        Column("d", 9, _cell, spare=2),
    ]
    for room in (60, 40, 36, 30, 26):
        shown = layout(columns, room)
        assert sum(width for _, width in shown) + len(shown) - 1 == room
    assert [c.title for c, _ in layout(columns, 30)] == ["a", "b", "c"]
    assert [c.title for c, _ in layout(columns, 20)] == ["a", "b"]
