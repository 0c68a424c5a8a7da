"""Requirement files (TOML) and the texts of a form, read by the same path into a validated requirement."""

import tomllib
from collections.abc import Mapping
from dataclasses import dataclass, field
from difflib import get_close_matches
from typing import Any

from engine.duty import duties
from engine.duty.base import Duty
from engine.rank import DEFAULT_WEIGHTS
from engine.requirement import Field, Problem, Requirement, RequirementError, Value, validate, with_defaults

from .quantities import QuantityError, read_quantity


@dataclass(frozen=True, eq=False)
class RequirementFile:
    """A requirement with the weights that its file gives, and the text itself."""

    requirement: Requirement
    weights: Mapping[str, float] = field(default_factory=dict)
    text: str = ""


def read_requirement(text: str, file: str = "") -> RequirementFile:
    """A requirement file's text. Raises RequirementError with every problem, each naming the field."""
    try:
        document = tomllib.loads(text)
    except tomllib.TOMLDecodeError as error:
        raise RequirementError((Problem(file or "file", "", f"not TOML: {error}", "Mend that line"),)) from error
    name = document.pop("duty", None)
    title = document.pop("title", "")
    weights, problems = _weights(document.pop("weights", {}))
    duty = duties().get(name) if isinstance(name, str) else None
    if duty is None:
        known = ", ".join(sorted(duties()))
        raise RequirementError((Problem("duty", str(name or ""), "not a duty that is known", f"Use one of: {known}"),))
    flat: dict[str, Any] = {}
    for key, value in document.items():
        if isinstance(value, dict):
            flat.update({f"{key}.{inner}": one for inner, one in value.items()})
        else:
            flat[key] = value
    requirement = _build(duty, str(title), flat, problems)
    return RequirementFile(requirement, weights, text)


def parse_fields(duty: str, texts: Mapping[str, str], *, title: str = "") -> Requirement:
    """A requirement from the texts of a form, by dotted key; an empty text is not stated. Raises RequirementError."""
    stated = {key: text.strip() for key, text in texts.items() if text.strip()}
    return _build(duties()[duty], title, stated, [])


def to_toml(requirement: Requirement, weights: Mapping[str, float] | None = None) -> str:
    """A requirement file that reads back as the same requirement."""
    known = duties()[requirement.duty]
    tables: dict[str, list[str]] = {
        "": [f"title = {_quoted(requirement.title)}", f"duty = {_quoted(requirement.duty)}"]
    }
    for one in known.fields:
        value = requirement.values.get(one.key)
        if value is None or value == () or value == one.default:
            continue
        table, _, name = one.key.rpartition(".")
        tables.setdefault(table, []).append(f"{name} = {_written(one, value)}")
    if weights:
        tables["weights"] = [f"{_quoted(name)} = {value!r}" for name, value in weights.items()]
    blocks = ["\n".join(([f"[{name}]"] if name else []) + lines) for name, lines in tables.items()]
    return "\n\n".join(blocks) + "\n"


def _build(duty: Duty, title: str, stated: Mapping[str, Any], problems: list[Problem]) -> Requirement:
    """Read, validate and complete; every problem is collected before any is raised."""
    known = {one.key: one for one in duty.fields}
    values: dict[str, Value] = {}
    for key, raw in stated.items():
        one = known.get(key)
        if one is None:
            near = get_close_matches(key, known, n=1, cutoff=0.4)
            mend = f"Did you mean {near[0]}?" if near else f"Known are {', '.join(known)}"
            problems.append(Problem(key, str(raw), "not a field of this duty", mend.rstrip("?.")))
            continue
        try:
            values[key] = _value(one, raw)
        except QuantityError as error:
            problems.append(Problem(key, str(raw), error.says, error.mend[0].upper() + error.mend[1:]))
    unread = {one.key for one in problems}
    full = with_defaults(duty.fields, values)
    problems += [one for one in validate(duty.fields, full) if one.key not in unread]
    completed, more, notes = duty.complete(full)
    said = {one.key for one in problems}
    problems += [one for one in more if one.key not in said]
    problems += [one for one in validate(duty.fields, completed) if one.key not in said | {m.key for m in more}]
    if problems:
        raise RequirementError(tuple(dict.fromkeys(problems)))
    return Requirement(duty.name, title, completed, tuple(notes), frozenset(completed.keys() - full.keys()))


def _value(one: Field, raw: Any) -> Value:
    if one.many:
        words = raw.split(",") if isinstance(raw, str) else raw
        if not isinstance(words, list | tuple) or not all(isinstance(word, str) for word in words):
            raise QuantityError("a list of words is wanted", 'write ["TO-92", "SOT-23"]')
        return tuple(word.strip() for word in words if word.strip())
    if one.words:
        return str(raw)
    if isinstance(raw, bool) or not isinstance(raw, str | int | float):
        raise QuantityError("a quantity is wanted", f"write a number with its unit ({one.unit or 'none'})")
    return read_quantity(raw, one.unit) if isinstance(raw, str) else float(raw)


def _weights(table: Any) -> tuple[dict[str, float], list[Problem]]:
    if not isinstance(table, dict):
        return {}, [
            Problem("weights", str(table), "a table is wanted", "Write [weights] and a line for each criterion")
        ]
    weights, problems = {}, []
    for name, value in table.items():
        if name not in DEFAULT_WEIGHTS:
            known = ", ".join(DEFAULT_WEIGHTS)
            problems.append(Problem(f"weights.{name}", str(value), "not a criterion", f"Use one of: {known}"))
        elif isinstance(value, bool) or not isinstance(value, int | float) or not 0 <= value < 1e6:
            problems.append(Problem(f"weights.{name}", str(value), "not a weight", "Write a number from 0 up"))
        else:
            weights[name] = float(value)
    return weights, problems


def _quoted(text: str) -> str:
    escaped = text.replace("\\", "\\\\").replace('"', '\\"')
    return '"' + "".join(c if c >= " " else f"\\u{ord(c):04x}" for c in escaped) + '"'


def _written(one: Field, value: Value) -> str:
    if isinstance(value, tuple):
        return "[" + ", ".join(_quoted(word) for word in value) + "]"
    if isinstance(value, str):
        return _quoted(value)
    unit = {"°C": "degC", "Ω": "ohm"}.get(one.unit, one.unit)
    return _quoted(f"{value!r} {unit}") if unit else repr(float(value))
