"""The laws on plain floats: junctions, leakage, thermal, safe area, times, the base network."""

from .ieee import INF, NAN, div, exp, known, ln, most
from .sheet import VT_ROOM, Sheet, Test


def thermal_voltage(t: float) -> float:
    """kT/q. [V]"""
    return 1.380649e-23 / 1.602176634e-19 * (t + 273.15)


# --- base–emitter junction


def vbe_highest(sheet: Sheet, ic: float, ib: float, coldest: float) -> float:
    """Highest VBE at (ic, ib) and the coldest: the least of the bounds of the saturation tests. [V]"""
    bounds = []
    for test in sheet.vbe:
        r = most(ic / test.ic, ib / test.ib)
        if r <= 10:
            beyond = 2.0 if r > 1 else 1.0
            bounds.append(test.value + VT_ROOM * ln(r) * beyond + max(test.value - 0.6, 0.0) * max(r - 1, 0.0))
    junctions = 2 if sheet.darlington else 1
    return min(bounds) + 2.5e-3 * junctions * max(25 - coldest, 0.0) if bounds else NAN


def over_temperature(v: float, t: float) -> float:
    """VBE at constant current moved from 25 °C up to `t`. [V]"""
    ratio = (t + 273.15) / 298.15
    if ratio < 1:
        return v
    return v * ratio + 1.17 * (1 - ratio) - 3 * thermal_voltage(t) * ln(ratio)


def vbe_lowest(sheet: Sheet, ic: float, t: float) -> float:
    """Lowest VBE at collector current `ic` and `t`. [V]"""
    return most(over_temperature(sheet.floor_v + VT_ROOM * ln(div(ic, sheet.floor_i)), t), 0.0)


# --- leakage


def _doublings(t: float) -> float:
    return (min(max(t, 25.0), 85.0) - 25.0) / 8 + max(t - 85.0, 0.0) / 10


def leakage(sheet: Sheet, v: float, t: float) -> float:
    """Highest collector leakage at `v` and `t`: the kindest of true bounds. [A]"""
    if not known(t):
        return NAN
    points = [(x.temp, _at_voltage(x, v, sheet.vceo)) for x in sheet.leak]
    points = [(temp, i) for temp, i in points if known(i)]
    if sheet.darlington:  # its own second base multiplies: a limit holds as it stands or not at all
        return min((x.value for x in sheet.leak if x.temp >= t and x.v >= v * (1 - 1e-9)), default=NAN)
    bounds = [i * exp(ln(2.0) * max(_doublings(t) - _doublings(temp), 0.0)) for temp, i in points]
    for cold, i_cold in points:
        for hot, i_hot in points:
            if cold < t < hot:
                a, b, x = (1 / (one + 273.15) for one in (cold, hot, t))
                bounds.append(exp(ln(i_cold) + (a - x) / (a - b) * ln(i_hot / i_cold)))
    best = min(bounds, default=NAN)
    return NAN if best == INF else best  # beyond any temperature that makes sense


def _at_voltage(test: Test, v: float, vceo: float) -> float:
    if test.v >= v * (1 - 1e-9):
        return test.value
    if v <= vceo:
        return test.value * (v / test.v / (1 - (v / (1.5 * vceo)) ** 3))
    return NAN


# --- thermal


def hot_factor(t: float) -> float:
    """Growth of the on-voltage from 25 °C."""
    return 1 + 0.007 * most(t - 25, 0.0)


def junction_temperature(ambient: float, rth: float, p_other: float, p_sat: float) -> float:
    """Fixed point of T = TA + Rth·(P other + P sat·(1 + 0.007·(T − 25))). [°C]"""
    loop = rth * p_sat * 0.007
    if loop >= 1:
        return INF
    cool = ambient + rth * (p_other + p_sat)
    if cool <= 25:
        return cool
    return (ambient + rth * (p_other + p_sat * (1 - 0.007 * 25))) / (1 - loop)


def heating_share(duty: float, f: float, tau: float) -> float:
    """From the mean loss to its peak. (√ of D·period over the thermal time)"""
    return duty + (1 - duty) * min(1.0, (duty / f / tau) ** 0.5)


# --- safe area


def area_current(corners: tuple[tuple[float, float], ...], v: float) -> float:
    """Collector current that the safe area allows at `v`; beyond the last corner nothing is promised. [A]"""
    if not known(v) or not corners:
        return NAN
    before: tuple[float, float] | None = None
    for v_c, i_c in corners:
        if v <= v_c:
            if before is None:
                return i_c
            share = (ln(v) - ln(before[0])) / (ln(v_c) - ln(before[0]))
            return exp(ln(before[1]) + (ln(i_c) - ln(before[1])) * share)
        before = (v_c, i_c)
    return NAN


# --- switching times, by charge control


def turn_on(test: Test | None, ic: float, v: float, ib: float, overdrive: float) -> float:
    """[s]"""
    if test is None:
        return NAN
    share = most(1 - div(1, overdrive), 1e-9)
    return test.value * most(ic / test.ic, v / test.vcc, 1.0) * div(test.ib, ib) / share


def turn_off(test: Test | None, ib: float, reverse: float, ic: float, v: float, gain: float, t: float) -> float:
    """[s]"""
    if test is None or not reverse > 0:
        return NAN
    stored = ln((ib + reverse) / reverse)
    of_test = ln((test.ib + test.ib2) / (test.ic / most(gain, test.ic / test.ib) + test.ib2))
    fall = most(ic / test.ic, v / test.vcc, 1.0) * test.ib2 / reverse
    return test.value * most(stored / most(of_test, 1e-9), fall) * (1 + 0.006 * most(t - 25.0, 0.0))


# --- the base network


def base_current(v: float, vbe: float, rb: float, r_drive: float, rbe: float) -> float:
    """What the network leaves in the base; `rb` and `rbe` at the unkind end of their tolerance. [A]"""
    return most(div(v - vbe, rb + r_drive) - div(vbe, rbe), 0.0)


def base_voltage_off(low: float, rb: float, rbe: float, r_drive: float, leak: float, tol: float) -> float:
    """Divider of the driver's low level with the least RB, drop of the leakage with the largest. [V]"""
    top = rbe * (1 + tol)
    divider = div(low, div(rb * (1 - tol) + r_drive, top) + 1)
    return divider + div(leak, div(1, rb * (1 + tol) + r_drive) + div(1, top))
