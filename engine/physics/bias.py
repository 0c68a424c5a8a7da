"""Operating point of a stage biased by a divider, and how firmly it holds."""

import numpy as np
from numpy.typing import NDArray

from ..formula import formula

Floats = NDArray[np.float64]


@formula("VTH", "V", "open-circuit voltage of the divider", text="V * R2 / (R1 + R2)", source="circuit law",
         exact=True)  # fmt: skip
def divider_voltage(V: Floats, R1: Floats, R2: Floats) -> Floats:
    """R1 from the supply to the base, R2 from the base to the common end. [V]

    >>> divider_voltage.raw(15.0, 100e3, 50e3)
    5.0
    """
    return V * R2 / (R1 + R2)


@formula("R parallel", "Ω", "two resistances side by side", text="R1 * R2 / (R1 + R2)", source="circuit law",
         exact=True)  # fmt: skip
def side_by_side(R1: Floats, R2: Floats) -> Floats:
    """Resistance of two in parallel. [Ω]

    >>> round(side_by_side.raw(33e3, 12e3))
    8800
    """
    return R1 * R2 / (R1 + R2)


@formula("R1", "Ω", "upper resistor of the divider", text="RTH * V / VTH", source="circuit law", exact=True)
def divider_upper(RTH: Floats, V: Floats, VTH: Floats) -> Floats:
    """The upper resistor that gives this source resistance and open-circuit voltage. [Ω]

    >>> round(divider_upper.raw(33e3, 10.0, 1.5))
    220000
    """
    return RTH * V / VTH


@formula("R2", "Ω", "lower resistor of the divider", text="RTH * (VTH + V_R1) / V_R1", source="circuit law",
         exact=True)  # fmt: skip
def divider_lower(RTH: Floats, VTH: Floats, V_R1: Floats) -> Floats:
    """The lower resistor that gives this source resistance and open-circuit voltage. [Ω]

    V_R1  what the supply has above VTH: the voltage across the upper resistor without load. [V]

    >>> round(divider_lower.raw(33e3, 1.5, 8.5))
    38824
    """
    return RTH * (VTH + V_R1) / V_R1


@formula("IC", "A", "collector current", text="hFE * (VTH - VBE) / (RTH + (1 + hFE) * RE)", source="divider bias",
         exact=True)  # fmt: skip
def bias_current(hFE: Floats, VTH: Floats, VBE: Floats, RTH: Floats, RE: Floats) -> Floats:
    """Collector current of a stage fed from VTH through RTH, leakage left out. [A]

    Rises with hFE and falls with VBE, so the bounds are at their ends.

    >>> round(bias_current.raw(100.0, 5.0, 0.7, 33333.3, 3e3) * 1e3, 3)
    1.278
    """
    return hFE * (VTH - VBE) / (RTH + (1 + hFE) * RE)


@formula("S(ICO)", "", "collector current over leakage current", source="stability factors", exact=True,
         text="(1 + hFE) * (RTH + RE) / (RTH + (1 + hFE) * RE)")  # fmt: skip
def stability_leakage(hFE: Floats, RTH: Floats, RE: Floats) -> Floats:
    """How often the leakage of the collector–base junction appears in the collector current.

    >>> round(stability_leakage.raw(100.0, 8800.0, 1e3), 3)
    9.015
    """
    return (1 + hFE) * (RTH + RE) / (RTH + (1 + hFE) * RE)


@formula("S(VBE)", "A/V", "collector current over base–emitter voltage", text="-hFE / (RTH + (1 + hFE) * RE)",
         source="stability factors", exact=True)  # fmt: skip
def stability_vbe(hFE: Floats, RTH: Floats, RE: Floats) -> Floats:
    """Change of the collector current with the base–emitter voltage; negative. [A/V]

    >>> round(stability_vbe.raw(100.0, 240e3, 1e3) * 1e4, 3)
    -2.933
    """
    return -hFE / (RTH + (1 + hFE) * RE)


@formula("S(β)", "A", "collector current over gain", text="IC / hFE * (RTH + RE) / (RTH + (1 + hFE) * RE)",
         source="stability factors", exact=True)  # fmt: skip
def stability_gain(IC: Floats, hFE: Floats, RTH: Floats, RE: Floats) -> Floats:
    """Change of the collector current for one of gain: the derivative of `bias_current`. [A]

    >>> less, more = (bias_current.raw(b, 5.0, 0.7, 33e3, 3e3) for b in (99.99, 100.01))
    >>> slope = stability_gain.raw(bias_current.raw(100.0, 5.0, 0.7, 33e3, 3e3), 100.0, 33e3, 3e3)
    >>> round((more - less) / 0.02 / slope, 6)
    1.0
    """
    return IC / hFE * (RTH + RE) / (RTH + (1 + hFE) * RE)
