"""The full explanation of one part, written from the arrays that judged it."""

import math
from collections.abc import Mapping

import numpy as np

from . import show
from .check import Outcome
from .duty import duties
from .evidence import Evidence
from .formula import Term
from .physics.sources import SOURCES
from .policy import POLICIES
from .rank import decide, prepared
from .ranking import CheckExplanation, Explanation, Status, Step, Verdict
from .requirement import Requirement
from .shelf import Shelf


def explain(
    requirement: Requirement,
    shelf: Shelf,
    row: int,
    *,
    network: Mapping[str, float] | None = None,
) -> Explanation:
    """Judge the part at `row` again and tell every figure."""
    duty = duties()[requirement.duty]
    one = slice(row, row + 1)
    judged = duty.judge(requirement, prepared(shelf).take(one), shelf.take(one), network)
    verdict, evidence, worst, _ = decide(tuple(outcome.column() for outcome in judged.outcomes))
    checks = tuple(_check(outcome) for outcome in judged.outcomes)
    chosen = {name: _number(column[0]) for name, column in judged.network.items()}
    chosen["tolerance"] = _number(requirement.number("resistors.tolerance"))
    policy = requirement.word("choice.derating") or "none"
    return Explanation(
        part=str(shelf.names[row]),
        structure=shelf.structure_word(row),
        package=str(shelf.package[row]),
        verdict=Verdict(int(verdict[0])).words,
        evidence=Evidence(int(evidence[0])).word,
        says=_verdict_sentence(Verdict(int(verdict[0])), checks, int(worst[0])),
        network=chosen,
        network_says=_network_sentence(chosen, requirement, chosen_here=network is None),
        bounds={name: _number(column[0]) for name, column in judged.bounds.items()},
        checks=checks,
        cautions=duty.cautions(requirement),
        notes=(*requirement.notes, f"derating policy {policy}: {POLICIES[policy].source}"),
        sources=_sources(judged.outcomes),
    )


def _number(value: float) -> float | None:
    return None if not math.isfinite(value) else float(value)


def _check(outcome: Outcome) -> CheckExplanation:
    column = outcome.column()
    status = Status(int(column.status[0]))
    value, limit, headroom = float(column.value[0]), float(column.limit[0]), float(column.headroom[0])
    compared = outcome.compared
    missing = missing_symbols(compared.demand, compared.limit) if status == Status.UNKNOWN else ()
    return CheckExplanation(
        name=column.name,
        question=column.question,
        status=status.word,
        evidence=Evidence(int(column.evidence[0])).word,
        value=_number(value),
        limit=_number(limit),
        unit=column.unit,
        headroom=_number(headroom),
        missing=missing,
        says=_sentence(outcome, value, limit, headroom, status, missing),
        steps=tuple(_steps(compared.demand, compared.limit)),
    )


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


def missing_symbols(*terms: Term) -> tuple[str, ...]:
    """Symbols to look up: where a value first went missing on the way to these terms."""
    found: dict[str, None] = {}
    for term in terms:
        for step in term.walk():
            silent = bool(np.isnan(np.ravel(step.values)[0]))
            caused = any(np.isnan(np.ravel(cause.values)[0]) for cause in step.inputs.values())
            if silent and not caused:
                found.update(dict.fromkeys(step.looked_up))
    return tuple(found)


def _steps(*terms: Term) -> list[Step]:
    steps, seen = [], set()
    for term in terms:
        for one in term.walk():
            key = (one.symbol, float(np.ravel(one.values)[0]))
            if id(one) in seen or key in seen or not one.symbol:
                continue
            seen |= {id(one), key}
            steps.append(_step(one))
    return steps


def _step(term: Term) -> Step:
    value = float(np.ravel(term.values)[0])
    evidence = Evidence(int(np.ravel(term.grades)[0])).word
    if term.source in ("requirement", "chosen") and not math.isnan(value):
        evidence = "stated" if term.source == "requirement" else "chosen"
    relation = numbers = ""
    source = term.source
    if term.formula is not None:
        names = {name: one.symbol for name, one in term.inputs.items()}
        figures = {name: show.quantity(float(np.ravel(one.values)[0]), one.unit) for name, one in term.inputs.items()}
        relation = term.formula.relation(names)
        text = term.formula.text
        numbers = term.formula.relation(figures) if text else ", ".join(f"{names[n]} = {figures[n]}" for n in names)
        source = SOURCES[term.formula.source]
    elif term.inputs:
        relation = term.source or term.meaning
        numbers = ", ".join(
            f"{one.symbol} = {show.quantity(float(np.ravel(one.values)[0]), one.unit)}" for one in term.inputs.values()
        )
        source = ""
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


def _network_sentence(network: Mapping[str, float | None], req: Requirement, *, chosen_here: bool) -> str:
    rb, rbe, low, high = (network.get(name) for name in ("rb", "rbe", "rb_low", "rb_high"))
    if rb is None:
        return "no base resistor can be chosen"
    series, tol = req.word("resistors.series"), req.number("resistors.tolerance")
    made = f"RB {show.quantity(rb, 'Ω')}" + (f", RBE {show.quantity(rbe, 'Ω')}" if rbe is not None else ", no RBE")
    how = f"{made} ({series}, ±{tol * 100:g} %)" if chosen_here else f"{made} (given)"
    if low is None or high is None:
        return f"{how}; the window of RB cannot be stated"
    if high < low:
        return (
            f"{how}; the window of RB is empty: the driver and the base need at least {show.quantity(low, 'Ω')}, "
            f"saturation at most {show.quantity(max(high, 0.0), 'Ω')}"
        )
    return f"{how}; window of RB {show.quantity(low, 'Ω')} to {show.quantity(high, 'Ω')}"
