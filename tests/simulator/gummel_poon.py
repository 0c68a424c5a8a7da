"""Direct-current Gummel–Poon transistors with a Kull collector, many at once: the judge's fast solver.

Written from the published equations (H. K. Gummel, H. C. Poon, Bell Syst. Tech. J. 49, 1970; G. M. Kull et al.,
IEEE Trans. Electron Devices 32, 1985: quasi-saturation) and checked against ngspice in `test_devices.py`.
It shares nothing with the engine: a mistake there must not be able to hide here.

Everything is in magnitudes with the emitter at 0 V, so a PNP is solved as its mirror image. SI units, °C.
"""

from collections.abc import Callable, Mapping
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

Floats = NDArray[np.float64]

BOLTZMANN_OVER_CHARGE = 1.380649e-23 / 1.602176634e-19  # V/K
NOMINAL = 298.15  # K: the models are stated at 25 °C
PARAMETERS = (
    "IS", "BF", "ISE", "NE", "IKF", "VAF", "BR", "RB", "RBM", "RC", "RE", "XTB", "XTI", "EG",
    "RCO", "VO", "GAMMA", "CN", "D", "TRC1", "CJE", "CJC", "TF", "TR",
)  # fmt: skip
GAP_OF_EPITAXY = 1.206  # V, ngspice's VG
GMIN = 1e-12


@dataclass(frozen=True, eq=False)
class Devices:
    """Transistors of one structure. Every array has shape (n,); a single transistor has no `driver`."""

    output: Mapping[str, Floats]  # Gummel–Poon parameters; of a Darlington the output transistor
    driver: Mapping[str, Floats] | None = None  # the first transistor of a Darlington
    r_driver: Floats | None = None  # inner resistor across the first base–emitter junction, inf when left out
    r_output: Floats | None = None  # the same of the output transistor
    leak: Floats | None = None  # collector–base leakage at 25 °C, A
    leak_diffusion: Floats | None = None  # share of it that grows as diffusion current

    def __len__(self) -> int:
        return len(self.output["IS"])

    def take(self, rows: NDArray[np.intp]) -> "Devices":
        """The devices `rows`, repeated and ordered as asked."""

        def pick(column: Floats | None) -> Floats | None:
            return None if column is None else column[rows]

        return Devices(
            {name: column[rows] for name, column in self.output.items()},
            None if self.driver is None else {name: column[rows] for name, column in self.driver.items()},
            pick(self.r_driver),
            pick(self.r_output),
            pick(self.leak),
            pick(self.leak_diffusion),
        )

    def leakage(self, t: Floats) -> Floats:
        """Collector–base leakage at junction temperature `t`, A.

        Generation current follows the intrinsic density, diffusion current its square (textbook physics).
        """
        kelvin = t + 273.15
        assert self.leak is not None and self.leak_diffusion is not None
        square = (kelvin / NOMINAL) ** 3 * np.exp(1.12 / BOLTZMANN_OVER_CHARGE * (1 / NOMINAL - 1 / kelvin))
        return self.leak * ((1 - self.leak_diffusion) * np.sqrt(square) + self.leak_diffusion * square)


def at_temperature(p: Mapping[str, Floats], t: Floats) -> dict[str, Floats]:
    """The parameters at junction temperature `t` in °C."""
    kelvin = t + 273.15
    ratio = kelvin / NOMINAL
    vt = BOLTZMANN_OVER_CHARGE * kelvin
    growth = (ratio - 1) * p["EG"] / vt + p["XTI"] * np.log(ratio)
    gain = ratio ** p["XTB"]
    hot = dict(p)
    hot["VT"] = vt
    hot["IS"] = p["IS"] * np.exp(growth)
    hot["BF"], hot["BR"] = p["BF"] * gain, p["BR"] * gain
    hot["ISE"] = p["ISE"] * np.exp(growth / p["NE"]) / gain
    hot["RC"] = p["RC"] * (1 + p["TRC1"] * (t - 25))
    hot["RCO"] = p["RCO"] * ratio ** p["CN"]
    hot["VO"] = p["VO"] * ratio ** (p["D"])
    hot["GAMMA"] = p["GAMMA"] * ratio ** p["XTI"] * np.exp(-GAP_OF_EPITAXY * (1 - ratio) / vt)
    return hot


def terminals(p: Mapping[str, Floats], x: Floats) -> tuple[Floats, Floats, Floats, Floats, Floats]:
    """Base voltage, collector voltage, base current, collector current and the error of the collector region.

    `x` holds the junction voltages (vbe, vbc, vbcx), shape (3, n): base–emitter, base–collector on the inner and
    on the outer side of the lightly doped collector.
    """
    vbe, vbc, vbcx = x
    vt = p["VT"]
    forward = p["IS"] * _rise(vbe / vt) + GMIN * vbe
    recombined = p["ISE"] * _rise(vbe / (p["NE"] * vt))
    reverse = p["IS"] * _rise(vbc / vt) + GMIN * vbc
    charge = 0.5 / (1 - np.minimum(vbc / p["VAF"], 0.9)) * (1 + np.sqrt(1 + 4 * np.maximum(forward, 0) / p["IKF"]))
    ic = (forward - reverse) / charge - reverse / p["BR"]
    ib = forward / p["BF"] + recombined + reverse / p["BR"]
    v_emitter = (ic + ib) * p["RE"]
    v_inner = v_emitter + vbe
    v_base = v_inner + ib * (p["RBM"] + (p["RB"] - p["RBM"]) / charge)
    v_collector = v_inner - vbcx + ic * p["RC"]
    return v_base, v_collector, ib, ic, _collector_current(p, vbc, vbcx) - ic


def _rise(u: Floats) -> Floats:
    """exp(u) − 1, carried on as a straight line where it would overflow."""
    safe = np.minimum(u, 90.0)
    return np.expm1(safe) + np.exp(safe) * (u - safe)


def _collector_current(p: Mapping[str, Floats], vbc: Floats, vbcx: Floats) -> Floats:
    vt, drop = p["VT"], vbc - vbcx
    inner = np.sqrt(1 + p["GAMMA"] * (_rise(vbc / vt) + 1))
    outer = np.sqrt(1 + p["GAMMA"] * (_rise(vbcx / vt) + 1))
    injected = vt * (inner - outer - np.log((1 + inner) / (1 + outer)))
    saturated = (drop + injected) / p["RCO"] / (1 + np.abs(drop) / p["VO"])
    return np.where(drop > 0, saturated, drop / p["RCO"])


@dataclass(frozen=True, eq=False)
class Points:
    """Operating points of the outer terminals. Shapes (n,)."""

    vbe: Floats
    vce: Floats
    ib: Floats
    ic: Floats
    converged: NDArray[np.bool_]


Boundary = Callable[[Floats, Floats, Floats, Floats, NDArray[np.intp]], tuple[Floats, Floats]]
"""(vb, vc, ib, ic, rows) → the two residuals of the outer circuit at the circuits `rows`, each near 1 in scale."""


@dataclass(frozen=True, eq=False)
class _Problem:
    """Transistors at temperature with their leakage and outer circuit. Arrays of shape (n,)."""

    stages: tuple[Mapping[str, Floats], ...]  # output transistor and, of a Darlington, the driver
    shunts: tuple[Floats, ...]  # inner resistors across the two junctions of a Darlington
    leak: Floats
    boundary: Boundary
    rows: NDArray[np.intp]

    def keep(self, kept: NDArray[np.intp]) -> "_Problem":
        """The problem cut down to the places `kept`."""
        return _Problem(
            tuple({name: column[kept] for name, column in stage.items()} for stage in self.stages),
            tuple(column[kept] for column in self.shunts),
            self.leak[kept],
            self.boundary,
            self.rows[kept],
        )

    def outer(self, x: Floats) -> tuple[Floats, Floats, Floats, Floats, list[Floats]]:
        """Base and collector voltage, base and collector current, and the inner equations' errors."""
        vb, vc, ib, ic, error = terminals(self.stages[0], x[:3])
        if len(self.stages) == 1:
            return vb, vc, ib - self.leak, ic + self.leak, [error]
        vb1, vc1, ib1, ic1, error1 = terminals(self.stages[1], x[3:])
        to_driver, to_output = self.shunts
        middle = ib1 + ic1 + vb1 / to_driver + 0.7 * self.leak - ib - vb / to_output
        errors = [error, error1, vb + vc1 - vc, middle]
        return vb + vb1, vc, ib1 + vb1 / to_driver - 0.3 * self.leak, ic + ic1 + self.leak, errors

    def residual(self, x: Floats) -> Floats:
        """Everything that must vanish, shape (m, n)."""
        vb, vc, ib, ic, errors = self.outer(x)
        return np.stack([*errors, *self.boundary(vb, vc, ib, ic, self.rows)])


def solve(devices: Devices, t: Floats, boundary: Boundary, *, off: Floats | None = None) -> Points:
    """Operating points at junction temperature `t`, shape (n,), under `boundary`.

    `off` is the collector voltage of transistors that are known to be off: a better start for them, and they leak.
    """
    n = len(devices)
    stages: list[Mapping[str, Floats]] = [at_temperature(devices.output, t)]
    shunts: tuple[Floats, ...] = ()
    if devices.driver is not None:
        assert devices.r_output is not None and devices.r_driver is not None
        stages.append(at_temperature(devices.driver, t))
        shunts = (devices.r_driver, devices.r_output)
    leak = devices.leakage(t) if off is not None else np.zeros(n)
    problem = _Problem(tuple(stages), shunts, leak, boundary, np.arange(n))
    x, converged = _newton(problem, _start(stages[0]["VT"], len(stages), off))
    vb, vc, ib, ic, _ = problem.outer(x)
    return Points(vb, vc, ib, ic, converged)


def _start(vt: Floats, stages: int, off: Floats | None) -> Floats:
    if off is None:
        base = 0.9 - 9 * (vt - 0.0187)
        rows = [base, base - 0.15, base - 0.3, base - 0.1, base - 0.8, base - 0.9]
    else:
        base = np.full_like(vt, 0.2)
        rows = [base, base - off, base - off, base, 2 * base - off, 2 * base - off]
    return np.stack(rows[: 3 * stages])


def _newton(problem: _Problem, x: Floats) -> tuple[Floats, NDArray[np.bool_]]:
    """Newton's method; an unknown that swings to and fro may move less and less. x has shape (m, n)."""
    m, n = x.shape
    left = np.arange(n)
    work, y = problem, x.copy()
    longest, before = np.full((m, n), 0.2), np.zeros((m, n))  # V, the step that each unknown may take and has taken
    for turn in range(160):
        vt = work.stages[0]["VT"]
        if turn in (50, 100):  # those still wandering start again: in the active region, then deep in saturation
            y = np.full_like(y, 0.6)
            y[1:] -= 1.5 if turn == 50 else 0.02
            longest = np.full_like(y, 0.1)
        change = _newton_step(work, y)
        longest = np.clip(np.where(change * before < 0, 0.4 * longest, 1.5 * longest), 1e-4, 40.0)
        upwards = np.where((y > 0.5) & (change > 0), np.minimum(longest, 3 * vt), longest)
        before = np.clip(change, -longest, upwards)
        wandering = ~(np.abs(change) < 1e-7 * np.maximum(1.0, np.abs(y))).all(axis=0)
        y = y + before
        if wandering.sum() < 0.7 * len(left) or not wandering.any():
            x[:, left] = y
            kept = np.flatnonzero(wandering)
            left, y, longest, before = left[kept], y[:, kept], longest[:, kept], before[:, kept]
            if not len(left):
                break
            work = work.keep(kept)
    else:
        wandering = ~(np.abs(_newton_step(work, y)) < 1e-6).all(axis=0)
        x[:, left] = y
        left = left[wandering]
    converged = np.ones(n, dtype=bool)
    converged[left] = False
    return x, converged


def _newton_step(problem: _Problem, x: Floats) -> Floats:
    m, n = x.shape
    f = problem.residual(x)
    jacobian = np.empty((n, m, m))
    for k in range(m):
        moved = x.copy()
        step = 1e-7 * np.maximum(1.0, np.abs(x[k]) * 0.1)
        moved[k] += step
        jacobian[:, :, k] = ((problem.residual(moved) - f) / step).T
    scale = np.abs(jacobian).max(axis=2)
    usable = np.isfinite(jacobian).all(axis=(1, 2)) & np.isfinite(f).all(axis=0) & (scale > 0).all(axis=1)
    scale[~usable] = 1.0
    jacobian[~usable] = np.eye(m)
    f[:, ~usable] = 0.05
    matrix, right = jacobian / scale[:, :, None], (-f.T / scale)[:, :, None]
    for softening in (1e-13, 1e-9, 1e-5):  # a singular matrix only ever spoils a step, not the answer
        try:
            return np.asarray(np.linalg.solve(matrix + softening * np.eye(m), right)[:, :, 0].T)
        except np.linalg.LinAlgError:
            continue
    return np.full_like(x, 0.05)
