"""What a given network really does: every device of a type at every corner that matters.

The corners are simulated by ngspice (`simulate`) or, where thousands of networks are tried, by the solver of
`gummel_poon` (`estimate`). Both take the same corners and give the same extremes.
"""

from collections.abc import Callable, Mapping
from dataclasses import dataclass, fields, replace

import numpy as np
from numpy.typing import NDArray

from engine.part import Part

from . import spice
from .circuits import Numbers
from .gummel_poon import Devices, Floats, solve
from .population import Type
from .transient import Stage, switching

TJ_CEILING = 250.0  # °C: beyond it the device is lost, and the model with it


@dataclass(frozen=True, eq=False)
class Circuits:
    """Circuits to solve, seen from the emitter. Every array has shape (n,)."""

    row: NDArray[np.intp]  # device of the type
    t: Floats  # junction temperature, °C
    vs: Floats
    load: Floats  # Ω, or A where `constant`
    vd: Floats  # base drive level
    rb: Floats  # with the driver's own resistance; inf for an open driver
    rbe: Floats  # inf without one
    injected: Floats  # current into the base
    constant: bool  # the load is a constant current
    off: bool

    def take(self, rows: NDArray[np.intp]) -> "Circuits":
        """Some of the circuits."""
        arrays = {
            one.name: getattr(self, one.name)[rows] for one in fields(self) if one.name not in ("constant", "off")
        }
        return replace(self, **arrays)


@dataclass(frozen=True, eq=False)
class Points:
    """Their operating points. Shapes (n,)."""

    vbe: Floats
    vce: Floats
    ib: Floats
    ic: Floats  # through the load
    drive: Floats  # from the driver


Simulator = Callable[[Devices, Circuits, str], Points]


def by_solver(devices: Devices, c: Circuits, polarity: str) -> Points:
    """The operating points by the fast solver."""
    gb, gbe = 1 / c.rb, 1 / c.rbe

    def boundary(vb: Floats, vc: Floats, ib: Floats, ic: Floats, rows: NDArray[np.intp]) -> tuple[Floats, Floats]:
        across = c.vs[rows] - vc
        drawn = c.load[rows] * np.tanh(across / 0.05) if c.constant else across / c.load[rows]
        return (c.vd[rows] - vb) * gb[rows] - vb * gbe[rows] + c.injected[rows] - ib, drawn - ic

    point = solve(devices.take(c.row), c.t, boundary, off=c.vs if c.off else None)
    bad = ~point.converged
    vbe, vce, ib, ic = (np.where(bad, np.nan, column) for column in (point.vbe, point.vce, point.ib, point.ic))
    return Points(vbe, vce, ib, ic, drive=(c.vd - vbe) * gb)


def by_ngspice(devices: Devices, c: Circuits, polarity: str, chunk: int = 40) -> Points:
    """The operating points by ngspice, `chunk` circuits a run (each run is solved as one set of equations)."""
    parts = [
        _solved(devices, c.take(np.arange(start, min(start + chunk, len(c.row)))), polarity)
        for start in range(0, len(c.row), chunk)
    ]
    return _joined(parts)


def _joined(parts: list[Points]) -> Points:
    return Points(**{one.name: np.concatenate([getattr(part, one.name) for part in parts]) for one in fields(Points)})


def _solved(devices: Devices, c: Circuits, polarity: str) -> Points:
    """Circuits that ngspice finds no point for together are tried in halves; one alone takes the solver's point."""
    found = _run(devices, c, polarity)
    if found is not None:
        return found
    if len(c.row) == 1:
        return by_solver(devices, c, polarity)
    middle = len(c.row) // 2
    halves = (np.arange(middle), np.arange(middle, len(c.row)))
    return _joined([_solved(devices, c.take(half), polarity) for half in halves])


def _run(devices: Devices, c: Circuits, polarity: str) -> Points | None:
    sign = -1 if polarity == "pnp" else 1
    rows, place = np.unique(c.row, return_inverse=True)
    some = devices.take(rows)
    leak = some.take(place).leakage(c.t) if c.off else np.zeros(len(c.row))
    lines = spice.models(some, polarity)
    for k in range(len(c.row)):
        lines += spice.transistor(some, int(place[k]), str(k), float(c.t[k]), sign, float(leak[k]))
        lines += [f"vs{k} s{k} 0 {sign * c.vs[k]:.9g}", f"vd{k} d{k} 0 {sign * c.vd[k]:.9g}"]
        if c.constant:
            lines.append(f"bl{k} s{k} c{k} i={sign * c.load[k]:.9g}*tanh({sign}*v(s{k},c{k})/0.05)")
        else:
            lines.append(f"rl{k} s{k} c{k} {c.load[k]:.9g}")
        for name, ends, ohms in (("rb", f"d{k} b{k}", c.rb[k]), ("rz", f"b{k} 0", c.rbe[k])):
            if np.isfinite(ohms):
                lines.append(f"{name}{k} {ends} {ohms:.9g}")
        if not np.isfinite(c.rb[k]):
            lines.append(f"rd{k} d{k} 0 1k")
        if c.injected[k]:
            lines.append(f"ij{k} 0 b{k} {sign * c.injected[k]:.9g}")
    raw = spice.run("corners", lines, ".op", patience=20.0)
    if "v(b0)" not in raw:
        return None

    def read(name: str) -> Floats:
        return sign * np.array([raw[name.format(k)][-1] for k in range(len(c.row))])

    vb, vc, ic = read("v(b{})"), read("v(c{})"), -read("i(vs{})")
    drive = (c.vd - vb) / c.rb
    return Points(vb, vc, drive + c.injected - vb / c.rbe, ic, drive)


def network_corners(n: Numbers, rb: float, rbe: float | None) -> tuple[tuple[float, float], tuple[float, float]]:
    """(RB with the driver's resistance, RBE) where the base gets least, and where it gets most."""
    low, high = 1 - n.tolerance, 1 + n.tolerance
    shunt = np.inf if rbe is None else rbe
    return (rb * high + n.drive_resistance, shunt * low), (rb * low + n.drive_resistance, shunt * high)


def on_corners(kind: Type, n: Numbers, rb: float, rbe: float | None, rows: NDArray[np.intp]) -> Circuits:
    """Supply × drive × load × (coldest, hottest), devices last; the hot ones start at ambient."""
    weak, strong = network_corners(n, rb, rbe)
    table = []
    for t in n.ambient:
        for vs in n.supply:
            for level, (r1, r2) in zip(n.drive, (weak, strong), strict=True):
                vd = vs - level if n.position == "high side" else level
                for load in n.current if n.load == "constant current" else n.resistance:
                    table.append((t, vs, load, vd, r1, r2))
    t_all, vs_all, load_all, vd_all, rb_all, rbe_all = np.array(table).T.repeat(len(rows), axis=1)
    row = np.tile(rows, len(table))
    constant = n.load == "constant current"
    return Circuits(row, t_all, vs_all, load_all, vd_all, rb_all, rbe_all, np.zeros(len(row)), constant, off=False)


def off_corners(kind: Type, n: Numbers, rb: float, rbe: float | None, rows: NDArray[np.intp], tj: Floats) -> Circuits:
    """The two resistor corners that can be worst, at the highest supply; `tj` is per row, shape (len(rows),)."""
    shunt = np.inf if rbe is None else rbe * (1 + n.tolerance)
    heavy = n.current[1] if n.load == "constant current" else n.resistance[0]
    size = len(rows)
    values = [np.inf] if n.off_open else [rb * (1 + s * n.tolerance) + n.drive_resistance for s in (-1, 1)]

    def full(value: float) -> Floats:
        return np.full(size * len(values), value)

    return Circuits(
        np.tile(rows, len(values)), np.tile(tj, len(values)), full(n.supply[1]), full(heavy), full(n.off_level),
        np.repeat(values, size), full(shunt), full(n.off_injected), n.load == "constant current", True,
    )  # fmt: skip


def thermal_resistance(kind: Type, n: Numbers) -> float:
    """Junction to ambient, K/W."""
    return kind.rth_ja if np.isnan(n.heatsink) else kind.rth_jc + n.heatsink


def settle(kind: Type, n: Numbers, c: Circuits, simulator: Simulator, turns: int = 12) -> tuple[Circuits, Points]:
    """The on corners with the hot half at the junction temperature that its own loss brings about."""
    rth = thermal_resistance(kind, n) * n.duty_cycle
    hot = c.t == n.ambient[1]
    for _ in range(turns):
        p = simulator(kind.devices, c, kind.polarity)
        loss = np.nan_to_num(p.vce * p.ic + p.vbe * p.ib)
        t = np.where(hot, np.minimum(n.ambient[1] + rth * loss, TJ_CEILING), c.t)
        moved = np.abs(t - c.t).max()
        c = replace(c, t=t)
        if moved < 0.1:
            break
    return c, p


def extremes(n: Numbers, on: Circuits, p: Points, off: Points) -> dict[str, float]:
    """The worst of every quantity the engine bounds, by the engine's names. NaN where a point did not solve."""
    loss = (p.vce * p.ic + p.vbe * p.ib) * n.duty_cycle
    with np.errstate(divide="ignore", invalid="ignore"):
        forced = np.where(p.ib > 0, p.ic / p.ib, np.inf)
    return {
        "vce_on_max": float(p.vce.max()),
        "ic_on_max": float(p.ic.max()),
        "ic_on_min": float(p.ic.min()),
        "ib_on_min": float(p.ib.min()),
        "ib_on_max": float(p.ib.max()),
        "drive_current_max": float(p.drive.max()),
        "forced_beta_max": float(forced.max()),
        "power_max": float(loss.max()),
        "tj_max": float(on.t.max()),
        "ic_off_max": float(off.ic.max()),
        "vce_off_max": float(n.supply[1] + n.overshoot),
    }


def judge(
    kind: Type, n: Numbers, rb: float, rbe: float | None, simulator: Simulator, rows: NDArray[np.intp] | None = None
) -> dict[str, float]:
    """Extremes of one network over the devices of a type (or `rows` of them) and all corners, by `simulator`."""
    if rows is None:
        rows = np.arange(len(kind.devices))
    c, p = settle(kind, n, on_corners(kind, n, rb, rbe, rows), by_solver)
    if simulator is not by_solver:  # the solver's temperatures are a good start; ngspice has the last word
        c, p = settle(kind, n, c, simulator, turns=2)
    tj = c.t.reshape(-1, len(rows)).max(axis=0)
    off = simulator(kind.devices, off_corners(kind, n, rb, rbe, rows, tj), kind.polarity)
    return _with_inrush(kind, n, c, extremes(n, c, p, off), simulator)


def confirm(kind: Type, n: Numbers, rb: float, rbe: float | None) -> dict[str, float]:
    """The same extremes by ngspice at those devices and corners only where the solver finds one of them."""
    rows = np.arange(len(kind.devices))
    c, p = settle(kind, n, on_corners(kind, n, rb, rbe, rows), by_solver)
    off_c = off_corners(kind, n, rb, rbe, rows, c.t.reshape(-1, len(rows)).max(axis=0))
    off = by_solver(kind.devices, off_c, kind.polarity)
    beta = p.ic / np.maximum(p.ib, 1e-12)
    worst = [p.vce.argmax(), p.ic.argmax(), p.ic.argmin(), p.ib.argmin(), p.ib.argmax(), p.drive.argmax(),
             beta.argmax(), (p.vce * p.ic + p.vbe * p.ib).argmax(), c.t.argmax()]  # fmt: skip
    unsolved = np.flatnonzero(np.isnan(p.vce))
    c = c.take(np.unique([*worst, *unsolved]))
    c, p = settle(kind, n, c, by_ngspice, turns=2)
    off_c = off_c.take(np.unique([off.ic.argmax(), *np.flatnonzero(np.isnan(off.ic))]))
    off = by_ngspice(kind.devices, off_c, kind.polarity)
    return _with_inrush(kind, n, c, extremes(n, c, p, off), by_ngspice)


def _with_inrush(
    kind: Type, n: Numbers, c: Circuits, found: dict[str, float], simulator: Simulator
) -> dict[str, float]:
    if n.inrush > 1:
        found["inrush_ok"] = float(_survives_inrush(kind, n, c, simulator))
    return found


def _survives_inrush(kind: Type, n: Numbers, c: Circuits, simulator: Simulator) -> bool:
    """Whether the switch carries a cold filament: saturated, or at least within its power rating while it is not.

    A cold filament lights only where it gets a good part of its inrush: half of it is asked here.
    """
    t = np.where(c.t > n.ambient[0], n.ambient[1], n.ambient[0])  # the filament is cold before the junction is hot
    cold = replace(c, load=c.load / n.inrush, t=t)
    p = simulator(kind.devices, cold, kind.polarity)
    power = p.vce * p.ic
    allowed = (kind.tj_max - n.ambient[1]) / thermal_resistance(kind, n)
    good = (p.ic >= 0.5 * cold.vs / cold.load) & ((p.vce < (2.5 if kind.darlington else 1.0)) | (power <= allowed))
    return bool(good.all())


def switching_times(kind: Type, n: Numbers, rb: float, rbe: float | None) -> dict[str, float]:
    """The longest turn-on and turn-off of a resistive low- or high-side switch over all devices, by ngspice.

    Turn-on is slowest where the drive is weak and the load heavy, turn-off where the drive was strong and the load
    light; both are tried cold and hot.
    """
    assert n.load == "resistive"
    weak, strong = network_corners(n, rb, rbe)
    stages = []
    rows = range(len(kind.devices))
    for level, (r1, r2), load in zip(n.drive, (weak, strong), n.resistance, strict=True):
        for t, vs in ((n.ambient[0], n.supply[0]), (n.ambient[1], n.supply[1])):
            vd = vs - level if n.position == "high side" else level
            stages += [Stage(row, t, vs, load, n.off_level, vd, r1, r2) for row in rows]
    on, off = switching(kind.devices, stages)
    return {"t_on_max": float(on.max()), "t_off_max": float(off.max())}


LOW_BOUNDS = ("ic_on_min", "ib_on_min")


def broken_bounds(bounds: Mapping[str, float | None], found: Mapping[str, float], slack: float = 1e-3) -> list[str]:
    """Names of the bounds that the simulation goes beyond; a bound that is not stated cannot be broken.

    `slack` is the share allowed for the simulator's own convergence; temperatures are compared in kelvin above 0 °C.
    """
    broken = []
    for name, value in found.items():
        bound = bounds.get(name)
        if bound is None or np.isnan(bound):
            continue
        excess = (bound - value) if name in LOW_BOUNDS else (value - bound)
        if np.isnan(value) or excess > slack * abs(bound) + 1e-12:
            broken.append(name)
    return broken


@dataclass(frozen=True, slots=True)
class Ratings:
    """Ratings of the sheet that the population does not carry itself."""

    peak_current: float  # the continuous one where no peak is stated
    base_current: float  # inf where not stated

    @classmethod
    def of(cls, part: Part) -> "Ratings":
        """Read from the part's limits."""
        found = {limit.symbol: limit.max for limit in part.limits if limit.max is not None}
        return cls(found.get("ICM", found["IC"]), found.get("IB", np.inf))


def shortfalls(kind: Type, ratings: Ratings, n: Numbers, found: Mapping[str, float]) -> list[str]:
    """What the network misses of the requirement and the ratings; empty when it does the job.

    A value that was not found (NaN) is missed.
    """
    saturated = 2.5 if kind.darlington else 1.0
    limit = saturated if np.isnan(n.on_voltage) else n.on_voltage
    tj_limit = min(kind.tj_max, n.junction if not np.isnan(n.junction) else np.inf)
    asked = {
        "on voltage": found["vce_on_max"] <= limit,
        "drive current": found["drive_current_max"] <= n.drive_current * 1.0001,
        "collector current": found["ic_on_max"] <= kind.current
        and found["ic_on_max"] * n.inrush <= ratings.peak_current,
        "base current": found["ib_on_max"] <= ratings.base_current,
        "junction": found["tj_max"] <= tj_limit,
        "off current": found["ic_off_max"] <= n.off_current,
        "off voltage": found["vce_off_max"] <= kind.vceo,
        "turn-off time": np.isnan(n.turn_off) or found.get("t_off_max", 0.0) <= n.turn_off,
        "inrush": found.get("inrush_ok", 1.0) > 0,
    }
    return [name for name, good in asked.items() if not good]
