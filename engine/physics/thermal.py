"""Losses, temperature rise and the derating line."""

import numpy as np
from numpy.typing import NDArray

from ..formula import formula
from .constants import ROOM

Floats = NDArray[np.float64]

FREE_AIR_TIME = 0.3  # s, source "pulse heating": a small part in air
SINK_TIME = 0.01  # s: the junction of a part on a sink


@formula("share", "", "share of the conduction loss that heats the junction",
         text="D + (1 - D) * min(1, sqrt(D / f / tau))", source="pulse heating")  # fmt: skip
def heating_share(D: Floats, f: Floats, tau: Floats) -> Floats:
    """From mean to peak: with slow switching the junction follows each pulse.

    D  duty cycle.   f  frequency. [Hz]   tau  time by which heating is complete. [s]

    >>> float(heating_share.raw(0.5, 1e-3, 0.3))
    1.0
    """
    return D + (1 - D) * np.minimum(1.0, np.sqrt(D / f / tau))


@formula("P on max", "W", "highest loss while on", text="VCE * IC + VBE * IB", source="definition", exact=True)
def conduction_loss(VCE: Floats, IC: Floats, VBE: Floats, IB: Floats) -> Floats:
    """Collector and base loss of a saturated transistor. [W]

    >>> round(float(conduction_loss.raw(1.0, 12.9, 1.5, 1.6125)), 2)
    15.32
    """
    return VCE * IC + VBE * IB


@formula("P max", "W", "highest mean loss that heats the junction", text="share * P_on + P_edges", source="definition",
         exact=True)  # fmt: skip
def mean_loss(share: Floats, P_on: Floats, P_edges: Floats) -> Floats:
    """Conduction and switching together. [W]

    >>> float(mean_loss.raw(0.5, 2.0, 0.25))
    1.25
    """
    return share * P_on + P_edges


@formula("TJ max", "°C", "highest junction temperature",
         words="the fixed point of TJ = TA + Rth·P(TJ), where the on-voltage grows by 0.7 %/K; no value when each kelvin "
               "heats by more than a kelvin (runaway)",
         source="jesd51")  # fmt: skip
def junction_temperature(T_A: Floats, Rth: Floats, P_cold: Floats, P_sat: Floats, rise_rate: Floats) -> Floats:
    """Closed solution of the fixed point; infinite on runaway. [°C]

    P_cold  the loss that does not depend on temperature. [W]   P_sat  VCE(sat)·IC at 25 °C, weighted. [W]
    rise_rate  growth of the on-voltage. [1/K]

    >>> round(float(junction_temperature.raw(25.0, 62.5, 1.0, 0.0, 0.006)), 1)
    87.5
    """
    loop = Rth * P_sat * rise_rate
    with np.errstate(divide="ignore"):  # a loop of 1 runs away
        settled = (T_A + Rth * (P_cold + P_sat * (1 - rise_rate * ROOM))) / (1 - loop)
    without = T_A + Rth * (P_cold + P_sat)  # below 25 °C nothing grows
    return np.where(loop >= 1, np.inf, np.where(without <= ROOM, without, settled))


@formula("P allowed", "W", "power the part may take at the hottest ambient",
         text="min((TJ_max - T_A) / Rth, P_rating)", source="derating line")  # fmt: skip
def power_allowed(TJ_max: Floats, T_A: Floats, Rth: Floats, P_rating: Floats) -> Floats:
    """The derating line, capped at the rating. [W]

    >>> round(float(power_allowed.raw(200.0, 60.0, 175.0, 0.8)), 2)
    0.8
    """
    return np.minimum((TJ_max - T_A) / Rth, P_rating)


@formula("Rth", "K/W", "thermal resistance, junction to ambient", text="RthJC + RthCA", source="definition", exact=True)
def resistance_with_sink(RthJC: Floats, RthCA: Floats) -> Floats:
    """Junction to case and case to ambient in series. [K/W]

    >>> round(float(resistance_with_sink.raw(3.12, 4.5)), 2)
    7.62
    """
    return RthJC + RthCA


@formula("rise", "K", "rise of the junction over the hottest ambient", text="TJ - T_A", source="definition", exact=True)
def rise(TJ: Floats, T_A: Floats) -> Floats:
    """Temperatures are compared as rises. [K]

    >>> float(rise.raw(87.5, 25.0))
    62.5
    """
    return TJ - T_A
