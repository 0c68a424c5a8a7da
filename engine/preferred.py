"""Preferred values of IEC 60063: the E series and rounding to them."""

import numpy as np
from numpy.typing import NDArray

Floats = NDArray[np.float64]

_E24 = "10 11 12 13 15 16 18 20 22 24 27 30 33 36 39 43 47 51 56 62 68 75 82 91"
_SUBSETS = {"E3": 8, "E6": 4, "E12": 2, "E24": 1}  # every how many of the E24 values


def _table() -> dict[str, Floats]:
    e24 = np.array([float(word) / 10 for word in _E24.split()])
    tables = {name: e24[::step] for name, step in _SUBSETS.items()}
    for count in (48, 96, 192):
        values = np.round(10 ** (np.arange(count) / count), 2)
        values[values == 9.19] = 9.20  # the standard's one exception to its own formula
        tables[f"E{count}"] = values
    return tables


SERIES: dict[str, Floats] = _table()
"""The values of one decade, 1 ≤ value < 10, by series name."""


_DECADES = range(-6, 13)


def _ladder(series: str) -> Floats:
    """Every value of a series from 1 µΩ to 10 TΩ, each the float nearest to its decimal."""
    return np.array([float(f"{value:.2f}e{decade}") for decade in _DECADES for value in SERIES[series]])


_LADDERS = {name: _ladder(name) for name in SERIES}


def step(series: str) -> float:
    """The largest ratio between neighbours of a series."""
    values = np.append(SERIES[series], 10.0)
    return float(np.max(values[1:] / values[:-1]))


def at_least(value: Floats, series: str) -> Floats:
    """The smallest preferred value not below `value` (above zero). Same shape; NaN and infinity travel."""
    ladder, usable, first, safe = _place(value, series)
    safe = safe * (1 - _SAME)
    found = ladder[first + 2]
    for step_up in (1, 0, -1):
        candidate = ladder[first + step_up]
        found = np.where(candidate >= safe, candidate, found)
    return np.where(usable, found, value)


def at_most(value: Floats, series: str) -> Floats:
    """The largest preferred value not above `value` (above zero). Same shape; NaN and infinity travel."""
    ladder, usable, first, safe = _place(value, series)
    safe = safe * (1 + _SAME)
    found = ladder[first - 1]
    for step_up in (0, 1, 2):
        candidate = ladder[first + step_up]
        found = np.where(candidate <= safe, candidate, found)
    return np.where(usable, found, value)


def nearest(value: Floats, series: str) -> Floats:
    """The preferred value nearest to `value` by ratio. Same shape; NaN and infinity travel."""
    low, high = at_most(value, series), at_least(value, series)
    with np.errstate(all="ignore"):
        return np.where(value * value < low * high, low, high)


_SAME = 1e-9  # a value this close to a preferred one is that one


def _place(value: Floats, series: str) -> tuple[Floats, NDArray[np.bool_], NDArray[np.intp], Floats]:
    """The ladder, where rounding makes sense, and a rung at most one away from the right one."""
    ladder, per_decade = _LADDERS[series], len(SERIES[series])
    value = np.asarray(value, dtype=np.float64)
    usable = (value > ladder[2]) & (value < ladder[-4])  # False for NaN, infinity and what is not above zero
    safe = np.where(usable, value, 1.0)
    # the values lie within one rung of the even logarithmic ladder: no search is needed
    first = np.floor(np.log10(safe) * per_decade).astype(np.intp) - _DECADES[0] * per_decade
    return ladder, usable, first, safe
