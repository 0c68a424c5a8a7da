"""Base–emitter voltage from above and from below, over current and temperature."""

import numpy as np
from numpy.typing import NDArray

from ..formula import formula
from .constants import ROOM, ROOM_KELVIN, ZERO_CELSIUS, thermal_voltage

Floats = NDArray[np.float64]

MOST_BEYOND = 10.0  # how far beyond its test currents a VBE(sat) limit is followed
JUNCTION_LEAST = 0.6  # V of a VBE(sat) limit that is surely junction and not ohmic
COLD_SHIFT = 2.5e-3  # V/K a junction
EG_HIGH = 1.17  # eV, the unkind band gap for a hot minimum
XTI = 3.0


def vbe_highest(ic: Floats, ib: Floats, ic_t: Floats, ib_t: Floats, v_t: Floats) -> Floats:
    """Highest VBE at 25 °C for saturated operation at (ic, ib), from VBE(sat) maximums. [V]

    Below a test's currents every device falls by at least VT·ln of the ratio; above them the junction
    rises by twice that (high-level injection) and the ohmic rest in proportion. Each test gives a bound;
    the least holds.

    Shapes: ic, ib () or (n,); the tests (k, n), NaN-padded. NaN where no test reaches.
    """
    vt = float(thermal_voltage(ROOM))
    best = np.full(v_t.shape[1], np.inf)
    with np.errstate(all="ignore"):
        for one_ic, one_ib, one_v in zip(ic_t, ib_t, v_t, strict=True):
            ratio = np.maximum(ic / one_ic, ib / one_ib)
            ohmic = np.maximum(one_v - JUNCTION_LEAST, 0.0) * np.maximum(ratio - 1.0, 0.0)
            bound = one_v + vt * np.log(ratio) * np.where(ratio > 1, 2.0, 1.0) + ohmic
            best = np.where((ratio <= MOST_BEYOND) & (bound < best), bound, best)
    return np.where(np.isinf(best), np.nan, best)


@formula("VBE(sat) max", "V", "highest base–emitter voltage at 25 °C",
         words="the least of the bounds from the part's VBE(sat) limits: V(limit) + VT·ln r, and above the test "
               "currents 2·VT·ln r and the ohmic rest times r, with r the larger of IC and IB over those of the test",
         source="ebers-moll")  # fmt: skip
def vbe_at_room(**_: Floats) -> Floats:
    """Traced only: see `vbe_highest`."""
    raise NotImplementedError


@formula("VBE max", "V", "highest base–emitter voltage at the coldest",
         text="VBE + 0.0025 * junctions * max(25 - T_cold, 0)", source="vbe cold")  # fmt: skip
def vbe_cold(VBE: Floats, junctions: Floats, T_cold: Floats) -> Floats:
    """VBE at 25 °C moved to the coldest junction. [V]

    VBE  at 25 °C. [V]   junctions  in series between base and emitter.   T_cold  [°C]

    >>> round(float(vbe_cold.raw(0.9, 1.0, -15.0)), 3)
    1.0
    """
    return VBE + COLD_SHIFT * junctions * np.maximum(ROOM - T_cold, 0)


def junction_floor(ic: Floats, t: Floats, v0: Floats, i0: Floats) -> Floats:
    """Lowest VBE at collector current `ic` and `t` °C when it is at least `v0` at `i0` and 25 °C. [V]

    The exponential law at 25 °C, then VBE(T) at constant current (source "vbe floor").
    """
    at_room = v0 + float(thermal_voltage(ROOM)) * np.log(ic / i0)
    return over_temperature(at_room, t)


def current_ceiling(vbe: Floats, t: Floats, v0: Floats, i0: Floats) -> Floats:
    """Highest collector current at base–emitter voltage `vbe` and `t` °C; the inverse of `junction_floor`. [A]"""
    return i0 * np.exp((vbe - over_temperature(v0, t)) / thermal_voltage(t))


def over_temperature(v: Floats, t: Floats) -> Floats:
    """VBE at constant current moved from 25 °C to `t`; the unkind band gap makes it fall fastest. [V]"""
    ratio = (t + ZERO_CELSIUS) / ROOM_KELVIN
    moved = v * ratio + EG_HIGH * (1 - ratio) - XTI * thermal_voltage(t) * np.log(ratio)
    return np.where(ratio >= 1, moved, v)  # colder it only rises


@formula("VBE min", "V", "lowest base–emitter voltage at the hottest",
         words="V0·T/T0 + EG·(1 − T/T0) − 3·VT·ln(T/T0) with V0 = V(floor) + VT·ln(IC ÷ I(floor))",
         source="vbe floor")  # fmt: skip
def vbe_hot(IC: Floats, TJ: Floats, V_floor: Floats, I_floor: Floats) -> Floats:
    """Lowest VBE while conducting. [V]

    >>> round(float(vbe_hot.raw(0.01, 100.0, 0.60, 0.01)), 3)
    0.435
    """
    return np.maximum(junction_floor(IC, TJ, V_floor, I_floor), 0.0)
