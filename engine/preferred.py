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


def step(series: str) -> float:
    """The largest ratio between neighbours of a series."""
    values = np.append(SERIES[series], 10.0)
    return float(np.max(values[1:] / values[:-1]))


def at_least(value: Floats, series: str) -> Floats:
    """The smallest preferred value not below `value` (above zero). Same shape; NaN and infinity travel."""
    return _round(value, series, up=True)


def at_most(value: Floats, series: str) -> Floats:
    """The largest preferred value not above `value` (above zero). Same shape; NaN and infinity travel."""
    return _round(value, series, up=False)


def nearest(value: Floats, series: str) -> Floats:
    """The preferred value nearest to `value` by ratio. Same shape; NaN and infinity travel."""
    low, high = at_most(value, series), at_least(value, series)
    with np.errstate(all="ignore"):
        return np.where(value * value < low * high, low, high)


def _round(value: Floats, series: str, up: bool) -> Floats:
    """Rounding one way; a value that equals a preferred one to 1e-9 stays where it is."""
    table = np.concatenate([SERIES[series], [10.0]])
    value = np.asarray(value, dtype=np.float64)
    usable = np.isfinite(value) & (value > 0)
    safe = np.where(usable, value, 1.0)
    decade = np.floor(np.log10(safe))
    scale = 10.0**decade
    mantissa = safe / scale
    if up:
        place = np.searchsorted(table, mantissa * (1 - 1e-9), side="left")
    else:
        place = np.searchsorted(table, mantissa * (1 + 1e-9), side="right") - 1
    place = np.clip(place, 0, len(table) - 1)
    # made by division where that is exact, so that 4.7 kΩ is 4700 and not 4700.000000000001
    rounded = np.where(decade >= 0, np.round(table[place] * 100) * scale / 100, np.round(table[place] * 100) / (100 / scale))
    return np.where(usable, rounded, value)
