"""Harder requirements and worse sheets: changes that can only take something away from a part."""

import math
from collections.abc import Callable, Mapping
from functools import cache

import numpy as np

from engine.part import Part
from engine.requirement import Requirement
from engine.shelf import SYMBOL_CODES, LimitTable, Shelf
from tests.strategies import random_parts, random_requirement

POOL = 150  # parts of a polarity


@cache
def pool(pnp: bool) -> tuple[tuple[Part, ...], LimitTable, Shelf]:
    """Parts of one polarity, half of them with gaps and contradictions, and a few nobody stated the structure of."""
    words = ("pnp", "pnp", "pnp", "pnp-darlington", "pnp-prebiased", "") if pnp else (
        "npn", "npn", "npn", "npn-darlington", "npn-prebiased", "",
    )  # fmt: skip
    parts = tuple(random_parts(77 + pnp, POOL, gaps=0.4, structures=words))
    table = LimitTable.from_parts(parts)
    return parts, table, shelf_of(parts, table)


def shelf_of(parts: tuple[Part, ...], table: LimitTable) -> Shelf:
    """A shelf of `parts` with the limits of `table`."""
    columns = ([p.type_number for p in parts], [p.structure for p in parts], [p.package for p in parts])
    return Shelf.from_table(*columns, table)


def asked(seed: int) -> Requirement:
    """A random requirement whose load is stated as a resistance, so that another supply is no other load."""
    req = random_requirement(seed)
    if req.has("load.current") and req.word("load.kind") != "constant current":
        values = {key: value for key, value in req.values.items() if key != "load.current"}
        values["load.resistance"] = req.number("supply.max") / req.number("load.current")
        return Requirement(req.duty, req.title, values, req.notes)
    return req


def is_pnp(req: Requirement) -> bool:
    return req.word("position") == "high side"


# --- harder requirements: key → the value after a tightening by `u`, 0 (not at all) … 1 (much)

Tighten = Callable[[Requirement, float], float]


def _down(key: str, otherwise: float) -> Tighten:
    """A limit made smaller; where none is stated, one is."""

    def tighter(req: Requirement, u: float) -> float:
        now = req.number(key)
        return (otherwise if math.isnan(now) else now) * (1 - 0.6 * u)

    return tighter


def _up(key: str, share: float, step: float = 0.0) -> Tighten:
    def tighter(req: Requirement, u: float) -> float:
        return req.number(key) * (1 + share * u) + step * u

    return tighter


TIGHTENINGS: dict[str, Tighten] = {
    "limits.on_voltage_max": _down("limits.on_voltage_max", 1.0),
    "limits.off_current_max": _down("limits.off_current_max", 1.0),
    "limits.turn_off_max": _down("limits.turn_off_max", 1e-3),
    "limits.turn_on_max": _down("limits.turn_on_max", 1e-4),
    "limits.junction_max": _down("limits.junction_max", 250.0),
    "drive.current_max": _down("drive.current_max", 1.0),
    "drive.high_min": _down("drive.high_min", 1.0),
    "drive.high_max": _up("drive.high_max", 0.5),
    "drive.low_max": _up("drive.low_max", 0.5),
    "drive.low_min": _up("drive.low_min", 0.0, -0.5),
    "drive.off_drop_max": _up("drive.off_drop_max", 1.0),
    "drive.off_leakage_max": _up("drive.off_leakage_max", 1.0, 1e-6),
    "load.tolerance": _up("load.tolerance", 0.0, 0.1),
    "load.inrush": _up("load.inrush", 0.5),
    "load.clamp_drop": _up("load.clamp_drop", 0.5),
    "supply.min": lambda req, u: req.number("supply.min") * (1 - 0.2 * u),
    "supply.max": _up("supply.max", 0.2),
    "ambient.min": _up("ambient.min", 0.0, -30.0),
    "ambient.max": _up("ambient.max", 0.0, 30.0),
    "resistors.tolerance": _up("resistors.tolerance", 0.0, 0.05),
    "heatsink.case_to_ambient": _up("heatsink.case_to_ambient", 1.0),
    "choice.overdrive": _up("choice.overdrive", 1.0),
}
MAY_BE_UNSTATED = ("limits.on_voltage_max", "limits.turn_off_max", "limits.turn_on_max", "limits.junction_max")


def tightened(req: Requirement, key: str, u: float) -> Requirement:
    """The same requirement with one demand harder; unchanged where it does not ask at all."""
    if key == "limits.load_current_min":
        now = req.number(key)
        return req.with_value(key, now * (1 + 0.3 * u) if not math.isnan(now) else 1e-3 * (1 + 100 * u))
    if not req.has(key) and key not in MAY_BE_UNSTATED:
        return req
    return req.with_value(key, TIGHTENINGS[key](req, u))


# --- worse sheets

FALLING = (("hFE", "min"), ("VCEO", "max"), ("V(BR)CEO", "min"), ("VEBO", "max"), ("IC", "max"), ("ICM", "max"),
           ("IB", "max"), ("PD", "max"), ("TJ", "max"), ("ES/b", "max"), ("SOA", "max"), ("derating(TA)", "max"),
           ("derating(TC)", "max"), ("VBE(on)", "min"), ("VBE(sat)", "min"))  # fmt: skip
RISING = (("VCE(sat)", "max"), ("VBE(sat)", "max"), ("ICBO", "max"), ("ICES", "max"), ("ICEX", "max"), ("ICEO", "max"),
          ("RthJA", "max"), ("RthJC", "max"), ("td", "max"), ("tr", "max"), ("ts", "max"), ("tf", "max"), ("ton", "max"),
          ("toff", "max"))  # fmt: skip


def worsened(table: LimitTable, symbol: str, bound: str, factors: np.ndarray) -> LimitTable:
    """Every `bound` of `symbol` times its part's factor. `factors` (n parts,)."""
    column = table.values[bound].copy()
    here = table.symbol == SYMBOL_CODES[symbol]
    column[here] *= factors[table.part[here]]
    return LimitTable(table.part, table.symbol, {**table.values, bound: column})


def without(table: LimitTable, dropped: np.ndarray) -> LimitTable:
    """The table without some of its rows."""
    kept = ~dropped
    values: Mapping[str, np.ndarray] = {name: column[kept] for name, column in table.values.items()}
    return LimitTable(table.part[kept], table.symbol[kept], values)
