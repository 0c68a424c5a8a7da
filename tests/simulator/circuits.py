"""Random but realistic switching requirements: as requirement files, and as the plain numbers a simulation needs."""

from dataclasses import dataclass, field

import numpy as np

from engine.duty.switch_fields import FIELDS, complete
from engine.requirement import Requirement, Value, validate, with_defaults

COPPER = 234.5  # °C: R(T)/R20 = (234.5 + T)/(234.5 + 20), the usual figure for copper
_UNITS = {one.key: {"°C": "degC", "Ω": "ohm"}.get(one.unit, one.unit) for one in FIELDS}


@dataclass(frozen=True, slots=True)
class Numbers:
    """One requirement in plain SI numbers, seen from the emitter: a PNP's circuit is its mirror image."""

    position: str
    supply: tuple[float, float]
    load: str
    resistance: tuple[float, float]  # least and most, over tolerance and temperature; unused for a constant current
    current: tuple[float, float]  # of a constant-current load
    inrush: float  # times the hot current, 1 unless a lamp
    overshoot: float  # V above the supply at turn-off, from the clamp; inf without one
    drive: tuple[float, float]  # level above the emitter (low side), or below the supply's (high side): weak, strong
    off_level: float  # highest base drive when off
    off_injected: float  # base current of an open driver when off
    off_open: bool
    drive_resistance: float
    drive_current: float
    ambient: tuple[float, float]
    tolerance: float
    duty_cycle: float
    frequency: float
    heatsink: float  # K/W, NaN without one
    on_voltage: float  # NaN when not asked
    off_current: float
    turn_off: float  # NaN when not asked
    junction: float  # NaN when not asked
    overdrive: float  # times the base current that the least gain needs


@dataclass(frozen=True, eq=False)
class Job:
    """One invented requirement in its three forms."""

    number: int
    values: dict[str, Value] = field(repr=False)  # as stated, dotted keys

    @property
    def requirement(self) -> Requirement:
        """The requirement as the engine takes it."""
        assert not validate(FIELDS, self.values)
        full, problems, notes = complete(with_defaults(FIELDS, self.values))
        assert not problems, problems
        return Requirement("switch", f"Job {self.number}", full, tuple(notes))

    @property
    def toml(self) -> str:
        """The requirement as a file."""
        sections: dict[str, list[str]] = {"": [f'title = "Job {self.number}"', 'duty = "switch"']}
        for key, value in self.values.items():
            section, _, name = key.rpartition(".")
            sections.setdefault(section, []).append(f"{name} = {_toml(key, value)}")
        blocks = ["\n".join(([f"[{name}]"] if name else []) + lines) for name, lines in sections.items()]
        return "\n".join(blocks) + "\n"

    @property
    def numbers(self) -> Numbers:
        """The requirement as the simulation takes it."""
        return _numbers(self.requirement)


def _toml(key: str, value: Value) -> str:
    if isinstance(value, str):
        return f'"{value}"'
    if isinstance(value, tuple):
        return "[" + ", ".join(f'"{word}"' for word in value) + "]"
    unit = _UNITS[key]
    return f'"{value:.9g} {unit}"' if unit else f"{value:.9g}"


def _numbers(r: Requirement) -> Numbers:
    high_side = r.word("position") == "high side"
    ambient = (r.number("ambient.min"), r.number("ambient.max"))
    kind = r.word("load.kind")
    tolerance = r.number("load.tolerance")
    resistance, current = (np.nan, np.nan), (np.nan, np.nan)
    if kind == "constant current":
        stated = r.number("load.current")
        current = (stated * (1 - tolerance), stated * (1 + tolerance))
    else:
        stated = r.number("load.resistance")
        if np.isnan(stated):
            stated = r.number("supply.max") / r.number("load.current")
        cold, hot = ((COPPER + t) / (COPPER + 20) if kind == "coil" else 1.0 for t in ambient)
        resistance = (stated * (1 - tolerance) * cold, stated * (1 + tolerance) * hot)
    if high_side:
        drive = (r.number("drive.low_max"), r.number("drive.low_min"))
        opened = r.word("drive.off") == "open"
        off_level = 0.0 if opened else r.number("drive.off_drop_max")
        injected = r.number("drive.off_leakage_max") if opened else 0.0
    else:
        drive = (r.number("drive.high_min"), r.number("drive.high_max"))
        opened, off_level, injected = False, r.number("drive.low_max"), 0.0
    overshoot = _overshoot(r) if kind == "coil" else 0.0
    return Numbers(
        r.word("position"), (r.number("supply.min"), r.number("supply.max")), kind, resistance, current,
        r.number("load.inrush") if kind == "lamp" else 1.0, overshoot, drive, off_level, injected, opened,
        r.number("drive.resistance"), r.number("drive.current_max"), ambient, r.number("resistors.tolerance"),
        r.number("timing.duty_cycle"), r.number("timing.frequency"), r.number("heatsink.case_to_ambient"),
        r.number("limits.on_voltage_max"), r.number("limits.off_current_max"), r.number("limits.turn_off_max"),
        r.number("limits.junction_max"), r.number("choice.overdrive"),
    )  # fmt: skip


def _overshoot(r: Requirement) -> float:
    if r.word("load.clamp") == "none":
        return np.inf
    zener = r.number("load.clamp_voltage") * (1 + r.number("load.clamp_tolerance"))
    return r.number("load.clamp_drop") + (zener if r.word("load.clamp") == "zener" else 0.0)


def jobs(count: int = 60, seed: int = 1) -> list[Job]:
    """`count` requirements; the same seed gives the same ones."""
    return [Job(k + 1, _values(np.random.default_rng([seed, 77, k]))) for k in range(count)]


def _values(rng: np.random.Generator) -> dict[str, Value]:
    high_side = rng.random() < 0.4
    nominal = float(rng.choice([3.3, 5, 9, 12, 12, 24, 24, 36, 48, 60]))
    swing = float(rng.choice([0.05, 0.1, 0.15]))
    values: dict[str, Value] = {
        "position": "high side" if high_side else "low side",
        "supply.min": round(nominal * (1 - swing), 3),
        "supply.max": min(round(nominal * (1 + swing), 3), 60.0),
    }
    _load(values, rng, float(values["supply.max"]))  # type: ignore[arg-type]
    (_sink if high_side else _source)(values, rng)
    values["ambient.min"] = float(rng.choice([-40, -25, -10, 0, 10]))
    values["ambient.max"] = float(rng.choice([40, 50, 60, 70, 85]))
    values["resistors.tolerance"] = float(rng.choice([0.01, 0.02, 0.05]))
    if rng.random() < 0.7:
        values["limits.on_voltage_max"] = float(rng.choice([0.2, 0.3, 0.4, 0.5, 0.8, 1.0, 1.5]))
    if rng.random() < 0.75:
        asked = max(_current(values) * 10 ** rng.uniform(-4, -2), 1e-6)
        values["limits.off_current_max"] = float(f"{asked:.2g}")
    if values["load.kind"] == "resistive" and rng.random() < 0.4:
        values["timing.frequency"] = float(rng.choice([10, 100, 1000, 2000]))
        values["timing.duty_cycle"] = float(rng.choice([0.25, 0.5, 0.75]))
        if rng.random() < 0.5:
            values["limits.turn_off_max"] = float(rng.choice([2e-6, 5e-6, 2e-5, 1e-4]))
    if _current(values) > 0.4 and rng.random() < 0.5:
        values["heatsink.case_to_ambient"] = float(rng.choice([5, 10, 20]))
    values["choice.overdrive"] = float(rng.choice([1, 1.5, 2, 2, 3]))
    return values


def _current(values: dict[str, Value]) -> float:
    if "load.current" in values:
        return float(values["load.current"])  # type: ignore[arg-type]
    return float(values["supply.max"]) / float(values["load.resistance"])  # type: ignore[arg-type]


def _load(values: dict[str, Value], rng: np.random.Generator, supply: float) -> None:
    kind = str(rng.choice(["resistive", "constant current", "coil", "lamp"], p=[0.45, 0.2, 0.25, 0.1]))
    current = float(np.exp(rng.uniform(np.log(5e-3), np.log(0.08 if kind == "lamp" else 0.8))))
    values["load.kind"] = kind
    values["load.tolerance"] = float(rng.choice([0.0, 0.05, 0.1]))
    if kind == "constant current" or rng.random() < 0.3:
        values["load.current"] = float(f"{current:.2g}")
    else:
        values["load.resistance"] = float(f"{supply / current:.2g}")
    if kind == "coil":
        values["load.inductance"] = float(f"{0.02 / current:.2g}")
        values["load.clamp"] = str(rng.choice(["diode", "zener", "none"], p=[0.6, 0.3, 0.1]))
        if values["load.clamp"] == "zener":
            values["load.clamp_voltage"] = float(rng.choice([12, 24, 36]))
    if kind == "lamp":
        values["load.inrush"] = float(rng.choice([10, 15]))


def _source(values: dict[str, Value], rng: np.random.Generator) -> None:
    """A driver that sources the base current of a low-side switch."""
    which = rng.random()
    if which < 0.4:
        values |= {"drive.level": "LVTTL 3.3 V", "drive.current_max": float(rng.choice([2, 4, 8, 12, 20])) * 1e-3}
    elif which < 0.75:
        values |= {
            "drive.high_min": float(rng.choice([4.2, 4.4])), "drive.high_max": 5.25,
            "drive.low_max": float(rng.choice([0.1, 0.26, 0.4])),
            "drive.current_max": float(rng.choice([4, 8, 25])) * 1e-3,
        }  # fmt: skip
    else:
        pull_up = float(rng.choice([1000, 2200, 4700]))
        values |= {
            "drive.high_min": 11.4, "drive.high_max": 12.6, "drive.low_max": 0.4,
            "drive.current_max": round(12.6 / pull_up, 5), "drive.resistance": pull_up,
        }  # fmt: skip


def _sink(values: dict[str, Value], rng: np.random.Generator) -> None:
    """A driver that sinks the base current of a high-side switch."""
    values["drive.low_max"] = float(rng.choice([0.2, 0.4, 0.5]))
    values["drive.current_max"] = float(rng.choice([4, 8, 16, 40])) * 1e-3
    if rng.random() < 0.5:
        values["drive.off"] = "rail"
        values["drive.off_drop_max"] = float(rng.choice([0.1, 0.4]))
    else:
        values["drive.off"] = "open"
        values["drive.off_leakage_max"] = float(rng.choice([0, 1e-6, 5e-6]))
