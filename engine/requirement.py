"""A requirement: what the load must do, stated in fields that its duty declares; frozen and validated.

A duty declares its `Field`s once; the form, the requirement file, the validation and the words that
name a field all come from that declaration.
"""

from collections.abc import Mapping
from dataclasses import dataclass, field, replace
from types import MappingProxyType

Value = float | str | tuple[str, ...]
"""A number in SI units (°C for temperatures), a word, or a list of words."""


@dataclass(frozen=True, slots=True)
class Field:
    """One thing a requirement of a duty can state."""

    key: str  # dotted place in the requirement file, such as "supply.min"
    label: str  # short name for the form
    unit: str  # SI unit; "°C" for a temperature; "" for a ratio or a word
    meaning: str  # one sentence for help
    required: bool = False
    default: Value | None = None
    choices: tuple[str, ...] = ()  # the words allowed; empty for a number
    low: float | None = None  # smallest value that makes sense
    high: float | None = None  # largest value that makes sense
    shown_if: tuple[str, tuple[str, ...]] | None = None  # only where that field has one of these words
    words: bool = False  # a word (with choices, or free) instead of a number
    many: bool = False  # a list of words


@dataclass(frozen=True, slots=True)
class Problem:
    """What is wrong with one field, and how to mend it."""

    key: str
    value: str  # what stands there, empty when nothing does
    says: str  # what is wrong
    mend: str  # what to do

    def __str__(self) -> str:
        found = f" is {self.value!r}" if self.value else ""
        return f"{self.key}{found}: {self.says}. {self.mend}."


class RequirementError(ValueError):
    """A requirement that cannot be judged; carries every problem found, not just the first."""

    def __init__(self, problems: tuple[Problem, ...]) -> None:
        super().__init__(" ".join(str(problem) for problem in problems))
        self.problems = problems


@dataclass(frozen=True, eq=False)
class Requirement:
    """A requirement ready to judge: every field of its duty with a value, or absent when not asked."""

    duty: str
    title: str
    values: Mapping[str, Value] = field(default_factory=dict)
    notes: tuple[str, ...] = ()  # defaults taken and things the user should know
    implied: frozenset[str] = frozenset()  # keys that nobody stated: they follow from others and change with them

    def __post_init__(self) -> None:
        object.__setattr__(self, "values", MappingProxyType(dict(self.values)))

    def number(self, key: str) -> float:
        """The number at `key`; NaN where the requirement does not state it."""
        value = self.values.get(key)
        return float(value) if isinstance(value, int | float) else float("nan")

    def word(self, key: str) -> str:
        """The word at `key`; empty where the requirement does not state it."""
        value = self.values.get(key)
        return value if isinstance(value, str) else ""

    def words(self, key: str) -> tuple[str, ...]:
        """The list of words at `key`; empty where the requirement does not state it."""
        value = self.values.get(key)
        return value if isinstance(value, tuple) else ()

    def has(self, key: str) -> bool:
        """Whether the requirement states `key`."""
        return self.values.get(key) is not None

    def with_value(self, key: str, value: Value) -> "Requirement":
        """The same requirement with one value changed (not validated again)."""
        return replace(self, values={**self.values, key: value})


def validate(fields: tuple[Field, ...], values: Mapping[str, Value]) -> tuple[Problem, ...]:
    """Problems of `values` against `fields`: unknown keys, missing, out of range, unknown words."""
    known = {one.key: one for one in fields}
    problems = [
        Problem(key, str(value), "not a field of this duty", f"Use one of: {_nearest(key, known)}")
        for key, value in values.items()
        if key not in known
    ]
    for one in fields:
        value = values.get(one.key)
        if value is None:
            if one.required and _asked(one, values):
                problems.append(Problem(one.key, "", "missing", f"State {one.meaning[0].lower()}{one.meaning[1:]}"))
            continue
        problems.extend(_misfit(one, value))
    return tuple(problems)


def with_defaults(fields: tuple[Field, ...], values: Mapping[str, Value]) -> dict[str, Value]:
    """`values` completed with the defaults of the fields that are asked and not stated."""
    full = dict(values)
    for one in fields:
        if one.key not in full and one.default is not None and _asked(one, full):
            full[one.key] = one.default
    return full


def _asked(one: Field, values: Mapping[str, Value]) -> bool:
    return one.shown_if is None or values.get(one.shown_if[0]) in one.shown_if[1]


def _misfit(one: Field, value: Value) -> list[Problem]:
    if one.many:
        if not isinstance(value, tuple):
            return [Problem(one.key, str(value), "a list of words is wanted", 'Write ["TO-92", "SOT-23"]')]
        return []
    if one.words:
        if not isinstance(value, str) or (one.choices and value not in one.choices):
            return [
                Problem(
                    one.key,
                    str(value),
                    "not a word that is known here",
                    f"Use one of: {', '.join(one.choices)}",
                )
            ]
        return []
    if isinstance(value, str | tuple) or value != value or value in (float("inf"), float("-inf")):
        return [
            Problem(
                one.key,
                str(value),
                "a number is wanted",
                f"Write a number with its unit ({one.unit or 'none'})",
            )
        ]
    if one.low is not None and value < one.low:
        return [
            Problem(
                one.key,
                f"{value:g} {one.unit}".strip(),
                f"below {one.low:g} {one.unit}".strip(),
                "Check the unit",
            )
        ]
    if one.high is not None and value > one.high:
        return [
            Problem(
                one.key,
                f"{value:g} {one.unit}".strip(),
                f"above {one.high:g} {one.unit}".strip(),
                "Check the unit",
            )
        ]
    return []


def _nearest(key: str, known: Mapping[str, Field]) -> str:
    head = key.split(".")[0]
    near = [other for other in known if other.split(".")[0] == head]
    return ", ".join(near or known)
