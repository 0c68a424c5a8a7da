"""What the interface shows: one frozen session, replaced as a whole whenever something changes."""

from collections.abc import Mapping
from dataclasses import dataclass, field, replace
from types import MappingProxyType
from typing import TYPE_CHECKING

if TYPE_CHECKING:  # numpy and the engine are imported after the first paint
    from engine.ranking import Ranking
    from engine.requirement import Problem, Requirement
    from engine.shelf import Shelf

NOTHING: Mapping[str, str] = MappingProxyType({})


@dataclass(frozen=True, slots=True)
class ShelfFilter:
    """Which parts the shelf screen shows, and in which order."""

    search: str = ""
    structure: str = ""  # "" shows every structure
    package: str = ""  # "" shows every package
    in_stock: bool = False
    sort: int = 0  # a column
    descending: bool = False

    @property
    def narrows(self) -> bool:
        """Whether any part may be hidden."""
        return bool(self.search or self.structure or self.package or self.in_stock)

    def words(self) -> str:
        """What is shown, for a person."""
        said = [
            f"structure {self.structure or 'any'}",
            f"package {self.package or 'any'}",
            "in stock only" if self.in_stock else "stock any",
        ]
        return " · ".join(said)


@dataclass(frozen=True, eq=False)
class Draft:
    """A requirement as it stands in the form: texts by field, not yet judged."""

    duty: str = "switch"
    title: str = ""
    texts: Mapping[str, str] = field(default_factory=lambda: NOTHING)  # only fields in which something is written


@dataclass(frozen=True, eq=False, repr=False)
class Session:
    """Everything that is shown. Arrays within are never changed.

    It has no repr of its fields: Textual writes out a worker's arguments unless the worker has a
    description, and a shelf written out costs a second.
    """

    shelf: "Shelf | None" = None
    shelf_name: str = ""
    demo: bool = False
    trouble: str = ""  # why the shelf could not be opened
    filter: ShelfFilter = field(default_factory=ShelfFilter)
    draft: Draft = field(default_factory=Draft)
    weights: Mapping[str, float] = field(default_factory=dict)  # only those that differ from the defaults
    requirement: "Requirement | None" = None  # the last one without problems
    problems: "tuple[Problem, ...]" = ()  # of the draft
    ranking: "Ranking | None" = None  # of `requirement`
    stale: bool = False  # the draft has changed since `ranking`
    only_fitting: bool = False
    marks: tuple[str, ...] = ()  # type numbers, in the order they were marked

    def marked(self, type_number: str) -> "Session":
        """The session with the mark of one part set, or taken off."""
        if type_number in self.marks:
            return replace(self, marks=tuple(one for one in self.marks if one != type_number))
        return replace(self, marks=(*self.marks, type_number))

    def facts(self) -> str:
        """What the shelf is, for the title line."""
        if self.trouble:
            return "no shelf"
        if self.shelf is None:
            return "opening the shelf"
        parts = f"{len(self.shelf):,} parts"
        marks = f" · {len(self.marks)} marked" if self.marks else ""
        return f"{self.shelf_name}: {parts}{marks}" + (" · invented demo data" if self.demo else "")
