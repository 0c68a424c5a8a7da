"""Losses, switching times and junction temperature of a switch with its network."""

from dataclasses import dataclass, fields

import numpy as np
from numpy.typing import NDArray

from ..evidence import Evidence
from ..formula import Term, given
from ..physics import drive, junction, saturation, speed, thermal
from ..physics.constants import ROOM, thermal_voltage
from ..prepared import Prepared
from .switch_corner import CornerBounds, NetworkTerms, vbe_term
from .switch_design import Needs, cold_rise, junction_limit, lightest_load, stated_gain, vbe_highest
from .switch_situation import Situation

Floats = NDArray[np.float64]
EDGE_SHARE = 0.1  # of the allowed power: below it edges of unknown length may be taken as the slowest known


@dataclass(frozen=True, eq=False)
class Heat:
    ib_max: Term
    drive: Term
    vce_on: Term
    on: Term
    mean: Term
    allowed: Term
    tj: Term
    limit: Term
    t_on: Term
    t_off: Term
    edge_time: Term

    def put(self, rows: NDArray[np.intp], other: "Heat", n: int) -> "Heat":
        """This for `n` parts, but `other` for the parts at `rows`."""
        return Heat(*(getattr(self, one.name).put(rows, getattr(other, one.name), n) for one in fields(self)))


def heat_up(
    sit: Situation, p: Prepared, n: Needs, net: NetworkTerms, corners: tuple[CornerBounds, ...], guess: Floats
) -> Heat:
    """Losses and temperature, with the junction taken at `guess` where a smaller VBE is the unkind one."""
    ic = float(sit.ic_max.values)
    hottest = given("TA max", sit.number("ambient.max"), "°C", "hottest ambient")
    tj_guess = Term("TJ taken", guess, "°C", Evidence.DERIVED, "junction temperature at which VBE is smallest",
                    "every other demand just met")  # fmt: skip
    floor_v = Term(
        "V floor", p.floor_v, "V", Evidence.DERIVED, "junction floor at 25 °C", "VBE minimum on file or common practice"
    )
    floor_i = Term(
        "I floor", p.floor_i, "A", Evidence.DERIVED, "its current", "a tenth of IC, or the test current", ("IC",)
    )
    least = Term("IC least", lightest_load(sit, n.v_on_most), "A", meaning="lightest load", source="requirement")
    vbe_min = junction.vbe_hot(IC=least, TJ=tj_guess, V_floor=floor_v, I_floor=floor_i)
    ib_max = drive.base_current(
        "IB max", "highest base current", V_drive=sit.drive_max, VBE=vbe_min, RB=net.rb, RB_factor=net.down,
        R_drive=net.r_drive, RBE=net.rbe, RBE_factor=net.up,
    )  # fmt: skip
    driver = drive.drive_current(V_drive=sit.drive_max, VBE=vbe_min, RB=net.rb, RB_factor=net.down, R_drive=net.r_drive)
    vbe_top = vbe_term(sit, p, ic, ib_max, vbe_highest(sit, p, ic, ib_max.values))
    v_room = _worst_room_voltage(corners)
    t_on, t_off = switching_times(sit, p, n, net, corners, ib_max, vbe_min, guess)
    rth, power_rating = _resistance(sit, p)
    limit = Term("TJ limit", junction_limit(sit, p), "°C", meaning="highest junction temperature allowed", source="rating",
                 looked_up=("TJ",))  # fmt: skip
    allowed = thermal.power_allowed(TJ_max=limit, T_A=hottest, Rth=rth, P_rating=power_rating)
    edges, edge_time = _edges(sit, p, t_on, t_off, allowed)
    share = _share(sit)
    rise = given("rise rate", saturation.HOT_RATE, "1/K")
    base_loss = vbe_top.values * ib_max.values
    extra = cold_rise(sit, p) * ic
    p_sat = Term("P sat 25 °C", share.values * v_room.values * ic, "W", v_room.evidence, "VCE(sat) at 25 °C × IC × share",
                 inputs={"VCE": v_room, "IC": sit.ic_max, "share": share})  # fmt: skip
    p_cold = Term("P other", share.values * (base_loss + extra) + edges.values, "W", ib_max.evidence,
                  "VBE × IB × share and the edges", inputs={"VBE": vbe_top, "IB": ib_max, "edges": edges})  # fmt: skip
    tj = thermal.junction_temperature(T_A=hottest, Rth=rth, P_cold=p_cold, P_sat=p_sat, rise_rate=rise)
    settled = Term(
        "TJ max", np.minimum(tj.values, 1e3), "°C", tj.evidence, tj.meaning, formula=tj.formula, inputs=tj.inputs
    )
    hot = saturation.hot_factor(TJ=settled)
    cold = Term(
        "cold rise",
        cold_rise(sit, p),
        "V",
        meaning="what a Darlington gains when cold",
        source="2.5 mV/K of one junction",
    )
    vce_on = saturation.on_voltage(VCE_sat=v_room, hot=hot, cold_rise=cold)
    on = thermal.conduction_loss(VCE=vce_on, IC=sit.ic_max, VBE=vbe_top, IB=ib_max)
    mean = thermal.mean_loss(share=share, P_on=on, P_edges=edges)
    whole = thermal.mean_loss("P most", "highest loss: on for good, and the edges", share=given("share", 1.0, ""), P_on=on,
                              P_edges=edges)  # fmt: skip
    return Heat(ib_max, driver, vce_on, whole, mean, allowed, tj, limit, t_on, t_off, edge_time)


def _worst_room_voltage(corners: tuple[CornerBounds, ...]) -> Term:
    worst = corners[0].v_room
    for corner in corners[1:]:
        values = np.maximum(worst.values, corner.v_room.values)
        grades = np.maximum(worst.grades, corner.v_room.grades)
        worst = Term("VCE(sat)", values, "V", grades, "the larger of both supply corners", inputs={"a": worst, "b": corner.v_room},
                     looked_up=("VCE(sat)",))  # fmt: skip
    return worst


def _resistance(sit: Situation, p: Prepared) -> tuple[Term, Term]:
    sink = sit.number("heatsink.case_to_ambient")
    if np.isnan(sink):
        meaning, source = "thermal resistance in the mounting of the sheet", "rating or derating line"
        rth = Term("RthJA", p.rth_ja, "K/W", p.rth_ja_grade, meaning, source, ("RthJA",))
        return rth, _rating(
            "PD", np.where(np.isnan(p.pd_ambient), np.inf, p.pd_ambient), "power rating at 25 °C ambient"
        )
    case = Term(
        "RthJC",
        p.rth_jc,
        "K/W",
        p.rth_jc_grade,
        "thermal resistance to the case",
        "rating or derating line",
        ("RthJC",),
    )
    rth = thermal.resistance_with_sink(RthJC=case, RthCA=given("RthCA", sink, "K/W", "case to ambient, heat sink"))
    return rth, _rating("PD", np.where(np.isnan(p.pd_case), np.inf, p.pd_case), "power rating at 25 °C case")


def _rating(symbol: str, values: Floats, meaning: str) -> Term:
    return Term(symbol, values, "W", meaning=meaning, source="rating", looked_up=(symbol,))


def _share(sit: Situation) -> Term:
    f = sit.number("timing.frequency")
    if np.isnan(f) or f == 0:
        return given("share", 1.0, "", "on for good")
    sink = np.isnan(sit.number("heatsink.case_to_ambient"))
    tau = given("τ", thermal.FREE_AIR_TIME if sink else thermal.SINK_TIME, "s", "time by which heating is complete")
    duty = given("D", sit.number("timing.duty_cycle"), "", "duty cycle")
    return thermal.heating_share(D=duty, f=given("f", f, "Hz", "frequency"), tau=tau)


def _edges(sit: Situation, p: Prepared, t_on: Term, t_off: Term, allowed: Term) -> tuple[Term, Term]:
    """Mean power of the edges, and the edge time; times that nobody states count as the slowest known if that is little."""
    slow = np.float64(speed.UNKNOWN_EDGE)
    known = ~np.isnan(t_on.values) & ~np.isnan(t_off.values)
    on = Term("t on", np.where(known, t_on.values, slow), "s", np.where(known, t_on.evidence, Evidence.DERIVED).astype(np.int8),
              "turn-on time, or 100 µs where the sheet is silent", inputs={"t": t_on})  # fmt: skip
    off = Term("t off", np.where(known, t_off.values, slow), "s", np.where(known, t_off.evidence, Evidence.DERIVED).astype(np.int8),
               "turn-off time, or 100 µs where the sheet is silent", inputs={"t": t_off})  # fmt: skip
    f = sit.number("timing.frequency")
    if np.isnan(f) or f == 0:
        return given("P edges", 0.0, "W", "switched once"), off
    if sit.v_off is None:
        return given("P edges", np.nan, "W", "no clamp: the edge is not bounded"), off
    divisor = given("divisor", 2.0 if sit.inductive else 6.0, "", "2 for a clamped coil, 6 for a resistive edge")
    energy = speed.edge_energy(V=sit.v_off, IC=sit.ic_max, t_on=on, t_off=off, divisor=divisor)
    power = energy.values * f
    little = known | ~(power > EDGE_SHARE * allowed.values)
    return Term("P edges", np.where(little, power, np.nan), "W", energy.evidence, "energy of the edges times the frequency",
                looked_up=("ton", "toff"), inputs={"E": energy, "f": given("f", f, "Hz")}), off  # fmt: skip


def switching_times(
    sit: Situation, p: Prepared, n: Needs, net: NetworkTerms, corners: tuple[CornerBounds, ...], ib_max: Term,
    vbe_min: Term, guess: Floats,
) -> tuple[Term, Term]:  # fmt: skip
    """Turn-on and turn-off times from the sheet's own test, scaled by charge control."""
    v = sit.v_off if sit.v_off is not None else sit.vs_max
    worst = corners[0]
    gain = n.corners[0].gain_stated
    overdrive = Term("overdrive", worst.ib_min.values * gain / worst.ic.values, "", Evidence.DERIVED,
                     "base current over what the gain floor needs", "IB·hFE ÷ IC", looked_up=("hFE",))  # fmt: skip
    test = _test_terms(p, "on")
    ib = Term("IB min", np.min(np.broadcast_arrays(*(c.ib_min.values for c in corners)), axis=0), "A", worst.ib_min.evidence,
              "lowest base current", "the weaker supply corner")  # fmt: skip
    t_on = speed.turn_on_time(t_test=test["time"], IC=sit.ic_max, IC_test=test["ic"], V=v, V_test=test["vcc"],
                              IB_test=test["ib"], IB=ib, overdrive=overdrive)  # fmt: skip
    test = _test_terms(p, "off")
    with np.errstate(all="ignore"):
        low_vbe = np.maximum(vbe_min.values - float(thermal_voltage(ROOM)) * np.log(10), 0.0)  # a decade less current
        through_rb = np.where(
            sit.off_open, 0.0, (low_vbe - sit.off_level.values) / (net.rb.values * net.up.values + net.r_drive.values)
        )
        reverse = np.maximum(through_rb, 0.0) + low_vbe / (net.rbe.values * net.up.values) - sit.off_leak
        gain_at_test = stated_gain(p, p.off_ic)
    ibr = Term("IBR min", reverse, "A", Evidence.DERIVED, "lowest reverse base current while turning off",
               "(VBE − V low) ÷ RB + VBE ÷ RBE − leakage of the driver, VBE a decade below the lightest load")  # fmt: skip
    hfe = Term(
        "hFE floor",
        gain_at_test,
        "",
        Evidence.DERIVED,
        "gain floor at the test current",
        "hFE limits on file",
        looked_up=("hFE",),
    )
    tj = Term("TJ", guess, "°C", Evidence.DERIVED, "hottest junction", "every other demand just met")
    t_off = speed.turn_off_time(
        t_test=test["time"], IB=ib_max, IBR=ibr, IC=sit.ic_max, V=v, IC_test=test["ic"], IB_test=test["ib"],
        IB2_test=test["ib2"], V_test=test["vcc"], hFE=hfe, TJ=tj,
    )  # fmt: skip
    return t_on, t_off


def _test_terms(p: Prepared, edge: str) -> dict[str, Term]:
    symbol = f"t{edge}"
    columns = {"time": ("s", f"{symbol} limit"), "ic": ("A", "IC of the test"), "ib": ("A", "IB1 of the test"),
               "ib2": ("A", "IB2 of the test"), "vcc": ("V", "supply of the test")}  # fmt: skip
    return {
        name: Term(
            meaning, getattr(p, f"{edge}_{name}"), unit, meaning=meaning, source="limit on file", looked_up=(symbol,)
        )
        for name, (unit, meaning) in columns.items()
        if hasattr(p, f"{edge}_{name}")
    }
