"""The worst values of one part with its network, on plain floats, each with its grade."""

from dataclasses import dataclass

from engine.evidence import Evidence

from .ieee import INF, NAN, div, exp, known, least, most
from .laws import (
    base_current,
    base_voltage_off,
    heating_share,
    hot_factor,
    junction_temperature,
    leakage,
    over_temperature,
    thermal_voltage,
    turn_off,
    turn_on,
    vbe_highest,
    vbe_lowest,
)
from .network import Need, Needs, Network, cold_rise, junction_limit, lightest_load, thermal_resistance
from .saturation import v_promised
from .sheet import VT_ROOM, Sheet
from .situation import Situation

G, D = int(Evidence.GUARANTEED), int(Evidence.DERIVED)
SLOWEST = 100e-6


@dataclass(frozen=True)
class Graded:
    """A number and how it is known."""

    value: float
    grade: int = G


@dataclass(frozen=True)
class Corner:
    ic: float
    needed: Graded
    ib: Graded
    v_room: Graded


@dataclass(frozen=True)
class Bounds:
    corners: tuple[Corner, ...]
    inrush: Corner | None
    ic_on_max: Graded
    ic_on_min: Graded
    ib_max: Graded
    drive: Graded
    vce_on: Graded
    power_most: Graded
    power: Graded
    power_allowed: Graded
    tj: Graded
    ic_off: Graded
    t_on: Graded
    t_off: Graded

    def columns(self, sit: Situation) -> dict[str, float]:
        """By the names of the contract; what cannot be stated is NaN."""
        values = {
            "vce_on_max": self.vce_on.value,
            "ic_on_max": self.ic_on_max.value,
            "ic_on_min": self.ic_on_min.value,
            "ib_on_min": least(*(c.ib.value for c in self.corners)),
            "ib_on_max": self.ib_max.value,
            "drive_current_max": self.drive.value,
            "forced_beta_max": most(*(div(c.ic, c.ib.value) for c in self.corners)),
            "power_max": self.power_most.value,
            "tj_max": self.tj.value,
            "ic_off_max": self.ic_off.value,
            "vce_off_max": sit.v_off,
            "t_on_max": self.t_on.value,
            "t_off_max": self.t_off.value,
        }
        return {name: NAN if abs(v) == INF else v for name, v in values.items()}


def bounds(sit: Situation, s: Sheet, n: Needs, net: Network) -> Bounds:
    """Heat is worked out at the first guess of the junction; hotter and yet allowed: again at the limit."""
    corners = tuple(_corner(sit, s, need, net, inrush=False) for need in n.corners)
    inrush = _corner(sit, s, n.inrush, net, inrush=True) if n.inrush else None
    found = _Heat(sit, s, n, net, corners, n.guess)
    if n.guess < found.tj.value <= n.tj_limit:
        found = _Heat(sit, s, n, net, corners, n.tj_limit)
    hot = most(found.tj.value, sit.number("ambient.max"))
    ic_off = _off_current(sit, s, net, NAN if hot == INF else hot, found.tj.grade)
    ic_on_min = Graded(sit.ic_least)
    if not known(sit.ic_least):
        grade = max(found.vce_on.grade, sit.ic_grade)
        ic_on_min = Graded(most((sit.vs_min - found.vce_on.value) / sit.r_max, 0.0), grade)
    return Bounds(
        corners, inrush, Graded(sit.ic_max, sit.ic_grade), ic_on_min, found.ib_max, found.drive, found.vce_on,
        found.power_most, found.power, found.allowed, found.tj, ic_off, found.t_on, found.t_off,
    )  # fmt: skip


def _corner(sit: Situation, s: Sheet, need: Need, net: Network, *, inrush: bool) -> Corner:
    tol, r_drive = sit.number("resistors.tolerance"), sit.number("drive.resistance")
    rb, rbe = net.rb * (1 + tol), net.rbe * (1 - tol)
    # VBE at the current itself is not known; at the needed one it is, and proves at least that current
    upper = base_current(need.drive, need.vbe, rb, r_drive, rbe)
    vbe = vbe_highest(s, need.ic, upper, sit.number("ambient.min"))
    traced = base_current(need.drive, vbe, rb, r_drive, rbe)
    ib = traced
    if known(need.ib):
        ib = most(traced, need.ib) if upper >= need.ib else upper
    ic_grade = D if inrush and sit.inductive else sit.ic_grade
    typical_gain = s.gain.typical or s.gain_low.typical
    # a gain stated at low VCE can promise saturation without any saturation limit
    saturation = D if s.sat_grade == Evidence.MISSING else s.sat_grade
    grade = max(D, saturation, ic_grade, int(Evidence.TYPICAL) if typical_gain else D)
    ib_grade = max(D, s.vbe_grade)
    room = Graded(v_promised(need.sat, div(need.ic, ib)), max(grade, ib_grade))
    return Corner(need.ic, Graded(need.ib, grade), Graded(ib, ib_grade), room)


class _Heat:
    """Losses and temperature with the junction taken at `guess` where a small VBE is the unkind one."""

    def __init__(
        self, sit: Situation, s: Sheet, n: Needs, net: Network, corners: tuple[Corner, ...], guess: float
    ) -> None:
        tol, self.r_drive = sit.number("resistors.tolerance"), sit.number("drive.resistance")
        self.sit, self.s, self.n, self.net, self.corners, self.guess = sit, s, n, net, corners, guess
        ic, hottest = sit.ic_max, sit.number("ambient.max")
        self.vbe_min = vbe_lowest(s, lightest_load(sit, n.v_on), guess)
        ib = base_current(sit.drive_max, self.vbe_min, net.rb * (1 - tol), self.r_drive, net.rbe * (1 + tol))
        self.ib_max = Graded(ib, D)
        self.drive = Graded(base_current(sit.drive_max, self.vbe_min, net.rb * (1 - tol), self.r_drive, INF), D)
        vbe_top = vbe_highest(s, ic, ib, sit.number("ambient.min"))
        v_room = most(*(c.v_room.value for c in corners))
        v_grade = max(c.v_room.grade for c in corners)
        self.t_on, self.t_off = self._times(tol)
        rth = thermal_resistance(sit, s)
        sink = known(sit.number("heatsink.case_to_ambient"))
        rth_grade = s.rth_jc_grade if sink else s.rth_ja_grade
        rating = s.pd_case if sink else s.pd_ambient
        allowed = least((junction_limit(sit, s) - hottest) / rth, rating if known(rating) else INF)
        self.allowed = Graded(allowed, max(D, rth_grade))
        edges = self._edges(allowed)
        share = self._share()
        extra = cold_rise(sit, s)
        other = share.value * (vbe_top * ib + extra * ic) + edges.value
        tj = junction_temperature(hottest, rth, other, share.value * v_room * ic)
        self.tj = Graded(tj, max(D, rth_grade, v_grade))
        self.vce_on = Graded(v_room * hot_factor(least(tj, 1e3)) + extra, self.tj.grade)
        on = self.vce_on.value * ic + vbe_top * ib
        on_grade = max(self.vce_on.grade, sit.ic_grade, s.vbe_grade)
        self.power_most = Graded(on + edges.value, max(on_grade, edges.grade))
        self.power = Graded(share.value * on + edges.value, max(share.grade, on_grade, edges.grade))

    def _share(self) -> Graded:
        f = self.sit.number("timing.frequency")
        if not known(f) or f == 0:
            return Graded(1.0)
        tau = 0.01 if known(self.sit.number("heatsink.case_to_ambient")) else 0.3
        return Graded(heating_share(self.sit.number("timing.duty_cycle"), f, tau), D)

    def _edges(self, allowed: float) -> Graded:
        """Mean power of the edges; times nobody states count as the slowest known where that is little."""
        f = self.sit.number("timing.frequency")
        if not known(f) or f == 0:
            return Graded(0.0)
        if self.sit.unclamped:
            return Graded(NAN)
        stated = known(self.t_on.value) and known(self.t_off.value)
        total = self.t_on.value + self.t_off.value if stated else 2 * SLOWEST
        grade = max(self.sit.ic_grade, self.t_on.grade if stated else D, self.t_off.grade if stated else D)
        power = self.sit.v_off * self.sit.ic_max * total / (2.0 if self.sit.inductive else 6.0) * f
        return Graded(NAN if not stated and power > 0.1 * allowed else power, grade)

    def _times(self, tol: float) -> tuple[Graded, Graded]:
        sit, s, net = self.sit, self.s, self.net
        v = sit.vs_max if sit.unclamped else sit.v_off
        first = self.corners[0]
        weakest = least(*(c.ib.value for c in self.corners))
        overdrive = first.ib.value * self.n.corners[0].gain / first.ic
        t_on = turn_on(s.on, sit.ic_max, v, weakest, overdrive)
        low_vbe = most(self.vbe_min - VT_ROOM * 2.302585092994046, 0.0)  # after the current has fallen by a decade
        through = 0.0 if sit.off_open else (low_vbe - sit.off_level) / (net.rb * (1 + tol) + self.r_drive)
        reverse = most(through, 0.0) + low_vbe / (net.rbe * (1 + tol)) - sit.off_leak
        gain = s.proven_gain(s.off.ic) if s.off else NAN
        t_off = turn_off(s.off, self.ib_max.value, reverse, sit.ic_max, v, gain, self.guess)
        return Graded(t_on, max(D, first.ib.grade, sit.ic_grade)), Graded(t_off, D)


def _off_current(sit: Situation, s: Sheet, net: Network, hot: float, hot_grade: int) -> Graded:
    """Leakage, and what the base voltage that it and the driver leave lets through."""
    leak = leakage(s, sit.vs_max, hot)
    rb = INF if sit.off_open else net.rb
    tol, r_drive = sit.number("resistors.tolerance"), sit.number("drive.resistance")
    vb = base_voltage_off(sit.off_level, rb, net.rbe, r_drive, leak + sit.off_leak, tol)
    value = leak + s.floor_i * exp((vb - over_temperature(s.floor_v, hot)) / thermal_voltage(hot))
    return Graded(value, max(D, s.leak_grade, hot_grade))
