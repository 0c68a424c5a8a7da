"""What a switching requirement can state, and how the stated becomes complete: levels and defaults."""

from dataclasses import dataclass

from ..policy import POLICIES
from ..requirement import Field, Problem, Value

LOADS = ("resistive", "constant current", "coil", "lamp")
CLAMPS = ("none", "diode", "zener")
POSITIONS = ("low side", "high side")


@dataclass(frozen=True, slots=True)
class Level:
    """Output levels of a logic family: guaranteed values of a published standard, in V and A."""

    high_min: float  # VOH at `current`
    high_max: float
    low_max: float  # VOL at `current`
    current: float  # at which VOH and VOL are guaranteed
    source: str


LEVELS: dict[str, Level] = {
    "LVTTL 3.3 V": Level(2.4, 3.6, 0.4, 2e-3, "JESD8C.01"),
    "CMOS 2.5 V": Level(2.0, 2.7, 0.4, 1e-3, "JESD8-5A"),
    "CMOS 1.8 V": Level(1.2, 1.95, 0.45, 2e-3, "JESD8-7A: VDD − 0.45 V at VDD 1.65 V"),
    "HC 4.5 V": Level(3.84, 5.5, 0.33, 4e-3, "74HC data sheets (from memory)"),
    "TTL 5 V": Level(2.4, 5.25, 0.4, 0.4e-3, "74-series data sheets (from memory)"),
}

_COIL = ("load.kind", ("coil",))
_LAMP = ("load.kind", ("lamp",))
_HIGH_SIDE = ("position", ("high side",))

FIELDS: tuple[Field, ...] = (
    Field("position", "Position", "", "Where the switch stands: low side (NPN) or high side (PNP)",
          default="low side", choices=POSITIONS, words=True),
    Field("supply.min", "Supply, lowest", "V", "The lowest voltage of the load's supply", True, low=0.1, high=2000),
    Field("supply.max", "Supply, highest", "V", "The highest voltage of the load's supply", True, low=0.1, high=2000),
    Field("load.kind", "Load", "", "What is switched", True, choices=LOADS, words=True),
    Field("load.resistance", "Resistance", "Ω", "The load's resistance (a coil's at 20 °C, a lamp's when hot)",
          low=1e-3, high=1e9),
    Field("load.current", "or current", "A", "The load's current at the highest supply", low=1e-9, high=1000),
    Field("load.tolerance", "Tolerance", "", "Tolerance of the load's resistance or current, as a share",
          default=0.0, low=0, high=0.9),
    Field("load.inductance", "Inductance", "H", "The coil's inductance", low=1e-9, high=1000, shown_if=_COIL),
    Field("load.clamp", "Clamp", "", "What carries the coil's current at turn-off: a diode across it, a diode and "
          "zener in series across it, or nothing", default="none", choices=CLAMPS, words=True, shown_if=_COIL),
    Field("load.clamp_voltage", "Zener voltage", "V", "Nominal voltage of the clamp's zener diode", low=1, high=1000,
          shown_if=("load.clamp", ("zener",))),
    Field("load.clamp_tolerance", "Zener tolerance", "", "Tolerance of the zener with its slope resistance, as a share",
          default=0.1, low=0, high=0.5, shown_if=("load.clamp", ("zener",))),
    Field("load.clamp_drop", "Diode drop", "V", "Highest forward voltage of the clamp's diode", default=1.5, low=0,
          high=5, shown_if=("load.clamp", ("diode", "zener"))),
    Field("load.inrush", "Inrush factor", "", "Current of the cold filament over its hot current", default=15.0, low=1,
          high=30, shown_if=_LAMP),
    Field("drive.level", "Logic level", "", "The driver's output family", choices=tuple(LEVELS), words=True),
    Field("drive.high_min", "High, lowest", "V", "Lowest high level of the driver", low=0, high=1000),
    Field("drive.high_max", "High, highest", "V", "Highest high level of the driver", low=0, high=1000),
    Field("drive.low_max", "Low, highest", "V", "Highest low level of the driver", low=0, high=1000),
    Field("drive.low_min", "Low, lowest", "V", "Lowest low level of the driver; negative for a reverse drive",
          default=0.0, low=-100, high=100),
    Field("drive.current_max", "Driver current", "A", "The current up to which the driver holds its levels", low=1e-9,
          high=100),
    Field("drive.resistance", "Driver resistance", "Ω", "Output resistance in series with the levels", default=0.0,
          low=0, high=1e8),
    Field("drive.off", "Turned off by", "", "High side: the driver pulls to the supply (rail) or lets go (open)",
          default="rail", choices=("rail", "open"), words=True, shown_if=_HIGH_SIDE),
    Field("drive.off_drop_max", "Off drop", "V", "How far below the supply the driver may stay when it pulls to it",
          default=0.4, low=0, high=100, shown_if=_HIGH_SIDE),
    Field("drive.off_leakage_max", "Off leakage", "A", "Leakage of the driver when it lets go", default=0.0, low=0,
          high=0.1, shown_if=_HIGH_SIDE),
    Field("timing.frequency", "Frequency", "Hz", "How often the load is switched; absent: on for good", low=0, high=1e8),
    Field("timing.duty_cycle", "Duty cycle", "", "Share of the time the load is on", default=1.0, low=0, high=1),
    Field("ambient.min", "Ambient, coldest", "°C", "The coldest ambient temperature", default=0.0, low=-65, high=200),
    Field("ambient.max", "Ambient, hottest", "°C", "The hottest ambient temperature", default=50.0, low=-65, high=200),
    Field("heatsink.case_to_ambient", "Heat sink", "K/W", "Thermal resistance from case to ambient, with its insulator",
          low=0, high=500),
    Field("resistors.series", "Resistor series", "", "Preferred values of the resistors", default="E24",
          choices=("E3", "E6", "E12", "E24", "E48", "E96", "E192"), words=True),
    Field("resistors.tolerance", "Resistor tolerance", "", "Tolerance of the resistors with drift, as a share",
          default=0.05, low=0, high=0.3),
    Field("limits.on_voltage_max", "On voltage, most", "V", "Highest voltage across the switch when on", low=1e-3,
          high=1000),
    Field("limits.off_current_max", "Off current, most", "A", "Highest current through the switch when off", low=1e-12,
          high=100),
    Field("limits.load_current_min", "Load current, least", "A", "Lowest current the load must get", low=0, high=1000),
    Field("limits.turn_on_max", "Turn-on, most", "s", "Longest time from drive to load on", low=1e-10, high=10),
    Field("limits.turn_off_max", "Turn-off, most", "s", "Longest time from drive to load off", low=1e-10, high=10),
    Field("limits.junction_max", "Junction, most", "°C", "Highest junction temperature allowed, below the part's own",
          low=0, high=300),
    Field("choice.overdrive", "Overdrive", "", "Base current over the least that the gain floor needs", default=2.0,
          low=1, high=50),
    Field("choice.quantity", "Pieces", "", "How many are wanted", default=1.0, low=0, high=1e6),
    Field("choice.derating", "Derating", "", "Derating policy", default="none", choices=tuple(POLICIES), words=True),
    Field("choice.packages", "Packages", "", "Packages that will do; empty for any", default=(), many=True),
)  # fmt: skip


def complete(values: dict[str, Value]) -> tuple[dict[str, Value], list[Problem], list[str]]:
    """Fill in what a level or a default implies; say what cannot be. Values, problems, notes."""
    full = dict(values)
    problems: list[Problem] = []
    notes: list[str] = []
    _levels(full, problems, notes)
    _load(full, problems)
    _pairs(full, problems)
    if "limits.off_current_max" not in full and not problems:
        full["limits.off_current_max"] = _one_percent(full)
        notes.append("off current: 1 % of the load current taken as the limit, as none is stated")
    return full, problems, notes


def _levels(full: dict[str, Value], problems: list[Problem], notes: list[str]) -> None:
    level = LEVELS.get(str(full.get("drive.level", "")))
    if level is not None:
        for key, value in (
            ("drive.high_min", level.high_min),
            ("drive.high_max", level.high_max),
            ("drive.low_max", level.low_max),
            ("drive.current_max", level.current),
        ):
            full.setdefault(key, value)
        stated = full["drive.current_max"]
        if isinstance(stated, float | int) and stated > level.current:
            notes.append(
                f"{level.source} guarantees the level up to {level.current * 1e3:g} mA; "
                f"you state that it holds to {stated * 1e3:g} mA"
            )
    high_side = full.get("position") == "high side"
    wanted = ("drive.low_max", "drive.current_max") if high_side else (
        "drive.high_min", "drive.high_max", "drive.low_max", "drive.current_max",
    )  # fmt: skip
    for key in wanted:
        if key not in full and "drive.level" not in full:
            problems.append(Problem(key, "", "missing", "State it, or name a drive.level"))


def _load(full: dict[str, Value], problems: list[Problem]) -> None:
    kind = full.get("load.kind")
    stated = [key for key in ("load.resistance", "load.current") if key in full]
    if kind == "constant current":
        if "load.current" not in full:
            problems.append(Problem("load.current", "", "missing", "State the current of the load"))
        if "load.resistance" in full:
            problems.append(Problem("load.resistance", str(full["load.resistance"]),
                                    "a constant current has no resistance", "Leave it out"))  # fmt: skip
    elif len(stated) != 1:
        says = "both stated" if stated else "missing"
        problems.append(Problem("load.resistance", "", f"{says}: resistance or current", "State exactly one of them"))
    if kind == "coil" and "load.inductance" not in full:
        problems.append(Problem("load.inductance", "", "missing", "State the coil's inductance, such as 0.35 H"))
    if full.get("load.clamp") == "zener" and "load.clamp_voltage" not in full:
        problems.append(Problem("load.clamp_voltage", "", "missing", "State the zener voltage, such as 36 V"))


def _pairs(full: dict[str, Value], problems: list[Problem]) -> None:
    for low, high in (
        ("supply.min", "supply.max"),
        ("ambient.min", "ambient.max"),
        ("drive.high_min", "drive.high_max"),
        ("drive.low_min", "drive.low_max"),
    ):
        a, b = full.get(low), full.get(high)
        if isinstance(a, float | int) and isinstance(b, float | int) and a > b:
            problems.append(Problem(low, f"{a:g}", f"above {high} ({b:g})", "Exchange them"))


def _one_percent(full: dict[str, Value]) -> float:
    if "load.current" in full:
        return 0.01 * float(full["load.current"])  # type: ignore[arg-type]
    return 0.01 * float(full["supply.max"]) / float(full["load.resistance"])  # type: ignore[arg-type]
