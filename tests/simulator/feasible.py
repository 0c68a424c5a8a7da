"""Whether any network of preferred values lets a type do a job: a search with the solver, confirmed by ngspice."""

import numpy as np

from .circuits import Numbers
from .datasheet import gain
from .gummel_poon import Floats
from .judge import (
    Circuits,
    Ratings,
    by_solver,
    confirm,
    judge,
    off_corners,
    on_corners,
    shortfalls,
    switching_times,
)
from .population import Type

E24 = (10, 11, 12, 13, 15, 16, 18, 20, 22, 24, 27, 30, 33, 36, 39, 43, 47, 51, 56, 62, 68, 75, 82, 91)  # IEC 60063
VALUES = np.array([mantissa * 10.0**decade for decade in range(5) for mantissa in E24])  # 10 Ω … 0.91 MΩ

Network = tuple[float, float | None]


def possible(kind: Type, ratings: Ratings, n: Numbers) -> bool:
    """Whether polarity and the plain ratings let the pair be tried at all."""
    heavy = n.current[1] if n.load == "constant current" else n.supply[1] / n.resistance[0]
    return (
        (kind.polarity == "pnp") == (n.position == "high side")
        and heavy <= kind.current
        and heavy * n.inrush <= ratings.peak_current
        and n.supply[1] + n.overshoot <= kind.vceo
    )


def candidates(kind: Type, n: Numbers) -> list[Network]:
    """Networks worth trying: for each RBE the smallest RB that the driver may see, and some larger ones."""
    junction = 1.2 if kind.darlington else 0.6
    shares = (0.02, 0.05, 0.1, 0.2, 0.35, 0.5)
    shunts: list[float | None] = [None, *(_above(junction / (share * n.drive_current)) for share in shares)]
    strongest = n.supply[1] - n.drive[1] if n.position == "high side" else n.drive[1]
    networks = []
    for rbe in shunts:
        for guess in (junction + 0.25, junction, junction - 0.25):
            least = ((strongest - guess) / n.drive_current - n.drive_resistance) / (1 - n.tolerance)
            networks += [(_above(least * factor), rbe) for factor in (1.0, 1.6, 2.7, 5.0)]
    return sorted(set(networks), key=lambda one: (one[0], one[1] or np.inf))


def overdriven(kind: Type, n: Numbers, found: dict[str, float]) -> bool:
    """Whether the base current is the wanted multiple of what the least gain of all devices asks for, 25 °C."""
    least = float(gain(kind, found["ic_on_max"], kind.family.sheet_vce[-1]).min())
    return n.overdrive * found["forced_beta_max"] <= least


def _above(value: float) -> float:
    return float(VALUES[min(int(np.searchsorted(VALUES, value * (1 - 1e-9))), len(VALUES) - 1)])


def screen(kind: Type, n: Numbers, networks: list[Network], *, on_only: bool = False) -> Floats:
    """Least margin of each network over the few devices and corners that usually decide; below 1 it fails.

    `on_only` asks for the on voltage alone.
    """
    p = kind.devices.output
    assert kind.devices.leak is not None
    rows = np.unique([
        p["BF"].argmin(), (p["BF"] * p["IKF"]).argmin(), (p["RC"] + p["RE"]).argmax(), p["RCO"].argmax(),
        kind.devices.leak.argmax(), (p["IS"] * p["BF"]).argmax(), p["IS"].argmax(),
    ])  # fmt: skip
    on = [_deciding(on_corners(kind, n, rb, rbe, rows), n) for rb, rbe in networks]
    shape = (len(networks), -1)
    point = by_solver(kind.devices, _joined(on), kind.polarity)
    limit = (2.5 if kind.darlington else 1.0) if np.isnan(n.on_voltage) else n.on_voltage
    margin: Floats = np.nan_to_num(limit / point.vce.reshape(shape).max(axis=1))
    if on_only:
        return margin
    margin = np.minimum(margin, n.drive_current * 1.0001 / point.drive.reshape(shape).max(axis=1))
    kept = np.flatnonzero(np.nan_to_num(margin) > 0.98)
    if not len(kept):
        return margin
    hot = np.full(len(rows), n.ambient[1] + 3.0)
    off = [off_corners(kind, n, *networks[k], rows, hot) for k in kept]
    off_point = by_solver(kind.devices, _joined(off), kind.polarity)
    margin[kept] = np.minimum(margin[kept], n.off_current / off_point.ic.reshape(len(kept), -1).max(axis=1))
    worst: Floats = np.nan_to_num(margin)
    return worst


def _deciding(c: Circuits, n: Numbers) -> Circuits:
    """Of the on corners: heaviest load with the weakest drive, and the strongest drive at the highest supply."""
    heavy = c.load == (c.load.max() if c.constant else c.load.min())
    weak = c.rb == c.rb.max()
    top = c.vs == c.vs.max()
    keep = heavy & ((weak & (top | (n.position == "high side"))) | (~weak & top & (c.t == n.ambient[1])))
    return c.take(np.flatnonzero(keep))


def _joined(circuits: list[Circuits]) -> Circuits:
    def joined(name: str) -> Floats:
        return np.concatenate([getattr(one, name) for one in circuits])

    first = circuits[0]
    row = np.concatenate([one.row for one in circuits])
    columns = (joined(name) for name in ("t", "vs", "load", "vd", "rb", "rbe", "injected"))
    t, vs, load, vd, rb, rbe, injected = columns
    return Circuits(row, t, vs, load, vd, rb, rbe, injected, first.constant, first.off)


def find(kind: Type, ratings: Ratings, n: Numbers, tries: int = 4) -> tuple[Network, dict[str, float]] | None:
    """A network with which every device does the job at the deciding corners by ngspice, and its extremes.

    None when the search finds none.
    """
    if not possible(kind, ratings, n) or not np.isfinite(n.overshoot):
        return None
    networks = candidates(kind, n)
    hardest = [one for one in networks if one[1] is None][:3]  # no RBE and least RB: the most drive there is
    if not (screen(kind, n, hardest, on_only=True) > 0.98).any():
        return None
    margin = screen(kind, n, networks)
    order = np.argsort(-margin)
    if not np.isnan(n.turn_off):  # little overdrive and a low RBE turn off fastest
        order = np.array(sorted(order, key=lambda k: (networks[k][1] or np.inf, -networks[k][0])), dtype=np.intp)
    for k in [k for k in order if margin[k] > 0.98][:tries]:
        rb, rbe = networks[k]
        solved = judge(kind, n, rb, rbe, by_solver)
        if shortfalls(kind, ratings, n, solved) or not overdriven(kind, n, solved):
            continue
        found = confirm(kind, n, rb, rbe)
        if not np.isnan(n.turn_off):
            found |= switching_times(kind, n, rb, rbe)
        if not shortfalls(kind, ratings, n, found):
            return (rb, rbe), found
    return None
