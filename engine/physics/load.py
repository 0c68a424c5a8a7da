"""What a load asks of its switch: current, voltage and stored energy at the unkind corner."""

import numpy as np
from numpy.typing import NDArray

from ..formula import formula

Floats = NDArray[np.float64]

COPPER = 234.5  # °C below zero where copper's resistance would vanish, IEC 60028


@formula("R(T)", "Ω", "copper resistance at temperature", text="R20 * (234.5 + T) / 254.5 * tolerance", source="copper")
def copper(R20: Floats, T: Floats, tolerance: Floats) -> Floats:
    """Resistance of a copper winding at `T` °C with the unkind end of its tolerance. [Ω]

    >>> round(float(copper.raw(180.0, -10.0, 0.9)), 1)
    142.9
    """
    return R20 * (COPPER + T) / (COPPER + 20) * tolerance


@formula("R", "Ω", "load resistance at the unkind end of its tolerance", text="R * tolerance", source="definition",
         exact=True)  # fmt: skip
def resistor(R: Floats, tolerance: Floats) -> Floats:
    """Resistance with tolerance. [Ω]

    >>> float(resistor.raw(100.0, 0.9))
    90.0
    """
    return R * tolerance


@formula("IC", "A", "collector current", text="(VS - VCE) / R", source="circuit law", exact=True)
def load_current(VS: Floats, VCE: Floats, R: Floats) -> Floats:
    """Current the load lets through. [A]

    >>> round(float(load_current.raw(10.0, 0.2, 1000.0)) * 1e3, 1)
    9.8
    """
    return np.maximum((VS - VCE) / R, 0.0)


@formula("IC inrush", "A", "collector current into the cold filament", text="IC * inrush", source="definition",
         exact=True)  # fmt: skip
def inrush_current(IC: Floats, inrush: Floats) -> Floats:
    """Current of a cold filament. [A]

    >>> round(float(inrush_current.raw(0.05, 15.0)), 2)
    0.75
    """
    return IC * inrush


@formula("VCE off max", "V", "highest collector–emitter voltage when off", text="VS + V_clamp + V_drop",
         source="circuit law", exact=True)  # fmt: skip
def off_voltage(VS: Floats, V_clamp: Floats, V_drop: Floats) -> Floats:
    """Supply and what the clamp adds while the coil discharges. [V]

    >>> round(float(off_voltage.raw(26.4, 0.0, 1.0)), 1)
    27.4
    """
    return VS + V_clamp + V_drop


@formula("E coil", "J", "energy stored in the coil", text="L * IC**2 / 2", source="definition", exact=True)
def coil_energy(L: Floats, IC: Floats) -> Floats:
    """Energy that an unclamped turn-off must get rid of. [J]

    >>> round(float(coil_energy.raw(0.35, 0.2)) * 1e3, 1)
    7.0
    """
    return L * IC**2 / 2


def release_time(inductance: float, resistance: float, current: float, v_clamp: float) -> float:
    """Time for the coil's current to fall to zero into a clamp of `v_clamp`. [s] Source: "circuit law".

    >>> round(release_time(0.2, 100.0, 0.12, 0.8) * 1e3, 2)
    5.55
    """
    return inductance / resistance * float(np.log(1 + current * resistance / v_clamp))
