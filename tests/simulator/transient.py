"""Switching times by ngspice: a step up and a step down of the drive, many circuits in one run."""

from dataclasses import dataclass, replace

import numpy as np

from . import spice
from .gummel_poon import Devices, Floats
from .population import Type


@dataclass(frozen=True, slots=True)
class Stage:
    """One resistive switch, as seen from its emitter."""

    row: int  # of the device
    t: float  # junction temperature, °C
    vs: float
    rl: float
    v_low: float
    v_high: float
    rb: float
    rbe: float = float("inf")


def switching(devices: Devices, stages: list[Stage]) -> tuple[Floats, Floats]:
    """Turn-on and turn-off time of every stage: from the step of the drive to 90 % and 10 % of the load current.

    Shapes (len(stages),). NaN where the load current never gets there in the time watched, which is several times
    the longest charge time constant, or where ngspice finds no way on.
    """
    if len(stages) > 10:  # few circuits a run: their time steps hold each other up
        halves = [switching(devices, half) for half in (stages[: len(stages) // 2], stages[len(stages) // 2 :])]
        return np.concatenate([on for on, _ in halves]), np.concatenate([off for _, off in halves])
    rows, place = np.unique([stage.row for stage in stages], return_inverse=True)
    answer = _run(devices.take(rows), [replace(one, row=int(k)) for one, k in zip(stages, place, strict=True)])
    if answer is not None:
        return answer
    if len(stages) == 1:
        return np.array([np.nan]), np.array([np.nan])
    singles = [switching(devices, [stage]) for stage in stages]
    return np.concatenate([on for on, _ in singles]), np.concatenate([off for _, off in singles])


def _run(devices: Devices, stages: list[Stage]) -> tuple[Floats, Floats] | None:
    p = devices.output
    slowest = float(max((2 * p["BF"] * p["TF"] + 3 * p["TR"] * (1 + p["BR"])).max(), 2e-7))
    period = 12 * slowest
    start, stop = period / 100, period / 100 + period
    lines = spice.models(devices, "npn")
    for k, stage in enumerate(stages):
        lines += spice.transistor(devices, stage.row, str(k), stage.t)
        lines += [
            f"vs{k} s{k} 0 {stage.vs:.9g}",
            f"rl{k} s{k} c{k} {stage.rl:.9g}",
            f"vd{k} d{k} 0 pulse({stage.v_low:.9g} {stage.v_high:.9g} {start:.4g} 1n 1n {period:.6g} 1)",
            f"rb{k} d{k} b{k} {stage.rb:.9g}",
        ]
        if np.isfinite(stage.rbe):
            lines.append(f"rz{k} b{k} 0 {stage.rbe:.9g}")
    save = [f"v(c{k})" for k in range(len(stages))]
    result = spice.run("switching", lines, f".tran {period / 500:.4g} {2.6 * period:.6g} 0 {period / 60:.4g}", save, 8)
    if not len(result.get("time", ())) or result["time"][-1] < 2.59 * period:
        return None
    currents = [(stage.vs - result[f"v(c{k})"]) / stage.rl for k, stage in enumerate(stages)]
    times = [
        _times(result["time"], current, start, stop, stage.vs / stage.rl)
        for current, stage in zip(currents, stages, strict=True)
    ]
    return np.array([on for on, _ in times]), np.array([off for _, off in times])


def _times(time: Floats, current: Floats, start: float, stop: float, most: float) -> tuple[float, float]:
    up, down = (time >= start) & (time < stop), time >= stop
    t_on = _crossing(time[up], current[up] - 0.9 * most) - start
    t_off = _crossing(time[down], 0.1 * most - current[down]) - stop
    return t_on, t_off


def _crossing(time: Floats, rising: Floats) -> float:
    """When a quantity first gets above zero; NaN when it never does."""
    above = np.flatnonzero(rising > 0)
    if not len(above):
        return float("nan")
    k = int(above[0])
    if k == 0:
        return float(time[0])
    share = -rising[k - 1] / (rising[k] - rising[k - 1])
    return float(time[k - 1] + share * (time[k] - time[k - 1]))


def step_times(kind: Type, ic: float, ib1: float, ib2: float, vcc: float) -> tuple[Floats, Floats]:
    """ton and toff of every device at a sheet's test conditions and 25 °C, shapes (n,)."""
    high, drop = 5.0, 0.75
    rb = (high - drop) / ib1
    low = drop - ib2 * rb
    stages = [Stage(row, 25.0, vcc, vcc / ic, low, high, rb) for row in range(len(kind.devices))]
    return switching(kind.devices, stages)
