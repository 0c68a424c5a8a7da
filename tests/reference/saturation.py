"""Saturation on plain floats: which forced beta is allowed, which voltage is promised."""

from dataclasses import dataclass

from .ieee import INF, NAN, div, either, exp, known, least, ln, most
from .sheet import VT_ROOM, Sheet

GUARD, STRETCHED, REVERSE_BETA = 0.6, 0.85, 0.1
SLACK = 1 + 1e-9


@dataclass(frozen=True)
class Witness:
    """One saturation limit, or the line between two, that reaches the collector current."""

    v: float
    ohmic: float  # the most that resistances take of it here; NaN on a line
    beta: float
    proven: float  # the forced beta that it proves at the coldest


@dataclass(frozen=True)
class Saturation:
    """Everything a sheet says of saturation at one current and the coldest."""

    witnesses: tuple[Witness, ...]
    gain: float  # gain floor without quasi-saturation
    gain_low: float  # gain floor stated at low VCE, itself a witness
    v_gain: float  # of this voltage
    stretch: bool  # a plain type, followed by Ebers–Moll beyond the tests

    @property
    def furthest(self) -> float:
        """The forced beta up to which the gain floor lets a witness be followed."""
        return (STRETCHED if self.stretch else GUARD) * (self.gain if known(self.gain) else 0.0)


def at_current(sheet: Sheet, ic: float, cold: float) -> Saturation:
    """The witnesses at `ic`; `cold` is what is left of the gain at the coldest."""
    epi = div(0.5 + 0.02 * sheet.vceo, sheet.ic)
    plain = (not sheet.power and sheet.vceo <= 100) or epi * ic <= 0.35
    low = sheet.gain_low.at(ic) * cold
    gain = either(low, (sheet.gain_plain if plain else sheet.gain_quasi).at(ic) * cold)
    found = []
    for i, test in enumerate(sheet.sat):
        if ic <= test.ic * SLACK:
            ratio = ic / test.ic
            ohmic = NAN if sheet.darlington else test.value * ratio
            beta = test.ic / test.ib
            found.append(Witness(test.value, ohmic, beta, beta * cold * min(ratio, 1.0) ** sheet.slope_below))
        if i and sheet.sat[i - 1].ic < ic < test.ic:
            before = sheet.sat[i - 1]
            share = (ic - before.ic) / (test.ic - before.ic)
            v = max(before.value, before.value + share * (test.value - before.value))
            beta = ic / (before.ib + share * (test.ib - before.ib))
            found.append(Witness(v, NAN, beta, beta * cold))
    return Saturation(tuple(found), gain, low, sheet.gain_low.vce, plain and not sheet.darlington)


def beta_allowed(sat: Saturation, v_most: float) -> float:
    """The largest forced beta at which some witness promises at most `v_most`; NaN: no witness at all."""
    best = _beta_for(sat, v_most)
    if best == -INF:
        hard = VT_ROOM * ln((1 + 2 / REVERSE_BETA) / (1 - GUARD))
        promised = [w.v if not known(w.ohmic) else min(w.v, w.ohmic + hard) for w in sat.witnesses]
        best = _beta_for(sat, min(promised, default=sat.v_gain))
    return NAN if best == -INF else best


def _beta_for(sat: Saturation, v_most: float) -> float:
    gain = sat.gain if known(sat.gain) else 0.0
    offers = []
    if sat.v_gain <= v_most:
        offers.append(sat.gain_low)
    for w in sat.witnesses:
        covered = sat.furthest if sat.stretch else min(w.beta, sat.furthest)
        room = exp((v_most - w.v) / VT_ROOM)
        if w.v <= v_most:
            # inside the test's own beta and 60 % of the gain floor; nearer to it only with an allowance
            offers.append(least(w.beta, sat.furthest, gain * (1 - (1 - GUARD) / room)))
            offers.append(w.proven)
        if sat.stretch:
            further = least(sat.furthest, _solved((w.beta + 1) * room, 1.0, 1.0, gain))
            if further > w.beta:
                offers.append(further)
        intrinsic = least(
            covered, _solved(exp((v_most - w.ohmic) / VT_ROOM), 1 / REVERSE_BETA, 1 + 1 / REVERSE_BETA, gain)
        )
        if intrinsic > 0:
            offers.append(intrinsic)
        if w.v <= v_most and sat.v_gain > w.v and sat.gain_low > w.proven:
            share = min(max((v_most - w.v) / (sat.v_gain - w.v), 0.0), 1.0)
            offers.append(div(1, 1 / w.proven - share * (1 / w.proven - 1 / sat.gain_low)))
    return max((x for x in offers if known(x)), default=-INF)


def _solved(top: float, slope: float, start: float, gain: float) -> float:
    """The b that solves start + slope·b = top·(1 − b ÷ gain)."""
    return gain if top == INF else div(top - start, slope + div(top, gain))


def v_promised(sat: Saturation, beta: float) -> float:
    """The least VCE(sat) at 25 °C that some witness promises at forced beta `beta`. [V]"""
    in_gain = beta <= sat.furthest * SLACK
    spare = 1 - div(beta, sat.gain)
    offers = []
    if beta <= sat.gain_low * SLACK:
        offers.append(sat.v_gain)
    for w in sat.witnesses:
        within = beta <= w.beta * SLACK
        if within and in_gain:
            offers.append(w.v + VT_ROOM * most(ln(div(1 - GUARD, spare)), 0.0))
        if beta <= w.proven * SLACK:
            offers.append(w.v)
        if sat.stretch and in_gain and not within:
            offers.append(w.v + VT_ROOM * ln(div((beta + 1) / (w.beta + 1), spare)))
        if in_gain and (sat.stretch or within):
            offers.append(w.ohmic + VT_ROOM * ln(div(1 + (beta + 1) / REVERSE_BETA, spare)))
        if sat.v_gain > w.v and sat.gain_low > w.proven:
            share = (1 / w.proven - div(1, beta)) / (1 / w.proven - 1 / sat.gain_low)
            if 0 < share <= SLACK:
                offers.append(w.v + (sat.v_gain - w.v) * share)
    return min((x for x in offers if known(x)), default=NAN)
