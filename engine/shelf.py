"""The shelf as the engine sees it: one column a rating, padded points for what depends on conditions.

A limit that the sheets do not state is NaN. Ratings have shape (n,) over parts; points have shape
(k, n), the parts' k-th points in rising order of their first field, NaN-padded. Values are SI
magnitudes; temperatures are °C.
"""

import hashlib
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, field
from functools import cached_property
from typing import Any

import numpy as np
from numpy.typing import NDArray

from .part import CONDITIONS, STRUCTURES, Part
from .symbols import SYMBOLS

Floats = NDArray[np.float64]

SYMBOL_CODES: dict[str, int] = {name: code for code, name in enumerate(SYMBOLS)}
"""The number a symbol has in a `LimitTable`; a symbol that is kept aside has -1."""

# rating column → (symbol, bound of the limit, how several sheets combine: the unkind one wins)
RATINGS: dict[str, tuple[str, str, str]] = {
    "vceo": ("VCEO", "max", "least"),
    "v_br_ceo": ("V(BR)CEO", "min", "least"),
    "vcbo": ("VCBO", "max", "least"),
    "vebo": ("VEBO", "max", "least"),
    "v_br_ebo": ("V(BR)EBO", "min", "least"),
    "ic": ("IC", "max", "least"),
    "icm": ("ICM", "max", "least"),
    "ib": ("IB", "max", "least"),
    "ibm": ("IBM", "max", "least"),
    "tj_max": ("TJ", "max", "least"),
    "tj_min": ("TJ", "min", "most"),
    "slope_ta": ("derating(TA)", "max", "least"),
    "slope_tc": ("derating(TC)", "max", "least"),
    "rth_ja": ("RthJA", "max", "most"),
    "rth_jc": ("RthJC", "max", "most"),
    "es_b": ("ES/b", "max", "least"),
}

# point group → (symbols in it, fields); the first field is the sorting key
POINTS: dict[str, tuple[tuple[str, ...], tuple[str, ...]]] = {
    "PD": (("PD",), ("max", "ta", "tc")),
    "hFE": (("hFE",), ("ic", "vce", "temp", "min", "typ", "max")),
    "VCE(sat)": (("VCE(sat)",), ("ic", "ib", "temp", "typ", "max")),
    "VBE(sat)": (("VBE(sat)",), ("ic", "ib", "temp", "min", "typ", "max")),
    "VBE(on)": (("VBE(on)",), ("ic", "vce", "temp", "min", "typ", "max")),
    "leakage": (("ICBO", "ICES", "ICEX", "ICEO"), ("temp", "symbol", "v", "typ", "max")),
    "SOA": (("SOA",), ("vce", "value", "t", "tc")),
    "on times": (("td", "tr", "ton"), ("symbol", "ic", "ib", "vcc", "typ", "max")),
    "off times": (("ts", "tf", "toff"), ("symbol", "ic", "ib", "ib2", "vcc", "typ", "max")),
    "speed": (("fT", "Cobo", "Cibo"), ("symbol", "ic", "vce", "v", "min", "typ", "max")),
}
MOST_POINTS = 16
"""Points kept a part and group; a sheet with more loses the surplus, which can only make a verdict harsher."""


@dataclass(frozen=True, eq=False)
class LimitTable:
    """Limits of many parts as columns, a row per limit. Shapes (m,); NaN where the sheet is silent."""

    part: NDArray[np.int64]  # row of the part in the shelf
    symbol: NDArray[np.int64]  # `SYMBOL_CODES`, -1 for a symbol that is kept aside
    values: Mapping[str, Floats]  # "min", "typ", "max" and every name of CONDITIONS

    @classmethod
    def from_parts(cls, parts: Sequence[Part]) -> "LimitTable":
        """The limits of `parts` in one table."""
        owner = [row for row, part in enumerate(parts) for _ in part.limits]
        limits = [limit for part in parts for limit in part.limits]
        values: dict[str, Floats] = {
            name: np.array([_nan(getattr(limit, name)) for limit in limits], dtype=np.float64)
            for name in ("min", "typ", "max")
        }
        stated = [dict(limit.conditions) for limit in limits]
        for name in CONDITIONS:
            values[name] = np.array([_nan(one.get(name)) for one in stated], dtype=np.float64)
        codes = [SYMBOL_CODES.get(limit.symbol, -1) for limit in limits]
        return cls(np.array(owner, dtype=np.int64), np.array(codes, dtype=np.int64), values)


@dataclass(frozen=True, eq=False)
class Shelf:
    """The parts of a shelf as columns over parts."""

    names: NDArray[np.object_]  # type numbers, unique
    structure: NDArray[np.int8]  # index in STRUCTURES, -1 when nobody stated it
    package: NDArray[np.object_]  # "" when not known
    ratings: Mapping[str, Floats]  # names of RATINGS → (n,)
    points: Mapping[str, Mapping[str, Floats]]  # names of POINTS → field → (k, n)
    stock: NDArray[np.int64] = field(default_factory=lambda: np.zeros(0, np.int64))  # on hand
    reserved: NDArray[np.int64] = field(default_factory=lambda: np.zeros(0, np.int64))
    cost: Floats = field(default_factory=lambda: np.zeros(0))  # of one piece, NaN when not known
    fingerprint: str = ""  # of the limits, not of the stock

    def __post_init__(self) -> None:
        n = len(self.names)
        for name, empty in (("stock", 0), ("reserved", 0), ("cost", np.nan)):
            if len(getattr(self, name)) != n:
                kind = np.float64 if name == "cost" else np.int64
                object.__setattr__(self, name, np.full(n, empty, dtype=kind))

    def __len__(self) -> int:
        return len(self.names)

    @cached_property
    def _rows(self) -> dict[str, int]:
        return {str(name): row for row, name in enumerate(self.names)}

    @cached_property
    def alphabetical(self) -> NDArray[np.intp]:
        """The place of each part in the order of type numbers: what breaks ties. Shape (n,)."""
        places = np.empty(len(self), dtype=np.intp)
        places[np.argsort(self.names.astype(str), kind="stable")] = np.arange(len(self))
        return places

    def index(self, type_number: str) -> int:
        """The row of `type_number`, exactly as written. Raises KeyError."""
        return self._rows[type_number]

    def structure_word(self, row: int) -> str:
        """The structure of one part as a word; empty when nobody stated it."""
        code = int(self.structure[row])
        return STRUCTURES[code] if code >= 0 else ""

    def take(self, rows: NDArray[np.intp] | slice) -> "Shelf":
        """The shelf cut down to `rows`, in that order. A slice gives views, not copies."""
        return Shelf(
            self.names[rows],
            self.structure[rows],
            self.package[rows],
            {name: column[rows] for name, column in self.ratings.items()},
            {
                group: {name: column[:, rows] for name, column in fields.items()}
                for group, fields in self.points.items()
            },
            self.stock[rows],
            self.reserved[rows],
            self.cost[rows],
            self.fingerprint,
        )

    def with_stock(self, stock: NDArray[np.int64], reserved: NDArray[np.int64], cost: Floats) -> "Shelf":
        """The same limits with other numbers on hand. Shapes (n,)."""
        columns = (self.names, self.structure, self.package, self.ratings, self.points)
        return Shelf(*columns, stock, reserved, cost, self.fingerprint)

    @classmethod
    def from_table(
        cls,
        names: Sequence[str],
        structures: Sequence[str],
        packages: Sequence[str],
        table: LimitTable,
    ) -> "Shelf":
        """Columns from a table of limits. `structures` holds words of STRUCTURES or ""."""
        codes = {word: code for code, word in enumerate(STRUCTURES)}
        n = len(names)
        ratings = {name: _rating(table, n, *rule) for name, rule in RATINGS.items()}
        points = {group: _points(table, n, *rule) for group, rule in POINTS.items()}
        shelf = cls(
            _objects(names),
            np.array([codes.get(word, -1) for word in structures], dtype=np.int8),
            _objects(packages),
            ratings,
            points,
        )
        object.__setattr__(shelf, "fingerprint", _fingerprint(shelf))
        return shelf

    @classmethod
    def from_parts(cls, parts: Iterable[Part]) -> "Shelf":
        """Columns from part records."""
        rows = list(parts)
        return cls.from_table(
            [part.type_number for part in rows],
            [part.structure for part in rows],
            [part.package for part in rows],
            LimitTable.from_parts(rows),
        )


def _objects(words: Sequence[str]) -> NDArray[np.object_]:
    column = np.empty(len(words), dtype=object)
    column[:] = words
    return column


def _nan(value: Any) -> float:
    return float("nan") if value is None else float(value)


def _rating(table: LimitTable, n: int, symbol: str, bound: str, combine: str) -> Floats:
    """The unkind one of what several sheets say of one rating. Shape (n,), NaN where none does."""
    column = table.values[bound]
    rows = np.flatnonzero((table.symbol == SYMBOL_CODES[symbol]) & ~np.isnan(column))
    start = np.inf if combine == "least" else -np.inf
    best = np.full(n, start)
    (np.minimum if combine == "least" else np.maximum).at(best, table.part[rows], column[rows])
    return np.where(np.isinf(best), np.nan, best)


def _points(table: LimitTable, n: int, symbols: tuple[str, ...], fields: tuple[str, ...]) -> dict[str, Floats]:
    """The points of one group, (k, n) a field, in rising order of the first field and NaN-padded."""
    codes = [SYMBOL_CODES[symbol] for symbol in symbols]
    rows = np.flatnonzero(np.isin(table.symbol, codes))
    columns = {name: _field(table, rows, name) for name in fields}
    owner = table.part[rows]
    order = np.lexsort((*(columns[name] for name in reversed(fields)), owner))
    owner = owner[order]
    first = np.searchsorted(owner, owner, side="left")
    place = np.arange(len(owner)) - first
    kept = place < MOST_POINTS
    k = int(place[kept].max()) + 1 if kept.any() else 1
    points = {}
    for name, column in columns.items():
        padded = np.full((k, n), np.nan)
        padded[place[kept], owner[kept]] = column[order][kept]
        points[name] = padded
    return points


def _field(table: LimitTable, rows: NDArray[np.intp], name: str) -> Floats:
    """One field of a point; a few are read from whichever column the sheet used."""
    values = table.values
    if name == "temp":  # of the junction: pulsed tests leave it at ambient or case; 25 °C unless stated
        return _first_stated(rows, values["tj"], values["ta"], values["tc"], default=25.0)
    if name == "v":
        return _first_stated(rows, values["vcb"], values["vce"], default=np.nan)
    if name == "value":
        return _first_stated(rows, values["min"], values["max"], default=np.nan)
    if name == "symbol":
        return table.symbol[rows].astype(np.float64)
    return values[name][rows]


def _first_stated(rows: NDArray[np.intp], *columns: Floats, default: float) -> Floats:
    found = np.full(len(rows), np.nan)
    for column in columns:
        found = np.where(np.isnan(found), column[rows], found)
    return np.where(np.isnan(found), default, found)


def _fingerprint(shelf: Shelf) -> str:
    """A short hash of what the sheets say: the same limits give the same one, whatever the stock."""
    digest = hashlib.sha256()
    for words in (shelf.names, shelf.package):
        digest.update("\n".join(map(str, words)).encode())
    digest.update(shelf.structure.tobytes())
    for column in shelf.ratings.values():
        digest.update(column.tobytes())
    for fields in shelf.points.values():
        for column in fields.values():
            digest.update(column.tobytes())
    return digest.hexdigest()[:16]
