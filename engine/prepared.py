"""A shelf made ready to judge: what every requirement needs of it, worked out once when it is loaded.

Here several statements of a sheet become one: the unkind one of contradicting values, a thermal resistance
from a derating line, a gain floor from its points, a typical value (graded so) where there is no limit.
"""

from collections.abc import Mapping
from dataclasses import dataclass, fields
from typing import Any

import numpy as np
from numpy.typing import NDArray

from .curves import Curve, columns
from .evidence import Evidence, Grades
from .part import STRUCTURES
from .physics.constants import ROOM, ROOM_KELVIN, ZERO_CELSIUS, thermal_voltage
from .physics.junction import COLD_SHIFT
from .points import grade, limit_or_typical, most, room_points, worst_of_same
from .shelf import SYMBOL_CODES, Shelf

Floats = NDArray[np.float64]
Mask = NDArray[np.bool_]

GAIN_AT_LOW_VCE = 0.85  # share of a gain stated at 5…10 V that is kept at 1 V without quasi-saturation
GAIN_QUASI_SATURATED = 0.2  # the share that high-voltage and power types keep in it
LOW_VCE = 2.0  # V: a gain stated at or below this speaks for a switch
COLD_EXPONENT = 2.5  # of absolute temperature, see source "gain cold"
DARLINGTON_EXPONENT = 5.0
POWER_PACKAGES = ("TO-3", "TO-66", "TO-220", "TO-126", "TO-202", "TO-218", "TO-247", "TO-252", "TO-263", "TO-264")
USUAL_FLOOR = 0.60  # V at a tenth of the rated collector current, source "vbe floor"
OHMIC = 0.5  # V that resistances can add to VBE at the rated collector current (common practice)
SMALL_PD = 1.0  # W: a rating without reference temperature up to here is an ambient one (common practice)


@dataclass(frozen=True, eq=False)
class Prepared:
    """Columns (n,) and points (k, n) of a shelf, ready to judge."""

    known: Mask  # structure stated
    package: NDArray[np.object_]  # as the sheet writes it
    pnp: Mask
    darlington: Mask
    prebiased: Mask
    power: Mask  # a power type: second breakdown and quasi-saturation are to be reckoned with
    v_epi: Floats  # unmodulated collector drop per ampere, Ω: what quasi-saturation can cost (common practice)
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
    gain_plain: Curve  # what is left of all points at low VCE, without quasi-saturation, and the saturation tests above
    gain_quasi: Curve  # the same where quasi-saturation is to be reckoned with
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
    soa_v: Floats  # (k, n) corners of the safe area, rising VCE: for direct current, else for the longest pulse on file
    soa_i: Floats
    soa_dc: Mask  # the corners hold for direct current

    def __len__(self) -> int:
        return len(self.ic)

    def take(self, rows: "slice | NDArray[np.intp]") -> "Prepared":
        """Some of the parts; a slice gives views."""
        cut: dict[str, Any] = {}
        for one in fields(self):
            value = getattr(self, one.name)
            cut[one.name] = value.take(rows) if isinstance(value, Curve) else columns(value, rows)
        return Prepared(**cut)


def prepare(shelf: Shelf) -> Prepared:
    """Everything a requirement needs of `shelf`."""
    with np.errstate(all="ignore"):
        columns: dict[str, Any] = {}
        columns |= _structure(shelf)
        columns |= _ratings(shelf)
        columns |= _thermal(shelf, columns["vceo"])
        columns |= _saturation(shelf)
        columns |= _junction(shelf, columns["darlington"])
        columns |= _gain(shelf, columns)
        columns |= _leakage(shelf, columns)
        columns |= _times(shelf)
        columns |= _safe_area(shelf)
        return Prepared(**columns)


def _structure(shelf: Shelf) -> dict[str, NDArray[Any]]:
    code = shelf.structure
    pnp = [i for i, word in enumerate(STRUCTURES) if word.startswith("pnp")]
    darlington = [i for i, word in enumerate(STRUCTURES) if word.endswith("darlington")]
    prebiased = [i for i, word in enumerate(STRUCTURES) if word.endswith("prebiased")]
    return {
        "package": shelf.package,
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


def _thermal(shelf: Shelf, vceo: Floats) -> dict[str, Floats | Grades | Mask]:
    """Thermal resistances: as printed, else from the derating line, else from power and temperature."""
    r, pd = shelf.ratings, shelf.points["PD"]
    tj = r["tj_max"]
    bare = np.isnan(pd["ta"]) & np.isnan(pd["tc"])
    at_ambient, at_case = ~np.isnan(pd["ta"]), ~np.isnan(pd["tc"])
    small = bare & (pd["max"] <= SMALL_PD)
    ambient_points = np.where(at_ambient, (tj - pd["ta"]) / pd["max"], np.where(small, (tj - ROOM) / pd["max"], np.nan))
    case_points = np.where(at_case, (tj - pd["tc"]) / pd["max"], np.nan)
    ja, ja_grade = _resistance(r["rth_ja"], 1 / r["slope_ta"], most(ambient_points))
    jc, jc_grade = _resistance(r["rth_jc"], 1 / r["slope_tc"], most(case_points))
    pd_case = most(np.where(at_case, pd["max"], np.nan))
    pd_case = np.where(np.isnan(pd_case), most(np.where(bare, pd["max"], np.nan)), pd_case)
    named = np.isin(np.array([str(p).upper() for p in shelf.package], dtype=object), POWER_PACKAGES)
    return {
        "rth_ja": ja,
        "rth_ja_grade": ja_grade,
        "rth_jc": jc,
        "rth_jc_grade": jc_grade,
        "pd_ambient": most(np.where(at_ambient | small, pd["max"], np.nan)),
        "pd_case": pd_case,
        "power": named | (pd_case >= 10) | (r["ic"] >= 3),
        "v_epi": (0.5 + 0.02 * vceo) / r["ic"],
    }


def _resistance(printed: Floats, from_slope: Floats, from_power: Floats) -> tuple[Floats, Grades]:
    """The worse of what is printed and what the slope says; from power and TJ only where neither is there."""
    both = np.where(np.isnan(printed), from_slope, np.where(from_slope > printed, from_slope, printed))
    value = np.where(np.isnan(both), from_power, both)
    grades = np.where(value == printed, Evidence.GUARANTEED, Evidence.DERIVED).astype(np.int8)
    return value, grades


def _saturation(shelf: Shelf) -> dict[str, Floats | Grades]:
    sat = shelf.points["VCE(sat)"]
    v, typical = limit_or_typical(sat["max"], sat["typ"])
    v = worst_of_same(v, np.maximum, sat["ic"], sat["ib"], sat["temp"])
    used = room_points(sat["temp"], ~np.isnan(v) & (sat["ic"] > 0) & (sat["ib"] > 0), hotter=True)
    order = np.argsort(np.where(used, sat["ic"], np.nan), axis=0, kind="stable")
    ic, ib, volts = (np.take_along_axis(np.where(used, c, np.nan), order, 0) for c in (sat["ic"], sat["ib"], v))
    return {
        "sat_ic": ic,
        "sat_ib": ib,
        "sat_v": volts,
        "sat_grade": grade(used, typical),
        "ib_tested": most(np.where(used, sat["ib"], np.nan)),
    }


def _junction(shelf: Shelf, darlington: Mask) -> dict[str, Floats | Grades]:
    """VBE from above (saturation tests) and from below (minimums on file, else common practice)."""
    sat = shelf.points["VBE(sat)"]
    v, typical = limit_or_typical(sat["max"], sat["typ"])
    v = worst_of_same(v, np.maximum, sat["ic"], sat["ib"], sat["temp"])
    used = ~np.isnan(v) & (sat["ic"] > 0) & (sat["ib"] > 0)
    used = room_points(sat["temp"], used, hotter=False)
    return {
        "vbe_ic": np.where(used, sat["ic"], np.nan),
        "vbe_ib": np.where(used, sat["ib"], np.nan),
        "vbe_v": np.where(used, v, np.nan),
        "vbe_grade": grade(used, typical),
        "floor_v": _junction_floor(shelf, darlington),
        "floor_i": shelf.ratings["ic"] / 10,
    }


def _junction_floor(shelf: Shelf, darlington: Mask) -> Floats:
    """VBE that every device has at least at a tenth of its rated collector current, 25 °C. [V]

    Common practice says 0.60 V. A minimum on file says more where it was measured at a small current, for
    the ohmic drop in it may be half a volt at the rated current; and where it says less, it is believed.
    A minimum measured cold is first moved to 25 °C. Of a Darlington only one of its junctions is counted on: at
    light loads the second may not conduct.
    """
    vt = float(thermal_voltage(ROOM))
    rated, per_kelvin = shelf.ratings["ic"], COLD_SHIFT * np.where(darlington, 2.0, 1.0)
    sure, highest = np.full(len(shelf), USUAL_FLOOR), np.full(len(shelf), -np.inf)
    for points in (shelf.points["VBE(on)"], shelf.points["VBE(sat)"]):
        for low, ic, temp in zip(points["min"], points["ic"], points["temp"], strict=True):
            moved = low + vt * np.log(rated / 10 / ic) - per_kelvin * np.maximum(ROOM - temp, 0.0)
            higher = moved - OHMIC * ic / rated - 0.02
            sure = np.where(~darlington & (higher > sure), higher, sure)
            highest = np.where(moved > highest, moved, highest)
    return np.where(np.isinf(highest), sure, np.minimum(sure, highest))


def _gain(shelf: Shelf, ready: Mapping[str, Any]) -> dict[str, Floats | Curve]:
    points = shelf.points["hFE"]
    gain, typical = limit_or_typical(points["min"], points["typ"])
    gain = worst_of_same(gain, np.minimum, points["ic"], points["vce"], points["temp"])
    stated = ~np.isnan(gain) & (points["ic"] > 0)
    used = room_points(points["temp"], stated, hotter=False)
    # a gain stated without VCE says nothing about a low one
    low = used & (points["vce"] <= LOW_VCE)
    high = used & ~low
    ic, vce = points["ic"], points["vce"]
    curve = Curve.through(ic, gain, vce, high, typical)
    curve_low = Curve.through(ic, gain, vce, low, typical)
    tests = tuple(ready[name] for name in ("sat_ic", "sat_ib", "sat_v", "sat_grade"))
    darlington = ready["darlington"]
    slope = np.where(darlington, 1.0, 0.5)
    usual = np.where(darlington, DARLINGTON_EXPONENT, COLD_EXPONENT)
    exponent = _cold_exponent(points, gain, stated & (points["temp"] < 15), (curve, curve_low), slope)
    exponent = np.where(np.isnan(exponent), usual, exponent)
    # cold points that are the only ones are no measure of themselves
    at_room = (used & (points["temp"] >= 15)).any(axis=0)
    exponent = np.where(at_room, exponent, np.maximum(exponent, usual))
    share = _share_kept(ic, gain, low, curve, slope)
    kept = np.where(low, 1.0, np.minimum(share, GAIN_AT_LOW_VCE))
    quasi = np.where(low, 1.0, np.minimum(share, GAIN_QUASI_SATURATED))
    return {
        "gain": curve,
        "gain_low": curve_low,
        "gain_plain": _with_tests(ic, gain * kept, vce, used, typical, tests),
        "gain_quasi": _with_tests(ic, gain * quasi, vce, used, typical, tests),
        "slope_below": slope,
        "cold_exponent": exponent,
    }


def _share_kept(ic: Floats, gain: Floats, low: Mask, curve: Curve, slope: Floats) -> Floats:
    """What a sheet that states gain at low and at high VCE says of the share kept at the low one. (n,)"""
    least = np.full(ic.shape[1], np.inf)
    for one_ic, one_gain, here in zip(ic, gain, low, strict=True):
        share = one_gain / curve.at(one_ic, slope)
        least = np.where(here & (share < least), share, least)
    return least


def _with_tests(ic: Floats, gain: Floats, vce: Floats, used: Mask, typical: Floats, tests: tuple[Floats, ...]) -> Curve:
    """A gain floor carried on above its highest point by the saturation tests, whose IC ÷ IB every device has."""
    sat_ic, sat_ib, sat_v, sat_grade = tests
    top = np.max(np.where(used, ic, -np.inf), axis=0)
    beyond = ~np.isnan(sat_v) & (sat_ic > top)
    sat_typical = np.broadcast_to((sat_grade >= Evidence.TYPICAL).astype(np.float64), sat_v.shape)
    columns = ((ic, sat_ic), (gain, sat_ic / sat_ib), (vce, sat_v), (used, beyond), (typical, sat_typical))
    joined = [np.concatenate(pair) for pair in columns]
    return Curve.through(joined[0], joined[1], joined[2], joined[3].astype(bool), joined[4])


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


def _leakage(shelf: Shelf, ready: Mapping[str, Any]) -> dict[str, Floats | Grades]:
    """Collector leakage maximums. A Darlington's inner base floats and multiplies: only the open-base limit counts."""
    leak = shelf.points["leakage"]
    v, typical = limit_or_typical(leak["max"], leak["typ"])
    v = worst_of_same(v, np.maximum, leak["v"], leak["temp"], leak["symbol"])
    open_base = leak["symbol"] == SYMBOL_CODES["ICEO"]
    used = ~np.isnan(v) & ~np.isnan(leak["v"]) & (open_base | ~ready["darlington"])
    return {
        "leak_t": np.where(used, leak["temp"], np.nan),
        "leak_v": np.where(used, leak["v"], np.nan),
        "leak_i": np.where(used, v, np.nan),
        "leak_grade": grade(used, typical),
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


def _safe_area(shelf: Shelf) -> dict[str, NDArray[Any]]:
    """Corners of the safe area, those of the longest pulse on file where there are several."""
    soa = shelf.points["SOA"]
    longest = np.where(np.isnan(soa["t"]), np.inf, soa["t"])
    used = ~np.isnan(soa["value"]) & (soa["vce"] > 0)
    longest = np.where(used, longest, -np.inf)
    used &= longest == longest.max(axis=0)
    return {
        "soa_v": np.where(used, soa["vce"], np.nan),
        "soa_i": np.where(used, soa["value"], np.nan),
        "soa_dc": np.isposinf(longest.max(axis=0)),
    }
