"""Gain floors as piecewise straight lines on log–log paper, for all parts at once.

Each device's log hFE is concave over log IC, so a chord between two guaranteed minimums lies below every
device (method: `gain chord`). Below the lowest point the gain falls no faster than a power of the current;
above the highest nothing is known.
"""

from dataclasses import dataclass, fields
from typing import Any

import numpy as np
from numpy.typing import NDArray

from .evidence import Evidence, Grades

Floats = NDArray[np.float64]
DECADES_BELOW = 2.0  # how far below its lowest point a curve is followed


@dataclass(frozen=True, eq=False)
class Curve:
    """A gain floor a part. Shapes (n,) and, for the k-1 lines between points, (k-1, n)."""

    x0: Floats  # ln IC of the lowest point, NaN where a part has none
    y0: Floats  # ln hFE there
    top: Floats  # ln IC of the highest point
    start: Floats  # ln IC where each line starts; padding has length and slope 0
    length: Floats
    slope: Floats
    vce: Floats  # highest VCE among the points, V: the floor holds from there up
    grades: Grades

    @classmethod
    def through(cls, ic: Floats, gain: Floats, vce: Floats, used: NDArray[np.bool_], typical: Floats) -> "Curve":
        """Curves through the points `used`; all shapes (k, n). `typical` says which gains are no limits."""
        with np.errstate(all="ignore"):
            x = np.where(used, np.log(ic), np.nan)
            y = np.where(used, np.log(gain), np.nan)
        order = np.argsort(x, axis=0, kind="stable")
        x, y = np.take_along_axis(x, order, 0), np.take_along_axis(y, order, 0)
        _merge_equal(x, y)
        known = ~np.isnan(x)
        length = np.where(known[1:], x[1:] - x[:-1], 0.0)
        with np.errstate(all="ignore"):
            slope = np.where(known[1:] & (length > 0), (y[1:] - y[:-1]) / length, 0.0)
        any_point = used.any(axis=0)
        top = np.where(any_point, np.max(np.where(known, x, -np.inf), axis=0), np.nan)
        highest = np.where(any_point, np.max(np.where(used, vce, -np.inf), axis=0), np.nan)
        grade = np.where((used & (typical > 0)).any(axis=0), Evidence.TYPICAL, Evidence.DERIVED).astype(np.int8)
        start = np.where(known[1:], x[:-1], 0.0)
        return cls(x[0], y[0], top, start, length, slope, highest, grade)

    def at(self, ic: "float | Floats", slope_below: Floats) -> Floats:
        """The gain floor at `ic` A, 25 °C; NaN outside the points (but for two decades below). Shape (n,)."""
        x = np.log(ic)
        y = self.y0 + slope_below * np.minimum(x - self.x0, 0.0)
        for start, length, slope in zip(self.start, self.length, self.slope, strict=True):
            y += slope * np.clip(x - start, 0.0, length)
        inside = (x <= self.top + 1e-9) & (x >= self.x0 - DECADES_BELOW * np.log(10))
        return np.where(inside, np.exp(y), np.nan)

    def take(self, rows: "slice | NDArray[np.intp]") -> "Curve":
        """The curves of some parts; a slice gives views."""
        return Curve(*(columns(getattr(self, one.name), rows) for one in fields(self)))


def columns(array: NDArray[Any], rows: "slice | NDArray[np.intp]") -> NDArray[Any]:
    """Some parts of an array whose last axis is the parts."""
    return array[..., rows] if isinstance(rows, slice) else np.take(array, rows, axis=-1)


def _merge_equal(x: Floats, y: Floats) -> None:
    """Where several points share one current, the highest minimum holds for all of them. In place."""
    for i in [*range(1, len(x)), *range(len(x) - 1, 0, -1)]:
        same = x[i] == x[i - 1]
        best = np.maximum(y[i], y[i - 1])
        y[i] = np.where(same, best, y[i])
        y[i - 1] = np.where(same, best, y[i - 1])
