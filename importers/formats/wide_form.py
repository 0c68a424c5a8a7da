"""The wide form: one part a row, a column for each bound and test condition; also tables of structure or stock alone."""

from collections.abc import Callable, Iterator
from dataclasses import dataclass

from engine.part import Arrival, Limit, Part
from engine.symbols import SYMBOLS

from ..conditions import condition_unit, magnitude
from ..headings import WideColumn, plain_columns, split_unit, wide_column
from ..problem import CellError, RowProblem
from ..quantities import QuantityError, read_number, read_quantity, scaled, unit_factor
from ..structures import read_structure
from ..tables import Table
from ..values import read_bounds

_BORROWED = ("ic", "ib")  # VBE(sat) is tested together with VCE(sat): its conditions, where it has none of its own


def recognise(header: tuple[str, ...]) -> bool:
    """Whether a heading is of the wide form: a part, and something about it."""
    columns = plain_columns(header)
    known = columns.keys() & {"polarity", "package", "maker", "stock", "price"}
    return "part" in columns and "symbol" not in columns and (bool(known) or any(map(wide_column, header)))


def unknown_columns(header: tuple[str, ...]) -> list[str]:
    """Headings that mean nothing here."""
    plain = set(plain_columns(header).values())
    return [h for place, h in enumerate(header) if h and place not in plain and wide_column(h) is None]


def arrivals(table: Table, polarity: str) -> Iterator[Arrival | RowProblem]:
    """Each part as it should land; a bad cell costs its limit, a missing name the row."""
    plain = plain_columns(table.header)
    wide = {place: one for place, heading in enumerate(table.header) if (one := _wide(place, heading, plain))}
    for row, cells in table.rows:
        try:
            yield from _read(row, cells, plain, wide, table.header, polarity)
        except CellError as error:
            yield error.at(row)


def _wide(place: int, heading: str, plain: dict[str, int]) -> WideColumn | None:
    return None if place in plain.values() else wide_column(heading)


@dataclass(frozen=True, slots=True)
class _Text:
    """A cell of a limit with its heading, for messages."""

    heading: str
    text: str
    unit: str


def _read(
    row: int,
    cells: tuple[str, ...],
    plain: dict[str, int],
    wide: dict[int, WideColumn],
    header: tuple[str, ...],
    polarity: str,
) -> Iterator[Arrival | RowProblem]:
    def cell(name: str) -> str:
        place = plain.get(name)
        return cells[place] if place is not None and place < len(cells) else ""

    name = cell("part")
    if not name:
        raise CellError("part", "", "no-part", "no type number; write it in every row")
    structure = read_structure(cell("polarity"), "polarity") or polarity
    groups: dict[tuple[str, int], dict[str, _Text]] = {}
    for place, one in wide.items():
        if place < len(cells) and cells[place]:
            text = _Text(header[place], cells[place], one.unit)
            groups.setdefault((one.symbol.name, one.group), {})[one.field] = text
    limits, problems = _limits(row, groups, structure, cell("source"))
    stock, cost = _count(cell("stock")), _price(cell("price"), header, plain)
    yield Arrival(row, Part(name, structure, cell("package"), cell("maker"), cell("note"), tuple(limits)), stock, cost)
    yield from problems


def _limits(
    row: int, groups: dict[tuple[str, int], dict[str, _Text]], structure: str, source: str
) -> tuple[list[Limit], list[RowProblem]]:
    limits, problems = [], []
    for (symbol, number), fields in groups.items():
        if not fields.keys() & {"min", "typ", "max"}:
            continue  # conditions without a value, such as VCESAT_IC of an empty VCESAT_MAX
        if symbol == "VBE(sat)":
            saturation = groups.get(("VCE(sat)", number), {})
            fields = {**{c: saturation[c] for c in _BORROWED if c in saturation}, **fields}
        try:
            limit = _limit(symbol, fields, structure, source)
        except CellError as error:
            problems.append(error.at(row, rejects=False))
            continue
        limits.append(limit)
        if limit.flag:
            text = next(fields[b] for b in ("max", "min", "typ") if b in fields)
            problems.append(RowProblem(row, text.heading, text.text, "implausible", limit.flag, False))
    return limits, problems


def _limit(name: str, fields: dict[str, _Text], structure: str, source: str) -> Limit:
    symbol = SYMBOLS[name]
    texts: dict[str, str] = {bound: fields[bound].text for bound in ("min", "typ", "max") if bound in fields}
    units = {fields[bound].unit for bound in texts}
    try:
        bounds = read_bounds(symbol, texts, units.pop() if len(units) == 1 else "", structure)
    except CellError as error:
        heading = fields[error.column].heading if error.column in fields else next(iter(fields.values())).heading
        raise CellError(heading, error.value, error.kind, error.says) from error
    values = {}
    for condition, text in fields.items():
        wanted = condition_unit(condition)
        if condition in texts or wanted is None:
            continue
        values[condition] = magnitude(condition, _condition(text, wanted), pnp=structure.startswith("pnp"))
    return Limit(
        name, bounds.min, bounds.typ, bounds.max, tuple(sorted(values.items())), False, source, "", bounds.flag
    )


def _condition(text: _Text, wanted: str) -> float:
    return _try(lambda: _scaled(text, wanted), text.heading, text.text)


def _scaled(text: _Text, wanted: str) -> float:
    value = read_quantity(text.text, wanted)
    return scaled(value, unit_factor(text.unit, wanted)) if text.unit and text.text[-1:].isdigit() else value


def _count(text: str) -> int | None:
    if not text:
        return None
    value = _try(lambda: read_number(text), "stock", text)
    if value < 0 or value != int(value) or value > 1e9:
        raise CellError("stock", text, "not-a-count", "stock is a number of pieces; write 0 or more")
    return int(value)


def _price(text: str, header: tuple[str, ...], plain: dict[str, int]) -> float | None:
    if not text:
        return None
    heading = split_unit(header[plain["price"]])[0]
    value = _try(lambda: read_number(text.lstrip("€$£ ")), heading, text)
    if value < 0:
        raise CellError(heading, text, "impossible", "a price is not negative; write 0 or more")
    return value


def _try(read: Callable[[], float], column: str, text: str) -> float:
    try:
        return read()
    except QuantityError as error:
        raise CellError(column, text, "not-a-number", f"{error.says}; {error.mend}") from error
