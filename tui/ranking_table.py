"""A ranking as a table: its columns and which of its rows are shown. Imports numpy."""

from collections.abc import Callable

import numpy as np
from numpy.typing import NDArray

from engine import show
from engine.duty import duties
from engine.duty.base import Figure
from engine.ranking import Ranking, Verdict

from .shelf_table import NOT_KNOWN
from .widgets.lines_view import Column


def short(value: float, unit: str) -> str:
    """A figure for a narrow cell, without its unit: `4.7k`, whole degrees; a dash where there is none."""
    if value != value:
        return NOT_KNOWN
    return f"{value:.0f}" if unit == "°C" else show.quantity(value, unit, 3).removesuffix(unit).replace(" ", "")


def headroom(value: float) -> str:
    """A headroom in at most five cells."""
    if value != value:
        return "?"
    return f"×{value:.2f}" if value < 9.995 else f"×{value:.1f}" if value < 99.95 else f"×{min(value, 9999):.0f}"


def columns(ranking: Ranking, marked: Callable[[str], bool]) -> list[Column]:
    """The columns of a ranking; a narrow view leaves out the last ones to be missed."""
    shelf, network, bounds = ranking.shelf, ranking.network, ranking.bounds
    place = np.empty(len(shelf), dtype=np.int64)
    place[ranking.order] = np.arange(1, len(shelf) + 1)
    rank_width = max(len(str(len(shelf))), 2)
    name_width = min(max((len(str(name)) for name in shelf.names[ranking.order[:2000]]), default=6), 14)
    names = [check.name for check in ranking.checks]
    verdict_width = max(
        len(verdict.words) for verdict in Verdict if ranking.count(verdict) or verdict == Verdict.CANNOT_SAY
    )
    nothing = np.full(len(shelf), np.nan)
    figures = [one for one in duties()[ranking.requirement.duty].figures if one.width]
    values = [network.get(one.key, bounds.get(one.key, nothing)) for one in figures]
    return [
        Column("", 1, lambda row: "*" if marked(str(shelf.names[row])) else ""),
        Column("#", rank_width, lambda row: str(place[row]), right=True),
        Column("type", name_width, lambda row: str(shelf.names[row])),
        Column(
            "verdict",
            verdict_width,
            lambda row: Verdict(int(ranking.verdict[row])).words,
        ),
        Column("room", 5, lambda row: headroom(float(ranking.headroom[row])), right=True),
        Column("worst check", 0, lambda row: names[int(ranking.worst[row])]),
        *(_figure(one, column) for one, column in zip(figures, values, strict=True)),
        Column("stock", 5, lambda row: str(shelf.stock[row]), right=True),
        Column("score", 5, lambda row: _score(ranking, row), right=True),
    ]


def _figure(figure: Figure, values: NDArray[np.float64]) -> Column:
    return Column(
        figure.heading, figure.width, lambda row: short(float(values[row]), figure.unit), right=True, spare=figure.spare
    )


def _score(ranking: Ranking, row: int) -> str:
    return f"{ranking.score[row]:.2f}" if ranking.verdict[row] <= Verdict.FITS_ON_TYPICALS else NOT_KNOWN


def rows(ranking: Ranking, *, only_fitting: bool) -> NDArray[np.intp]:
    """Rows in ranked order; with `only_fitting` just those that fit, on typicals too."""
    if not only_fitting:
        return ranking.order
    return ranking.order[ranking.verdict[ranking.order] <= Verdict.FITS_ON_TYPICALS]


def summary(ranking: Ranking) -> str:
    """How many parts have which verdict."""
    return " · ".join(f"{ranking.count(verdict):,} {verdict.words}" for verdict in Verdict)
