"""Saturation: which forced beta the sheets allow, and the on-voltage they promise.

Every saturation test (and the line between two neighbours) that reaches the collector current is a witness.
A witness promises its voltage at its own forced beta, and at a larger one as far as the gain floor and the
laws below carry (source `gummel-poon`). Witnesses combine by the kindest, since each is true.
"""

from dataclasses import dataclass, fields

import numpy as np
from numpy.typing import NDArray

from ..formula import formula
from .constants import ROOM, thermal_voltage

Floats = NDArray[np.float64]
Mask = NDArray[np.bool_]

HOT_RATE = 0.007  # 1/K, source "saturation hot"
LEAST_REVERSE_BETA = 0.1  # of a transistor in use: bounds the intrinsic part of VCE(sat) (common practice)
GUARD = 0.6  # share of the gain floor that a saturation limit covers without an allowance
STRETCHED = 0.85  # share up to which a plain type is followed by Ebers–Moll


@dataclass(frozen=True, eq=False)
class Witnesses:
    """Saturation limits that reach one collector current. Shapes (m, n), NaN where there is none."""

    v: Floats  # promised at forced beta `beta`, 25 °C
    v_ohmic: Floats  # the most that resistances can take of it at this lower current; NaN on a line between tests
    beta: Floats
    beta_cold: Floats  # forced beta that the witness itself proves at the coldest and at this current
    gain: Floats  # (n,) gain floor without quasi-saturation, coldest; NaN: unknown
    gain_low: Floats  # (n,) gain floor that limits at low VCE state, coldest; NaN: unknown
    v_gain: Floats  # (n,) the VCE from which that one holds
    stretch: Mask  # (n,) a plain small type, whose collector resistance does not depend on the drive

    def take(self, rows: NDArray[np.intp]) -> "Witnesses":
        """What speaks for some of the parts."""
        return Witnesses(*(getattr(self, one.name)[..., rows] for one in fields(self)))


def witnesses(
    ic: float,
    sat_ic: Floats,
    sat_ib: Floats,
    sat_v: Floats,
    cold: Floats,
    slope_below: Floats,
    gain: Floats,
    gain_low: Floats,
    v_gain: Floats,
    stretch: Mask,
    simple: Mask,
) -> Witnesses:
    """What the tests (k, n), in rising IC, say at collector current `ic`.

    `simple` (n,) is False for a Darlington, whose on-voltage does not shrink with the current: its output
    cannot go below one VBE. `cold` (n,) is the factor from 25 °C to the coldest gain, `slope_below` how the gain falls with IC.
    """
    v, ohmic, beta, beta_cold = [], [], [], []
    for i, (ic_t, ib_t, v_t) in enumerate(zip(sat_ic, sat_ib, sat_v, strict=True)):
        ratio = np.where(ic <= ic_t * (1 + 1e-9), ic / ic_t, np.nan)
        v.append(np.where(np.isnan(ratio), np.nan, v_t))
        ohmic.append(np.where(simple, v_t * ratio, np.nan))
        beta.append(np.where(np.isnan(ratio), np.nan, ic_t / ib_t))
        beta_cold.append(beta[-1] * cold * np.minimum(ratio, 1.0) ** slope_below)
        if i == 0:
            continue
        low_ic, low_ib, low_v = sat_ic[i - 1], sat_ib[i - 1], sat_v[i - 1]
        share = np.where((low_ic < ic) & (ic < ic_t), (ic - low_ic) / (ic_t - low_ic), np.nan)
        v.append(np.maximum(low_v, low_v + share * (v_t - low_v)))
        ohmic.append(np.full_like(share, np.nan))
        beta.append(ic / (low_ib + share * (ib_t - low_ib)))
        beta_cold.append(beta[-1] * cold)
    return Witnesses(np.stack(v), np.stack(ohmic), np.stack(beta), np.stack(beta_cold), gain, gain_low, v_gain, stretch)


def beta_allowed(w: Witnesses, v_most: Floats) -> Floats:
    """The largest forced beta at which some witness promises at most `v_most` V at 25 °C. (n,)

    Where the witnesses reach the current but none promises so little, the one with the least voltage counts:
    the on-voltage will then be found too high. NaN where no witness reaches the current.
    """
    best = _beta_for(w, v_most)
    none = np.isinf(best)
    if none.any():
        best = np.where(none, _beta_for(w, _least_voltage(w)), best)
    return np.where(np.isinf(best), np.nan, best)


def _least_voltage(w: Witnesses) -> Floats:
    """A voltage that some witness does promise, near the least. (n,) [V]"""
    hard_driven = w.v_ohmic + float(thermal_voltage(ROOM)) * np.log((1 + 2 / LEAST_REVERSE_BETA) / (1 - GUARD))
    promised = np.where(np.isnan(hard_driven), w.v, np.minimum(w.v, hard_driven))
    least = np.min(np.where(np.isnan(promised), np.inf, promised), axis=0)
    return np.where(np.isinf(least), w.v_gain, least)


def _beta_for(w: Witnesses, v_most: Floats) -> Floats:
    vt = float(thermal_voltage(ROOM))
    gain = np.where(np.isnan(w.gain), 0.0, w.gain)
    most = np.where(w.stretch, STRETCHED, GUARD) * gain
    # a gain stated at low VCE is a witness of its own: with that base current VCE is no higher
    best = np.where(w.v_gain <= v_most, w.gain_low, -np.inf)
    best = np.where(np.isnan(best), -np.inf, best)
    for v, ohmic, beta, proven in zip(w.v, w.v_ohmic, w.beta, w.beta_cold, strict=True):
        covered = np.where(w.stretch, most, np.minimum(beta, most))
        room = np.exp((v_most - v) / vt)  # what the wanted voltage leaves, in thermal voltages
        ample = np.minimum(np.minimum(beta, most), gain * (1 - (1 - GUARD) / room))
        best = np.where((v <= v_most) & (ample > best), ample, best)
        best = np.where((v <= v_most) & (proven > best), proven, best)
        stretched = np.minimum(most, _solved(beta + 1, room, 1.0, 1.0, gain))
        best = np.where(w.stretch & (stretched > beta) & (stretched > best), stretched, best)
        room = np.exp((v_most - ohmic) / vt)
        inner = 1 / LEAST_REVERSE_BETA
        intrinsic = np.minimum(covered, _solved(1.0, room, inner, 1 + inner, gain))
        best = np.where(intrinsic > np.maximum(best, 0.0), intrinsic, best)
        share = np.clip((v_most - v) / (w.v_gain - v), 0.0, 1.0)
        chord = 1 / (1 / proven - share * (1 / proven - 1 / w.gain_low))
        usable = (v <= v_most) & (w.v_gain > v) & (w.gain_low > proven)
        best = np.where(usable & (chord > best), chord, best)
    return best


def _solved(scale: "Floats | float", room: Floats, slope: float, start: float, gain: Floats) -> Floats:
    """The forced beta b that solves (start + slope·b) = scale·room·(1 − b ÷ gain)."""
    top = scale * room
    return np.where(np.isinf(room), gain, (top - start) / (slope + top / gain))


def v_promised(w: Witnesses, beta_forced: Floats) -> Floats:
    """The least VCE(sat) bound at 25 °C that some witness promises at `beta_forced`. (n,), NaN: none. [V]"""
    vt = float(thermal_voltage(ROOM))
    slack = 1 + 1e-9  # a network chosen for exactly the allowed beta is allowed
    most = np.where(w.stretch, STRETCHED, GUARD) * np.where(np.isnan(w.gain), 0.0, w.gain) * slack
    spare = 1 - beta_forced / w.gain
    in_gain = beta_forced <= most
    near_gain = vt * np.maximum(np.log((1 - GUARD) / spare), 0.0)
    intrinsic = vt * np.log((1 + (beta_forced + 1) / LEAST_REVERSE_BETA) / spare)
    best = np.where(beta_forced <= w.gain_low * slack, w.v_gain, np.inf)
    for v, ohmic, beta, proven in zip(w.v, w.v_ohmic, w.beta, w.beta_cold, strict=True):
        within = beta_forced <= beta * slack
        best = np.where(within & in_gain & (v + near_gain < best), v + near_gain, best)
        best = np.where((beta_forced <= proven * slack) & (v < best), v, best)
        stretched = v + vt * np.log((beta_forced + 1) / (beta + 1) / spare)
        best = np.where(w.stretch & ~within & in_gain & (stretched < best), stretched, best)
        usable = (w.stretch | within) & in_gain
        best = np.where(usable & (ohmic + intrinsic < best), ohmic + intrinsic, best)
        share = (1 / proven - 1 / beta_forced) / (1 / proven - 1 / w.gain_low)
        chord = v + (w.v_gain - v) * share
        usable = (share > 0) & (share <= slack) & (w.v_gain > v) & (w.gain_low > proven)
        best = np.where(usable & (chord < best), chord, best)
    return np.where(np.isinf(best), np.nan, best)


@formula("VCE(sat)", "V", "on-voltage that the saturation limits promise at 25 °C",
         words="the least of the part's VCE(sat) limits (and lines between neighbours) that reach IC; of one at a larger "
               "current its ohmic share V·IC ÷ IC(test) and VT·ln((1 + (β + 1) ÷ βR) ÷ (1 − β ÷ hFE)); beyond a test's "
               "own IC ÷ IB with VT·ln((β + 1) ÷ (β(test) + 1) ÷ (1 − β ÷ hFE)) added, hFE the cold gain floor, or on "
               "the line to a gain stated at low VCE",
         source="ebers-moll")  # fmt: skip
def saturation_at_room(**_: Floats) -> Floats:
    """Traced only: see `v_promised`."""
    raise NotImplementedError


@formula("forced β allowed", "", "largest IC ÷ IB at which saturation is promised",
         words="from the part's VCE(sat) limits that reach IC, its gain floor at low VCE at the coldest, and the "
               "on-voltage wanted",
         source="ebers-moll")  # fmt: skip
def beta_at_room(**_: Floats) -> Floats:
    """Traced only: see `beta_allowed`."""
    raise NotImplementedError


@formula("hot factor", "", "growth of the on-voltage from 25 °C to the hottest junction",
         text="1 + 0.007 * max(TJ - 25, 0)", source="saturation hot")  # fmt: skip
def hot_factor(TJ: Floats) -> Floats:
    """Factor on VCE(sat) at `TJ` °C.

    >>> round(float(hot_factor.raw(125.0)), 2)
    1.7
    """
    return 1 + HOT_RATE * np.maximum(TJ - ROOM, 0)


@formula("VCE on max", "V", "highest voltage across the switch when on",
         text="VCE_sat * hot + cold_rise", source="saturation hot")  # fmt: skip
def on_voltage(VCE_sat: Floats, hot: Floats, cold_rise: Floats) -> Floats:
    """On-voltage over temperature; `cold_rise` is a Darlington's junction growing when cold. [V]

    >>> round(float(on_voltage.raw(0.4, 1.45, 0.0)), 2)
    0.58
    """
    return VCE_sat * hot + cold_rise


def vce_sat_ebers_moll(beta_forced: Floats, beta_f: Floats, beta_r: Floats, t: Floats) -> Floats:
    """VCE(sat) of the intrinsic transistor, no ohmic part. [V] Source: "ebers-moll".

    >>> round(float(vce_sat_ebers_moll(10.0, 100.0, 1.0, 25.0)) * 1e3, 1)
    66.6
    """
    numerator = 1 + (beta_forced + 1) / beta_r
    return thermal_voltage(t) * np.log(numerator / (1 - beta_forced / beta_f))


def operating_point(
    drive: float, r_base: float, supply: float, r_collector: float, hfe: float, vbe: float, vce_sat: float = 0.1
) -> tuple[float, float, bool]:
    """Base current, collector current and whether it is saturated, for one transistor of known gain.

    The collector current is the smaller of hFE·IB and what the load lets through: more base voltage
    changes nothing once the load limits. [A, A, -] Source: "circuit law".
    """
    ib = max(drive - vbe, 0.0) / r_base
    cap = (supply - vce_sat) / r_collector
    return ib, min(hfe * ib, cap), hfe * ib >= cap
