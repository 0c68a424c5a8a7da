"""What judging gives back: columns over the parts of a shelf, and the full explanation of one part."""

from collections.abc import Mapping
from dataclasses import dataclass
from enum import IntEnum
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from .evidence import Grades
from .pareto import pareto_front
from .requirement import Requirement
from .shelf import Shelf

Floats = NDArray[np.float64]


class Verdict(IntEnum):
    """What may be promised of a part; larger is worse."""

    FITS = 0
    FITS_ON_TYPICALS = 1
    CANNOT_SAY = 2
    FAILS = 3

    @property
    def words(self) -> str:
        return self.name.lower().replace("_", " ")


class Status(IntEnum):
    """The outcome of one check; larger is worse."""

    PASS = 0
    UNKNOWN = 1
    FAIL = 2

    @property
    def word(self) -> str:
        return self.name.lower()


@dataclass(frozen=True, eq=False)
class CheckColumn:
    """One check over all parts. Shapes (n,)."""

    name: str  # "base drive"
    question: str  # the question it answers
    unit: str  # SI unit of value and limit
    value: Floats  # what the requirement demands of the part
    limit: Floats  # what the part allows
    headroom: Floats  # limit ÷ demand, or its mirror where the demand must be exceeded; 1 = at the limit
    status: NDArray[np.int8]  # `Status`
    evidence: Grades


@dataclass(frozen=True, eq=False)
class Ranking:
    """Every part of a shelf judged under one requirement. All arrays have shape (n,)."""

    requirement: Requirement
    policy: str
    shelf: Shelf
    checks: tuple[CheckColumn, ...]
    network: Mapping[str, Floats]  # names of the duty, SI; NaN: none, or none possible
    bounds: Mapping[str, Floats]  # names of the contract: "vce_on_max", …; NaN: cannot be stated
    verdict: NDArray[np.int8]  # `Verdict`
    evidence: Grades  # weakest figure of the verdict
    worst: NDArray[np.int16]  # index in `checks` of the check that decides: failing, unknown or tightest
    headroom: Floats  # of the tightest check, NaN when one is unknown
    score: Floats  # overall desirability, 0…1; 0 unless the part fits
    desirability: Mapping[str, Floats]  # criterion → 0…1
    order: NDArray[np.intp]  # indices of parts, best first

    @cached_property
    def pareto(self) -> NDArray[np.bool_]:
        """Parts that fit and that no other fitting part beats in one criterion without losing in another."""
        fitting = np.flatnonzero(self.verdict <= Verdict.FITS_ON_TYPICALS)
        front = np.zeros(len(self.verdict), dtype=bool)
        front[fitting] = pareto_front(np.column_stack([d[fitting] for d in self.desirability.values()]))
        return front

    def count(self, verdict: Verdict) -> int:
        """How many parts have this verdict."""
        return int(np.count_nonzero(self.verdict == verdict))

    def index(self, type_number: str) -> int:
        """The row of the part called `type_number`. Raises KeyError."""
        return self.shelf.index(type_number)


@dataclass(frozen=True, slots=True)
class Step:
    """One line of a calculation: the relation in words, with its numbers, and the result."""

    symbol: str  # what is computed, as printed: "IB min"
    meaning: str
    relation: str  # "(VOH min − VBE max) ÷ RB max"; empty for a value read from the sheet or requirement
    numbers: str  # the same with this part's numbers
    result: str  # "1.1 mA"
    evidence: str  # word of the grade
    source: str  # law or document the figure comes from


@dataclass(frozen=True, slots=True)
class CheckExplanation:
    """One check of one part, with its working."""

    name: str
    question: str
    status: str  # "pass", "fail", "unknown"
    evidence: str
    value: float | None
    limit: float | None
    unit: str
    headroom: float | None
    missing: tuple[str, ...]  # symbols to look up
    says: str  # one sentence with the two numbers
    steps: tuple[Step, ...]


@dataclass(frozen=True, slots=True)
class NearMiss:
    """One change that alone would do."""

    change: str  # dotted place in the requirement file, or "part." and a symbol
    was: float | None  # None where nothing is stated or on file
    to: float
    unit: str
    says: str
    conditions: tuple[tuple[str, float], ...] = ()  # of a value of the part


@dataclass(frozen=True, slots=True)
class Explanation:
    """Everything there is to say about one part under one requirement."""

    duty: str
    part: str
    structure: str
    package: str
    verdict: str
    evidence: str
    says: str  # the verdict in one sentence
    network: Mapping[str, float | None]  # names of the duty, and "tolerance"
    network_says: str
    bounds: Mapping[str, float | None]
    checks: tuple[CheckExplanation, ...]
    cautions: tuple[str, ...]
    notes: tuple[str, ...]  # defaults taken, allowances made
    sources: tuple[str, ...]  # full references of the laws and sheets used
    near_misses: tuple[NearMiss, ...] = ()  # what alone would make it fit; empty where nobody asked or nothing would
