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
    "RCO", "VO", "GAMMA", "QCO", "CN", "D", "TRC1", "CJE", "CJC", "TF", "TR",
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
        pick = lambda column: None if column is None else column[rows]  # noqa: E731
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


Boundary = Callable[[Floats, Floats, Floats, Floats], tuple[Floats, Floats]]
"""(vb, vc, ib, ic) → the two residuals of the outer circuit, each near 1 A or 1 V in scale."""


def solve(devices: Devices, t: Floats, boundary: Boundary, *, off: Floats | None = None) -> Points:
    """Operating points at junction temperature `t`, shape (n,), under `boundary`.

    `off` is the collector voltage of transistors that are known to be off: a better start for them.
    """
    stages = [at_temperature(devices.output, t)]
    if devices.driver is not None:
        stages.append(at_temperature(devices.driver, t))
    leak = devices.leakage(t) if off is not None else np.zeros(len(devices))

    def outer(x: Floats) -> tuple[Floats, Floats, Floats, Floats, list[Floats]]:
        vb, vc, ib, ic, error = terminals(stages[0], x[:3])
        if devices.driver is None:
            return vb, vc, ib - leak, ic + leak, [error]
        assert devices.r_output is not None and devices.r_driver is not None
        vb1, vc1, ib1, ic1, error1 = terminals(stages[1], x[3:])
        to_middle = ib1 + ic1 + vb1 / devices.r_driver + 0.7 * leak
        middle = to_middle - ib - vb / devices.r_output
        errors = [error, error1, (vb + vc1 - vc), middle]
        return vb + vb1, vc, ib1 + vb1 / devices.r_driver - 0.3 * leak, ic + ic1 + leak, errors

    def residual(x: Floats) -> Floats:
        vb, vc, ib, ic, errors = outer(x)
        return np.stack([*errors, *boundary(vb, vc, ib, ic)])

    vt = stages[0]["VT"]
    guess = _start(vt, len(stages), off)
    x, converged = _newton(residual, guess, vt)
    vb, vc, ib, ic, _ = outer(x)
    return Points(vb, vc, ib, ic, converged)


def _start(vt: Floats, stages: int, off: Floats | None) -> Floats:
    base = 0.9 - 9 * (vt - 0.0187) if off is None else np.full_like(vt, 0.2)
    if off is None:
        rows = [base, base - 0.15, base - 0.3]
        rows2 = [base - 0.1, base - 0.8, base - 0.9]
    else:
        rows = [base, base - off, base - off]
        rows2 = [base, 2 * base - off, 2 * base - off]
    return np.stack(rows + (rows2 if stages == 2 else []))


def _newton(residual: Callable[[Floats], Floats], x: Floats, vt: Floats) -> tuple[Floats, NDArray[np.bool_]]:
    """Newton's method; an unknown that swings to and fro may move less and less. x has shape (m, n)."""
    m, n = x.shape
    longest = np.full((m, n), 0.2)  # V, the step that each unknown may take
    before = np.zeros((m, n))
    done = np.zeros(n, dtype=bool)
    for turn in range(160):
        if turn in (50, 100):  # those still wandering start again: in the active region, then deep in saturation
            afresh = np.zeros_like(x) + 0.6 - 0.0015 * (vt / vt.min() - 1)
            afresh[1:] -= 1.5 if turn == 50 else 0.02
            x = np.where(done, x, afresh)
            longest = np.where(done, longest, 0.1)
        change = _newton_step(residual, x)
        swing = change * before < 0
        longest = np.clip(np.where(swing, 0.4 * longest, 1.5 * longest), 1e-4, 40.0)
        done = (np.abs(change) < 1e-7 * np.maximum(1.0, np.abs(x))).all(axis=0)
        if done.all():
            break
        upwards = np.where((x > 0.5) & (change > 0), np.minimum(longest, 3 * vt), longest)
        before = np.clip(change, -longest, upwards)
        x = x + before
    return x, done


def _newton_step(residual: Callable[[Floats], Floats], x: Floats) -> Floats:
    m, n = x.shape
    f = residual(x)
    jacobian = np.empty((n, m, m))
    for k in range(m):
        moved = x.copy()
        step = 1e-7 * np.maximum(1.0, np.abs(x[k]) * 0.1)
        moved[k] += step
        jacobian[:, :, k] = ((residual(moved) - f) / step).T
    scale = np.abs(jacobian).max(axis=2)
    scale[~(scale > 0)] = 1.0
    jacobian = jacobian / scale[:, :, None] + 1e-13 * np.eye(m)
    change = np.linalg.solve(jacobian, (-f.T / scale)[:, :, None])[:, :, 0].T
    return np.where(np.isfinite(change), change, 0.0)
