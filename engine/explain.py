"""The full explanation of one part, written from the arrays that judged it."""

import math
from collections.abc import Iterator, Mapping, Sequence

import numpy as np

from . import show
from .check import Outcome
from .duty import duties
from .duty.base import Judged
from .evidence import Evidence
from .formula import Term
from .physics.sources import SOURCES
from .policy import POLICIES
from .rank import BLOCK, decide, prepared
from .ranking import CheckColumn, CheckExplanation, Explanation, Status, Step, Verdict
from .requirement import Requirement
from .shelf import Shelf


def explain(
    requirement: Requirement,
    shelf: Shelf,
    row: int,
    *,
    network: Mapping[str, float] | None = None,
) -> Explanation:
    """Judge the part at `row` again and tell every figure, with its working."""
    (told,) = explain_rows(requirement, shelf, [row], network=network, working=True)
    return told


def explain_rows(
    requirement: Requirement,
    shelf: Shelf,
    rows: Sequence[int],
    *,
    network: Mapping[str, float] | None = None,
    working: bool = False,
) -> Iterator[Explanation]:
    """Judge the parts at `rows` again and tell of each in turn; the steps of the working only where asked."""
    for start in range(0, len(rows), BLOCK):
        some = np.asarray(rows[start : start + BLOCK], dtype=np.intp)
        duty = duties()[requirement.duty]
        judged = duty.judge(requirement, prepared(shelf).take(some), network)
        said = duty.cautions(requirement)

        def teller_of(one: Judged, said: tuple[str, ...] = said) -> _Teller:
            return _Teller(requirement, one, said, chosen_here=network is None, working=working)

        first = teller_of(judged)
        again: dict[int, tuple[_Teller, int]] = {}
        for places, better in judged.again:
            other = teller_of(better)
            again |= {int(place): (other, j) for j, place in enumerate(places)}
        for k, row in enumerate(some):
            teller, i = again.get(k, (first, k))
            yield teller.tell(i, str(shelf.names[row]), shelf.structure_word(int(row)), str(shelf.package[row]))


class _Teller:
    """Tells of the parts of one judgement, by their place in it."""

    def __init__(
        self, req: Requirement, judged: Judged, cautions: tuple[str, ...], *, chosen_here: bool, working: bool
    ) -> None:
        self.req, self.judged, self.cautions = req, judged, cautions
        self.chosen_here, self.working = chosen_here, working
        self.columns = tuple(outcome.column() for outcome in judged.outcomes)
        self.verdict, self.evidence, self.worst, _ = decide(self.columns)
        policy = req.word("choice.derating") or "none"
        self.notes = (*req.notes, f"derating policy {policy}: {POLICIES[policy].source}")
        self.sources = _sources(judged.outcomes)

    def tell(self, i: int, name: str, structure: str, package: str) -> Explanation:
        """Everything there is to say about the part at place `i`."""
        checks = tuple(
            self._check(outcome, column, i) for outcome, column in zip(self.judged.outcomes, self.columns, strict=True)
        )
        verdict = Verdict(int(self.verdict[i]))
        chosen = {key: _number(column[i]) for key, column in self.judged.network.items()}
        chosen["tolerance"] = _number(self.req.number("resistors.tolerance"))
        return Explanation(
            duty=self.req.duty,
            part=name,
            structure=structure,
            package=package,
            verdict=verdict.words,
            evidence=Evidence(int(self.evidence[i])).word,
            says=_verdict_sentence(verdict, checks, int(self.worst[i])),
            network=chosen,
            network_says=duties()[self.req.duty].network_says(chosen, self.req, self.chosen_here),
            bounds={key: _number(column[i]) for key, column in self.judged.bounds.items()},
            checks=checks,
            cautions=self.cautions,
            notes=self.notes,
            sources=self.sources,
        )

    def _check(self, outcome: Outcome, column: CheckColumn, i: int) -> CheckExplanation:
        status = Status(int(column.status[i]))
        value, limit, headroom = float(column.value[i]), float(column.limit[i]), float(column.headroom[i])
        compared = outcome.compared
        missing = missing_symbols(i, compared.demand, compared.limit) if status == Status.UNKNOWN else ()
        return CheckExplanation(
            name=column.name,
            question=column.question,
            status=status.word,
            evidence=Evidence(int(column.evidence[i])).word,
            value=_number(value),
            limit=_number(limit),
            unit=column.unit,
            headroom=_number(headroom),
            missing=missing,
            says=_sentence(outcome, value, limit, headroom, status, missing),
            steps=tuple(_steps(i, compared.demand, compared.limit)) if self.working else (),
        )


def _number(value: float) -> float | None:
    return None if not math.isfinite(value) else float(value)


def _at(term: Term, i: int) -> float:
    """A term's value for the part at place `i`; a term of the requirement has one for all."""
    return float(term.values if term.values.ndim == 0 else term.values[i])


def _word(term: Term, i: int) -> str:
    grades = term.grades
    return Evidence(int(grades if grades.ndim == 0 else grades[i])).word


def _sentence(
    outcome: Outcome, value: float, limit: float, headroom: float, status: Status, missing: tuple[str, ...]
) -> str:
    demand, allowed = outcome.compared.demand, outcome.compared.limit
    unit = demand.unit
    if status == Status.UNKNOWN and missing:
        return f"cannot say: no {' or '.join(missing)} limit on file covers this point"
    if status == Status.UNKNOWN and not math.isnan(headroom):
        return (
            f"cannot say: {demand.symbol} {show.quantity(value, unit)} lies beyond {show.quantity(limit, unit)}, "
            "up to where it is sure without a safe area on file"
        )
    if status == Status.UNKNOWN:
        return "cannot say: a figure that it needs is not stated"
    if outcome.compared.yes_no:
        return f"{demand.symbol}: {'yes' if value else 'no'}"
    relation = "at least" if outcome.compared.at_least else "at most"
    tail = "" if math.isinf(headroom) else f" ({show.headroom(headroom)})"
    return f"{demand.symbol} {show.quantity(value, unit)}, must be {relation} {allowed.symbol} {show.quantity(limit, unit)}{tail}"


def missing_symbols(i: int, *terms: Term) -> tuple[str, ...]:
    """Symbols to look up: where the value of the part at place `i` first went missing on the way to these terms."""
    found: dict[str, None] = {}
    for term in terms:
        for step in term.walk():
            caused = any(math.isnan(_at(cause, i)) for cause in step.inputs.values())
            if math.isnan(_at(step, i)) and not caused:
                found.update(dict.fromkeys(step.looked_up))
    return tuple(found)


def _steps(i: int, *terms: Term) -> list[Step]:
    steps, seen = [], set()
    for term in terms:
        for one in term.walk():
            key = (one.symbol, _at(one, i))
            if not one.symbol or key in seen:
                continue
            seen.add(key)
            steps.append(_step(one, i))
    return steps


def _step(term: Term, i: int) -> Step:
    value = _at(term, i)
    evidence = _word(term, i)
    if term.source in ("requirement", "chosen") and not math.isnan(value):
        evidence = "stated" if term.source == "requirement" else "chosen"
    relation = numbers = ""
    source = term.source
    figures = {name: show.quantity(_at(one, i), one.unit) for name, one in term.inputs.items()}
    names = {name: one.symbol for name, one in term.inputs.items()}
    listed = ", ".join(f"{names[name]} = {figures[name]}" for name in names)
    if term.formula is not None:
        relation = term.formula.relation(names)
        numbers = term.formula.relation(figures) if term.formula.text else listed
        source = SOURCES[term.formula.source]
    elif term.inputs:
        relation, numbers, source = term.source or term.meaning, listed, ""
    return Step(term.symbol, term.meaning, relation, numbers, show.quantity(value, term.unit), evidence, source)


def _sources(outcomes: tuple[Outcome, ...]) -> tuple[str, ...]:
    used: dict[str, None] = {}
    for outcome in outcomes:
        for term in (outcome.compared.demand, outcome.compared.limit):
            used.update({SOURCES[one.formula.source]: None for one in term.walk() if one.formula is not None})
    return tuple(used)


def _verdict_sentence(verdict: Verdict, checks: tuple[CheckExplanation, ...], worst: int) -> str:
    one = checks[worst]
    if verdict == Verdict.FAILS:
        return f"fails: {one.name}: {one.says}"
    if verdict == Verdict.CANNOT_SAY:
        return f"{one.name}: {one.says}"
    tail = "" if one.headroom is None else f"; tightest: {one.name} {show.headroom(one.headroom)}"
    if verdict == Verdict.FITS_ON_TYPICALS:
        return f"fits only if a typical value holds{tail}"
    return f"fits{tail}"
