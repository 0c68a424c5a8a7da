"""The on state at one supply corner: base current, forced gain and the on-voltage that is promised.

Every quantity of a corner is at its own worst limit at once (source `wcca`).
"""

from collections.abc import Callable
from dataclasses import dataclass, fields, replace

import numpy as np
from numpy.typing import NDArray

from ..evidence import Evidence
from ..formula import Term, given
from ..physics import drive, junction, saturation
from ..physics.constants import ROOM
from ..prepared import Prepared
from .switch_design import Need, Network, vbe_highest
from .switch_situation import Corner, Situation

Floats = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class CornerBounds:
    """The on state at one supply corner."""

    ic: Term
    ib_needed: Term
    ib_min: Term
    forced_beta: Term
    v_room: Term  # VCE(sat) bound at 25 °C

    def take(self, rows: NDArray[np.intp]) -> "CornerBounds":
        """The corner for some of the parts."""
        return CornerBounds(*(getattr(self, one.name).take(rows) for one in fields(self)))


class NetworkTerms:
    """The network and its tolerances as terms."""

    def __init__(self, sit: Situation, net: Network) -> None:
        tol = sit.number("resistors.tolerance")
        self.rb = Term("RB", net.rb, "Ω", meaning="base resistor", source="chosen")
        self.rbe = Term("RBE", net.rbe, "Ω", meaning="base–emitter resistor", source="chosen")
        self.up = given("(1 + tolerance)", 1 + tol, "")
        self.down = given("(1 − tolerance)", 1 - tol, "")
        self.r_drive = given("R drive", sit.number("drive.resistance"), "Ω", "output resistance of the driver")


def at_corner(sit: Situation, p: Prepared, corner: Corner, need: Need, net: NetworkTerms) -> CornerBounds:
    ic = float(corner.ic.values)
    gain_grade = np.maximum(p.gain.grades, p.gain_low.grades)
    # a gain stated at low VCE can promise saturation without any saturation limit
    grade = np.maximum(np.where(p.sat_grade == Evidence.MISSING, Evidence.DERIVED, p.sat_grade), gain_grade)
    cold = Term("hFE cold", need.witnesses.gain, "", gain_grade, "gain floor at low VCE, at the coldest",
                "hFE limits on file, chord and cold law")  # fmt: skip
    cold = replace(cold, values=np.where(np.isnan(cold.values), 0.0, cold.values))  # nothing known: nothing claimed
    beta = saturation.beta_at_room.traced(need.beta_allowed, grade, ("VCE(sat)",), IC=corner.ic, hFE=cold)
    floor = Term("hFE min", np.where(np.isnan(need.gain_stated), np.inf, need.gain_stated), "", gain_grade,
                 "gain floor that the sheet proves there at 25 °C",
                 "hFE limits on file and chords between them; beyond them IC ÷ IB of the saturation tests")  # fmt: skip
    inrush = corner.ic is sit.ic_inrush
    k_od = given("overdrive", 1.0 if inrush else sit.number("choice.overdrive"), "", "overdrive wanted")
    needed = drive.base_current_needed(IC=corner.ic, beta_allowed=beta, k_OD=k_od, hFE=floor)
    if inrush:
        needed = Term("IB needed", need.ib, "A", beta.evidence, "base current that keeps the cold lamp's switch "
                      "saturated; none where the safe area takes it", "IC ÷ β allowed", looked_up=("VCE(sat)",))  # fmt: skip
    upper = _base_current(corner, net, need.vbe)
    vbe_at_upper = vbe_highest(sit, p, ic, upper)
    vbe = vbe_term(sit, p, ic, needed, vbe_at_upper)
    traced = drive.base_current(
        "IB min", "lowest base current", V_drive=corner.drive, VBE=vbe, RB=net.rb, RB_factor=net.up,
        R_drive=net.r_drive, RBE=net.rbe, RBE_factor=net.down,
    )  # fmt: skip
    # the junction voltage at the needed current proves at least that current (see physics.junction)
    values = np.where(upper >= need.ib, np.maximum(traced.values, need.ib), upper)
    values = np.where(np.isnan(need.ib), traced.values, values)
    ib_min = Term(
        traced.symbol, values, "A", traced.evidence, traced.meaning, formula=traced.formula, inputs=traced.inputs
    )
    forced = Term("β forced", _ratio(corner.ic.values, values), "", ib_min.evidence, "largest IC ÷ IB", source="IC max ÷ IB min",
                  inputs={"IC": corner.ic, "IB": ib_min})  # fmt: skip
    v_room = saturation.saturation_at_room.traced(
        quiet(saturation.v_promised, need.witnesses, forced.values), grade, ("VCE(sat)",), IC=corner.ic,
        beta=forced, hFE=cold,
    )  # fmt: skip
    return CornerBounds(corner.ic, needed, ib_min, forced, v_room)


def _base_current(corner: Corner, net: NetworkTerms, vbe: Floats) -> Floats:
    with np.errstate(all="ignore"):
        return drive.base_current.raw(
            corner.drive.values, vbe, net.rb.values, net.up.values, net.r_drive.values, net.rbe.values, net.down.values
        )


def vbe_term(sit: Situation, p: Prepared, ic: float, ib: Term, cold: Floats) -> Term:
    """VBE at (IC, IB) as a term; `cold` is its value at the coldest, `ib` the current it was sought with."""
    room = cold - junction.COLD_SHIFT * np.where(p.darlington, 2.0, 1.0) * max(ROOM - sit.number("ambient.min"), 0.0)
    at_room = junction.vbe_at_room.traced(room, p.vbe_grade, ("VBE(sat)",), IC=given("IC", ic, "A"),
                                          IB=replace(ib, evidence=Evidence.GUARANTEED))  # fmt: skip
    junctions = Term("junctions", np.where(p.darlington, 2.0, 1.0), "", meaning="base–emitter junctions in series",
                     source="structure")  # fmt: skip
    coldest = given("T cold", sit.number("ambient.min"), "°C", "coldest ambient")
    return junction.vbe_cold(VBE=at_room, junctions=junctions, T_cold=coldest)


def _ratio(a: Floats, b: Floats) -> Floats:
    with np.errstate(all="ignore"):
        return a / b


def quiet(law: Callable[..., Floats], *arguments: object) -> Floats:
    """A law over points of the sheets, where NaN and infinity are answers."""
    with np.errstate(all="ignore"):
        return law(*arguments)
