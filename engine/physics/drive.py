"""The base network: a driver level through RB into the base, RBE from base to emitter."""

import numpy as np
from numpy.typing import NDArray

from ..formula import formula

Floats = NDArray[np.float64]


@formula("IB", "A", "base current",
         text="(V_drive - VBE) / (RB * RB_factor + R_drive) - VBE / (RBE * RBE_factor)",
         source="circuit law", exact=True)  # fmt: skip
def base_current(
    V_drive: Floats, VBE: Floats, RB: Floats, RB_factor: Floats, R_drive: Floats, RBE: Floats, RBE_factor: Floats
) -> Floats:
    """Base current that the network leaves after RBE took its share. RBE infinite where there is none. [A]

    V_drive  level at the driver, against the emitter. [V]   RB, RBE, R_drive  [Ω]
    RB_factor, RBE_factor  the unkind end of the resistors' tolerance.

    >>> round(float(base_current.raw(5.0, 0.7, 2194.0, 1.0, 0.0, float("inf"), 1.0)) * 1e3, 2)
    1.96
    """
    return np.maximum((V_drive - VBE) / (RB * RB_factor + R_drive) - VBE / (RBE * RBE_factor), 0.0)


@formula("I drive max", "A", "highest current the driver must give",
         text="(V_drive - VBE) / (RB * RB_factor + R_drive)", source="circuit law", exact=True)  # fmt: skip
def drive_current(V_drive: Floats, VBE: Floats, RB: Floats, RB_factor: Floats, R_drive: Floats) -> Floats:
    """Current through RB. [A]

    >>> round(float(drive_current.raw(12.0, 0.7, 240.0, 1.0, 0.0)) * 1e3, 1)
    47.1
    """
    return np.maximum((V_drive - VBE) / (RB * RB_factor + R_drive), 0.0)


@formula("IB needed", "A", "base current that saturation and overdrive ask for",
         text="max(IC / beta_allowed, IC * k_OD / hFE)", source="jesd77")  # fmt: skip
def base_current_needed(IC: Floats, beta_allowed: Floats, k_OD: Floats, hFE: Floats) -> Floats:
    """Base current needed at collector current IC. [A]

    beta_allowed  forced beta at which saturation is promised.   k_OD  overdrive wanted.
    hFE  the gain floor that the sheet states there; infinite where only a saturation limit speaks.

    >>> round(float(base_current_needed.raw(9.8e-3, 50.0, 10.0, 50.0)) * 1e3, 2)
    1.96
    """
    return np.maximum(IC / beta_allowed, IC * k_OD / hFE)


def rb_largest(v_drive: Floats, vbe: Floats, ib: Floats, rbe: Floats, r_drive: float, tol: float) -> Floats:
    """Largest nominal RB that still leaves `ib` in the base; NaN or not above zero: none. [Ω]"""
    return ((v_drive - vbe) / (ib + vbe / (rbe * (1 - tol))) - r_drive) / (1 + tol)


def rb_smallest(v_drive: Floats, vbe: Floats, i_most: Floats, r_drive: float, tol: float) -> Floats:
    """Smallest nominal RB that keeps the driver current at `i_most`. [Ω]"""
    return np.maximum(((v_drive - vbe) / i_most - r_drive) / (1 - tol), 0.0)


def rbe_smallest(v_drive: Floats, vbe: Floats, ib: Floats, rb: Floats, r_drive: float, tol: float) -> Floats:
    """Smallest nominal RBE that the drive can pay for besides `ib`; infinite: none. [Ω]"""
    spare = (v_drive - vbe) / (rb * (1 + tol) + r_drive) - ib
    return np.where(spare > 0, vbe / np.where(spare > 0, spare, 1.0) / (1 - tol), np.inf)


def rbe_largest(v_allowed: Floats, v_low: float, leak: Floats, rb: Floats, r_drive: float, tol: float) -> Floats:
    """Largest nominal RBE that holds the base at `v_allowed` or less when off; infinite: none needed. [Ω]

    `v_low` is the driver's low level behind RB, `leak` the current into the base node. The divider is
    taken with the smallest RB, the leakage drop with the largest: each term at its worst.
    """
    least, most = rb * (1 - tol) + r_drive, rb * (1 + tol) + r_drive
    # RBE·(v_low/least + leak·most/least − v_allowed/least) ≤ v_allowed, kept below the exact worst case
    excess = (v_low + leak * most - v_allowed) / least
    return np.where(excess <= 0, np.inf, v_allowed / np.where(excess > 0, excess, 1.0) / (1 + tol))


def rbe_largest_open(v_allowed: Floats, leak: Floats, tol: float) -> Floats:
    """The same when the driver lets go and only RBE holds the base. [Ω]"""
    return v_allowed / leak / (1 + tol)


@formula("VB off", "V", "base–emitter voltage when off, at the hottest",
         text="V_low / ((RB * down + R_drive) / (RBE * up) + 1) + I_base / (1 / (RB * up + R_drive) + 1 / (RBE * up))",
         source="circuit law", exact=True)  # fmt: skip
def base_voltage_off(
    V_low: Floats, RB: Floats, RBE: Floats, R_drive: Floats, I_base: Floats, up: Floats, down: Floats
) -> Floats:
    """Divider of the low level and drop of the leakage, each at its worst. RB infinite: the driver lets go. [V]

    up, down  1 + and 1 − the resistors' tolerance.

    >>> round(float(base_voltage_off.raw(0.4, 1e3, 1e3, 0.0, 10e-6, 1.0, 1.0)), 3)
    0.205
    """
    divider = V_low / ((RB * down + R_drive) / (RBE * up) + 1)
    return divider + I_base / (1 / (RB * up + R_drive) + 1 / (RBE * up))
