"""Switching a load: low side (NPN) or high side (PNP), a base resistor and, where needed, one to the emitter."""

from collections.abc import Mapping
from dataclasses import replace

import numpy as np
from numpy.typing import NDArray

from ..check import Outcome, checks, run
from ..policy import POLICIES
from ..prepared import Prepared
from ..ranking import Status
from ..requirement import Requirement
from .base import Duty, Judged
from .switch_bounds import Bounds, bounds
from .switch_case import SwitchCase
from .switch_cautions import cautions
from .switch_design import Needs, Network, at_an_end, design, needs, window
from .switch_fields import FIELDS, complete
from .switch_figures import BOUND_UNITS, FIGURES, GIVEN, network_object, network_says
from .switch_levers import LEVERS, readings
from .switch_situation import Situation, situation

Floats = NDArray[np.float64]
AT_ONCE = 2000  # parts for which other networks are tried at once
PLACES = (1.0, 0.75, 0.5, 0.25, 0.0)  # of the window, where other networks are tried
RETRIES = tuple((place, stiff) for stiff in (True, False) for place in PLACES)


def judge(req: Requirement, p: Prepared, network: Mapping[str, float] | None = None) -> Judged:
    """Judge all parts, with the network chosen for each or, where `network` gives rb (and rbe), with that one."""
    with np.errstate(all="ignore"):
        sit = situation(req)
        n = needs(sit, p)
        if network is not None:
            return _judged(sit, p, n, _given(sit, p, n, network))
        net = design(sit, p, n)
        found = _judged(sit, p, n, net)
        rows = np.flatnonzero(_only_network(found.outcomes, net))
        worst = _worst(found.outcomes)
        again = []
        for some in np.array_split(rows, -(-len(rows) // AT_ONCE)) if len(rows) else ():
            changed, other = _another(sit, p, n, net, some, worst[some])
            if len(changed):
                again.append((changed, _judged(sit, p.take(changed), n.take(changed), other)))
        return replace(found, again=tuple(again))


def _judged(sit: Situation, p: Prepared, n: Needs, net: Network) -> Judged:
    outcomes, b = _outcomes(sit, p, n, net)
    return Judged(outcomes, _network_columns(net), _bound_columns(b, len(p)), p.ic / float(sit.ic_max.values))


def _given(sit: Situation, p: Prepared, n: Needs, network: Mapping[str, float]) -> Network:
    rbe = np.full(len(p), network.get("rbe", np.inf))
    low, high = window(sit, p, n, rbe)
    return Network(np.full(len(p), network["rb"]), rbe, low, high)


def _outcomes(sit: Situation, p: Prepared, n: Needs, net: Network) -> tuple[tuple[Outcome, ...], Bounds]:
    b = bounds(sit, p, n, net)
    case = SwitchCase(sit.requirement, sit, p, b, POLICIES[sit.requirement.word("choice.derating") or "none"])
    found = (run(one, case, len(p)) for one in checks("switch"))
    return tuple(one for one in found if one is not None), b


def _another(
    sit: Situation, p: Prepared, n: Needs, net: Network, rows: NDArray[np.intp], worst: NDArray[np.int8]
) -> tuple[NDArray[np.intp], Network]:
    """Those of `rows` that another network serves better, and that network: the first of the best."""
    k, m = len(RETRIES), len(rows)
    some, needed, plain = p.take(rows), n.take(rows), net.take(rows)
    others = Network.joined([at_an_end(sit, some, needed, plain, place, stiff=stiff) for place, stiff in RETRIES])
    copies = np.tile(np.arange(m), k)  # all at once: a short shelf is mostly overhead
    outcomes, _ = _outcomes(sit, some.take(copies), needed.take(copies), others)
    status = _worst(outcomes).reshape(k, m)
    better = np.flatnonzero(status.min(axis=0) < worst)
    return rows[better], others.take(status.argmin(axis=0)[better] * m + better)


def _only_network(outcomes: tuple[Outcome, ...], net: Network) -> NDArray[np.bool_]:
    """Parts that another network could still turn: nothing wrong but what the network decides, and room for one."""
    wrong = np.zeros(len(net.rb), dtype=bool)
    fixed = ~(net.rb_low <= net.rb_high)
    for one in outcomes:
        bad = one.status != Status.PASS
        wrong |= bad
        if not one.check.chosen:
            fixed |= bad
    undecided: NDArray[np.bool_] = wrong & ~fixed
    return undecided


def _worst(outcomes: tuple[Outcome, ...]) -> NDArray[np.int8]:
    worst = outcomes[0].status
    for one in outcomes[1:]:
        worst = np.maximum(worst, one.status)
    return worst


def _network_columns(net: Network) -> dict[str, Floats]:
    columns = {"rb": net.rb, "rb_low": net.rb_low, "rb_high": net.rb_high, "rbe": net.rbe}
    return {name: np.where(np.isfinite(column), column, np.nan) for name, column in columns.items()}


def _bound_columns(b: Bounds, n: int) -> dict[str, Floats]:
    columns = {
        "vce_on_max": b.vce_on_max.values,
        "ic_on_max": b.ic_on_max.values,
        "ic_on_min": b.ic_on_min.values,
        "ib_on_min": b.ib_on_min,
        "ib_on_max": b.ib_on_max.values,
        "drive_current_max": b.drive_current_max.values,
        "forced_beta_max": b.forced_beta_max,
        "power_max": b.power_on.values,
        "tj_max": b.tj_max.values,
        "ic_off_max": b.ic_off_max.values,
        "vce_off_max": b.vce_off_max.values,
        "t_on_max": b.t_on_max.values,
        "t_off_max": b.t_off_max.values,
    }
    finite = {name: np.broadcast_to(column, n).astype(np.float64) for name, column in columns.items()}
    return {name: np.where(np.isfinite(column), column, np.nan) for name, column in finite.items()}


def eligible(req: Requirement, p: Prepared) -> NDArray[np.bool_]:
    """Parts of the right polarity, and those whose structure nobody stated. Shape (n,)."""
    right: NDArray[np.bool_] = ~p.known | (p.pnp == (req.word("position") == "high side"))
    return right


DUTY = Duty(
    "switch", FIELDS, complete, judge, eligible, cautions, FIGURES, GIVEN, network_says, network_object, BOUND_UNITS,
    LEVERS, readings,
)  # fmt: skip
