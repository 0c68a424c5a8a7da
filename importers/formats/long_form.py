"""The long form: one limit a row."""

from collections.abc import Callable, Iterator

from engine.part import CONDITIONS, Arrival, Limit, Part
from engine.symbols import SYMBOLS, Symbol, find_symbol

from ..conditions import condition_unit, magnitude, read_conditions
from ..headings import condition_columns, plain_columns
from ..problem import CellError, RowProblem
from ..quantities import QuantityError, read_quantity, scaled, unit_factor
from ..structures import read_structure
from ..tables import Table
from ..values import Bounds, read_bounds

Cell = Callable[[str], str]
"""The text of a row under a meaning, empty where there is none."""

_PEAKS = {"IC": "ICM", "IB": "IBM"}  # a pulsed rating of a current is its peak, not what it may carry for good


def recognise(header: tuple[str, ...]) -> bool:
    """Whether a heading is of the long form: a part, a symbol and some value."""
    columns = plain_columns(header)
    return {"part", "symbol"} <= columns.keys() and bool({"min", "typ", "max"} & columns.keys())


def arrivals(table: Table, polarity: str) -> Iterator[Arrival | RowProblem]:
    """Each row as it should land, or what is wrong with it; a row that lands can bring a problem along."""
    reader = _Rows(table, polarity)
    for row, cells in table.rows:
        try:
            yield from reader.read(row, cells)
        except CellError as error:
            yield error.at(row)


class _Rows:
    """Reads rows of one table; a part's structure, once stated, holds for its later rows."""

    def __init__(self, table: Table, polarity: str) -> None:
        self.columns = plain_columns(table.header)
        self.conditions = condition_columns(table.header)
        self.polarity = polarity
        self.structures: dict[str, str] = {}
        self.width = len(table.header)

    def read(self, row: int, cells: tuple[str, ...]) -> Iterator[Arrival | RowProblem]:
        if len(cells) > self.width:
            extra = ",".join(cells[self.width :])
            says = f"{len(cells)} cells under {self.width} headings; put quotes around a text that holds the delimiter"
            raise CellError("row", extra, "too-many-cells", says)

        def cell(name: str) -> str:
            place = self.columns.get(name)
            return cells[place] if place is not None and place < len(cells) else ""

        name = cell("part")
        if not name:
            raise CellError("part", "", "no-part", "no type number; write it in every row")
        stated = read_structure(cell("polarity"), "polarity")
        structure = stated or self.structures.get(name) or self.polarity
        self.structures[name] = structure
        part = Part(name, stated or self.polarity, cell("package"), cell("maker"))
        word = cell("symbol")
        if not word:
            raise CellError("symbol", "", "no-symbol", "no symbol; write one such as VCEO or hFE")
        symbol = find_symbol(word)
        if symbol is None:
            yield Arrival(row, _with(part, _aside(word, cell)), set_aside=True)
            yield RowProblem(row, "symbol", word, "unknown-symbol", "not a symbol that is used here; kept aside", False)
            return
        limit = self._limit(symbol, cell, cells, structure)
        yield Arrival(row, _with(part, limit))
        if limit.flag:
            column = next((one for one in ("max", "min", "typ") if cell(one)), "max")
            yield RowProblem(row, column, cell(column), "implausible", limit.flag, False)

    def _limit(self, symbol: Symbol, cell: Cell, cells: tuple[str, ...], structure: str) -> Limit:
        texts = {name: cell(name) for name in ("min", "typ", "max")}
        bounds = read_bounds(symbol, texts, cell("unit"), structure)
        pnp = structure.startswith("pnp")
        said = read_conditions(cell("conditions"), pnp=pnp)
        values = dict(said.values)
        for name, (place, unit) in self.conditions.items():
            text = cells[place] if place < len(cells) else ""
            if text:
                values[name] = magnitude(name, _condition(name, text, unit), pnp=pnp)
        if symbol.name in _PEAKS and (said.pulsed or "peak" in said.note.casefold()):
            symbol = SYMBOLS[_PEAKS[symbol.name]]
        pulsed = said.pulsed or cell("pulsed").casefold() in ("1", "yes", "true", "pulsed")
        return _as_limit(symbol, bounds, values, pulsed, cell("source"), said.note)


def _as_limit(symbol: Symbol, bounds: Bounds, values: dict[str, float], pulsed: bool, source: str, note: str) -> Limit:
    kept = tuple(sorted((name, value) for name, value in values.items() if name in CONDITIONS))
    flag = bounds.flag
    if symbol.name == "hfe" and pulsed and "f" not in values:
        flag = flag or "hfe with a pulsed test and no frequency: is the static gain hFE meant?"
    return Limit(symbol.name, bounds.min, bounds.typ, bounds.max, kept, pulsed, source, note, flag)


def _condition(name: str, text: str, unit: str) -> float:
    wanted = condition_unit(name) or ""
    try:
        value = read_quantity(text, wanted)
        return scaled(value, unit_factor(unit, wanted)) if unit and text.strip()[-1:].isdigit() else value
    except QuantityError as error:
        raise CellError(name, text, "condition", f"{error.says}; {error.mend}") from error


def _aside(word: str, cell: Cell) -> Limit:
    """A symbol that nobody knows, with its own words; its numbers are kept as they stand where they are numbers."""
    numbers: dict[str, float | None] = {}
    for name in ("min", "typ", "max"):
        try:
            numbers[name] = read_quantity(cell(name), "V") if cell(name) else None
        except QuantityError:
            numbers[name] = None
    verbatim = "; ".join(f"{name} {cell(name)}" for name in ("min", "typ", "max", "unit", "conditions") if cell(name))
    return Limit(word, numbers["min"], numbers["typ"], numbers["max"], source=cell("source"), note=verbatim)


def _with(part: Part, limit: Limit) -> Part:
    return Part(part.type_number, part.structure, part.package, part.maker, part.note, (limit,))
