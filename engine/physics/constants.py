"""Exact SI constants and what follows from them."""

import numpy as np
from numpy.typing import NDArray

K_BOLTZMANN = 1.380649e-23  # J/K, exact
Q_ELECTRON = 1.602176634e-19  # C, exact
ZERO_CELSIUS = 273.15  # K
ROOM = 25.0  # °C, where sheets state characteristics
ROOM_KELVIN = ZERO_CELSIUS + ROOM


def thermal_voltage(t: "float | NDArray[np.float64]") -> "float | NDArray[np.float64]":
    """kT/q at `t` °C. [V]

    >>> round(float(thermal_voltage(25.0)) * 1e3, 4)
    25.6926
    """
    return K_BOLTZMANN / Q_ELECTRON * (t + ZERO_CELSIUS)
