"""Switching times by ngspice: a step up and a step down of the drive, many circuits in one run."""

from dataclasses import dataclass

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
    the longest charge time constant.
    """
    p = devices.output
    slowest = float(max((2 * p["BF"] * p["TF"] + 3 * p["TR"] * (1 + p["BR"])).max(), 2e-7))
    period = 12 * slowest
    lines = spice.models(devices, "npn")
    for k, stage in enumerate(stages):
        lines += spice.transistor(devices, stage.row, str(k), stage.t)
        lines += [
            f"vs{k} s{k} 0 {stage.vs:.9g}",
            f"rl{k} s{k} c{k} {stage.rl:.9g}",
            f"vd{k} d{k} 0 pulse({stage.v_low:.9g} {stage.v_high:.9g} {period / 100:.4g} 1n 1n {period:.6g} 1)",
            f"rb{k} d{k} b{k} {stage.rb:.9g}",
        ]
        if np.isfinite(stage.rbe):
            lines.append(f"rz{k} b{k} 0 {stage.rbe:.9g}")
    save = [f"v(c{k})" for k in range(len(stages))]
    result = spice.run("switching", lines, f".tran {period / 500:.4g} {2.6 * period:.6g} 0 {period / 60:.4g}", save)
    time = result["time"]
    start, stop = period / 100, period / 100 + period
    times = [
        _times(time, (stage.vs - result[f"v(c{k})"]) / stage.rl, start, stop, (stage.vs / stage.rl))
        for k, stage in enumerate(stages)
    ]
    return np.array([on for on, _ in times]), np.array([off for _, off in times])


def _times(time: Floats, current: Floats, start: float, stop: float, most: float) -> tuple[float, float]:
    on = (time >= start) & (current >= 0.9 * most)
    first = int(np.argmax(on)) if on.any() else -1
    off = (time > stop) & (current <= 0.1 * most)
    last = int(np.argmax(off)) if off.any() else -1
    t_on = time[first] - start if first >= 0 and time[first] < stop else np.nan
    t_off = time[last] - stop if last >= 0 else np.nan
    return float(t_on), float(t_off)


def step_times(kind: Type, ic: float, ib1: float, ib2: float, vcc: float) -> tuple[Floats, Floats]:
    """ton and toff of every device at a sheet's test conditions and 25 °C, shapes (n,)."""
    high, drop = 5.0, 0.75
    rb = (high - drop) / ib1
    low = drop - ib2 * rb
    stages = [Stage(row, 25.0, vcc, vcc / ic, low, high, rb) for row in range(len(kind.devices))]
    return switching(kind.devices, stages)
