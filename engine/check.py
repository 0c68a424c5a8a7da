"""Checks: one question about every part, answered by comparing what is demanded with what is allowed."""

import importlib
import pkgutil
from collections.abc import Callable
from dataclasses import dataclass
from functools import cache
from typing import Any

import numpy as np
from numpy.typing import NDArray

from .evidence import Evidence, Grades
from .formula import Term
from .ranking import CheckColumn, Status

Floats = NDArray[np.float64]
SLACK = 1e-9  # a part exactly at its limit passes


@dataclass(frozen=True, eq=False)
class Compared:
    """What a check found. Terms of shape (n,) or ()."""

    demand: Term  # what the circuit does or needs
    limit: Term  # what the part or the requirement allows
    at_least: bool = False  # the value must reach the limit instead of staying below it
    undecided: NDArray[np.bool_] | None = None  # parts for which exceeding the limit proves nothing: unknown
    yes_no: bool = False  # a question without a margin: the demand is 1 for yes and 0 for no


@dataclass(frozen=True)
class Check:
    """One check: its name, the question it answers and the duties it belongs to."""

    name: str
    question: str
    duties: frozenset[str]
    compare: Callable[[Any], Compared | None]  # None: the requirement does not ask
    chosen: bool  # whether another network could change the answer


@dataclass(frozen=True, eq=False)
class Outcome:
    """A check with its comparison over the parts."""

    check: Check
    compared: Compared
    headroom: Floats
    status: NDArray[np.int8]
    evidence: Grades

    def column(self) -> CheckColumn:
        """The outcome without its terms."""
        n = len(self.headroom)
        value, limit = (
            np.broadcast_to(t.values, n).astype(np.float64) for t in (self.compared.demand, self.compared.limit)
        )
        unit = self.compared.demand.unit
        return CheckColumn(
            self.check.name, self.check.question, unit, value, limit, self.headroom, self.status, self.evidence
        )


def check(name: str, *duties: str, chosen: bool = False) -> Callable[[Callable[[Any], Compared | None]], Check]:
    """Make a check of a function; the first line of its docstring is the question it answers."""

    def register(compare: Callable[[Any], Compared | None]) -> Check:
        question = (compare.__doc__ or "").strip().splitlines()[0]
        return Check(name, question, frozenset(duties), compare, chosen)

    return register


@cache
def checks(duty: str) -> tuple[Check, ...]:
    """The checks of a duty, in the order of their file names, found by importing the folder."""
    package = importlib.import_module(f"{__package__}.checks")
    found = []
    for info in sorted(pkgutil.iter_modules(package.__path__), key=lambda one: one.name):
        module = importlib.import_module(f"{package.__name__}.{info.name}")
        found += [one for one in vars(module).values() if isinstance(one, Check) and duty in one.duties]
    return tuple(found)


def run(one: Check, case: object, n: int) -> Outcome | None:
    """Answer one check for all `n` parts; None when the requirement does not ask."""
    compared = one.compare(case)
    if compared is None:
        return None
    demand, limit = (np.broadcast_to(term.values, n) for term in (compared.demand, compared.limit))
    with np.errstate(all="ignore"):
        headroom = demand / limit if compared.at_least else limit / demand
        nothing = (limit <= 0) if compared.at_least else (demand <= 0)
        headroom = np.where(nothing & ~np.isnan(demand) & ~np.isnan(limit), np.inf, headroom)
        headroom = np.where(headroom < 0, 0.0, headroom)
    if compared.yes_no:
        headroom = np.where(np.isnan(demand), np.nan, np.where(demand >= 1, np.inf, 0.0))
    status = np.where(headroom >= 1 - SLACK, Status.PASS, Status.FAIL)
    if compared.undecided is not None:
        status = np.where((status == Status.FAIL) & compared.undecided, Status.UNKNOWN, status)
    status = np.where(np.isnan(headroom), Status.UNKNOWN, status).astype(np.int8)
    evidence = np.maximum(np.broadcast_to(compared.demand.grades, n), np.broadcast_to(compared.limit.grades, n))
    evidence = np.where(status == Status.UNKNOWN, np.int8(Evidence.MISSING), evidence).astype(np.int8)
    return Outcome(one, compared, headroom, status, evidence)
