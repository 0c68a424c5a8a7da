"""The verdict on one part: every check of a switch, and the retries of the network."""

from collections.abc import Mapping
from dataclasses import dataclass
from itertools import product

from engine.evidence import Evidence
from engine.part import Part
from engine.policy import POLICIES
from engine.requirement import Requirement

from .bounds import Bounds, Graded, bounds
from .ieee import INF, NAN, div, known, least
from .laws import area_current
from .network import Designer, Needs, Network, base_limit, junction_limit, needs
from .sheet import Sheet, read
from .situation import Situation, situation

G, D, T, M = int(Evidence.GUARANTEED), int(Evidence.DERIVED), int(Evidence.TYPICAL), int(Evidence.MISSING)
PASS, UNKNOWN, FAIL = 0, 1, 2
FITS, FITS_ON_TYPICALS, CANNOT_SAY, FAILS = range(4)
NETWORK_DECIDES = (
    "base current", "base drive", "base drive, inrush", "driver current", "junction temperature", "load current",
    "off-state current", "power dissipation", "saturation voltage", "turn-off time", "turn-on time",
)  # fmt: skip


@dataclass(frozen=True)
class Answer:
    """One check of one part."""

    value: float
    limit: float
    headroom: float
    status: int
    grade: int


@dataclass(frozen=True)
class Judgement:
    """One part judged."""

    verdict: int
    grade: int
    answers: Mapping[str, Answer]
    network: Network
    bounds: Mapping[str, float]


def judge(req: Requirement, part: Part, network: Mapping[str, float] | None = None) -> Judgement:
    """The part with the network chosen for it, or with the one given."""
    sit, sheet = situation(req), read(part)
    n = needs(sit, sheet)
    designer = Designer(sit, n)

    def answered(net: Network) -> tuple[dict[str, Answer], Bounds]:
        b = bounds(sit, sheet, n, net)
        return _answers(sit, sheet, n, b), b

    if network is not None:
        rbe = network.get("rbe", INF)
        net = Network(network["rb"], rbe, *designer.window(rbe))
        answers, b = answered(net)
    else:
        net = first = designer.design()
        answers, b = answered(net)
        others = product((True, False), (1.0, 0.75, 0.5, 0.25, 0.0)) if _another_could_turn_it(answers, net) else ()
        for stiff, place in others:
            other = designer.at_an_end(first, place, stiff)
            tried, tried_b = answered(other)
            if _worst(tried) < _worst(answers):
                net, answers, b = other, tried, tried_b
    grade = max(one.grade for one in answers.values())
    verdict = {PASS: FITS_ON_TYPICALS if grade >= T else FITS, UNKNOWN: CANNOT_SAY, FAIL: FAILS}[_worst(answers)]
    return Judgement(verdict, grade, answers, net, b.columns(sit))


def _worst(answers: Mapping[str, Answer]) -> int:
    return max(one.status for one in answers.values())


def _another_could_turn_it(answers: Mapping[str, Answer], net: Network) -> bool:
    """Something is wrong, nothing but what another network could mend, and there is room for one."""
    wrong = [name for name, one in answers.items() if one.status != PASS]
    return net.low <= net.high and bool(wrong) and all(name in NETWORK_DECIDES for name in wrong)


def _compare(
    demand: Graded, limit: Graded, *, at_least: bool = False, undecided: bool = False, yes_no: bool = False
) -> Answer:
    a, b = demand.value, limit.value
    headroom = div(a, b) if at_least else div(b, a)
    if known(a) and known(b) and (b if at_least else a) <= 0:
        headroom = INF
    headroom = 0.0 if headroom < 0 else headroom
    if yes_no:
        headroom = NAN if not known(a) else (INF if a >= 1 else 0.0)
    if not known(headroom):
        status = UNKNOWN
    elif headroom >= 1 - 1e-9:
        status = PASS
    else:
        status = UNKNOWN if undecided else FAIL
    grade = M if status == UNKNOWN or not known(a) or not known(b) else max(demand.grade, limit.grade)
    return Answer(a, b, headroom, status, grade)


def _answers(sit: Situation, s: Sheet, n: Needs, b: Bounds) -> dict[str, Answer]:
    req, policy = sit.req, POLICIES[sit.req.word("choice.derating") or "none"]
    hottest = sit.number("ambient.max")
    tj_limit = junction_limit(sit, s)
    tj_limit = least(tj_limit, policy.tj_max)
    found = {
        "base drive": _base_drive(b),
        "base current": _compare(b.ib_max, Graded(base_limit(s) * policy.current, G if known(s.ib) else D)),
        "collector current": _compare(b.ic_on_max, Graded(s.ic * policy.current)),
        "driver current": _compare(b.drive, Graded(sit.number("drive.current_max"))),
        "junction temperature": _compare(
            Graded(b.tj.value - hottest, b.tj.grade), Graded(tj_limit - hottest)
        ),
        "off-state current": _compare(b.ic_off, Graded(sit.number("limits.off_current_max"))),
        "power dissipation": _compare(b.power, Graded(b.power_allowed.value * policy.power, b.power_allowed.grade)),
        "safe area": _safe_area(sit, s, tj_limit),
        "structure": _structure(sit, s),
    }  # fmt: skip
    if sit.unclamped:
        found["collector–emitter voltage"] = _compare(Graded(sit.energy, sit.ic_grade), Graded(s.es_b))
    else:
        found["collector–emitter voltage"] = _compare(Graded(sit.v_off), Graded(s.vceo * policy.voltage))
    reverse = 0.0 if sit.pnp else -min(sit.number("drive.low_min"), 0.0)
    vebo = INF if reverse == 0 and not known(s.vebo) else s.vebo * policy.voltage
    found["reverse base voltage"] = _compare(Graded(reverse), Graded(vebo))
    asked = sit.number("limits.on_voltage_max")
    found["saturation voltage"] = _compare(b.vce_on, Graded(asked if known(asked) else 2.5 if s.darlington else 1.0))
    if b.inrush is not None:
        found["base drive, inrush"] = _compare(b.inrush.ib, b.inrush.needed, at_least=True)
        found["peak collector current"] = _compare(Graded(sit.ic_inrush, sit.ic_grade), Graded(s.icm * policy.current))
    if req.has("limits.load_current_min"):
        found["load current"] = _compare(b.ic_on_min, Graded(sit.number("limits.load_current_min")), at_least=True)
    if req.has("limits.turn_on_max"):
        found["turn-on time"] = _compare(b.t_on, Graded(sit.number("limits.turn_on_max")))
    if req.has("limits.turn_off_max"):
        found["turn-off time"] = _compare(b.t_off, Graded(sit.number("limits.turn_off_max")))
    wanted = {word.casefold() for word in req.words("choice.packages")}
    if wanted:
        will_do = NAN if not s.package else float(s.package.casefold() in wanted)
        found["package"] = _compare(Graded(will_do), Graded(1.0), yes_no=True)
    return found


def _base_drive(b: Bounds) -> Answer:
    """The tighter of the corners; silence in one is the tighter."""
    tight = b.corners[0]
    for other in b.corners[1:]:
        if not div(other.ib.value, other.needed.value) >= div(tight.ib.value, tight.needed.value):
            tight = other
    return _compare(tight.ib, tight.needed, at_least=True)


def _structure(sit: Situation, s: Sheet) -> Answer:
    right = s.pnp == sit.pnp
    silent = not s.structure or (right and s.prebiased)
    return _compare(Graded(NAN if silent else float(right)), Graded(1.0), yes_no=True)


def _safe_area(sit: Situation, s: Sheet, tj_limit: float) -> Answer:
    """The locus inside the area on file, else the box of a small type or half the power line of a large one."""
    share = 1.0 if sit.inductive else 0.5
    volts, amps = sit.v_off * share, sit.ic_max * share
    feared = s.power and volts > 30.0
    printed = area_current(s.soa, volts) * volts
    if s.soa_dc and known(printed):
        return _compare(Graded(volts * amps, D), Graded(printed))
    if feared:
        line = least(div(tj_limit - sit.number("ambient.max"), s.rth_jc), s.pd_case)
        box = 0.5 * line
    else:
        box = s.vceo * s.icm
    # a pulse's area, or one that ends at a lower voltage, still says where the part must not be
    forbidden = printed if known(printed) else min((i for _, i in s.soa), default=INF) * volts
    undecided = feared and volts * amps <= forbidden
    return _compare(Graded(volts * amps, D), Graded(least(box, forbidden), D), undecided=undecided)
