"""Points of a sheet as columns (k, n): which of them count, which of contradicting ones holds, what they are worth."""

import numpy as np
from numpy.typing import NDArray

from .evidence import Evidence, Grades

Floats = NDArray[np.float64]
Mask = NDArray[np.bool_]


def limit_or_typical(limit: Floats, typical: Floats) -> tuple[Floats, Floats]:
    """A part's limits; only a part without any falls back on typicals. Values and 1 where typical, (k, n)."""
    without = np.isnan(limit).all(axis=0)
    fallback = np.isnan(limit) & without
    return np.where(fallback, typical, limit), fallback.astype(np.float64)


def worst_of_same(value: Floats, worst: np.ufunc, *conditions: Floats) -> Floats:
    """Statements under the same conditions contradict each other: the unkind one holds for all. (k, n)"""
    value = value.copy()
    for i in range(len(value)):
        for j in range(i):
            same = ~np.isnan(value[i]) & ~np.isnan(value[j])
            for one in conditions:
                same &= (one[i] == one[j]) | (np.isnan(one[i]) & np.isnan(one[j]))
            both = worst(value[i], value[j])
            value[i], value[j] = np.where(same, both, value[i]), np.where(same, both, value[j])
    return value


def room_points(temp: Floats, stated: Mask, hotter: bool) -> Mask:
    """The points at room temperature; where a part has none, those on the unkind side of it."""
    room = stated & (temp >= 15) & (temp <= 35)
    other = stated & ((temp > 35) if hotter else (temp < 15))
    return np.where(room.any(axis=0), room, other)


def grade(used: Mask, typical: Floats) -> Grades:
    is_typical = (used & (typical > 0)).any(axis=0)
    grade = np.where(is_typical, Evidence.TYPICAL, Evidence.GUARANTEED)
    return np.where(used.any(axis=0), grade, Evidence.MISSING).astype(np.int8)


def most(points: Floats) -> Floats:
    """The largest of a part's points, NaN where it has none. (k, n) → (n,)."""
    best = np.max(np.where(np.isnan(points), -np.inf, points), axis=0)
    return np.where(np.isinf(best), np.nan, best)
