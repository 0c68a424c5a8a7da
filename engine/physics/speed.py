"""Switching times by charge control, and the energy of an edge."""

import numpy as np
from numpy.typing import NDArray

from ..formula import formula

Floats = NDArray[np.float64]

HOT_TIME_RATE = 0.006  # 1/K: stored charge grows with temperature (common practice)
UNKNOWN_EDGE = 100e-6  # s: no bipolar transistor in use is slower (common practice)


@formula("t on max", "s", "longest turn-on time",
         text="t_test * max(IC / IC_test, V / V_test, 1) * (IB_test / IB) / (1 - 1 / overdrive)",
         source="charge control")  # fmt: skip
def turn_on_time(
    t_test: Floats, IC: Floats, IC_test: Floats, V: Floats, V_test: Floats, IB_test: Floats, IB: Floats,
    overdrive: Floats,
) -> Floats:  # fmt: skip
    """The charge of the test, scaled to this current and voltage, carried by this base current. [s]

    overdrive  base current over what recombination takes at the gain floor.

    >>> round(float(turn_on_time.raw(45e-9, 0.15, 0.15, 30.0, 30.0, 0.015, 0.015, 10.0)) * 1e9)
    50
    """
    share = np.maximum(1 - 1 / overdrive, 1e-9)
    return t_test * np.maximum(np.maximum(IC / IC_test, V / V_test), 1.0) * (IB_test / IB) / share


@formula("t off max", "s", "longest turn-off time",
         words="t(test) × the larger of the storage and fall ratios by charge control: storage ∝ ln((IB1 + IBR) ÷ IBR) "
               "against ln((IB1 + IB2) ÷ (IC ÷ hFE + IB2)) of the test, fall ∝ max(IC, V) ÷ IBR; hot +0.6 %/K",
         source="charge control")  # fmt: skip
def turn_off_time(
    t_test: Floats, IB: Floats, IBR: Floats, IC: Floats, V: Floats, IC_test: Floats, IB_test: Floats,
    IB2_test: Floats, V_test: Floats, hFE: Floats, TJ: Floats,
) -> Floats:  # fmt: skip
    """Storage and fall by charge control. [s]

    IB  largest forward base current. [A]   IBR  smallest reverse base current while turning off. [A]
    hFE  gain floor at the test (a small one makes the stored charge of the test large).

    >>> bool(turn_off_time.raw(3e-7, .015, .015, .15, 6., .15, .015, .015, 6., 50., 25.) >= 3e-7)
    True
    """
    stored = np.log((IB + IBR) / IBR)
    stored_test = np.log((IB_test + IB2_test) / (IC_test / np.maximum(hFE, IC_test / IB_test) + IB2_test))
    storage = stored / np.maximum(stored_test, 1e-9)
    fall = np.maximum(np.maximum(IC / IC_test, V / V_test), 1.0) * IB2_test / IBR
    hot = 1 + HOT_TIME_RATE * np.maximum(TJ - 25.0, 0.0)
    slowest = t_test * np.maximum(storage, fall) * hot
    return np.where(IBR > 0, slowest, np.nan)


@formula("E edges", "J", "energy of one turn-on and one turn-off", text="V * IC * (t_on + t_off) / divisor",
         source="edge energy", exact=True)  # fmt: skip
def edge_energy(V: Floats, IC: Floats, t_on: Floats, t_off: Floats, divisor: Floats) -> Floats:
    """Resistive edges share by 6, clamped inductive ones by 2. [J]

    >>> round(float(edge_energy.raw(200.0, 80.0, 40e-6, 60e-6, 6.0)), 5)
    0.26667
    """
    return V * IC * (t_on + t_off) / divisor
