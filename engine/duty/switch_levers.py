"""What could be changed so that a part would fit a switch: demands to ease, values to look up on its sheet."""

from collections.abc import Callable

from ..requirement import Requirement
from .base import Lever, Reading
from .switch_situation import situation

Span = Callable[[Requirement], tuple[float, float]]


def _times(key: str, factor: float, cap: float = float("inf")) -> Span:
    """From what is asked to `factor` times that, not beyond `cap`."""

    def span(req: Requirement) -> tuple[float, float]:
        now = req.number(key)
        return now, min(now * factor, cap)

    return span


def _towards(key: str, end: Callable[[Requirement], float]) -> Span:
    return lambda req: (req.number(key), end(req))


def _sink(req: Requirement) -> tuple[float, float]:
    """From the stated sink, or a piece of sheet metal where none is stated, to a large one with a fan."""
    stated = req.number("heatsink.case_to_ambient")
    return (60.0 if stated != stated else stated), 0.2


LEVERS = (
    Lever("drive.current_max", "A", "let the driver give", _times("drive.current_max", 100)),
    Lever("drive.low_max", "V", "pull the base down to", _towards("drive.low_max", lambda req: req.number("drive.low_min"))),
    Lever("limits.on_voltage_max", "V", "allow an on-voltage of", _times("limits.on_voltage_max", 50, 5.0)),
    Lever("limits.off_current_max", "A", "allow an off-state current of", _times("limits.off_current_max", 1e4)),
    Lever("limits.turn_on_max", "s", "allow a turn-on time of", _times("limits.turn_on_max", 1e3)),
    Lever("limits.turn_off_max", "s", "allow a turn-off time of", _times("limits.turn_off_max", 1e3)),
    Lever("limits.junction_max", "°C", "allow a junction of", _towards("limits.junction_max", lambda _: 200.0)),
    Lever("limits.load_current_min", "A", "be content with a load current of", _times("limits.load_current_min", 0.1)),
    Lever("supply.max", "V", "keep the supply at or below", _towards("supply.max", lambda req: req.number("supply.min"))),
    Lever("ambient.max", "°C", "keep the ambient at or below", _towards("ambient.max", lambda req: req.number("ambient.min"))),
    Lever("ambient.min", "°C", "keep the ambient at or above",
          _towards("ambient.min", lambda req: min(25.0, req.number("ambient.max")))),
    Lever("heatsink.case_to_ambient", "K/W", "fit a heat sink of", _sink),
    Lever("timing.frequency", "Hz", "switch no faster than", _times("timing.frequency", 1e-3)),
    Lever("load.inrush", "", "limit the inrush to a ratio of", _towards("load.inrush", lambda _: 1.0)),
    Lever("choice.overdrive", "", "be content with an overdrive of", _towards("choice.overdrive", lambda _: 1.0)),
)  # fmt: skip


def readings(req: Requirement) -> tuple[Reading, ...]:
    """Limits that a sheet could state for this load, each from a value that any part would do with to the worst."""
    sit = situation(req)
    ic, vs = float(sit.ic_max.values), float(sit.vs_max.values)
    off = vs if sit.v_off is None else float(sit.v_off.values)
    most = 1.0 if sit.ic_inrush is None else float(sit.ic_inrush.values) / ic
    saturated = (("ib", ic / 10), ("ic", ic))
    timed = (("ib", ic / 10), ("ic", ic), ("vcc", vs))
    reversed_ = (("ib", ic / 10), ("ib2", ic / 10), ("ic", ic), ("vcc", vs))
    sunk = req.has("heatsink.case_to_ambient")
    switches = req.number("timing.frequency") > 0
    times = []
    if switches or req.has("limits.turn_on_max"):
        times.append(Reading("ton", "max", "s", timed, 1e-9, 1e-3))
    if switches or req.has("limits.turn_off_max"):
        times.append(Reading("toff", "max", "s", reversed_, 1e-9, 1e-3))
    return (
        Reading("VCE(sat)", "max", "V", saturated, 0.02, 3.0),
        Reading("VBE(sat)", "max", "V", saturated, 0.7, 2.0),
        Reading("hFE", "min", "", (("ic", ic), ("vce", 1.0)), 1000.0, 5.0),
        Reading("ICBO", "max", "A", (("vcb", off),), 1e-11, 1e-2),
        Reading("VCEO", "max", "V", (), 3 * off, 0.2 * off),
        Reading("IC", "max", "A", (), 5 * ic * most, 0.2 * ic),
        Reading("VEBO", "max", "V", (), 20.0, 1.0),
        Reading("TJ", "max", "°C", (), 175.0, 50.0),
        Reading("RthJC", "max", "K/W", (), 0.5, 100.0) if sunk else Reading("RthJA", "max", "K/W", (), 5.0, 1000.0),
        *times,
    )
