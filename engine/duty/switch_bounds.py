"""What a switch with its network does at the worst: every bound as a traced term."""

from collections.abc import Callable
from dataclasses import dataclass, fields, replace

import numpy as np
from numpy.typing import NDArray

from ..evidence import Evidence
from ..formula import Term, given
from ..physics import drive, junction, leakage, load, saturation, speed, thermal
from ..physics.constants import ROOM, thermal_voltage
from ..prepared import Prepared
from .switch_design import (
    Need,
    Needs,
    Network,
    cold_rise,
    either,
    junction_limit,
    lightest_load,
    vbe_highest,
)
from .switch_situation import Corner, Situation

Floats = NDArray[np.float64]
EDGE_SHARE = 0.1  # of the allowed power: below it edges of unknown length may be taken as the slowest known


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
    names = _Network(sit, net)
    corners = tuple(_corner(sit, p, c, need, names) for c, need in zip(sit.corners, n.corners, strict=True))
    inrush = None
    if sit.ic_inrush is not None and n.inrush is not None:
        inrush = _corner(sit, p, Corner(sit.ic_inrush, sit.corners[-1].drive), n.inrush, names)
    guess = n.tj_guess
    heat = _heat(sit, p, n, names, corners, guess)
    hotter = (heat.tj.values > guess) & (heat.tj.values <= n.tj_limit)
    if hotter.all():  # beyond the first guess and yet allowed: the limit is the unkind temperature then
        heat = _heat(sit, p, n, names, corners, n.tj_limit)
    elif hotter.any():
        rows = np.flatnonzero(hotter)
        some = tuple(corner.take(rows) for corner in corners)
        net_there = _Network(sit, net.take(rows))
        heat = heat.put(rows, _heat(sit, p.take(rows), n.take(rows), net_there, some, n.tj_limit[rows]), len(p))
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


class _Network:
    """The network and its tolerances as terms."""

    def __init__(self, sit: Situation, net: Network) -> None:
        tol = sit.number("resistors.tolerance")
        self.rb = Term("RB", net.rb, "Ω", meaning="base resistor", source="chosen")
        self.rbe = Term("RBE", net.rbe, "Ω", meaning="base–emitter resistor", source="chosen")
        self.up = given("(1 + tolerance)", 1 + tol, "")
        self.down = given("(1 − tolerance)", 1 - tol, "")
        self.r_drive = given("R drive", sit.number("drive.resistance"), "Ω", "output resistance of the driver")


def _corner(sit: Situation, p: Prepared, corner: Corner, need: Need, net: _Network) -> CornerBounds:
    ic = float(corner.ic.values)
    gain_grade = np.maximum(p.gain.grades, p.gain_low.grades)
    # a gain stated at low VCE can promise saturation without any saturation limit
    grade = np.maximum(np.where(p.sat_grade == Evidence.MISSING, Evidence.DERIVED, p.sat_grade), gain_grade)
    cold = Term("hFE cold", need.witnesses.gain, "", gain_grade, "gain floor at low VCE, at the coldest",
                "hFE limits on file, chord and cold law")  # fmt: skip
    cold = replace(cold, values=np.where(np.isnan(cold.values), 0.0, cold.values))  # nothing known: nothing claimed
    beta = saturation.beta_at_room.traced(need.beta_allowed, grade, ("VCE(sat)",), IC=corner.ic, hFE=cold)
    floor = Term("hFE min", np.where(np.isnan(need.gain_stated), np.inf, need.gain_stated), "", gain_grade,
                 "gain floor that the sheet states there at 25 °C; unlimited where only saturation limits speak",
                 "hFE limits on file and chords between them")  # fmt: skip
    inrush = corner.ic is sit.ic_inrush
    k_od = given("overdrive", 1.0 if inrush else sit.number("choice.overdrive"), "", "overdrive wanted")
    needed = drive.base_current_needed(IC=corner.ic, beta_allowed=beta, k_OD=k_od, hFE=floor)
    if inrush:
        needed = Term("IB needed", need.ib, "A", beta.evidence, "base current that keeps the cold lamp's switch "
                      "saturated; none where the safe area takes the inrush", looked_up=("VCE(sat)",))  # fmt: skip
    upper = _base_current(corner, net, need.vbe)
    vbe_at_upper = vbe_highest(sit, p, ic, upper)
    vbe = _vbe_term(sit, p, ic, vbe_at_upper)
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
        _quiet(saturation.v_promised, need.witnesses, forced.values), grade, ("VCE(sat)",), IC=corner.ic,
        beta=forced, hFE=cold,
    )  # fmt: skip
    return CornerBounds(corner.ic, needed, ib_min, forced, v_room)


def _base_current(corner: Corner, net: _Network, vbe: Floats) -> Floats:
    with np.errstate(all="ignore"):
        return drive.base_current.raw(
            corner.drive.values, vbe, net.rb.values, net.up.values, net.r_drive.values, net.rbe.values, net.down.values
        )


def _vbe_term(sit: Situation, p: Prepared, ic: float, cold: Floats) -> Term:
    room = cold - junction.COLD_SHIFT * np.where(p.darlington, 2.0, 1.0) * max(ROOM - sit.number("ambient.min"), 0.0)
    at_room = junction.vbe_at_room.traced(room, p.vbe_grade, ("VBE(sat)",), IC=given("IC", ic, "A"))
    junctions = Term("junctions", np.where(p.darlington, 2.0, 1.0), "", meaning="base–emitter junctions in series")
    coldest = given("T cold", sit.number("ambient.min"), "°C", "coldest ambient")
    return junction.vbe_cold(VBE=at_room, junctions=junctions, T_cold=coldest)


@dataclass(frozen=True, eq=False)
class _Heat:
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

    def put(self, rows: NDArray[np.intp], other: "_Heat", n: int) -> "_Heat":
        """This for `n` parts, but `other` for the parts at `rows`."""
        return _Heat(*(getattr(self, one.name).put(rows, getattr(other, one.name), n) for one in fields(self)))


def _heat(
    sit: Situation, p: Prepared, n: Needs, net: _Network, corners: tuple[CornerBounds, ...], guess: Floats
) -> _Heat:
    """Losses and temperature, with the junction taken at `guess` where a smaller VBE is the unkind one."""
    ic = float(sit.ic_max.values)
    hottest = given("TA max", sit.number("ambient.max"), "°C", "hottest ambient")
    tj_guess = Term("TJ taken", guess, "°C", Evidence.DERIVED, "junction temperature at which VBE is smallest")
    floor_v = Term(
        "V floor", p.floor_v, "V", Evidence.DERIVED, "junction floor at 25 °C", "VBE minimum on file or common practice"
    )
    floor_i = Term(
        "I floor", p.floor_i, "A", Evidence.DERIVED, "its current", "a tenth of IC, or the test current", ("IC",)
    )
    least = given("IC least", lightest_load(sit, float(np.max(n.v_on_most))), "A", "lightest load")
    vbe_min = junction.vbe_hot(IC=least, TJ=tj_guess, V_floor=floor_v, I_floor=floor_i)
    ib_max = drive.base_current(
        "IB max", "highest base current", V_drive=sit.drive_max, VBE=vbe_min, RB=net.rb, RB_factor=net.down,
        R_drive=net.r_drive, RBE=net.rbe, RBE_factor=net.up,
    )  # fmt: skip
    driver = drive.drive_current(V_drive=sit.drive_max, VBE=vbe_min, RB=net.rb, RB_factor=net.down, R_drive=net.r_drive)
    vbe_top = _vbe_term(sit, p, ic, vbe_highest(sit, p, ic, ib_max.values))
    v_room = _worst_room_voltage(corners)
    t_on, t_off = _times(sit, p, n, net, corners, ib_max, vbe_min, guess)
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
    cold = Term("cold rise", cold_rise(sit, p), "V", meaning="what a Darlington gains when cold")
    vce_on = saturation.on_voltage(VCE_sat=v_room, hot=hot, cold_rise=cold)
    on = thermal.conduction_loss(VCE=vce_on, IC=sit.ic_max, VBE=vbe_top, IB=ib_max)
    mean = thermal.mean_loss(share=share, P_on=on, P_edges=edges)
    whole = thermal.mean_loss("P most", "highest loss: on for good, and the edges", share=given("share", 1.0, ""), P_on=on,
                              P_edges=edges)  # fmt: skip
    return _Heat(ib_max, driver, vce_on, whole, mean, allowed, tj, limit, t_on, t_off, edge_time)


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


def _times(
    sit: Situation, p: Prepared, n: Needs, net: _Network, corners: tuple[CornerBounds, ...], ib_max: Term,
    vbe_min: Term, guess: Floats,
) -> tuple[Term, Term]:  # fmt: skip
    """Turn-on and turn-off times from the sheet's own test, scaled by charge control."""
    v = sit.v_off if sit.v_off is not None else sit.vs_max
    worst = corners[0]
    gain = n.corners[0].gain_stated
    overdrive = Term("overdrive", worst.ib_min.values * gain / worst.ic.values, "", Evidence.DERIVED,
                     "base current over what the gain floor needs", looked_up=("hFE",))  # fmt: skip
    test = _test_terms(p, "on")
    ib = Term("IB min", np.min(np.broadcast_arrays(*(c.ib_min.values for c in corners)), axis=0), "A", worst.ib_min.evidence,
              "lowest base current")  # fmt: skip
    t_on = speed.turn_on_time(t_test=test["time"], IC=sit.ic_max, IC_test=test["ic"], V=v, V_test=test["vcc"],
                              IB_test=test["ib"], IB=ib, overdrive=overdrive)  # fmt: skip
    test = _test_terms(p, "off")
    with np.errstate(all="ignore"):
        low_vbe = np.maximum(vbe_min.values - float(thermal_voltage(ROOM)) * np.log(10), 0.0)  # a decade less current
        through_rb = np.where(
            sit.off_open, 0.0, (low_vbe - sit.off_level.values) / (net.rb.values * net.up.values + net.r_drive.values)
        )
        reverse = np.maximum(through_rb, 0.0) + low_vbe / (net.rbe.values * net.up.values) - sit.off_leak
        gain_at_test = either(p.gain.at(p.off_ic, p.slope_below), p.gain_low.at(p.off_ic, p.slope_below))
    ibr = Term("IBR min", reverse, "A", Evidence.DERIVED, "lowest reverse base current while turning off")
    hfe = Term("hFE floor", gain_at_test, "", Evidence.DERIVED, "gain floor at the test current", looked_up=("hFE",))
    tj = Term("TJ", guess, "°C", Evidence.DERIVED, "hottest junction")
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


def _off_current(sit: Situation, p: Prepared, net: _Network, tj: Term) -> Term:
    symbols = ("ICBO",) if not p.darlington.all() else ("ICEO",)
    hot = tj.values
    values = _quiet(leakage.leakage_most, float(sit.vs_max.values), hot, p.leak_v, p.leak_t, p.leak_i, p.vceo)
    leak = leakage.leakage_hot.traced(values, p.leak_grade, symbols, V=sit.vs_max, TJ=tj)
    into_base = Term("I base", leak.values + sit.off_leak, "A", leak.evidence, "leakage into the base node",
                     inputs={"leak": leak, "driver": given("driver leakage", sit.off_leak, "A")})  # fmt: skip
    rb = net.rb if not sit.off_open else given("RB", np.inf, "Ω", "the driver lets go")
    vb = drive.base_voltage_off(
        V_low=sit.off_level, RB=rb, RBE=net.rbe, R_drive=net.r_drive, I_base=into_base, up=net.up, down=net.down
    )
    floor_i = Term("I floor", p.floor_i, "A", Evidence.DERIVED, "current of the junction floor", looked_up=("IC",))
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
    vt = Term("VT", np.asarray(thermal_voltage(hot)), "V", Evidence.DERIVED, "kT/q")
    return leakage.off_current(I_leak=leak, I_floor=floor_i, VB=vb, V_floor=floor_v, VT=vt)


def _off_voltage(sit: Situation) -> Term:
    if sit.v_off is not None:
        return sit.v_off
    return Term("VCE off max", np.asarray(np.nan), "V", meaning="not bounded: nothing clamps the coil")


def _least_current(sit: Situation, vce_on: Term) -> Term:
    if sit.ic_min_constant is not None:
        return sit.ic_min_constant
    assert sit.r_max is not None
    return load.load_current(symbol="IC min", meaning="lowest load current", VS=sit.vs_min, VCE=vce_on, R=sit.r_max)


def _ratio(a: Floats, b: Floats) -> Floats:
    with np.errstate(all="ignore"):
        return a / b


def _quiet(law: Callable[..., Floats], *arguments: object) -> Floats:
    """A law over points of the sheets, where NaN and infinity are answers."""
    with np.errstate(all="ignore"):
        return law(*arguments)
