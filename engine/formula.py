"""Numbers that know where they came from.

A `Formula` is a law: code, the same relation in words, and its source. Called with `Term`s it gives a
`Term` that remembers them, so a calculation sheet is written from the very arrays that judged a part,
and evidence combines by itself.
"""

import re
from collections.abc import Callable, Mapping
from dataclasses import dataclass, field, replace
from types import MappingProxyType

import numpy as np
from numpy.typing import NDArray

from .evidence import Evidence, Grades, weakest

Floats = NDArray[np.float64]
_NO_TERMS: Mapping[str, "Term"] = MappingProxyType({})


@dataclass(frozen=True, eq=False)
class Term:
    """A quantity over the parts: shape (n,) for parts, () for what the requirement fixes."""

    symbol: str  # as printed: "IB min"
    values: Floats
    unit: str
    evidence: Grades | Evidence = Evidence.GUARANTEED
    meaning: str = ""
    source: str = ""  # where a value that is not computed comes from
    looked_up: tuple[str, ...] = ()  # symbols a sheet must state for this value
    formula: "Formula | None" = None
    inputs: Mapping[str, "Term"] = field(default_factory=lambda: _NO_TERMS)

    @property
    def grades(self) -> Grades:
        """The evidence, with MISSING wherever there is no value. Broadcast to the shape of the values."""
        return np.where(np.isnan(self.values), np.int8(Evidence.MISSING), self.evidence).astype(np.int8)

    def named(self, symbol: str, meaning: str = "") -> "Term":
        """The same numbers under another name."""
        return replace(self, symbol=symbol, meaning=meaning or self.meaning)

    def take(self, rows: NDArray[np.intp]) -> "Term":
        """The numbers of some of the parts, without what they were made of."""
        evidence = np.asarray(self.evidence, dtype=np.int8)
        return Term(
            self.symbol,
            self.values if self.values.ndim == 0 else self.values[rows],
            self.unit,
            evidence if evidence.ndim == 0 else evidence[rows],
            self.meaning,
        )

    def put(self, rows: NDArray[np.intp], other: "Term", n: int) -> "Term":
        """These numbers for `n` parts, but those of `other` for the parts at `rows`."""
        values = np.broadcast_to(self.values, n).copy()
        evidence = np.broadcast_to(np.asarray(self.evidence, dtype=np.int8), n).copy()
        values[rows], evidence[rows] = other.values, np.asarray(other.evidence, dtype=np.int8)
        return replace(self, values=values, evidence=evidence)

    def walk(self) -> list["Term"]:
        """This term and all it was made of, each once, causes before effects."""
        seen: dict[int, Term] = {}
        _visit(self, seen)
        return list(seen.values())


def _visit(term: Term, seen: dict[int, Term]) -> None:
    if id(term) in seen:
        return
    for cause in term.inputs.values():
        _visit(cause, seen)
    seen[id(term)] = term


def given(symbol: str, value: float, unit: str, meaning: str = "") -> Term:
    """A number of the requirement, the same for all parts."""
    return Term(symbol, np.asarray(value, dtype=np.float64), unit, meaning=meaning, source="requirement")


@dataclass(frozen=True)
class Formula:
    """A law with its words. `raw` is the plain function on floats or arrays; calling traces."""

    raw: Callable[..., Floats]
    symbol: str
    unit: str
    meaning: str
    text: str  # the relation in plain operators over the argument names; empty when it is an algorithm
    words: str  # the algorithm in words, where there is no text
    source: str  # key of physics.sources.SOURCES
    floor: Evidence  # the best grade a result can have

    def __call__(self, symbol: str = "", meaning: str = "", **terms: Term) -> Term:
        with np.errstate(all="ignore"):  # NaN and infinity are answers here: silence, and no demand
            values = self.raw(**{name: term.values for name, term in terms.items()})
        grades = weakest(self.floor, *(term.evidence for term in terms.values()))
        return Term(
            symbol or self.symbol,
            np.asarray(values, dtype=np.float64),
            self.unit,
            grades,
            meaning or self.meaning,
            formula=self,
            inputs=terms,
        )

    def traced(
        self,
        values: Floats,
        evidence: Grades | Evidence,
        looked_up: tuple[str, ...] = (),
        symbol: str = "",
        meaning: str = "",
        **terms: Term,
    ) -> Term:
        """A result that was worked out over points of the sheets, with the terms that went in besides them."""
        grades = weakest(self.floor, evidence, *(term.evidence for term in terms.values()))
        name, what = symbol or self.symbol, meaning or self.meaning
        return Term(name, values, self.unit, grades, what, looked_up=looked_up, formula=self, inputs=terms)

    def relation(self, names: Mapping[str, str]) -> str:
        """The relation with each argument replaced by what `names` calls it."""
        if not self.text:
            return self.words
        shown = re.sub(r"\b[A-Za-z_]\w*\b", lambda m: names.get(m.group(), m.group()), self.text)
        return shown.replace("**", "^").replace("*", "×").replace("/", "÷").replace("-", "−")


FORMULAS: dict[str, Formula] = {}
"""Every law by its module and function name, for the tests that hold words against code."""


def formula(
    symbol: str, unit: str, meaning: str, *, text: str = "", words: str = "", source: str, exact: bool = False
) -> Callable[[Callable[..., Floats]], Formula]:
    """Make a law of a function. `exact` keeps the grade of the inputs (definitions and circuit laws)."""

    def register(raw: Callable[..., Floats]) -> Formula:
        floor = Evidence.GUARANTEED if exact else Evidence.DERIVED
        law = Formula(raw, symbol, unit, meaning, text, words, source, floor)
        FORMULAS[f"{raw.__module__}.{raw.__name__}"] = law
        return law

    return register
