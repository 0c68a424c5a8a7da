"""The shelf as a table: its columns, and which rows a filter keeps in which order. Imports numpy."""

from collections.abc import Callable
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from engine import show
from engine.shelf import Shelf

from .state import ShelfFilter
from .widgets.lines_view import Column

Floats = NDArray[np.float64]
NOT_KNOWN = "–"


@dataclass(frozen=True, slots=True)
class Quantity:
    """One numeric column: what it is called, its values (n,) and how they are written."""

    title: str
    width: int
    values: Floats
    words: Callable[[float], str]


def short(value: float, unit: str, digits: int = 3) -> str:
    """A quantity for a narrow cell; a dash where the sheets are silent."""
    return NOT_KNOWN if value != value else show.quantity(value, unit, digits)


@dataclass(frozen=True, eq=False)
class ShelfTable:
    """Columns of one shelf with what searching and sorting need, worked out once each."""

    shelf: Shelf

    @cached_property
    def quantities(self) -> tuple[Quantity, ...]:
        ratings = self.shelf.ratings
        return (
            Quantity("VCEO", 7, ratings["vceo"], lambda v: short(v, "V")),
            Quantity("IC", 7, ratings["ic"], lambda v: short(v, "A")),
            Quantity("hFE ≥", 6, gain_floor(self.shelf), lambda v: short(v, "")),
            Quantity("RthJA", 8, ratings["rth_ja"], lambda v: short(v, "K/W")),
            Quantity("stock", 6, self.shelf.stock.astype(np.float64), lambda v: f"{v:.0f}"),
        )

    @cached_property
    def more(self) -> tuple[Quantity, ...]:
        """Columns for which only a wide screen has room."""
        ratings = self.shelf.ratings
        return (
            Quantity("ICM", 7, ratings["icm"], lambda v: short(v, "A")),
            Quantity("VEBO", 6, ratings["vebo"], lambda v: short(v, "V")),
            Quantity("TJ max", 6, ratings["tj_max"], lambda v: short(v, "°C")),
            Quantity("RthJC", 8, ratings["rth_jc"], lambda v: short(v, "K/W")),
        )

    @cached_property
    def _name_width(self) -> int:
        return min(max((len(str(name)) for name in self.shelf.names), default=8), 18)

    @cached_property
    def _structure_width(self) -> int:
        return max((len(word) for word in self.structures()), default=10)

    @cached_property
    def haystack(self) -> list[str]:
        """What a search looks through, one text a part, in lower case."""
        words = [self.shelf.structure_word(row) for row in range(len(self.shelf))]
        rows = zip(self.shelf.names, self.shelf.package, words, strict=True)
        return [f"{name} {package} {structure}".casefold() for name, package, structure in rows]

    def columns(self, sort: int, descending: bool, marked: Callable[[str], bool]) -> list[Column]:
        """The columns with the digit that sorts by each and an arrow at the one that does."""
        shelf = self.shelf
        arrow = "▼" if descending else "▲"
        titles = ["type", "structure", "package", *(q.title for q in self.quantities)]
        heads = [f"{i + 1}{arrow if i == sort else ' '}{title}" for i, title in enumerate(titles)]
        return [
            Column("", 1, lambda row: "*" if marked(str(shelf.names[row])) else ""),
            Column(heads[0], 0, lambda row: str(shelf.names[row]), most=max(self._name_width, len(heads[0]))),
            Column(
                heads[1],
                max(self._structure_width, len(heads[1])),
                lambda row: shelf.structure_word(row) or "not stated",
            ),
            Column(heads[2], 10, lambda row: str(shelf.package[row]) or NOT_KNOWN),
            *(
                Column(head, max(q.width, len(head)), lambda row, q=q: q.words(float(q.values[row])), right=True)  # type: ignore[misc]
                for head, q in zip(heads[3:], self.quantities, strict=True)
            ),
            *(
                Column(q.title, q.width, lambda row, q=q: q.words(float(q.values[row])), right=True, spare=i)  # type: ignore[misc]
                for i, q in enumerate(self.more, 1)
            ),
        ]

    def order(self, wanted: ShelfFilter) -> NDArray[np.intp]:
        """The rows that `wanted` keeps, in its order. Rows without a value come last."""
        ranks = self.sorted_rows(wanted.sort)
        if wanted.descending:
            ranks = self._turned(wanted.sort, ranks)
        return ranks[self.kept(wanted)[ranks]]

    def kept(self, wanted: ShelfFilter) -> NDArray[np.bool_]:
        """Which rows the filter keeps. Shape (n,)."""
        shelf = self.shelf
        kept = np.ones(len(shelf), dtype=bool)
        if wanted.structure:
            kept &= np.array([shelf.structure_word(row) == wanted.structure for row in range(len(shelf))], dtype=bool)
        if wanted.package:
            kept &= np.asarray(shelf.package == wanted.package, dtype=bool)
        if wanted.in_stock:
            kept &= shelf.stock > 0
        for word in wanted.search.casefold().split():
            kept &= np.fromiter((word in text for text in self.haystack), dtype=bool, count=len(shelf))
        return kept

    @cached_property
    def _orders(self) -> dict[int, NDArray[np.intp]]:
        return {}

    def sorted_rows(self, column: int) -> NDArray[np.intp]:
        """All rows in rising order of a column, ties by type number."""
        if column not in self._orders:
            if column == 0:
                self._orders[0] = np.argsort(self.shelf.names.astype(str), kind="stable")
            else:
                by_name = self.sorted_rows(0)
                self._orders[column] = by_name[np.argsort(self._key(column)[by_name], kind="stable")]
        return self._orders[column]

    def _key(self, column: int) -> NDArray[np.generic]:
        if column == 1:
            return self.shelf.structure.astype(np.int64)
        if column == 2:
            return self.shelf.package.astype(str)
        return self.quantities[column - 3].values

    def _turned(self, column: int, ranks: NDArray[np.intp]) -> NDArray[np.intp]:
        if column < 3:
            return ranks[::-1]
        silent = int(np.isnan(self.quantities[column - 3].values).sum())
        known = len(ranks) - silent
        return np.concatenate([ranks[:known][::-1], ranks[known:]])

    def structures(self) -> list[str]:
        """The structures on the shelf."""
        return sorted({self.shelf.structure_word(row) for row in range(len(self.shelf))} - {""})

    def packages(self) -> list[str]:
        """The packages on the shelf."""
        return sorted({str(package) for package in self.shelf.package} - {""})


def gain_floor(shelf: Shelf) -> Floats:
    """The lowest stated minimum of hFE, whatever its conditions; NaN where there is none. Shape (n,)."""
    least = shelf.points["hFE"]["min"]
    lowest = np.where(np.isnan(least), np.inf, least).min(axis=0)
    return np.where(np.isinf(lowest), np.nan, lowest)
