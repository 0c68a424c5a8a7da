"""A shelf made ready to judge: what every requirement needs of it, worked out once when it is loaded.

Here several statements of a sheet become one: the unkind one of contradicting values, a thermal resistance
from a derating line, a gain floor from its points, a typical value (graded so) where there is no limit.
"""

from collections.abc import Mapping
from dataclasses import dataclass, fields

import numpy as np
from numpy.typing import NDArray

from .curves import Curve
from .evidence import Evidence, Grades
from .part import STRUCTURES
from .physics.constants import ROOM, ROOM_KELVIN, ZERO_CELSIUS, thermal_voltage
from .shelf import SYMBOL_CODES, Shelf

Floats = NDArray[np.float64]
Mask = NDArray[np.bool_]

LOW_VCE = 2.0  # V: a gain stated at or below this speaks for a switch
COLD_EXPONENT = 2.5  # of absolute temperature, see source "gain cold"
DARLINGTON_EXPONENT = 5.0
POWER_PACKAGES = ("TO-3", "TO-66", "TO-220", "TO-126", "TO-202", "TO-218", "TO-247", "TO-252", "TO-263", "TO-264")
SMALL_PD = 1.0  # W: a rating without reference temperature up to here is an ambient one (common practice)


@dataclass(frozen=True, eq=False)
class Prepared:
    """Columns (n,) and points (k, n) of a shelf, ready to judge."""

    known: Mask  # structure stated
    pnp: Mask
    darlington: Mask
    prebiased: Mask
    power: Mask  # a power type: second breakdown and quasi-saturation are to be reckoned with
    vceo: Floats
    vebo: Floats
    ic: Floats
    icm: Floats
    ib: Floats
    ib_tested: Floats  # largest base current of the saturation tests
    tj_max: Floats
    rth_ja: Floats
    rth_ja_grade: Grades
    rth_jc: Floats
    rth_jc_grade: Grades
    pd_ambient: Floats  # the highest power on an ambient rating
    pd_case: Floats
    es_b: Floats
    gain: Curve  # from the points at any VCE above LOW_VCE
    gain_low: Curve  # from the points at low VCE
    gain_switch: Curve  # the same, carried on above them by saturation tests
    cold_exponent: Floats
    slope_below: Floats
    sat_ic: Floats  # (k, n) saturation tests in rising IC
    sat_ib: Floats
    sat_v: Floats
    sat_grade: Grades  # (n,)
    vbe_ic: Floats  # (k, n) VBE(sat) maximums
    vbe_ib: Floats
    vbe_v: Floats
    vbe_grade: Grades  # (n,)
    floor_v: Floats  # junction floor: at 25 °C at least floor_v at floor_i
    floor_i: Floats
    leak_t: Floats  # (k, n) leakage maximums
    leak_v: Floats
    leak_i: Floats
    leak_grade: Grades  # (n,)
    on_time: Floats  # with its test conditions; NaN where a condition is not stated
    on_ic: Floats
    on_ib: Floats
    on_vcc: Floats
    off_time: Floats
    off_ic: Floats
    off_ib: Floats
    off_ib2: Floats
    off_vcc: Floats
    soa_v: Floats  # (k, n) corners of the safe area for the longest pulse on file, rising VCE
    soa_i: Floats

    def __len__(self) -> int:
        return len(self.ic)

    def take(self, rows: slice) -> "Prepared":
        """Some of the parts, as views."""
        cut = {}
        for one in fields(self):
            value = getattr(self, one.name)
            cut[one.name] = value.take(rows) if isinstance(value, Curve) else value[..., rows]
        return Prepared(**cut)


def prepare(shelf: Shelf) -> Prepared:
    """Everything a requirement needs of `shelf`."""
    with np.errstate(all="ignore"):
        columns: dict[str, Floats | Mask | Grades | Curve] = {}
        columns |= _structure(shelf)
        columns |= _ratings(shelf)
        columns |= _thermal(shelf)
        columns |= _saturation(shelf)
        columns |= _junction(shelf)
        columns |= _gain(shelf, columns)
        columns |= _leakage(shelf, columns)
        columns |= _times(shelf)
        columns |= _safe_area(shelf)
        return Prepared(**columns)  # type: ignore[arg-type]


def _structure(shelf: Shelf) -> dict[str, Mask]:
    code = shelf.structure
    pnp = [i for i, word in enumerate(STRUCTURES) if word.startswith("pnp")]
    darlington = [i for i, word in enumerate(STRUCTURES) if word.endswith("darlington")]
    prebiased = [i for i, word in enumerate(STRUCTURES) if word.endswith("prebiased")]
    return {
        "known": code >= 0,
        "pnp": np.isin(code, pnp),
        "darlington": np.isin(code, darlington),
        "prebiased": np.isin(code, prebiased),
    }


def _ratings(shelf: Shelf) -> dict[str, Floats]:
    r = shelf.ratings
    return {
        "vceo": np.where(np.isnan(r["vceo"]), r["v_br_ceo"], r["vceo"]),
        "vebo": np.where(np.isnan(r["vebo"]), r["v_br_ebo"], r["vebo"]),
        "ic": r["ic"],
        "icm": np.where(np.isnan(r["icm"]), r["ic"], r["icm"]),
        "ib": r["ib"],
        "tj_max": r["tj_max"],
        "es_b": r["es_b"],
    }


def _thermal(shelf: Shelf) -> dict[str, Floats | Grades | Mask]:
    """Thermal resistances: as printed, else from the derating line, else from power and temperature."""
    r, pd = shelf.ratings, shelf.points["PD"]
    tj = r["tj_max"]
    bare = np.isnan(pd["ta"]) & np.isnan(pd["tc"])
    at_ambient, at_case = ~np.isnan(pd["ta"]), ~np.isnan(pd["tc"])
    small = bare & (pd["max"] <= SMALL_PD)
    ambient_points = np.where(at_ambient, (tj - pd["ta"]) / pd["max"], np.where(small, (tj - ROOM) / pd["max"], np.nan))
    case_points = np.where(at_case, (tj - pd["tc"]) / pd["max"], np.nan)
    ja, ja_grade = _resistance(r["rth_ja"], 1 / r["slope_ta"], _most(ambient_points))
    jc, jc_grade = _resistance(r["rth_jc"], 1 / r["slope_tc"], _most(case_points))
    pd_case = _most(np.where(at_case, pd["max"], np.nan))
    named = np.isin(np.array([str(p).upper() for p in shelf.package], dtype=object), POWER_PACKAGES)
    return {
        "rth_ja": ja,
        "rth_ja_grade": ja_grade,
        "rth_jc": jc,
        "rth_jc_grade": jc_grade,
        "pd_ambient": _most(np.where(at_ambient | small, pd["max"], np.nan)),
        "pd_case": np.where(np.isnan(pd_case), _most(np.where(bare, pd["max"], np.nan)), pd_case),
        "power": named | (pd_case >= 10) | (r["ic"] >= 3),
    }


def _resistance(printed: Floats, from_slope: Floats, from_power: Floats) -> tuple[Floats, Grades]:
    """The worse of what is printed and what the slope says; from power and TJ only where neither is there."""
    both = np.where(np.isnan(printed), from_slope, np.where(from_slope > printed, from_slope, printed))
    value = np.where(np.isnan(both), from_power, both)
    grade = np.where(value == printed, Evidence.GUARANTEED, Evidence.DERIVED).astype(np.int8)
    return value, grade


def _saturation(shelf: Shelf) -> dict[str, Floats | Grades]:
    sat = shelf.points["VCE(sat)"]
    v, typical = _limit_or_typical(sat["max"], sat["typ"])
    used = _room_points(sat["temp"], ~np.isnan(v) & (sat["ic"] > 0) & (sat["ib"] > 0), hotter=True)
    order = np.argsort(np.where(used, sat["ic"], np.nan), axis=0, kind="stable")
    ic, ib, volts = (np.take_along_axis(np.where(used, c, np.nan), order, 0) for c in (sat["ic"], sat["ib"], v))
    return {
        "sat_ic": ic,
        "sat_ib": ib,
        "sat_v": volts,
        "sat_grade": _grade(used, typical),
        "ib_tested": _most(np.where(used, sat["ib"], np.nan)),
    }


def _junction(shelf: Shelf) -> dict[str, Floats | Grades]:
    """VBE from above (saturation tests) and from below (minimums on file, else common practice)."""
    sat, on = shelf.points["VBE(sat)"], shelf.points["VBE(on)"]
    v, typical = _limit_or_typical(sat["max"], sat["typ"])
    used = ~np.isnan(v) & (sat["ic"] > 0) & (sat["ib"] > 0)
    used = _room_points(sat["temp"], used, hotter=False)
    vt = float(thermal_voltage(ROOM))
    merit, at = np.full(len(shelf), -np.inf), np.full(len(shelf), np.nan)
    volts = np.full(len(shelf), np.nan)
    # what a minimum loses to the ohmic drop of its own test current: common practice
    for points, ohmic in ((on, 0.03), (sat, 0.06)):
        for low, ic in zip(points["min"], points["ic"], strict=True):
            better = (low - ohmic - vt * np.log(ic)) > merit
            merit = np.where(better, low - ohmic - vt * np.log(ic), merit)
            volts, at = np.where(better, low - ohmic, volts), np.where(better, ic, at)
    stated = ~np.isnan(volts)
    return {
        "vbe_ic": np.where(used, sat["ic"], np.nan),
        "vbe_ib": np.where(used, sat["ib"], np.nan),
        "vbe_v": np.where(used, v, np.nan),
        "vbe_grade": _grade(used, typical),
        "floor_v": np.where(stated, volts, 0.60),
        "floor_i": np.where(stated, at, shelf.ratings["ic"] / 10),
    }


def _gain(shelf: Shelf, ready: dict[str, Floats | Mask | Grades | Curve]) -> dict[str, Floats | Curve]:
    points = shelf.points["hFE"]
    gain, typical = _limit_or_typical(points["min"], points["typ"])
    stated = ~np.isnan(gain) & (points["ic"] > 0)
    used = _room_points(points["temp"], stated, hotter=False)
    # a gain stated without VCE says nothing about a low one
    low = used & (points["vce"] <= LOW_VCE)
    high = used & ~low
    ic, vce = points["ic"], points["vce"]
    curve = Curve.through(ic, gain, vce, high, typical)
    curve_low = Curve.through(ic, gain, vce, low, typical)
    sat_ic, sat_ib, sat_v = (np.asarray(ready[name]) for name in ("sat_ic", "sat_ib", "sat_v"))
    top = np.where(np.isnan(curve_low.top), -np.inf, np.exp(curve_low.top))
    beyond = ~np.isnan(sat_v) & (sat_ic > top)
    switch = Curve.through(
        np.concatenate([ic, sat_ic]),
        np.concatenate([gain, sat_ic / sat_ib]),
        np.concatenate([vce, sat_v]),
        np.concatenate([low, beyond]),
        np.concatenate([typical, np.broadcast_to(np.asarray(ready["sat_grade"]) >= Evidence.TYPICAL, sat_v.shape)]),
    )
    darlington = np.asarray(ready["darlington"])
    slope = np.where(darlington, 1.0, 0.5)
    usual = np.where(darlington, DARLINGTON_EXPONENT, COLD_EXPONENT)
    cold = stated & (points["temp"] < 15)
    exponent = _cold_exponent(points, gain, cold, (curve, curve_low), slope)
    return {
        "gain": curve,
        "gain_low": curve_low,
        "gain_switch": switch,
        "slope_below": slope,
        "cold_exponent": np.where(np.isnan(exponent), usual, exponent),
    }


def _cold_exponent(
    points: Mapping[str, Floats], gain: Floats, cold: Mask, curves: tuple[Curve, Curve], slope: Floats
) -> Floats:
    """The exponent that a sheet's own cold points imply against its room points; the hardest of them."""
    hardest = np.full(gain.shape[1], -np.inf)
    for ic, temp, minimum, here in zip(points["ic"], points["temp"], gain, cold, strict=True):
        # the higher of the room floors is the harder reference
        room = np.max([np.nan_to_num(one.at(ic, slope), nan=-np.inf) for one in curves], axis=0)
        exponent = np.log(minimum / room) / np.log((temp + ZERO_CELSIUS) / ROOM_KELVIN)
        hardest = np.where(here & (exponent > hardest) & np.isfinite(exponent), exponent, hardest)
    return np.where(np.isinf(hardest), np.nan, np.maximum(hardest, 0.0))


def _leakage(shelf: Shelf, ready: dict[str, Floats | Mask | Grades | Curve]) -> dict[str, Floats | Grades]:
    """Collector leakage maximums. A Darlington's inner base floats: only what was measured whole counts."""
    leak = shelf.points["leakage"]
    v, typical = _limit_or_typical(leak["max"], leak["typ"])
    icbo_only = leak["symbol"] == SYMBOL_CODES["ICBO"]
    used = ~np.isnan(v) & ~np.isnan(leak["v"]) & ~(icbo_only & np.asarray(ready["darlington"]))
    return {
        "leak_t": np.where(used, leak["temp"], np.nan),
        "leak_v": np.where(used, leak["v"], np.nan),
        "leak_i": np.where(used, v, np.nan),
        "leak_grade": _grade(used, typical),
    }


def _times(shelf: Shelf) -> dict[str, Floats]:
    """The first complete pair of switching times: ton or td + tr, toff or ts + tf, with test conditions."""
    on, off = shelf.points["on times"], shelf.points["off times"]
    columns = _one_time(on, "ton", ("td", "tr"), ("ic", "ib", "vcc"), "on")
    return columns | _one_time(off, "toff", ("ts", "tf"), ("ic", "ib", "ib2", "vcc"), "off")


def _one_time(
    points: Mapping[str, Floats], whole: str, halves: tuple[str, str], conditions: tuple[str, ...], prefix: str
) -> dict[str, Floats]:
    found = {name: np.full(points["max"].shape[1], np.nan) for name in (*halves, whole)}
    test = {(name, c): np.full(points["max"].shape[1], np.nan) for name in found for c in conditions}
    needed = [c for c in conditions if c != "vcc"]
    for row in range(len(points["max"])):
        complete = ~np.isnan(points["max"][row])
        for condition in needed:
            complete = complete & (points[condition][row] > 0)
        for name in found:
            here = complete & (points["symbol"][row] == SYMBOL_CODES[name]) & np.isnan(found[name])
            found[name] = np.where(here, points["max"][row], found[name])
            for c in conditions:
                test[name, c] = np.where(here, points[c][row], test[name, c])
    a, b = halves
    alike = np.ones(len(found[a]), dtype=bool)
    for condition in needed:
        alike &= test[a, condition] == test[b, condition]
    total = np.where(alike, found[a] + found[b], np.nan)
    use_whole = ~np.isnan(found[whole])
    columns = {f"{prefix}_time": np.where(use_whole, found[whole], total)}
    for c in conditions:
        columns[f"{prefix}_{c}"] = np.where(use_whole, test[whole, c], test[a, c])
    return columns


def _safe_area(shelf: Shelf) -> dict[str, Floats]:
    """Corners of the safe area, those of the longest pulse on file where there are several."""
    soa = shelf.points["SOA"]
    longest = np.where(np.isnan(soa["t"]), np.inf, soa["t"])
    used = ~np.isnan(soa["value"]) & (soa["vce"] > 0)
    longest = np.where(used, longest, -np.inf)
    used &= longest == longest.max(axis=0)
    return {"soa_v": np.where(used, soa["vce"], np.nan), "soa_i": np.where(used, soa["value"], np.nan)}


def _limit_or_typical(limit: Floats, typical: Floats) -> tuple[Floats, Floats]:
    """A part's limits; only a part without any falls back on typicals. Values and 1 where typical, (k, n)."""
    without = np.isnan(limit).all(axis=0)
    fallback = np.isnan(limit) & without
    return np.where(fallback, typical, limit), fallback.astype(np.float64)


def _room_points(temp: Floats, stated: Mask, hotter: bool) -> Mask:
    """The points at room temperature; where a part has none, those on the unkind side of it."""
    room = stated & (temp >= 15) & (temp <= 35)
    other = stated & ((temp > 35) if hotter else (temp < 15))
    return np.where(room.any(axis=0), room, other)


def _grade(used: Mask, typical: Floats) -> Grades:
    is_typical = (used & (typical > 0)).any(axis=0)
    grade = np.where(is_typical, Evidence.TYPICAL, Evidence.GUARANTEED)
    return np.where(used.any(axis=0), grade, Evidence.MISSING).astype(np.int8)


def _most(points: Floats) -> Floats:
    """The largest of a part's points, NaN where it has none. (k, n) → (n,)."""
    best = np.max(np.where(np.isnan(points), -np.inf, points), axis=0)
    return np.where(np.isinf(best), np.nan, best)
