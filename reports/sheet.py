"""A calculation sheet as an ordered document of headings, paragraphs and tables: what every format writes."""

from collections.abc import Iterator
from dataclasses import dataclass
from typing import Any

from engine import show
from engine.duty import duties
from engine.part import CONDITION_UNITS, Limit
from engine.ranking import CheckExplanation, Explanation, Step
from engine.requirement import Requirement
from engine.symbols import SYMBOLS

from .program import program
from .ranking_json import explanation_object, near_misses_object


@dataclass(frozen=True, slots=True)
class Heading:
    """A heading of some depth."""

    depth: int
    text: str


@dataclass(frozen=True, slots=True)
class Paragraph:
    """A paragraph."""

    text: str


@dataclass(frozen=True, slots=True)
class Bullets:
    """A list of sentences."""

    items: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class Grid:
    """A table with its headings."""

    head: tuple[str, ...]
    rows: tuple[tuple[str, ...], ...]


Block = Heading | Paragraph | Bullets | Grid


@dataclass(frozen=True, slots=True)
class Sheet:
    """What a calculation sheet is made from, with the date that the caller gives."""

    requirement: Requirement
    told: Explanation
    fingerprint: str
    date: str
    limits: tuple[Limit, ...] = ()  # everything on file of the part, for the reader who checks


def blocks(sheet: Sheet) -> Iterator[Block]:
    """The sheet from its title to its sources."""
    told, req = sheet.told, sheet.requirement
    yield Heading(1, f"{told.part}: {req.title or req.duty}")
    yield Paragraph(f"{told.says[0].upper()}{told.says[1:]}. Evidence: {told.evidence}.")
    yield Paragraph(
        f"{told.structure or 'structure not stated'}, {told.package or 'package not stated'}. {told.network_says}."
    )
    yield Heading(2, "Requirement")
    yield Grid(("what", "value"), tuple(_requirement(req)))
    if req.notes or told.notes:
        yield Bullets(tuple(dict.fromkeys((*req.notes, *told.notes))))
    yield Heading(2, "Checks")
    yield Grid(
        ("check", "status", "value", "limit", "headroom", "evidence"), tuple(_summary(one) for one in told.checks)
    )
    if told.near_misses:
        yield Heading(2, "What alone would make it fit")
        yield Bullets(tuple(one.says for one in told.near_misses))
    yield Heading(2, "Bounds at the worst")
    units = duties()[told.duty].bound_units
    yield Grid(("bound", "value"), tuple((name, show.quantity(v, units[name])) for name, v in told.bounds.items()))
    yield Heading(2, "Working")
    seen: set[tuple[str, str]] = set()
    for one in told.checks:
        yield Heading(3, one.name)
        yield Paragraph(f"{one.question} {one.says[0].upper()}{one.says[1:]}.")
        rows = tuple(_step(step) for step in one.steps if not _repeated(step, seen))
        if rows:
            yield Grid(("quantity", "relation", "with numbers", "result", "evidence"), rows)
    if sheet.limits:
        yield Heading(2, "Limits on file")
        yield Grid(("symbol", "min", "typ", "max", "at", "source"), tuple(_limit(limit) for limit in sheet.limits))
    yield Heading(2, "Cautions")
    yield Bullets(told.cautions)
    yield Heading(2, "Laws and sources")
    yield Bullets(told.sources)
    yield Paragraph(f"{program()}, shelf {sheet.fingerprint}, {sheet.date}.")


def sheet_object(sheet: Sheet) -> dict[str, Any]:
    """The same as an object for scripts."""
    told, req = sheet.told, sheet.requirement
    return {
        "program": program(),
        "date": sheet.date,
        "shelf": {"fingerprint": sheet.fingerprint},
        "requirement": {
            "title": req.title,
            "duty": req.duty,
            **{k: list(v) if isinstance(v, tuple) else v for k, v in req.values.items()},
        },
        "part": told.part,
        "structure": told.structure,
        "package": told.package,
        "verdict": told.verdict,
        "evidence": told.evidence,
        "says": told.says,
        "network_says": told.network_says,
        **explanation_object(told),
        "near_misses": near_misses_object(told),
        "steps": {
            one.name: [{name: getattr(step, name) for name in Step.__slots__} for step in one.steps]
            for one in told.checks
        },
        "cautions": list(told.cautions),
        "notes": list(told.notes),
        "sources": list(told.sources),
    }


def _requirement(req: Requirement) -> Iterator[tuple[str, str]]:
    for one in duties()[req.duty].fields:
        value = req.values.get(one.key)
        if value is None or value == ():
            continue
        shown = (
            show.quantity(value, one.unit)
            if isinstance(value, int | float)
            else ", ".join(value)
            if isinstance(value, tuple)
            else value
        )
        yield f"{one.label} ({one.key})", shown


def _summary(one: CheckExplanation) -> tuple[str, ...]:
    room = "–" if one.headroom is None else show.headroom(one.headroom)
    value, limit = show.quantity(one.value, one.unit), show.quantity(one.limit, one.unit)
    return one.name, one.status, value, limit, room, one.evidence


def _step(step: Step) -> tuple[str, ...]:
    relation = step.relation or f"given: {step.source or step.meaning}"
    return (
        f"{step.symbol}, {step.meaning}" if step.meaning else step.symbol,
        relation,
        step.numbers,
        step.result,
        step.evidence,
    )


def _limit(limit: Limit) -> tuple[str, ...]:
    unit = SYMBOLS[limit.symbol].unit if limit.symbol in SYMBOLS else ""
    bounds = ("" if value is None else show.quantity(value, unit) for value in (limit.min, limit.typ, limit.max))
    stated = [f"{name.upper()} {show.quantity(value, CONDITION_UNITS[name])}" for name, value in limit.conditions]
    at = ", ".join([*stated, *(["pulsed"] if limit.pulsed else []), *([limit.note] if limit.note else [])])
    return limit.symbol, *bounds, at, limit.source


def _repeated(step: Step, seen: set[tuple[str, str]]) -> bool:
    """A figure that was worked out further up is not worked out again."""
    key = (step.symbol, step.result)
    if key in seen:
        return True
    seen.add(key)
    return False
