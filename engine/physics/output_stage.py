"""A complementary pair in class B: what it delivers, draws and turns into heat."""

import numpy as np
from numpy.typing import NDArray

from ..formula import formula

Floats = NDArray[np.float64]
PI = 3.141592653589793  # written out in the texts


@formula("V peak", "V", "peak voltage at the load", text="sqrt(2 * P * RL)", source="definition", exact=True)
def peak_voltage(P: Floats, RL: Floats) -> Floats:
    """Of a sine of mean power P. [V]

    >>> round(float(peak_voltage.raw(20.0, 8.0)), 2)
    17.89
    """
    return np.sqrt(2 * P * RL)


@formula("P supply", "W", "power drawn from both supplies", text="2 * V_supply * V_peak / (3.141592653589793 * RL)",
         source="class b", exact=True)  # fmt: skip
def supply_power(V_supply: Floats, V_peak: Floats, RL: Floats) -> Floats:
    """Resistive load, ±V_supply, no quiescent current. [W]

    >>> round(supply_power.raw(25.0, 12 * 2**0.5, 4.0), 2)
    67.52
    """
    return 2 * V_supply * V_peak / (PI * RL)


@formula("P max", "W", "worst mean dissipation of one transistor of a pair",
         text="V_supply**2 / (3.141592653589793**2 * RL)", source="class b", exact=True)  # fmt: skip
def worst_dissipation(V_supply: Floats, RL: Floats) -> Floats:
    """At the drive of 2/π of the supply, resistive load, ±V_supply. [W]

    >>> round(worst_dissipation.raw(23.0, 8.0), 2)
    6.7
    """
    return V_supply**2 / (PI**2 * RL)
