"""The chart is a function of its figures: size, places, dashes, and nothing but ASCII where that is asked."""

import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from rich.cells import cell_len

from tui.widgets.bars import bar
from tui.widgets.chart import Axes, Points, Series, axis_number, chart, span

AXES = Axes("IC", "A", (1e-3, 1.0), "hFE", "", (1.0, 1000.0))
LEVEL = Series("floor at 25 °C", (1e-3, 1.0), (100.0, 100.0))
SLOPE = Series("floor at −40 °C", (1e-3, 1.0), (1.0, 1000.0))


@given(
    width=st.integers(1, 140),
    height=st.integers(1, 60),
    x=st.lists(st.floats(1e-9, 1e3), min_size=0, max_size=6),
    y=st.lists(st.one_of(st.floats(1e-3, 1e6), st.just(math.nan)), min_size=6, max_size=6),
    plain=st.booleans(),
)
@settings(max_examples=60, deadline=None)
def test_every_picture_has_the_size_that_was_asked_for(
    width: int, height: int, x: list[float], y: list[float], plain: bool
) -> None:
    series = [Series("one", sorted(x), y[: len(x)])]
    points = [Points("○", "o", "stated", list(zip(x, y, strict=False)), beside="needs 61")]
    lines = chart(series, points, Axes("IC", "A", span(x), "hFE", "", span(y)), width, height, plain=plain)
    assert len(lines) == height
    assert {cell_len(line) for line in lines} == {width}
    assert not plain or all(line.isascii() for line in lines)


def test_a_mark_stands_where_its_figures_say() -> None:
    """On log paper of three decades the geometric middle is in the middle."""
    middle = (math.sqrt(1e-3 * 1.0), math.sqrt(1.0 * 1000.0))
    lines = chart([], [Points("◆", "@", "needed", [middle])], AXES, 67, 34)
    places = [(line.index("◆"), y) for y, line in enumerate(lines[:-1]) if "◆" in line]
    columns, rows = 67 - 6, 34 - 4
    assert places == [(6 + round((columns - 1) / 2), 1 + round((rows - 1) / 2))]


def test_a_level_curve_is_level_and_a_rising_one_rises() -> None:
    def heights(one: Series) -> list[int]:
        lines = chart([one], [], AXES, 60, 24)[1:-3]
        columns = [[y for y, line in enumerate(lines) if "\u2800" < line[c] <= "\u28ff"] for c in range(6, 60)]
        return [rows[0] for rows in columns if rows]

    assert len(set(heights(Series("", LEVEL.x, LEVEL.y)))) == 1
    rising = heights(Series("", SLOPE.x, SLOPE.y))
    assert rising == sorted(rising, reverse=True) and rising[0] - rising[-1] >= 15


def test_curves_are_told_apart_by_their_dashes_and_names_without_colour() -> None:
    lines = chart([LEVEL, Series("cold", (1e-3, 1.0), (20.0, 20.0))], [], AXES, 90, 24)
    samples = [entry.split()[0] for entry in lines[-1].split("   ")[:2]]
    assert samples[0] != samples[1]
    assert "floor at 25 °C" in lines[-1] and "cold" in lines[-1]
    solid, dashed = (line for line in lines if sum("\u2800" < c <= "\u28ff" for c in line) > 20)
    assert " " not in solid[8:80].strip() and " " in dashed[8:80].strip()


def test_a_gap_in_a_curve_is_not_bridged() -> None:
    broken = Series("", (1e-3, 1e-2, 0.03, 0.1, 1.0), (100.0, 100.0, math.nan, 100.0, 100.0))
    line = next(one for one in chart([broken], [], AXES, 66, 24) if sum("\u2800" < c <= "\u28ff" for c in one) > 20)
    assert " " * 15 in line[8:].rstrip()


def test_the_value_is_written_beside_the_mark() -> None:
    lines = chart([LEVEL], [Points("◆", "@", "needed", [(0.13, 61.0)], beside="needs 61 at 130 mA")], AXES, 80, 24)
    (line,) = (one for one in lines[:-1] if "◆" in one)
    assert "needs 61 at 130 mA" in line


@pytest.mark.parametrize(("value", "words"), [(0.02, "20m"), (1.0, "1"), (500.0, "500"), (2e3, "2k"), (1e-5, "10µ")])
def test_ticks_carry_si_prefixes(value: float, words: str) -> None:
    """SI brochure, table 7: m, k, µ."""
    assert axis_number(value) == words


@pytest.mark.parametrize("width", [8, 20, 40])
@pytest.mark.parametrize("plain", [True, False])
def test_a_bar_crosses_the_stroke_only_where_there_is_headroom(width: int, plain: bool) -> None:
    full = "#" if plain else "━"
    stroke = "|" if plain else "┃"
    for headroom in (0.1, 0.5, 0.9, 0.999):
        before, after = bar(headroom, width, plain=plain).split(stroke)
        assert not after.strip() and before.endswith(" ")
    for headroom in (2.0, 5.0, 100.0, math.inf):
        before, after = bar(headroom, width, plain=plain).split(stroke)
        assert set(before) == {full} and after.startswith(full)
    assert len(bar(None, width, plain=plain)) == width


def test_bars_grow_with_the_headroom() -> None:
    lengths = [bar(h, 40).count("━") for h in (0.3, 0.6, 1.5, 3.0, 6.0, 12.0)]
    assert lengths == sorted(lengths) and len(set(lengths)) == len(lengths)
