"""The base network of a switch: which RB and RBE all corners leave, and the choice from the series.

RB must be small enough for the base current that saturation and overdrive ask for at every supply corner,
and large enough for the driver and the base. RBE must hold the base down against leakage and the driver's
low level when hot, and be large enough for the drive to pay for it.
"""

from collections.abc import Sequence
from dataclasses import dataclass, fields, replace

import numpy as np
from numpy.typing import NDArray

from .. import preferred
from ..physics import drive, junction, leakage, saturation
from ..physics.area import allowed_current
from ..physics.constants import ROOM, ROOM_KELVIN, ZERO_CELSIUS, thermal_voltage
from ..prepared import Prepared
from .switch_situation import UNSTATED_DARLINGTON, UNSTATED_ON_VOLTAGE, Corner, Situation

Floats = NDArray[np.float64]

PLAIN_VCEO = 100.0  # V: up to here a small type is plain
PLAIN_DROP = 0.35  # V: a collector drop up to which quasi-saturation is not to be reckoned with
LEAST_RB = 1.0  # Ω: where the driver's own resistance limits the current, something still stands in the base lead
LEAST_RBE = 10.0  # Ω: below it no network is meant
PLACES = tuple(np.linspace(1.0, 0.0, 9))  # where in the window RB is tried, from the largest


@dataclass(frozen=True, eq=False)
class Need:
    """What one corner asks of the base. Shapes (n,)."""

    drive: Floats  # (), the level at the driver there
    witnesses: saturation.Witnesses
    gain_stated: Floats  # the gain floor that the sheet proves there, 25 °C: overdrive counts from it; NaN: none
    beta_allowed: Floats
    ib: Floats
    vbe: Floats  # highest VBE at that base current, coldest

    def take(self, rows: NDArray[np.intp]) -> "Need":
        """The drive that some of the parts need."""
        cut = (self.gain_stated[rows], self.beta_allowed[rows], self.ib[rows], self.vbe[rows])
        return Need(self.drive, self.witnesses.take(rows), *cut)


@dataclass(frozen=True, eq=False)
class Needs:
    """What all corners ask, and what the part allows. Shapes (n,)."""

    corners: tuple[Need, ...]
    inrush: Need | None  # of a lamp that must stay saturated while cold; no base current where the safe area holds
    v_on_most: Floats
    tj_guess: Floats  # highest junction temperature if every other demand is met
    tj_limit: Floats
    vbe_min: Floats  # lowest VBE when on and hot
    ib_limit: Floats
    leak: Floats
    v_base_allowed: Floats

    def take(self, rows: NDArray[np.intp]) -> "Needs":
        """What some of the parts need."""
        cut = {one.name: getattr(self, one.name) for one in fields(self)}
        for name, value in cut.items():
            if isinstance(value, np.ndarray):
                cut[name] = value[rows]
        cut["corners"] = tuple(one.take(rows) for one in self.corners)
        cut["inrush"] = None if self.inrush is None else self.inrush.take(rows)
        return Needs(**cut)

    @property
    def drives(self) -> tuple[Need, ...]:
        """Everything that the base current must satisfy."""
        return self.corners if self.inrush is None else (*self.corners, self.inrush)


@dataclass(frozen=True, eq=False)
class Network:
    """A base network a part. Ω, shapes (n,)."""

    rb: Floats
    rbe: Floats  # infinite: none
    rb_low: Floats  # the window that all corners leave for RB, with this RBE
    rb_high: Floats

    def take(self, rows: NDArray[np.intp]) -> "Network":
        """The network of some of the parts."""
        return Network(self.rb[rows], self.rbe[rows], self.rb_low[rows], self.rb_high[rows])

    @classmethod
    def joined(cls, nets: Sequence["Network"]) -> "Network":
        """Networks one after the other."""
        return cls(*(np.concatenate([getattr(net, one.name) for net in nets]) for one in fields(cls)))

    def put(self, rows: NDArray[np.intp], other: "Network") -> "Network":
        """This network, but `other` for the parts at `rows`."""
        columns = [self.rb.copy(), self.rbe.copy(), self.rb_low.copy(), self.rb_high.copy()]
        for mine, theirs in zip(columns, (other.rb, other.rbe, other.rb_low, other.rb_high), strict=True):
            mine[rows] = theirs
        return Network(*columns)

    def where(self, mask: NDArray[np.bool_], other: "Network") -> "Network":
        """This network, but `other` at `mask`."""
        pairs = ((other.rb, self.rb), (other.rbe, self.rbe), (other.rb_low, self.rb_low), (other.rb_high, self.rb_high))
        return Network(*(np.where(mask, theirs, mine) for theirs, mine in pairs))


def either(a: Floats, b: Floats) -> Floats:
    """The larger of two lower bounds where both are known, else the one that is."""
    return np.where(np.isnan(a), b, np.where(np.isnan(b), a, np.maximum(a, b)))


def needs(sit: Situation, p: Prepared) -> Needs:
    """What the requirement asks of every part."""
    req = sit.requirement
    asked = req.number("limits.on_voltage_max")
    unstated = np.where(p.darlington, UNSTATED_DARLINGTON, UNSTATED_ON_VOLTAGE)
    v_on = np.full(len(p), asked) if not np.isnan(asked) else unstated
    tj_limit = junction_limit(sit, p)
    guess = _tj_guess(sit, p, v_on, tj_limit)
    hot = saturation.hot_factor.raw(guess)
    v_room = v_on / hot - cold_rise(sit, p)
    cold = cold_factor(sit, p)
    corners = tuple(_need(sit, p, c, v_room, cold) for c in sit.corners)
    inrush = _inrush_need(sit, p, unstated, cold)
    guess = np.minimum(guess, _tj_guess(sit, p, _promised(corners) * hot + cold_rise(sit, p), tj_limit))
    ic_least = lightest_load(sit, v_on)
    vbe_min = junction.vbe_hot.raw(ic_least, guess, p.floor_v, p.floor_i)
    leak = leakage.leakage_most(float(sit.vs_max.values), guess, p.leak_v, p.leak_t, p.leak_i, p.vceo, p.darlington)
    allowed = leakage.base_voltage_allowed(
        req.number("limits.off_current_max"), leak, leakage.floor_hot.raw(p.floor_v, guess), p.floor_i,
        np.asarray(thermal_voltage(guess)),
    )  # fmt: skip
    return Needs(corners, inrush, v_on, guess, tj_limit, vbe_min, base_limit(p), leak, allowed)


def junction_limit(sit: Situation, p: Prepared) -> Floats:
    """The part's highest junction temperature, or the requirement's lower one. [°C]"""
    asked = sit.number("limits.junction_max")
    return p.tj_max if np.isnan(asked) else np.minimum(p.tj_max, asked)


def thermal_resistance(sit: Situation, p: Prepared) -> Floats:
    """Junction to ambient: in air, or through the case and the requirement's heat sink. [K/W]"""
    sink = sit.number("heatsink.case_to_ambient")
    return p.rth_ja if np.isnan(sink) else p.rth_jc + sink


def cold_factor(sit: Situation, p: Prepared) -> Floats:
    """What is left of the 25 °C gain at the coldest; nothing is claimed above 25 °C."""
    coldest = min(sit.number("ambient.min"), ROOM)
    return ((coldest + ZERO_CELSIUS) / ROOM_KELVIN) ** p.cold_exponent


def cold_rise(sit: Situation, p: Prepared) -> Floats:
    """How much a Darlington's on-voltage grows when cold: one junction of it. [V]"""
    rise = junction.COLD_SHIFT * max(ROOM - sit.number("ambient.min"), 0.0)
    return np.where(p.darlington, rise, 0.0)


def base_limit(p: Prepared) -> Floats:
    """Base current the part may take: its rating, else what its sheet tests or a tenth of IC. [A]"""
    usual = either(p.ib_tested, p.ic / 10)
    return np.where(np.isnan(p.ib), usual, p.ib)


def stated_gain(p: Prepared, ic: "float | Floats") -> Floats:
    """The gain floor at `ic`, 25 °C, from hFE limits; where none reaches, what the saturation tests prove.

    NaN where neither does.
    """
    stated = either(p.gain.at(ic, p.slope_below), p.gain_low.at(ic, p.slope_below))
    return np.where(np.isnan(stated), p.gain_plain.at(ic, p.slope_below), stated)


def switch_witnesses(p: Prepared, ic: float, cold: Floats) -> saturation.Witnesses:
    """Saturation limits and gain floors of every part at one collector current."""
    plain = (~p.power & (p.vceo <= PLAIN_VCEO)) | (p.v_epi * ic <= PLAIN_DROP)
    low = p.gain_low.at(ic, p.slope_below) * cold
    gain = either(low, np.where(plain, p.gain_plain.at(ic, p.slope_below), p.gain_quasi.at(ic, p.slope_below)) * cold)
    stretch = plain & ~p.darlington
    return saturation.witnesses(
        ic, p.sat_ic, p.sat_ib, p.sat_v, cold, p.slope_below, gain, low, p.gain_low.vce, stretch, ~p.darlington
    )


def vbe_highest(sit: Situation, p: Prepared, ic: float, ib: Floats) -> Floats:
    """Highest VBE at (ic, ib) and the coldest. [V]"""
    at_room = junction.vbe_highest(np.asarray(ic), ib, p.vbe_ic, p.vbe_ib, p.vbe_v)
    junctions = np.where(p.darlington, 2.0, 1.0)
    return junction.vbe_cold.raw(at_room, junctions, sit.number("ambient.min"))


def _need(sit: Situation, p: Prepared, corner: Corner, v_room: Floats, cold: Floats) -> Need:
    ic = float(corner.ic.values)
    w = switch_witnesses(p, ic, cold)
    gain = stated_gain(p, ic)
    beta = saturation.beta_allowed(w, v_room)
    floor = np.where(np.isnan(gain), np.inf, gain)
    ib = drive.base_current_needed.raw(ic, beta, sit.number("choice.overdrive"), floor)
    return Need(corner.drive.values, w, gain, beta, ib, vbe_highest(sit, p, ic, ib))


def _promised(corners: tuple[Need, ...]) -> Floats:
    """The on-voltage at 25 °C that the needed base current brings; infinite where nothing is promised. [V]"""
    worst = np.zeros(len(corners[0].ib))
    for need in corners:
        v = saturation.v_promised(need.witnesses, need.beta_allowed)
        worst = np.maximum(worst, np.where(np.isnan(v), np.inf, v))
    return worst


def _inrush_need(sit: Situation, p: Prepared, unstated: Floats, cold: Floats) -> Need | None:
    """What keeps a cold lamp's switch saturated; nothing where the safe area takes the inrush."""
    if sit.ic_inrush is None:
        return None
    corner = Corner(sit.ic_inrush, sit.corners[-1].drive)
    need = _need(sit, p, corner, unstated, cold)
    ic = float(sit.ic_inrush.values)
    survives = p.soa_dc & (allowed_current(sit.vs_max.values, p.soa_v, p.soa_i) >= ic)
    ib = np.where(survives, 0.0, ic / need.beta_allowed)  # for its short time no overdrive is asked
    vbe = np.where(survives, 0.0, vbe_highest(sit, p, ic, ib))
    return replace(need, ib=ib, vbe=vbe)


def _tj_guess(sit: Situation, p: Prepared, v_on: Floats, tj_limit: Floats) -> Floats:
    """Junction temperature with the on-voltage and the driver at their limits, at most the part's own. [°C]"""
    ic = float(sit.ic_max.values)
    i_most = np.minimum(base_limit(p), sit.number("drive.current_max"))
    loss = ic * v_on + i_most * either(np.max(np.nan_to_num(p.vbe_v, nan=1.0), axis=0), np.ones(len(p)))
    rise = thermal_resistance(sit, p) * loss
    limit = np.where(np.isnan(tj_limit), 150.0, tj_limit)
    hottest = sit.number("ambient.max")
    guess = hottest + np.where(np.isnan(rise), np.inf, rise)
    return np.maximum(np.minimum(guess, limit), hottest)


def lightest_load(sit: Situation, v_on: Floats) -> Floats:
    """The lightest load, for the lowest VBE; a small share of the heaviest where the supply barely drives it. [A]"""
    if sit.ic_min_constant is not None:
        return sit.ic_min_constant.values
    assert sit.r_max is not None
    return np.maximum((sit.vs_min.values - v_on) / sit.r_max.values, 1e-3 * sit.ic_max.values)


def window(sit: Situation, p: Prepared, n: Needs, rbe: Floats) -> tuple[Floats, Floats]:
    """Smallest and largest nominal RB that every corner leaves with this RBE. [Ω]"""
    tol, r_drive = sit.number("resistors.tolerance"), sit.number("drive.resistance")
    strongest = float(sit.drive_max.values)
    by_driver = drive.rb_smallest(
        np.asarray(strongest), n.vbe_min, np.asarray(sit.number("drive.current_max")), r_drive, tol
    )
    # RBE takes its share before the base: what it takes at the least VBE is not lost on the base's limit
    base_share = n.ib_limit + n.vbe_min / (rbe * (1 + tol))
    by_base = drive.rb_smallest(np.asarray(strongest), n.vbe_min, base_share, r_drive, tol)
    low = np.where(np.isnan(by_base), by_driver, np.maximum(by_driver, by_base))
    low = np.maximum(low, LEAST_RB)
    high = np.full(len(p), np.inf)
    for need in n.drives:
        high = np.minimum(high, drive.rb_largest(need.drive, need.vbe, need.ib, rbe, r_drive, tol))
    return low, high


def design(sit: Situation, p: Prepared, n: Needs) -> Network:
    """The network for every part: RB in the middle of its window, RBE only where turn-off needs it."""
    series = sit.requirement.word("resistors.series")
    tol = sit.number("resistors.tolerance")
    none = np.full(len(p), np.inf)
    low, high = window(sit, p, n, none)
    off_level = float(sit.off_level.values)
    if sit.off_open:
        quiet = np.full(len(p), -np.inf)  # nothing but RBE holds the base
    else:
        quiet = ((n.v_base_allowed - off_level) / n.leak - sit.number("drive.resistance")) / (1 + tol)
    usable = np.minimum(high, np.where(np.isnan(quiet), high, quiet))
    fits = preferred.at_least(low, series) <= usable
    plain = Network(_inside(low, np.where(fits, usable, high), series), none, low, high)
    if fits.all():
        return plain
    return plain.where(~fits, _with_rbe(sit, p, n, plain))


def _turned_off_at_least(sit: Situation, p: Prepared, n: Needs, plain: Network) -> Network:
    """Where the drive cannot pay for an RBE: one that turns the part off, so that only the drive is found wanting."""
    series = sit.requirement.word("resistors.series")
    _, most = rbe_interval(sit, n, plain.rb)
    rbe = np.where(np.isfinite(most) & (most >= LEAST_RBE), preferred.at_most(most, series), np.inf)
    low, high = window(sit, p, n, rbe)
    serves = preferred.at_most(high, series)
    return Network(np.where(np.isfinite(serves) & (serves > 0), serves, plain.rb), rbe, low, high)


def _with_rbe(sit: Situation, p: Prepared, n: Needs, plain: Network) -> Network:
    """RB as large as leaves RBE a comfortable interval; else where that is widest; else a part that only turns off."""
    best = _turned_off_at_least(sit, p, n, plain)
    rows = np.flatnonzero(plain.rb_low <= plain.rb_high)  # elsewhere no drive can pay for anything
    rb, rbe = _comfortable(sit, n.take(rows), plain.rb_low[rows], plain.rb_high[rows])
    chosen_rb, chosen_rbe = best.rb.copy(), best.rbe.copy()
    found = ~np.isnan(rb)
    chosen_rb[rows[found]], chosen_rbe[rows[found]] = rb[found], rbe[found]
    low, high = window(sit, p, n, chosen_rbe)
    return Network(chosen_rb, chosen_rbe, low, high)


def _comfortable(sit: Situation, n: Needs, low: Floats, high: Floats) -> tuple[Floats, Floats]:
    """RB and RBE for parts whose window is open; NaN where no preferred pair does both."""
    series = sit.requirement.word("resistors.series")
    comfortable = 1.5 * preferred.step(series)
    rb, least_kept, most_kept = (np.full(len(low), np.nan) for _ in range(3))
    widest = np.zeros(len(low))
    ends = (preferred.at_least(low, series), preferred.at_most(high, series))
    for place in PLACES:
        tried = at_place(low, high, place, series, ends)
        least, most = rbe_interval(sit, n, tried)
        possible = np.isfinite(least) & (preferred.at_least(least, series) <= most)
        width = np.where(possible, most / least, 0.0)
        better = (width > widest) & (widest < comfortable)
        rb = np.where(better, tried, rb)
        least_kept, most_kept = np.where(better, least, least_kept), np.where(better, most, most_kept)
        widest = np.where(better, width, widest)
    # a drive that leaves RBE free is still given one it pays for easily
    middle = _inside(least_kept, np.minimum(most_kept, least_kept * 10), series)
    return rb, middle


def at_an_end(sit: Situation, p: Prepared, n: Needs, plain: Network, place: float, *, stiff: bool) -> Network:
    """RB at a place of its window, RBE at an end of its interval.

    The smallest RBE that the drive can pay for turns off quickest; the largest that still turns off leaves the
    most base current.
    """
    series = sit.requirement.word("resistors.series")
    rb = at_place(plain.rb_low, plain.rb_high, place, series)
    least, most = rbe_interval(sit, n, rb)
    rbe = preferred.at_least(least, series) if stiff else preferred.at_most(most, series)
    low, high = window(sit, p, n, rbe)
    return Network(rb, rbe, low, high)


def rbe_interval(sit: Situation, n: Needs, rb: Floats) -> tuple[Floats, Floats]:
    """Smallest RBE that the drive pays for at every corner, largest that turns off when hot. [Ω]"""
    tol, r_drive = sit.number("resistors.tolerance"), sit.number("drive.resistance")
    least = np.zeros_like(rb)
    for need in n.drives:
        least = np.maximum(least, drive.rbe_smallest(need.drive, need.vbe, need.ib, rb, r_drive, tol))
    if sit.off_open:
        most = drive.rbe_largest_open(n.v_base_allowed, n.leak + sit.off_leak, tol)
    else:
        most = drive.rbe_largest(n.v_base_allowed, float(sit.off_level.values), n.leak, rb, r_drive, tol)
    return least, most


def at_place(low: Floats, high: Floats, place: float, series: str, ends: tuple[Floats, Floats] | None = None) -> Floats:
    """The preferred value at a place (0 lowest, 1 highest) of a window on a ratio scale, inside it if one is.

    `ends` are the lowest and the highest preferred value inside, where the caller already has them.
    """
    spread = np.where((high > low) & (low > 0), high / np.where(low > 0, low, 1.0), 1.0)
    start = np.where(low > 0, low, high)
    wanted = preferred.nearest(start * spread**place, series)
    lowest, highest = ends or (preferred.at_least(low, series), preferred.at_most(high, series))
    return np.where(wanted < low, lowest, np.where(wanted > high, highest, wanted))


def _inside(low: Floats, high: Floats, series: str) -> Floats:
    """The preferred value in the middle of a window; where it is empty the largest that serves the base."""
    top = np.where(np.isinf(high), low * 10, high)
    bottom = np.where(low > 0, low, top / 10)
    ends = (preferred.at_least(bottom, series), preferred.at_most(top, series))
    middle = at_place(bottom, top, 0.5, series, ends)
    serves = np.where(np.isinf(high), ends[0], ends[1])
    empty = ends[0] > top
    fallback = np.where(np.isfinite(serves) & (serves > 0), serves, ends[0])
    return np.where(empty | np.isnan(top), fallback, middle)
