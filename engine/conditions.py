"""What the sheets promise of one part over a range of conditions: the curves that are drawn."""

import numpy as np
from numpy.typing import NDArray

from .physics.constants import ROOM, ROOM_KELVIN, ZERO_CELSIUS
from .rank import prepared
from .shelf import Shelf

Floats = NDArray[np.float64]


def gain_floor_curve(shelf: Shelf, row: int, ic: Floats, temp: float) -> Floats:
    """The gain floor that the hFE limits of one part state over collector current, at `temp` °C. Shape of `ic`.

    NaN where they say nothing; above 25 °C the floor of 25 °C, since no gain is claimed there.
    """
    p = prepared(shelf).take(slice(row, row + 1))
    cold = ((min(temp, ROOM) + ZERO_CELSIUS) / ROOM_KELVIN) ** p.cold_exponent[0]
    with np.errstate(all="ignore"):
        curves = np.array([[curve.at(float(one), p.slope_below)[0] for one in ic] for curve in (p.gain, p.gain_low)])
    known = np.max(np.where(np.isnan(curves), -np.inf, curves), axis=0)
    floor: Floats = np.where(np.isinf(known), np.nan, known) * cold
    return floor
