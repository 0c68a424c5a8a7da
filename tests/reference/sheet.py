"""What the statements of one sheet come to: contradictions settled the unkind way, typicals only where no limit is."""

from dataclasses import dataclass

from engine.evidence import Evidence
from engine.part import Limit, Part

from .gain import GainFloor
from .ieee import INF, NAN, div, either, known, ln, most

G, D, T, M = Evidence.GUARANTEED, Evidence.DERIVED, Evidence.TYPICAL, Evidence.MISSING
VT_ROOM = 1.380649e-23 / 1.602176634e-19 * (273.15 + 25.0)
POWER_PACKAGES = ["TO-3", "TO-66", "TO-220", "TO-126", "TO-202", "TO-218", "TO-247", "TO-252", "TO-263", "TO-264"]


@dataclass(frozen=True)
class Test:
    """One point of a characteristic: conditions and the value that counts."""

    value: float
    typical: bool
    symbol: str
    ic: float
    ib: float
    ib2: float
    vce: float
    vcc: float
    v: float  # collector–base voltage or, where that is not stated, collector–emitter
    temp: float


@dataclass(frozen=True)
class Sheet:
    """One part ready to judge."""

    structure: str
    package: str
    vceo: float
    vebo: float
    ic: float
    icm: float
    ib: float
    ib_tested: float
    tj_max: float
    es_b: float
    rth_ja: float
    rth_ja_grade: int
    rth_jc: float
    rth_jc_grade: int
    pd_ambient: float
    pd_case: float
    power: bool
    gain: GainFloor  # from points above 2 V or without VCE
    gain_low: GainFloor
    gain_plain: GainFloor
    gain_quasi: GainFloor
    cold_exponent: float
    slope_below: float
    sat: tuple[Test, ...]
    sat_grade: int
    vbe: tuple[Test, ...]
    vbe_grade: int
    floor_v: float
    floor_i: float
    leak: tuple[Test, ...]
    leak_grade: int
    on: Test | None
    off: Test | None
    soa: tuple[tuple[float, float], ...]  # (V, A), rising; for direct current, else for the longest pulse
    soa_dc: bool

    @property
    def darlington(self) -> bool:
        return self.structure.endswith("darlington")

    @property
    def pnp(self) -> bool:
        return self.structure.startswith("pnp")

    @property
    def prebiased(self) -> bool:
        return self.structure.endswith("prebiased")

    def proven_gain(self, ic: float) -> float:
        """The gain floor at 25 °C from hFE limits; where none reaches, from the saturation tests."""
        stated = either(self.gain.at(ic), self.gain_low.at(ic))
        return stated if known(stated) else self.gain_plain.at(ic)


def read(part: Part) -> Sheet:
    """The sheet of `part`."""

    def rating(symbol: str, bound: str = "max", unkind: str = "least") -> float:
        stated = [getattr(x, bound) for x in part.limits if x.symbol == symbol and getattr(x, bound) is not None]
        return (min(stated) if unkind == "least" else max(stated)) if stated else NAN

    darlington = part.structure.endswith("darlington")
    ic, tj = rating("IC"), rating("TJ")
    vceo = rating("VCEO")
    vceo = vceo if known(vceo) else rating("V(BR)CEO", "min")
    vebo = rating("VEBO")
    icm = rating("ICM")
    power = _powers(part, tj)
    ja, ja_grade = _resistance(rating("RthJA", unkind="most"), div(1, rating("derating(TA)")), power["ja"])
    jc, jc_grade = _resistance(rating("RthJC", unkind="most"), div(1, rating("derating(TC)")), power["jc"])
    sat, sat_grade = _tests(part, ("VCE(sat)",), "max", hotter=True)
    vbe, vbe_grade = _tests(part, ("VBE(sat)",), "max", hotter=False)
    leak, leak_grade = _leakage(part, darlington)
    return Sheet(
        structure=part.structure,
        package=part.package,
        vceo=vceo,
        vebo=vebo if known(vebo) else rating("V(BR)EBO", "min"),
        ic=ic,
        icm=icm if known(icm) else ic,
        ib=rating("IB"),
        ib_tested=max((x.ib for x in sat), default=NAN),
        tj_max=tj,
        es_b=rating("ES/b"),
        rth_ja=ja,
        rth_ja_grade=ja_grade,
        rth_jc=jc,
        rth_jc_grade=jc_grade,
        pd_ambient=power["ambient"],
        pd_case=power["case"],
        power=part.package.upper() in POWER_PACKAGES or power["case"] >= 10 or ic >= 3,
        **_gains(part, darlington, sat, sat_grade),
        sat=sat,
        sat_grade=sat_grade,
        vbe=vbe,
        vbe_grade=vbe_grade,
        floor_v=_junction_floor(part, ic),
        floor_i=ic / 10,
        leak=leak,
        leak_grade=leak_grade,
        on=_time(part, "ton", ("td", "tr"), ("ic", "ib")),
        off=_time(part, "toff", ("ts", "tf"), ("ic", "ib", "ib2")),
        soa=_area(part),
        soa_dc=any(x.symbol == "SOA" and x.at("t") is None and (x.max or x.min) and x.at("vce") for x in part.limits),
    )


def _or_nan(x: float | None) -> float:
    return NAN if x is None else x


def _test(limit: Limit, value: float, typical: bool) -> Test:
    at = {name: _or_nan(limit.at(name)) for name in ("ic", "ib", "ib2", "vce", "vcc", "vcb", "tj", "ta", "tc")}
    temp = next((at[name] for name in ("tj", "ta", "tc") if known(at[name])), 25.0)
    v = at["vcb"] if known(at["vcb"]) else at["vce"]
    return Test(value, typical, limit.symbol, at["ic"], at["ib"], at["ib2"], at["vce"], at["vcc"], v, temp)


def _statements(part: Part, symbols: tuple[str, ...], bound: str) -> list[Test]:
    """The limits; a sheet that states none of them is taken at its typicals."""
    here = [x for x in part.limits if x.symbol in symbols]
    limits = [_test(x, getattr(x, bound), False) for x in here if getattr(x, bound) is not None]
    return limits or [_test(x, x.typ, True) for x in here if x.typ is not None]


def _settled(tests: list[Test], bound: str, same: tuple[str, ...]) -> list[Test]:
    """Statements under the same conditions all count as the unkind one of them."""

    def key(x: Test) -> tuple[object, ...]:
        return tuple(str(getattr(x, name)) for name in same)

    worst: dict[tuple[object, ...], float] = {}
    for x in tests:
        pick = min if bound == "min" else max
        worst[key(x)] = pick(worst.get(key(x), x.value), x.value)
    return [Test(worst[key(x)], *(getattr(x, n) for n in Test.__dataclass_fields__ if n != "value")) for x in tests]


def _at_room(tests: list[Test], hotter: bool) -> list[Test]:
    """Those at 15…35 °C; where there is none, those on the unkind side of it."""
    room = [x for x in tests if 15 <= x.temp <= 35]
    return room or [x for x in tests if (x.temp > 35 if hotter else x.temp < 15)]


def _grade(tests: list[Test]) -> int:
    if not tests:
        return M
    return T if any(x.typical for x in tests) else G


def _tests(part: Part, symbols: tuple[str, ...], bound: str, hotter: bool) -> tuple[tuple[Test, ...], int]:
    settled = _settled(_statements(part, symbols, bound), bound, ("ic", "ib", "temp"))
    used = _at_room([x for x in settled if x.ic > 0 and x.ib > 0], hotter)
    return tuple(sorted(used, key=lambda x: (x.ic, x.ib, x.temp))), _grade(used)


def _leakage(part: Part, darlington: bool) -> tuple[tuple[Test, ...], int]:
    """Of a Darlington, whose inner base floats and multiplies, only the open-base limit counts."""
    stated = _statements(part, ("ICBO", "ICES", "ICEX", "ICEO"), "max")
    used = [x for x in _settled(stated, "max", ("v", "temp", "symbol")) if known(x.v)]
    used = [x for x in used if x.symbol == "ICEO" or not darlington]
    return tuple(sorted(used, key=lambda x: x.temp)), _grade(used)


def _powers(part: Part, tj: float) -> dict[str, float]:
    """Power ratings, and the thermal resistances that they imply with the highest junction temperature."""
    ratings = [(x.max, _or_nan(x.at("ta")), _or_nan(x.at("tc"))) for x in part.limits if x.symbol == "PD"]
    ratings = [one for one in ratings if one[0] is not None]
    ambient, case, bare = [], [], []
    ja, jc = [], []
    for pd, ta, tc in ratings:
        if known(ta):
            ambient.append(pd)
            ja.append((tj - ta) / pd)
        if known(tc):
            case.append(pd)
            jc.append((tj - tc) / pd)
        if not known(ta) and not known(tc):
            bare.append(pd)
            if pd <= 1.0:
                ambient.append(pd)
                ja.append((tj - 25.0) / pd)

    def top(values: list[float]) -> float:
        return max((v for v in values if known(v)), default=NAN)

    return {"ja": top(ja), "jc": top(jc), "ambient": top(ambient), "case": top(case) if case else top(bare)}


def _resistance(printed: float, slope: float, from_power: float) -> tuple[float, int]:
    value = slope if not known(printed) else (slope if slope > printed else printed)
    value = value if known(value) else from_power
    return value, G if value == printed else D


def _junction_floor(part: Part, rated: float) -> float:
    """VBE at a tenth of the rated current: 0.6 V, or what the sheet's minimums say for certain."""
    sure, top = 0.60, -INF
    for x in part.limits:
        if x.symbol in ("VBE(on)", "VBE(sat)") and x.min is not None:
            ic = _or_nan(x.at("ic"))
            cold = max(25 - _test(x, x.min, False).temp, 0.0) * (2 if part.structure.endswith("darlington") else 1)
            moved = x.min + VT_ROOM * ln(div(rated / 10, ic)) - 2.5e-3 * cold
            certain = moved - 0.5 * div(ic, rated) - 0.02
            sure = certain if certain > sure and not part.structure.endswith("darlington") else sure
            top = moved if moved > top else top
    return sure if top == -INF else min(sure, top)


def _gains(part: Part, darlington: bool, sat: tuple[Test, ...], sat_grade: int) -> dict[str, GainFloor | float]:
    stated = [x for x in _settled(_statements(part, ("hFE",), "min"), "min", ("ic", "vce", "temp")) if x.ic > 0]
    used = _at_room(stated, hotter=False)
    low = [x for x in used if x.vce <= 2.0]
    high = [x for x in used if not x.vce <= 2.0]
    slope = 1.0 if darlington else 0.5

    def floor(points: list[Test]) -> GainFloor:
        pairs = [(x.ic, x.value) for x in points]
        return GainFloor.through(pairs, slope, most(-INF, *(x.vce for x in points)), any(x.typical for x in points))

    gain, gain_low = floor(high), floor(low)
    # what a sheet that speaks at both voltages says of the share kept at the low one
    shares = [div(x.value, gain.at(x.ic)) for x in low]
    share = min((s for s in shares if known(s)), default=INF)
    top = max((x.ic for x in used), default=-INF)
    beyond = [(x.ic, x.ic / x.ib) for x in sat if x.ic > top]  # a saturation test shows a gain too

    def carried(usual: float) -> GainFloor:
        pairs = [(x.ic, x.value * (1.0 if x.vce <= 2.0 else min(share, usual))) for x in used] + beyond
        typical = any(x.typical for x in used) or (bool(beyond) and sat_grade >= T)
        return GainFloor.through(pairs, slope, NAN, typical)

    return {
        "gain": gain,
        "gain_low": gain_low,
        "gain_plain": carried(0.85),
        "gain_quasi": carried(0.2),
        "slope_below": slope,
        "cold_exponent": _cold_exponent(stated, (gain, gain_low), 5.0 if darlington else 2.5),
    }


def _cold_exponent(stated: list[Test], floors: tuple[GainFloor, GainFloor], usual: float) -> float:
    """Of absolute temperature: the hardest that the sheet's own cold points imply, else the usual one."""
    implied = []
    for x in (x for x in stated if x.temp < 15):
        room = max((f.at(x.ic) for f in floors if known(f.at(x.ic))), default=NAN)
        exponent = div(ln(div(x.value, room)), ln((x.temp + 273.15) / 298.15))
        if known(exponent) and abs(exponent) != INF:
            implied.append(exponent)
    hardest = max(0.0, *implied) if implied else usual
    # cold points that are the only ones are no measure of themselves
    return hardest if any(15 <= x.temp <= 35 for x in stated) else max(hardest, usual)


def _time(part: Part, whole: str, halves: tuple[str, str], needed: tuple[str, ...]) -> Test | None:
    """The first complete time: of the whole edge, else of its two halves under one test."""

    def first(symbol: str) -> Test | None:
        tests = [_test(x, x.max, False) for x in part.limits if x.symbol == symbol and x.max is not None]
        tests = [x for x in tests if all(getattr(x, name) > 0 for name in needed)]
        order = ("ic", "ib", "ib2", "vcc", "value") if "ib2" in needed else ("ic", "ib", "vcc", "value")
        return min(tests, key=lambda x: [v if known(v := getattr(x, n)) else INF for n in order], default=None)

    if (found := first(whole)) is not None:
        return found
    a, b = first(halves[0]), first(halves[1])
    if a is None or b is None or any(getattr(a, name) != getattr(b, name) for name in needed):
        return None
    return Test(a.value + b.value, False, whole, a.ic, a.ib, a.ib2, a.vce, a.vcc, a.v, a.temp)


def _area(part: Part) -> tuple[tuple[float, float], ...]:
    """Corners for the longest pulse on file."""
    corners = []
    for x in part.limits:
        amps = x.min if x.min is not None else x.max
        vce = _or_nan(x.at("vce"))
        if x.symbol == "SOA" and amps is not None and vce > 0:
            pulse = x.at("t")
            corners.append((INF if pulse is None else pulse, vce, amps))
    longest = max((t for t, _, _ in corners), default=INF)
    return tuple(sorted((v, i) for t, v, i in corners if t == longest))
