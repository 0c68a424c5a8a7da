"""Headings: which column says what, with the unit that stands in it."""

import re
from dataclasses import dataclass

from engine.part import CONDITIONS
from engine.symbols import Symbol, find_symbol

from .conditions import condition_name, condition_unit

_UNIT = re.compile(r"^(?P<name>.*?)\s*[\[(](?P<unit>[^\])]*)[\])]\s*$")
_NUMBERED = re.compile(r"^(?P<name>.+?)_(?P<number>\d+)$")
_BOUNDS = ("min", "typ", "max")
_UNDER_MIN = {"fT", "V(BR)CEO", "V(BR)CBO", "V(BR)EBO"}

PLAIN = {
    "part": "part", "polarity": "polarity", "structure": "polarity", "package": "package", "case": "package",
    "maker": "maker", "manufacturer": "maker", "source": "source", "symbol": "symbol", "min": "min", "typ": "typ",
    "max": "max", "unit": "unit", "units": "unit", "conditions": "conditions", "condition": "conditions", "stock": "stock",
    "price": "price", "note": "note", "pulsed": "pulsed",
}  # fmt: skip


@dataclass(frozen=True, slots=True)
class WideColumn:
    """A column of the wide form: one bound or one test condition of one limit."""

    symbol: Symbol
    field: str  # min, typ, max or a condition
    group: int  # 1 for the unnumbered columns, 2 for those with _2
    unit: str  # as it stands in the heading, empty for none


def split_unit(heading: str) -> tuple[str, str]:
    """A heading without the unit in brackets behind it, and that unit."""
    match = _UNIT.match(heading)
    if match is None or find_symbol(heading) is not None:
        return heading.strip(), ""
    return match["name"].strip(), match["unit"].strip()


def plain_columns(header: tuple[str, ...]) -> dict[str, int]:
    """Columns that are not limits, by meaning. `type` names the part unless there is a `part` column."""
    found: dict[str, int] = {}
    names = [split_unit(heading)[0].casefold() for heading in header]
    for place, name in enumerate(names):
        meaning = PLAIN.get(name)
        if name == "type":
            meaning = "polarity" if "part" in names else "part"
        if meaning is not None:
            found.setdefault(meaning, place)
    return found


def condition_columns(header: tuple[str, ...]) -> dict[str, tuple[int, str]]:
    """Columns of the long form that hold a test condition: name → place, unit in the heading."""
    found = {}
    for place, heading in enumerate(header):
        name, unit = split_unit(heading)
        if condition_unit(name) is not None:
            found[condition_name(name)] = (place, unit)
    return found


def wide_column(heading: str) -> WideColumn | None:
    """What a heading of the wide form means; None where it means nothing known."""
    name, unit = split_unit(heading)
    group = 1
    numbered = _NUMBERED.match(name)
    if numbered is not None and find_symbol(name) is None:
        name, group = numbered["name"], int(numbered["number"])
    whole = find_symbol(name)
    if whole is not None:
        return WideColumn(whole, _usual_bound(whole), group, unit)
    head, _, field = name.rpartition("_")
    symbol = find_symbol(head) if head else None
    if symbol is None:
        return None
    key = field.casefold()
    key = "tj" if key in ("t", "temp") else condition_name(key)
    return WideColumn(symbol, key, group, unit) if key in (*_BOUNDS, *CONDITIONS) else None


def _usual_bound(symbol: Symbol) -> str:
    """The bound of a column that names none: a gain alone is typical, a frequency a minimum, the rest maximums."""
    if symbol.name in ("hFE", "hfe", "|hfe|"):
        return "typ"
    return "min" if symbol.name in _UNDER_MIN else "max"
