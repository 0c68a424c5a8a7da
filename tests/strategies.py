"""Random sheets and requirements, the same for the same seed: lifelike enough that a good share fits.

A strategy draws only the seed, so one example can be a whole shelf; a failing test prints the part itself.
"""

import math
import random
from collections.abc import Mapping

from hypothesis import strategies as st

from engine.duty import duties
from engine.part import STRUCTURES, Limit, Part
from engine.policy import POLICIES
from engine.requirement import Requirement, Value, validate, with_defaults

PACKAGES = ("TO-92", "SOT-23", "TO-18", "TO-126", "TO-220", "TO-3", "")
SERIES = ("E12", "E24", "E96")

seeds = st.integers(0, 2**32 - 1)


def requirement_of(values: Mapping[str, Value]) -> Requirement:
    """A complete, validated requirement of a switch."""
    duty = duties()["switch"]
    problems = validate(duty.fields, values)
    full, more, notes = duty.complete(with_defaults(duty.fields, values))
    assert not problems and not more, (problems, more)
    return Requirement("switch", "", full, tuple(notes))


def random_parts(seed: int, count: int, *, gaps: float = 0.5, structures: tuple[str, ...] | None = None) -> list[Part]:
    """`count` sheets; a share `gaps` of them lacks or contradicts something."""
    rng = random.Random(seed)
    return [_Sheet(rng, f"P-{i:03}", rng.random() < gaps, structures).part() for i in range(count)]


def random_requirement(seed: int) -> Requirement:
    """Any load, clamp, position, way of turning off, sink, time limit, policy and series."""
    return requirement_of(_requirement_values(random.Random(seed ^ 0x5EED)))


def _spread(rng: random.Random, low: float, high: float) -> float:
    """Even on a ratio scale."""
    return math.exp(rng.uniform(math.log(low), math.log(high)))


def _at(**conditions: float | None) -> tuple[tuple[str, float], ...]:
    return tuple(sorted((name, value) for name, value in conditions.items() if value is not None))


class _Sheet:
    """One random sheet in the making."""

    def __init__(self, rng: random.Random, name: str, gappy: bool, structures: tuple[str, ...] | None) -> None:
        self.rng, self.name, self.gappy = rng, name, gappy
        usual = ("npn",) * 8 + ("pnp",) * 6 + STRUCTURES + ("npn-darlington", "pnp-darlington", "")
        self.structure = rng.choice(structures or usual)
        self.darlington = self.structure.endswith("darlington")
        self.ic = rng.choice((0.1, 0.2, 0.5, 0.8, 1.0, 2.0, 4.0, 10.0)) * rng.choice((1.0, 1.0, rng.uniform(0.8, 1.5)))
        self.vceo = rng.choice((20.0, 30.0, 40.0, 60.0, 80.0, 100.0, 140.0, 300.0))
        self.limits: list[Limit] = []

    def part(self) -> Part:
        for group in (
            self._ratings, self._thermal, self._gains, self._saturation, self._junction, self._leakage, self._times,
            self._area,
        ):  # fmt: skip
            before = len(self.limits)
            group()
            if self.gappy and self.rng.random() < 0.12:
                del self.limits[before:]
        if self.gappy:
            self._spoil()
        self.rng.shuffle(self.limits)
        return Part(self.name, self.structure, self.rng.choice(PACKAGES), limits=tuple(self.limits))

    def _spoil(self) -> None:
        """Drop limits, state some again with another value, turn some symbols' limits into typicals."""
        rng = self.rng
        self.limits = [one for one in self.limits if rng.random() > 0.08]
        for one in list(self.limits):
            if rng.random() < 0.06:
                factor = rng.uniform(0.7, 1.4)
                bounds = {name: getattr(one, name) for name in ("min", "typ", "max")}
                scaled = {name: None if value is None else value * factor for name, value in bounds.items()}
                self.limits.append(Limit(one.symbol, conditions=one.conditions, **scaled))
        if rng.random() < 0.2:
            symbol = rng.choice(("hFE", "VCE(sat)", "VBE(sat)", "ICBO"))
            self.limits = [
                Limit(one.symbol, typ=one.min or one.max, conditions=one.conditions) if one.symbol == symbol else one
                for one in self.limits
            ]

    def _add(self, symbol: str, **fields: float | None) -> None:
        bounds = {name: fields.pop(name, None) for name in ("min", "typ", "max")}
        self.limits.append(Limit(symbol, conditions=_at(**fields), **bounds))

    def _maybe(self, chance: float) -> bool:
        return self.rng.random() < chance

    def _ratings(self) -> None:
        if self._maybe(0.85):
            self._add("VCEO", max=self.vceo)
        else:
            self._add("V(BR)CEO", min=self.vceo, ic=0.01)
        self._add("VEBO", max=self.rng.choice((4.0, 5.0, 7.0)))
        self._add("IC", max=self.ic)
        if self._maybe(0.5):
            self._add("ICM", max=self.ic * self.rng.uniform(1.0, 3.0))
        if self._maybe(0.5):
            self._add("IB", max=self.ic / self.rng.choice((4.0, 5.0, 10.0)))
        if self._maybe(0.15):
            self._add("ES/b", max=_spread(self.rng, 1e-4, 1.0))

    def _thermal(self) -> None:
        rng = self.rng
        tj = rng.choice((125.0, 150.0, 175.0, 200.0))
        self._add("TJ", min=-55.0, max=tj)
        rth = min(_spread(rng, 60.0, 500.0), 300.0 / self.ic)
        case = rth / rng.uniform(2.0, 12.0)
        form = rng.random()
        if form < 0.7:
            self._add("RthJA", max=rth)
        if form > 0.5:
            self._add("derating(TA)", max=1 / rth * rng.uniform(0.9, 1.1))
        self._add("PD", max=(tj - 25) / rth, ta=rng.choice((25.0, 25.0, None)))
        if self._maybe(0.6):
            self._add("RthJC", max=case)
        if self._maybe(0.6):
            self._add("PD", max=(tj - 25) / case, tc=rng.choice((25.0, 25.0, None)))
        if self._maybe(0.2):
            self._add("derating(TC)", max=1 / case)

    def _gains(self) -> None:
        rng = self.rng
        top = _spread(rng, 1000.0, 10000.0) if self.darlington else _spread(rng, 25.0, 400.0)
        shares = sorted(rng.sample((0.001, 0.01, 0.03, 0.1, 0.2, 0.3, 0.5, 1.0), rng.randint(1, 6)))
        vce = rng.choice((1.0, 1.0, 2.0, 5.0, 10.0))
        for share in shares:
            droop = 1 / (1 + (2.0 * share) ** 2) * min(1.0, (share / 0.02) ** 0.3)
            gain = max(round(top * droop * rng.uniform(0.9, 1.1)), 1)
            here = vce if self._maybe(0.8) else rng.choice((1.0, 5.0, None))
            self._add("hFE", min=gain, ic=self.ic * share, vce=here, tj=25.0 if self._maybe(0.3) else None)
            if self._maybe(0.1):
                self._add("hFE", min=gain * rng.uniform(0.35, 0.7), ic=self.ic * share, vce=here,
                          ta=rng.choice((-55.0, -40.0, 0.0)))  # fmt: skip
            if self._maybe(0.05):
                self._add("hFE", min=gain * 1.3, max=gain * 5, ic=self.ic * share, vce=here, tj=100.0)

    def _forced(self) -> float:
        return self.rng.choice((250.0, 500.0)) if self.darlington else self.rng.choice((10.0, 10.0, 20.0))

    def _saturation(self) -> None:
        rng, ohms = self.rng, rng_ohms(self.rng, self.ic)
        for share in rng.sample((0.05, 0.1, 0.2, 0.5, 0.75, 1.0), rng.randint(0 if self.gappy else 1, 4)):
            ic = self.ic * share
            v = (0.75 if self.darlington else 0.08) + ohms * ic
            temp = {"tj": rng.choice((100.0, 125.0, -40.0))} if self._maybe(0.06) else {}
            self._add("VCE(sat)", max=v, ic=ic, ib=ic / self._forced(), **temp)

    def _junction(self) -> None:
        rng, ohms = self.rng, rng_ohms(self.rng, self.ic)
        for share in rng.sample((0.05, 0.1, 0.2, 0.5, 1.0), rng.randint(0 if self.gappy else 1, 4)):
            ic = self.ic * share
            v = (1.4 if self.darlington else 0.8) + ohms * ic
            least = v - rng.uniform(0.1, 0.3) if self._maybe(0.3) else None
            temp = {"tj": rng.choice((100.0, -40.0))} if self._maybe(0.05) else {}
            self._add("VBE(sat)", min=least, max=v, ic=ic, ib=ic / self._forced(), **temp)
        if self._maybe(0.3):
            self._add(
                "VBE(on)", min=rng.uniform(0.52, 0.66), max=0.9, ic=self.ic * rng.choice((0.002, 0.01, 0.1)), vce=5.0
            )

    def _leakage(self) -> None:
        rng = self.rng
        room = _spread(rng, 1e-9, 1e-7) * max(self.ic, 0.3)
        symbols = ("ICEO",) if self.darlington else ("ICBO", "ICBO", "ICES", "ICEX")
        for temp in rng.sample((None, 25.0, 100.0, 125.0, 150.0), rng.randint(1, 3)):
            v = self.vceo * rng.choice((0.5, 0.8, 1.0, 1.0))
            hot = temp or 25.0
            symbol = rng.choice(symbols)
            volts = {"vcb": v} if symbol == "ICBO" else {"vce": v}
            self._add(symbol, max=room * 2 ** ((hot - 25) / 11), ta=temp, **volts)

    def _times(self) -> None:
        rng = self.rng
        ic, t = self.ic * rng.choice((0.1, 0.3)), _spread(rng, 2e-8, 2e-6)
        ib = ic / self._forced()
        vcc = rng.choice((10.0, 30.0, None))
        test = {"ic": ic, "ib": ib, "vcc": vcc}
        ib2 = ib if self._maybe(0.9) else None
        if self._maybe(0.4):
            self._add("td", max=t / 2, **test)
            self._add("tr", max=t, **test)
            self._add("ts", max=t * 5, ib2=ib2, **test)
            self._add("tf", max=t * 2, ib2=ib2, **test)
        if self._maybe(0.4):
            self._add("ton", max=t * 2, **test)
            self._add("toff", max=t * 8, ib2=ib2, **test)

    def _area(self) -> None:
        rng = self.rng
        if not self._maybe(0.4):
            return
        power = self.ic * rng.uniform(5.0, 12.0)
        for pulse in rng.sample((None, 1e-3, 1e-5), rng.randint(1, 2)):
            kind = 1.0 if pulse is None else 3.0
            for v in (1.0, 8.0, self.vceo / 2, self.vceo)[: rng.randint(1, 4)]:
                self._add("SOA", max=min(self.ic, power * kind / v), vce=v, t=pulse)


def rng_ohms(rng: random.Random, ic: float) -> float:
    """Series resistance that drops 0.1 to 0.6 V at the rated current."""
    return rng.uniform(0.1, 0.6) / ic


def _requirement_values(rng: random.Random) -> dict[str, Value]:
    high_side = rng.random() < 0.35
    top = rng.choice((5.0, 12.0, 24.0, 24.0, 36.0)) * rng.uniform(0.95, 1.1)
    ambient = sorted((rng.choice((-55.0, -40.0, -10.0, 0.0, 20.0, 30.0)), rng.choice((30.0, 40.0, 60.0, 85.0))))
    current = _spread(rng, 3e-3, 0.6)
    values: dict[str, Value] = {
        "position": "high side" if high_side else "low side",
        "supply.max": top,
        "supply.min": top * rng.choice((1.0, 0.9, 0.8)),
        "load.kind": rng.choice(("resistive", "constant current", "coil", "coil", "lamp")),
        "load.tolerance": rng.choice((0.0, 0.05, 0.1)),
        "ambient.min": ambient[0],
        "ambient.max": ambient[1],
        "resistors.series": rng.choice(SERIES),
        "resistors.tolerance": rng.choice((0.01, 0.05)),
        "choice.overdrive": rng.choice((1.0, 1.5, 2.0, 3.0)),
        "choice.derating": rng.choice(("none",) * 6 + tuple(POLICIES)),
    }
    _load(rng, values, current, top)
    _drive(rng, values, current, high_side)
    if rng.random() < 0.5:
        values["timing.frequency"] = rng.choice((0.0, _spread(rng, 0.05, 2e4)))
        values["timing.duty_cycle"] = rng.choice((0.1, 0.5, 1.0))
    if rng.random() < 0.25:
        values["heatsink.case_to_ambient"] = rng.choice((2.0, 10.0, 40.0))
    _limits(rng, values, current)
    if rng.random() < 0.06:
        values["choice.packages"] = tuple(rng.sample([one for one in PACKAGES if one], 3))
    return values


def _load(rng: random.Random, values: dict[str, Value], current: float, top: float) -> None:
    if values["load.kind"] != "constant current" and rng.random() < 0.5:
        values["load.resistance"] = top / current
    else:
        values["load.current"] = current
    if values["load.kind"] == "coil":
        values["load.inductance"] = _spread(rng, 1e-3, 1.0)
        values["load.clamp"] = rng.choice(("none", "diode", "diode", "zener"))
        if values["load.clamp"] == "zener":
            values["load.clamp_voltage"] = rng.choice((12.0, 27.0))
    if values["load.kind"] == "lamp":
        values["load.inrush"] = rng.choice((5.0, 10.0, 15.0))


def _drive(rng: random.Random, values: dict[str, Value], current: float, high_side: bool) -> None:
    if rng.random() < 0.4:
        values["drive.level"] = rng.choice(("LVTTL 3.3 V", "CMOS 2.5 V", "HC 4.5 V", "TTL 5 V"))
        if rng.random() < 0.7:
            values["drive.current_max"] = max(_spread(rng, current / 15, current / 2), 2e-3)
    else:
        low = rng.choice((2.4, 3.0, 4.5, 9.0))
        values |= {"drive.high_min": low, "drive.high_max": low * rng.choice((1.0, 1.2)),
                   "drive.low_max": rng.choice((0.1, 0.2, 0.4)),
                   "drive.current_max": _spread(rng, current / 12, current)}  # fmt: skip
    if rng.random() < 0.3:
        values["drive.resistance"] = rng.choice((10.0, 100.0, 1000.0))
    if rng.random() < 0.1:
        values["drive.low_min"] = rng.choice((-3.0, -0.3))
    if high_side:
        values["drive.off"] = rng.choice(("rail", "open"))
        values["drive.off_drop_max"] = rng.choice((0.1, 0.3, 0.4))
        values["drive.off_leakage_max"] = rng.choice((0.0, 1e-7, 1e-5))


def _limits(rng: random.Random, values: dict[str, Value], current: float) -> None:
    offered: dict[str, tuple[float, float]] = {
        "limits.on_voltage_max": (0.6, rng.choice((0.2, 0.4, 0.6, 1.0, 1.8))),
        "limits.off_current_max": (0.6, current * rng.choice((1e-3, 1e-2))),
        "limits.load_current_min": (0.3, current * rng.choice((0.5, 0.7, 0.8))),
        "limits.turn_on_max": (0.2, _spread(rng, 1e-7, 1e-4)),
        "limits.turn_off_max": (0.25, _spread(rng, 1e-6, 1e-3)),
        "limits.junction_max": (0.2, rng.choice((90.0, 110.0, 140.0))),
    }
    for key, (chance, value) in offered.items():
        if rng.random() < chance:
            values[key] = value
