"""A part's limits as table cells and sentences, and its gain floor as a chart. Imports numpy and the engine."""

import math
from collections.abc import Sequence
from typing import TYPE_CHECKING

import numpy as np

from engine import show
from engine.part import CONDITIONS, Limit, Part
from engine.shelf import Floats, Shelf
from engine.symbols import SYMBOLS

from .widgets.chart import Axes, Points, Series, chart, span
from .widgets.lines_view import Column

if TYPE_CHECKING:
    from engine.ranking import Explanation

_SHOWN = {
    "ic": ("IC", "A"), "ib": ("IB", "A"), "ib2": ("IB2", "A"), "ie": ("IE", "A"), "vce": ("VCE", "V"),
    "vbe": ("VBE", "V"), "vcb": ("VCB", "V"), "veb": ("VEB", "V"), "vcc": ("VCC", "V"), "rs": ("RS", "Ω"),
    "f": ("f", "Hz"), "t": ("t", "s"), "tj": ("TJ", "°C"), "ta": ("TA", "°C"), "tc": ("TC", "°C"),
}  # fmt: skip
ROOM = 25.0


def conditions_words(limit: Limit) -> str:
    """The test conditions of a limit: `IC 150 mA, VCE 1 V, pulsed`."""
    said = []
    for name, value in sorted(limit.conditions, key=lambda pair: CONDITIONS.index(pair[0])):
        symbol, unit = _SHOWN.get(name, (name, ""))
        said.append(f"{symbol} {show.quantity(value, unit)}")
    said += ["pulsed"] if limit.pulsed else []
    said += [limit.note] if limit.note else []
    return ", ".join(said)


def unit_of(limit: Limit) -> str:
    """The SI unit of a limit's values."""
    symbol = SYMBOLS.get(limit.symbol)
    return symbol.unit if symbol else ""


def in_sheet_order(part: Part) -> list[Limit]:
    """Ratings first, then characteristics, in the order of the table of symbols; what is kept aside last."""
    places = {name: place for place, name in enumerate(SYMBOLS)}
    key = {"ic": 0.0, "vce": 0.0}
    return sorted(
        part.limits,
        key=lambda one: (places.get(one.symbol, len(places)), one.symbol, {**key, **dict(one.conditions)}["ic"]),
    )


def limit_columns(limits: Sequence[Limit]) -> list[Column]:
    """The limits as a table."""

    def bound(row: int, name: str) -> str:
        value = getattr(limits[row], name)
        return "" if value is None else show.quantity(value, unit_of(limits[row]))

    def wide(title: str) -> int:
        return max([len(title), *(len(bound(row, title)) for row in range(len(limits)))])

    symbols = max((len(one.symbol) for one in limits), default=6)
    return [
        Column("", 1, lambda row: "!" if limits[row].flag else ""),
        Column("symbol", min(max(symbols, 6), 14), lambda row: limits[row].symbol),
        Column("min", wide("min"), lambda row: bound(row, "min"), right=True),
        Column("typ", wide("typ"), lambda row: bound(row, "typ"), right=True),
        Column("max", wide("max"), lambda row: bound(row, "max"), right=True),
        Column("at", 0, lambda row: conditions_words(limits[row])),
        Column("source", 21, lambda row: limits[row].source, spare=1),
    ]


def limit_sentence(limit: Limit) -> str:
    """One limit in full: meaning, conditions, source, and why somebody should look at it."""
    symbol = SYMBOLS.get(limit.symbol)
    meaning = f"{symbol.meaning} ({symbol.kind})" if symbol else "kept aside: no check uses this symbol"
    at = conditions_words(limit)
    said = [f"{limit.symbol}: {meaning}", f"at {at}" if at else "no conditions stated"]
    said.append(f"source: {limit.source}" if limit.source else "no source stated")
    said += [f"! {limit.flag}"] if limit.flag else []
    return "; ".join(said)


def gain_chart(
    shelf: Shelf, row: int, told: "Explanation | None", cold: float, width: int, height: int, *, plain: bool
) -> list[str]:
    """The gain floor over IC at 25 °C and at `cold` °C, guaranteed and typical points, and what the job needs."""
    from engine.conditions import gain_floor_curve

    stated = shelf.points["hFE"]
    here = {name: column[:, row] for name, column in stated.items()}
    least = _points(here["ic"], here["min"])
    typical = _points(here["ic"], here["typ"])
    needed = _needed(told)
    if not least and not typical:
        return ["No hFE limit on file: nothing can be drawn, and no check that needs a gain can pass."]
    currents = [ic for ic, _ in [*least, *typical, *needed]]
    x_ends = span([*currents, min(currents) / 5])
    ic = np.geomspace(*x_ends, 160)
    # the floors at the points and currents themselves too, so that corners are drawn where they are
    ic = np.unique(np.concatenate([ic, [c for c in currents if x_ends[0] <= c <= x_ends[1]]]))
    floors = [
        Series(f"floor at {temp:g} °C", ic, gain_floor_curve(shelf, row, ic, temp))
        for temp in dict.fromkeys((ROOM, cold))
    ]
    heights = [h for _, h in [*least, *typical, *needed]]
    heights += [float(y) for one in floors for y in one.y if not math.isnan(y)]
    beside = f"needs {show.number(needed[0][1], 3)} at {show.quantity(needed[0][0], 'A', 3)}" if needed else ""
    points = [
        Points("○", "o", "guaranteed minimum", least),
        Points("·", ":", "typical only", typical),
        Points("◆", "@", beside or "needed", needed, beside=beside),
    ]
    axes = Axes("IC", "A", x_ends, "hFE", "", span(heights))
    return chart(floors, points, axes, width, height, plain=plain)


def _points(x: Floats, y: Floats) -> list[tuple[float, float]]:
    return [(float(a), float(b)) for a, b in zip(x, y, strict=True) if a > 0 and b > 0]


def _needed(told: "Explanation | None") -> list[tuple[float, float]]:
    """The largest collector current and the gain that it asks for there."""
    if told is None:
        return []
    ic, gain = told.bounds.get("ic_on_max"), told.bounds.get("forced_beta_max")
    return [(ic, gain)] if ic and gain else []
