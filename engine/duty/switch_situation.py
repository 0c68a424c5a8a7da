"""What a switching requirement asks at its unkind corners: the same for every part."""

from dataclasses import dataclass

from ..formula import Term, given
from ..physics import load
from ..requirement import Requirement

UNSTATED_ON_VOLTAGE = 1.0  # V: taken as saturated where no on-voltage is asked
UNSTATED_DARLINGTON = 2.5  # V


@dataclass(frozen=True, eq=False)
class Corner:
    """One supply corner of the on state: the heaviest load there and the weakest drive."""

    ic: Term
    drive: Term  # level at the driver against the emitter


@dataclass(frozen=True, eq=False)
class Situation:
    """The requirement as terms () that no part can change."""

    requirement: Requirement
    pnp: bool
    vs_min: Term
    vs_max: Term
    r_max: Term | None  # None for a constant current
    ic_max: Term
    ic_min_constant: Term | None  # for a constant current
    ic_inrush: Term | None  # for a lamp
    corners: tuple[Corner, ...]
    drive_max: Term
    off_level: Term
    off_leak: float
    off_open: bool
    v_off: Term | None  # None: no clamp holds the coil
    coil_energy: Term | None
    inductive: bool

    def number(self, key: str) -> float:
        return self.requirement.number(key)


def situation(req: Requirement) -> Situation:
    """The corners of a complete, validated requirement."""
    vs_min = given("VS min", req.number("supply.min"), "V", "lowest supply")
    vs_max = given("VS max", req.number("supply.max"), "V", "highest supply")
    tol = req.number("load.tolerance")
    ic_max, ic_low, r_min, r_max, constant = _currents(req, vs_min, vs_max, tol)
    inrush = None
    if req.word("load.kind") == "lamp":
        factor = given("inrush factor", req.number("load.inrush"), "", "cold over hot current")
        inrush = load.inrush_current(IC=ic_max, inrush=factor)
    pnp = req.word("position") == "high side"
    drive_max, corners = _drive(req, pnp, vs_min, vs_max, ic_max, ic_low, r_min)
    off_open = pnp and req.word("drive.off") == "open"
    if pnp:
        off = given(
            "V off", 0.0 if off_open else req.number("drive.off_drop_max"), "V", "driver below the supply when off"
        )
    else:
        off = given("VOL max", req.number("drive.low_max"), "V", "highest low level of the driver")
    v_off, energy, inductive = _turn_off(req, vs_max, ic_max)
    leak = req.number("drive.off_leakage_max") if off_open else 0.0
    return Situation(
        req, pnp, vs_min, vs_max, r_max, ic_max, constant, inrush, corners, drive_max, off, leak, off_open, v_off,
        energy, inductive,
    )  # fmt: skip


def _currents(
    req: Requirement, vs_min: Term, vs_max: Term, tol: float
) -> tuple[Term, Term, Term | None, Term | None, Term | None]:
    """Heaviest current at the highest and the lowest supply, least and most resistance, least constant current."""
    kind = req.word("load.kind")
    up = given("1 + tolerance", 1 + tol, "")
    down = given("1 − tolerance", 1 - tol, "")
    zero = given("VCE least", 0.0, "V", "an ideal switch: the most the load can draw")
    if kind == "constant current":
        nominal = given("IC nominal", req.number("load.current"), "A", "current of the load")
        most = load.inrush_current(symbol="IC max", meaning="highest load current", IC=nominal, inrush=up)
        least = load.inrush_current(symbol="IC min", meaning="lowest load current", IC=nominal, inrush=down)
        return most, most, None, None, least
    if req.has("load.resistance"):
        nominal = given("R load", req.number("load.resistance"), "Ω", "resistance of the load")
    else:
        stated = given("I load", req.number("load.current"), "A", "current of the load at the highest supply")
        nominal = Term(
            "R load", vs_max.values / stated.values, "Ω", meaning="resistance of the load", source="requirement"
        )
    if kind == "coil":
        cold = given("T cold", req.number("ambient.min"), "°C", "coldest ambient")
        hot = given("T hot", req.number("ambient.max"), "°C", "hottest ambient")
        r_min = load.copper(symbol="R min", meaning="coil at the coldest", R20=nominal, T=cold, tolerance=down)
        r_max = load.copper(symbol="R max", meaning="coil at the hottest ambient", R20=nominal, T=hot, tolerance=up)
    else:
        r_min = load.resistor(symbol="R min", meaning="least resistance of the load", R=nominal, tolerance=down)
        r_max = load.resistor(symbol="R max", meaning="most resistance of the load", R=nominal, tolerance=up)
    most = load.load_current(symbol="IC max", meaning="highest load current", VS=vs_max, VCE=zero, R=r_min)
    low = load.load_current(
        symbol="IC max", meaning="highest load current, lowest supply", VS=vs_min, VCE=zero, R=r_min
    )
    return most, low, r_min, r_max, None


def _drive(
    req: Requirement, pnp: bool, vs_min: Term, vs_max: Term, ic_max: Term, ic_low: Term, r_min: Term | None
) -> tuple[Term, tuple[Corner, ...]]:
    """The strongest drive, and the corners of the weakest: a high-side drive moves with the supply."""
    if not pnp:
        low = given("VOH min", req.number("drive.high_min"), "V", "lowest high level of the driver")
        high = given("VOH max", req.number("drive.high_max"), "V", "highest high level of the driver")
        return high, (Corner(ic_max, low),)
    sink = req.number("drive.low_max")
    least = req.number("drive.low_min")
    high = given("V drive max", float(vs_max.values) - least, "V", "highest supply over the lowest sink level")
    at_min = given("V drive min", float(vs_min.values) - sink, "V", "lowest supply over the highest sink level")
    if r_min is None:
        return high, (Corner(ic_max, at_min),)
    at_max = given("V drive", float(vs_max.values) - sink, "V", "highest supply over the highest sink level")
    return high, (Corner(ic_low, at_min), Corner(ic_max, at_max))


def _turn_off(req: Requirement, vs_max: Term, ic_max: Term) -> tuple[Term | None, Term | None, bool]:
    """Voltage when off, energy of an unclamped coil, and whether current and full voltage meet."""
    nothing = given("V clamp", 0.0, "V", "no clamp adds to the supply")
    if req.word("load.kind") != "coil":
        return load.off_voltage(VS=vs_max, V_clamp=nothing, V_drop=given("V drop", 0.0, "V")), None, False
    clamp = req.word("load.clamp")
    if clamp == "none":
        inductance = given("L", req.number("load.inductance"), "H", "inductance of the coil")
        return None, load.coil_energy(L=inductance, IC=ic_max), True
    drop = given("V diode", req.number("load.clamp_drop"), "V", "highest forward voltage of the clamp diode")
    if clamp == "zener":
        tolerance = req.number("load.clamp_tolerance")
        zener = req.number("load.clamp_voltage") * (1 + tolerance)
        nothing = given("VZ max", zener, "V", "highest zener voltage of the clamp")
    return load.off_voltage(VS=vs_max, V_clamp=nothing, V_drop=drop), None, True
