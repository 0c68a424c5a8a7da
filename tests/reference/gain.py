"""A gain floor: straight lines on log–log paper between guaranteed minimums."""

import math
from dataclasses import dataclass

from .ieee import NAN, known


@dataclass(frozen=True)
class GainFloor:
    """(ln IC, ln hFE) in rising current; below the first the gain falls with a power of the current."""

    points: tuple[tuple[float, float], ...]
    slope_below: float
    vce: float  # the highest VCE among the points
    typical: bool

    @classmethod
    def through(cls, pairs: list[tuple[float, float]], slope_below: float, vce: float, typical: bool) -> "GainFloor":
        """Of several gains at one current the highest holds."""
        best: dict[float, float] = {}
        for ic, gain in pairs:
            best[math.log(ic)] = max(best.get(math.log(ic), -math.inf), math.log(gain))
        return cls(tuple(sorted(best.items())), slope_below, vce if pairs else NAN, typical)

    def at(self, ic: float) -> float:
        """The floor at `ic` A and 25 °C; followed two decades down, never up."""
        if not self.points or not known(ic):
            return NAN
        x = math.log(ic)
        (x0, y0), (top, y_top) = self.points[0], self.points[-1]
        if x > top + 1e-9 or x < x0 - 2 * math.log(10):
            return NAN
        if x <= x0:
            return math.exp(y0 + self.slope_below * (x - x0))
        for (xa, ya), (xb, yb) in zip(self.points, self.points[1:], strict=False):
            if x <= xb:
                return math.exp(ya + (yb - ya) * (x - xa) / (xb - xa))
        return math.exp(y_top)
