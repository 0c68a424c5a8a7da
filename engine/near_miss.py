"""The least change that makes a part fit: one demand of the requirement eased, or one value found on a sheet.

Solved, not guessed: each change is judged like any requirement, and narrowed down until it fits while one that
goes less far does not.
"""

from collections.abc import Callable
from dataclasses import replace

import numpy as np

from .duty import duties
from .duty.base import Lever, Reading
from .explain import explain_rows
from .part import Part
from .rank import prepared, rank
from .ranking import NearMiss, Verdict
from .requirement import Requirement, Value
from .shelf import Shelf
from .show import quantity

CLOSE = 1.004  # ratio between the value that fits and the one that does not
FIGURES = 4


def near_misses(requirement: Requirement, part: Part) -> tuple[NearMiss, ...]:
    """Every single change that turns the verdict of `part` into "fits", the easiest first; none where it fits."""
    shelf = Shelf.from_parts([part])
    duty = duties()[requirement.duty]
    if _fits(requirement, shelf) or not duty.eligible(requirement, prepared(shelf))[0]:
        return ()
    (told,) = explain_rows(requirement, shelf, [0])
    silent = {symbol for one in told.checks for symbol in one.missing}
    stated = {one.symbol for one in part.limits}
    found = [_eased(requirement, shelf, lever) for lever in duty.levers]
    found += [
        _looked_up(requirement, part, reading)
        for reading in duty.readings(requirement)
        if reading.symbol in silent | {"hFE"} or reading.symbol not in stated
    ]
    return tuple(sorted((one for one in found if one), key=_effort))


def restated(requirement: Requirement, key: str, value: Value) -> Requirement | None:
    """The requirement as its file would read with `value` at `key`; None where that makes no sense."""
    stated = {k: v for k, v in requirement.values.items() if k not in requirement.implied}
    full, problems, notes = duties()[requirement.duty].complete({**stated, key: value})
    if problems:
        return None
    return replace(requirement, values=full, notes=tuple(notes), implied=requirement.implied - {key})


def _effort(one: NearMiss) -> float:
    """How far the change goes, as a ratio; looking up a value comes first."""
    if one.was is None:
        return 1.0 if one.change.startswith("part.") else 3.0
    return max(one.to / one.was, one.was / one.to) if one.was > 0 and one.to > 0 else 3.0


def _fits(requirement: Requirement, shelf: Shelf) -> bool:
    return bool(rank(requirement, shelf).verdict[0] == Verdict.FITS)


def _eased(requirement: Requirement, shelf: Shelf, lever: Lever) -> NearMiss | None:
    """The least easing of one demand."""
    asked, end = lever.span(requirement)
    if np.isnan(asked) or np.isnan(end) or asked == end:
        return None

    def fits(value: float) -> bool:
        other = restated(requirement, lever.key, value)
        return other is not None and _fits(other, shelf)

    if not fits(end):
        return None
    to = asked if fits(asked) else _narrowed(fits, good=end, bad=asked)
    was = requirement.number(lever.key)
    instead = "" if np.isnan(was) else f" instead of {quantity(was, lever.unit)}"
    says = f"{lever.says} {quantity(to, lever.unit)}{instead}"
    return NearMiss(lever.key, None if np.isnan(was) else was, to, lever.unit, says)


def _looked_up(requirement: Requirement, part: Part, reading: Reading) -> NearMiss | None:
    """The worst that a value could be, were it on file, for the part to fit."""

    def fits(value: float) -> bool:
        return _fits(requirement, Shelf.from_parts([replace(part, limits=(*part.limits, reading.limit(value)))]))

    if not fits(reading.surely):
        return None
    to = reading.hardly if fits(reading.hardly) else _narrowed(fits, good=reading.surely, bad=reading.hardly)
    at = ", ".join(f"{name.upper()} {quantity(x, 'V' if name[0] == 'v' else 'A')}" for name, x in reading.conditions)
    relation = "at least" if reading.surely > reading.hardly else "at most"
    says = f"look up {reading.symbol}{f' at {at}' if at else ''}: {relation} {quantity(to, reading.unit)} would do"
    return NearMiss(f"part.{reading.symbol}", None, to, reading.unit, says, reading.conditions)


def _narrowed(fits: Callable[[float], bool], good: float, bad: float) -> float:
    """A value that fits, with one that does not right beside it towards `bad`."""
    shift = 0.0 if min(good, bad) > 0 else 1.0 - min(good, bad)  # temperatures may lie below zero
    good, bad = good + shift, bad + shift
    while max(good / bad, bad / good) > CLOSE:
        middle = float(np.sqrt(good * bad))
        good, bad = (middle, bad) if fits(middle - shift) else (good, middle)
    rounded = _rounded(good - shift, up=good > bad)
    return rounded if fits(rounded) else good - shift


def _rounded(value: float, *, up: bool) -> float:
    """To a few figures, away from the side that does not fit."""
    if value == 0:
        return value
    size = 10.0 ** (int(np.floor(np.log10(abs(value)))) - FIGURES + 1)
    steps = np.ceil(value / size - 1e-9) if up else np.floor(value / size + 1e-9)
    return float(f"{steps * size:.{FIGURES}g}")
