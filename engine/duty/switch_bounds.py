"""What a switch with its network does at the worst: every bound as a traced term."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from ..evidence import Evidence
from ..formula import Term, given
from ..physics import drive, leakage, load
from ..physics.constants import thermal_voltage
from ..prepared import Prepared
from .switch_corner import CornerBounds, NetworkTerms, at_corner, quiet
from .switch_design import Needs, Network
from .switch_heat import heat_up
from .switch_situation import Corner, Situation

Floats = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Bounds:
    """Everything the checks compare. Terms of shape (n,) or ()."""

    corners: tuple[CornerBounds, ...]
    inrush: CornerBounds | None
    ic_on_max: Term
    ic_on_min: Term
    ib_on_max: Term
    drive_current_max: Term
    vce_on_max: Term
    power_on: Term
    power: Term
    power_allowed: Term
    tj_max: Term
    tj_limit: Term
    ic_off_max: Term
    vce_off_max: Term
    t_on_max: Term
    t_off_max: Term
    edge_time: Term

    @property
    def ib_on_min(self) -> Floats:
        least: Floats = np.min(np.broadcast_arrays(*(c.ib_min.values for c in self.corners)), axis=0)
        return least

    @property
    def forced_beta_max(self) -> Floats:
        most: Floats = np.max(np.broadcast_arrays(*(c.forced_beta.values for c in self.corners)), axis=0)
        return most


def bounds(sit: Situation, p: Prepared, n: Needs, net: Network) -> Bounds:
    """Worst values of the network `net` on every part."""
    names = NetworkTerms(sit, net)
    corners = tuple(at_corner(sit, p, c, need, names) for c, need in zip(sit.corners, n.corners, strict=True))
    inrush = None
    if sit.ic_inrush is not None and n.inrush is not None:
        inrush = at_corner(sit, p, Corner(sit.ic_inrush, sit.corners[-1].drive), n.inrush, names)
    guess = n.tj_guess
    heat = heat_up(sit, p, n, names, corners, guess)
    hotter = (heat.tj.values > guess) & (heat.tj.values <= n.tj_limit)
    if hotter.all():  # beyond the first guess and yet allowed: the limit is the unkind temperature then
        heat = heat_up(sit, p, n, names, corners, n.tj_limit)
    elif hotter.any():
        rows = np.flatnonzero(hotter)
        some = tuple(corner.take(rows) for corner in corners)
        net_there = NetworkTerms(sit, net.take(rows))
        heat = heat.put(rows, heat_up(sit, p.take(rows), n.take(rows), net_there, some, n.tj_limit[rows]), len(p))
    hottest = np.maximum(heat.tj.values, sit.number("ambient.max"))
    hot = Term("TJ hot", np.where(np.isinf(hottest), np.nan, hottest), "°C", heat.tj.evidence,
               "hottest junction, just turned off", "TJ max", inputs={"TJ": heat.tj})  # fmt: skip
    ic_on_min = _least_current(sit, heat.vce_on)
    t_on, t_off = heat.t_on, heat.t_off
    return Bounds(
        corners, inrush, sit.ic_max, ic_on_min, heat.ib_max, heat.drive, heat.vce_on, heat.on, heat.mean, heat.allowed,
        heat.tj, heat.limit, _off_current(sit, p, names, hot), _off_voltage(sit),
        t_on, t_off, heat.edge_time,
    )  # fmt: skip


def _off_current(sit: Situation, p: Prepared, net: NetworkTerms, tj: Term) -> Term:
    symbols = ("ICBO",) if not p.darlington.all() else ("ICEO",)
    hot = tj.values
    values = quiet(
        leakage.leakage_most, float(sit.vs_max.values), hot, p.leak_v, p.leak_t, p.leak_i, p.vceo, p.darlington
    )
    leak = leakage.leakage_hot.traced(values, p.leak_grade, symbols, V=sit.vs_max, TJ=tj)
    into_base = Term("I base", leak.values + sit.off_leak, "A", leak.evidence, "leakage into the base node",
                     inputs={"leak": leak, "driver": given("driver leakage", sit.off_leak, "A")})  # fmt: skip
    rb = net.rb if not sit.off_open else given("RB", np.inf, "Ω", "the driver lets go")
    vb = drive.base_voltage_off(
        V_low=sit.off_level, RB=rb, RBE=net.rbe, R_drive=net.r_drive, I_base=into_base, up=net.up, down=net.down
    )
    floor_i = Term(
        "I floor", p.floor_i, "A", Evidence.DERIVED, "current of the junction floor", "a tenth of IC", looked_up=("IC",)
    )
    floor_v = leakage.floor_hot(
        V_floor=Term(
            "V floor",
            p.floor_v,
            "V",
            Evidence.DERIVED,
            "junction floor at 25 °C",
            "VBE minimum on file or common practice",
        ),
        TJ=tj,
    )
    vt = Term("VT", np.asarray(thermal_voltage(hot)), "V", Evidence.DERIVED, "kT/q", "physical constants")
    return leakage.off_current(I_leak=leak, I_floor=floor_i, VB=vb, V_floor=floor_v, VT=vt)


def _off_voltage(sit: Situation) -> Term:
    if sit.v_off is not None:
        return sit.v_off
    return Term("VCE off max", np.asarray(np.nan), "V", meaning="not bounded: nothing clamps the coil",
                source="requirement")  # fmt: skip


def _least_current(sit: Situation, vce_on: Term) -> Term:
    if sit.ic_min_constant is not None:
        return sit.ic_min_constant
    assert sit.r_max is not None
    return load.load_current(symbol="IC min", meaning="lowest load current", VS=sit.vs_min, VCE=vce_on, R=sit.r_max)
