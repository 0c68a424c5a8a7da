"""The minimum, typical and maximum of a row: cells to SI bounds of one symbol, with what is odd about them."""

import re
from dataclasses import dataclass

from engine.symbols import Symbol

from .problem import CellError
from .quantities import QuantityError, read_quantity, scaled, unit_factor

_DASHES = {"", "-", "–", "—", "−", "n/a", "na", "none", "."}
_RANGE = re.compile(r"^(?P<low>[\d.,]+[a-zA-Zµμ]?)\s*(?:-|–|—|…|\.\.\.?|to)\s*(?P<high>[\d.,]+.*)$")
_BOUND = re.compile(r"^(?P<sign>[<>≤≥])\s*=?\s*(?P<value>.+)$")


@dataclass(frozen=True, slots=True)
class Bounds:
    """Bounds in SI, None where the sheet is silent; `flag` says why a person should look."""

    min: float | None
    typ: float | None
    max: float | None
    flag: str = ""


def read_bounds(symbol: Symbol, cells: dict[str, str], unit_text: str, structure: str) -> Bounds:
    """Bounds from the cells "min", "typ" and "max" (columns as a CellError should name them are the keys).

    Ratings come out under max (TJ keeps both), breakdown voltages under min; a PNP's signs are taken off.
    Raises CellError.
    """
    found: dict[str, float | None] = {"min": None, "typ": None, "max": None}
    negative = False
    for column in ("min", "typ", "max"):
        text = cells.get(column, "").strip()
        if text.casefold() in _DASHES:
            continue
        for bound, value in _read_cell(symbol, column, text, unit_text):
            negative |= value < 0
            found[bound] = value
    if symbol.name != "TJ":
        _strip_signs(found)
    _normalise(symbol, found)
    _refuse(symbol, found, cells)
    return Bounds(found["min"], found["typ"], found["max"], _flag(symbol, found, negative, structure))


def _read_cell(symbol: Symbol, column: str, text: str, unit_text: str) -> list[tuple[str, float]]:
    """What one cell states: usually one bound, two for a range."""
    bound = _BOUND.match(text)
    if bound is not None:
        side = "max" if bound["sign"] in "<≤" else "min"
        return [(side, _number(symbol, column, bound["value"], unit_text))]
    span = _RANGE.match(text)
    if span is not None:
        ends = (
            (side, _number(symbol, column, span[end], unit_text)) for side, end in (("min", "low"), ("max", "high"))
        )
        return list(ends)
    return [(column, _number(symbol, column, text, unit_text))]


def _number(symbol: Symbol, column: str, text: str, unit_text: str) -> float:
    unit = unit_text.strip()
    bare = not re.search(r"[A-Za-zµμΩΩ°%]", re.sub(r"(?<=\d)[eE][-+]?\d+$", "", text.strip()))
    try:
        factor = unit_factor(unit, symbol.unit) if bare and unit else 1.0
    except QuantityError as error:
        raise CellError("unit", unit_text, "unit", f"{symbol.name}: {error.says}; {error.mend}") from error
    try:
        return scaled(read_quantity(text, symbol.unit), factor)
    except QuantityError as error:
        kind = "unit" if error.says.startswith("unit") else "not-a-number"
        raise CellError(column, text, kind, f"{symbol.name}: {error.says}; {error.mend}") from error


def _strip_signs(found: dict[str, float | None]) -> None:
    """Sizes instead of a PNP's signed values: −300 to −100 is 100 to 300."""
    low, high = found["min"], found["max"]
    if low is not None and high is not None and low < 0 and high < 0:
        found["min"], found["max"] = high, low
    for bound, value in found.items():
        found[bound] = None if value is None else abs(value)


def _normalise(symbol: Symbol, found: dict[str, float | None]) -> None:
    """A rating counts as a maximum in whichever column it stands, a breakdown voltage as a minimum."""
    if symbol.kind == "rating" and symbol.name not in ("TJ", "SOA"):
        stated = [found[b] for b in ("max", "typ", "min") if found[b] is not None]
        found["min"], found["typ"], found["max"] = None, None, stated[0] if stated else None
    if symbol.name.startswith("V(BR)") and found["min"] is None:
        found["min"], found["max"] = found["max"], None


def _refuse(symbol: Symbol, found: dict[str, float | None], cells: dict[str, str]) -> None:
    stated = {bound: value for bound, value in found.items() if value is not None}
    if not stated:
        column = next((name for name in ("max", "min", "typ") if name in cells), "max")
        raise CellError(
            column, "", "no-value", f"{symbol.name}: no value in min, typ or max; write one or leave the row out"
        )
    for bound, value in stated.items():
        if value <= 0 and symbol.name not in ("TJ", "NF"):
            raise CellError(
                bound, cells.get(bound, ""), "impossible", f"{symbol.name} cannot be {value:g}; write its size"
            )
    low, high = found["min"], found["max"]
    if low is not None and high is not None and low > high:
        says = f"{symbol.name}: the minimum {low:g} lies above the maximum {high:g}; exchange them or check the unit"
        raise CellError("min", cells.get("min", ""), "min-above-max", says)


def _flag(symbol: Symbol, found: dict[str, float | None], negative: bool, structure: str) -> str:
    for value in found.values():
        if value is not None and not symbol.low <= value <= symbol.high:
            return f"{value:g} {symbol.unit} is not a usual {symbol.name} ({symbol.low:g} to {symbol.high:g}); check the unit"
    if negative and structure.startswith("npn") and symbol.name != "TJ":
        return "a negative value on an NPN part; the size was taken"
    return ""
