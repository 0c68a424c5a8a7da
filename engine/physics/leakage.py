"""Leakage over temperature and voltage."""

import numpy as np
from numpy.typing import NDArray

from ..formula import formula
from .constants import ZERO_CELSIUS
from .junction import over_temperature

Floats = NDArray[np.float64]

KNEE = 85.0  # °C: below it leakage is taken to double every 8 K, above every 10 K
STEP_BELOW, STEP_ABOVE = 8.0, 10.0
JUNCTION_OVER_VCEO = 1.5  # least ratio of the collector junction's own breakdown to VCEO (common practice)


def doublings(t: Floats) -> Floats:
    """How many times leakage has doubled from 25 °C to `t`; the rule of source "leakage growth"."""
    below = np.clip(t, 25.0, KNEE) - 25.0
    return below / STEP_BELOW + np.maximum(t - KNEE, 0.0) / STEP_ABOVE


def leakage_most(
    v: float, t: Floats, test_v: Floats, test_t: Floats, test_i: Floats, vceo: Floats, stands: NDArray[np.bool_]
) -> Floats:
    """Highest collector leakage at voltage `v` and `t` °C (n,) from leakage maximums (k, n). [A]

    Each limit grows by the doubling rule from its own temperature; a limit at a hotter test holds as it
    stands; between a cooler and a hotter limit the chord of log I over 1/T holds (source `leakage arrhenius`).
    The kindest bound wins, since each is true. A test at a lower voltage is scaled with the voltage and the multiplication factor
    1/(1 − (V/VBR)³) of the junction, up to VCEO. NaN: none.

    `stands` (n,): parts whose leakage feeds a base of their own (a Darlington's). There it rises by orders of
    magnitude where its inner resistors no longer hold that base down, so that only a limit at least as hot and at
    no lower a voltage bounds it.
    """
    grows = np.logical_not(stands)
    multiplied = v / test_v / (1 - (v / (JUNCTION_OVER_VCEO * vceo)) ** 3)
    scale = np.where(test_v >= v * (1 - 1e-9), 1.0, np.where((v <= vceo) & grows, multiplied, np.nan))
    at_v = test_i * scale
    best = np.full(len(vceo), np.inf)
    inverse = 1 / (t + ZERO_CELSIUS)
    for i, (temp, current) in enumerate(zip(test_t, at_v, strict=True)):
        grown = current * 2.0 ** np.maximum(doublings(t) - doublings(temp), 0.0)
        grown = np.where(grows | (temp >= t), grown, np.nan)
        best = np.where(grown < best, grown, best)
        for hot_temp, hot_current in zip(test_t[i + 1 :], at_v[i + 1 :], strict=True):
            between = (temp < t) & (t < hot_temp) & grows
            a, b = 1 / (temp + ZERO_CELSIUS), 1 / (hot_temp + ZERO_CELSIUS)
            share = (a - inverse) / np.where(a > b, a - b, 1.0)
            chord = np.exp(np.log(current) + share * np.log(hot_current / current))
            best = np.where(between & (chord < best), chord, best)
    return np.where(np.isinf(best), np.nan, best)


@formula("ICBO max", "A", "highest collector–base leakage at the hottest",
         words="the least of the part's leakage limits grown ×2 every 8 K to 85 °C and every 10 K above, a hotter limit "
               "as it stands, or the line of log I over 1/T between two",
         source="leakage growth")  # fmt: skip
def leakage_hot(**_: Floats) -> Floats:
    """Traced only: see `leakage_most`."""
    raise NotImplementedError


@formula("IC off max", "A", "highest collector current when off, at the hottest",
         text="I_leak + I_floor * exp((VB - V_floor) / VT)", source="ebers-moll")  # fmt: skip
def off_current(I_leak: Floats, I_floor: Floats, VB: Floats, V_floor: Floats, VT: Floats) -> Floats:
    """Leakage plus what the off base voltage lets through. [A]

    V_floor  lowest VBE at which I_floor can flow, at that temperature. [V]

    >>> round(float(off_current.raw(1e-6, 1e-3, 0.2, 0.45, 0.0309)) * 1e6, 2)
    1.31
    """
    return I_leak + I_floor * np.exp((VB - V_floor) / VT)


@formula("VBE floor", "V", "lowest base–emitter voltage at the floor's current, at the hottest",
         words="V(floor)·T/T0 + EG·(1 − T/T0) − 3·VT·ln(T/T0)", source="vbe floor")  # fmt: skip
def floor_hot(V_floor: Floats, TJ: Floats) -> Floats:
    """The floor moved to the junction temperature. [V]"""
    return over_temperature(V_floor, TJ)


def base_voltage_allowed(i_off: float, leak: Floats, v_floor: Floats, i_floor: Floats, vt: Floats) -> Floats:
    """Base voltage at which the off current is `i_off`; NaN where leakage alone exceeds it. [V]"""
    spare = i_off - leak
    return np.where(spare > 0, v_floor + vt * np.log(np.where(spare > 0, spare, 1.0) / i_floor), np.nan)
