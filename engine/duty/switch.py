"""Switching a load: low side (NPN) or high side (PNP), a base resistor and, where needed, one to the emitter."""

from collections.abc import Mapping

import numpy as np
from numpy.typing import NDArray

from ..check import Outcome, checks, run
from ..policy import POLICIES
from ..prepared import Prepared
from ..ranking import Status
from ..requirement import Requirement
from ..shelf import Shelf
from .base import Duty, Judged
from .switch_bounds import Bounds, bounds
from .switch_case import SwitchCase
from .switch_cautions import cautions
from .switch_design import Needs, Network, design, needs, stiffest, window
from .switch_fields import FIELDS, complete
from .switch_figures import BOUND_UNITS, FIGURES, GIVEN, network_object, network_says
from .switch_situation import Situation, situation

Floats = NDArray[np.float64]
RETRIES = (1.0, 0.75, 0.5, 0.25, 0.0)  # places of the window where a stiffer network is tried


def judge(req: Requirement, p: Prepared, shelf: Shelf, network: Mapping[str, float] | None = None) -> Judged:
    """Judge all parts, with the network chosen for each or, where `network` gives rb (and rbe), with that one."""
    with np.errstate(all="ignore"):
        sit = situation(req)
        n = needs(sit, p)
        if network is not None:
            net = _given(sit, p, n, network)
            outcomes, b = _outcomes(sit, p, shelf, n, net)
        else:
            net, outcomes, b = _best(sit, p, shelf, n)
        return Judged(outcomes, _network_columns(net), _bound_columns(b, len(p)), p.ic / float(sit.ic_max.values))


def _given(sit: Situation, p: Prepared, n: Needs, network: Mapping[str, float]) -> Network:
    rbe = np.full(len(p), network.get("rbe", np.inf))
    low, high = window(sit, p, n, rbe)
    return Network(np.full(len(p), network["rb"]), rbe, low, high)


def _outcomes(sit: Situation, p: Prepared, shelf: Shelf, n: Needs, net: Network) -> tuple[tuple[Outcome, ...], Bounds]:
    b = bounds(sit, p, n, net)
    case = SwitchCase(sit.requirement, sit, p, shelf, b, POLICIES[sit.requirement.word("choice.derating") or "none"])
    found = (run(one, case, len(p)) for one in checks("switch"))
    return tuple(one for one in found if one is not None), b


def _best(sit: Situation, p: Prepared, shelf: Shelf, n: Needs) -> tuple[Network, tuple[Outcome, ...], Bounds]:
    """The chosen network; where only the network's own checks fail, stiffer ones are tried."""
    plain = design(sit, p, n)
    outcomes, b = _outcomes(sit, p, shelf, n, plain)
    rows = np.flatnonzero(_only_network(outcomes))
    if not len(rows):
        return plain, outcomes, b
    worst = _worst(outcomes)[rows]
    net = _stiffer(sit, p.take(rows), shelf.take(rows), n.take(rows), plain.take(rows), worst)
    if net is None:
        return plain, outcomes, b
    better = plain.put(rows, net)
    return better, *_outcomes(sit, p, shelf, n, better)


def _stiffer(
    sit: Situation, p: Prepared, shelf: Shelf, n: Needs, plain: Network, worst: NDArray[np.int8]
) -> Network | None:
    """For parts that only their network fails: the first stiffer one that does better; None where none does."""
    net, found = plain, False
    still_open = np.ones(len(p), dtype=bool)
    for place in RETRIES:
        if not still_open.any():
            break
        other = stiffest(sit, p, n, plain, place)
        outcomes, _ = _outcomes(sit, p, shelf, n, net.where(still_open, other))
        better = still_open & (_worst(outcomes) < worst)
        net = net.where(better, other)
        worst = np.where(better, _worst(outcomes), worst)
        still_open &= ~better | _only_network(outcomes)
        found |= bool(better.any())
    return net if found else None


def _only_network(outcomes: tuple[Outcome, ...]) -> NDArray[np.bool_]:
    """Parts that another network could still turn: nothing wrong but what the network decides."""
    wrong = np.zeros(len(outcomes[0].status), dtype=bool)
    fixed = np.zeros_like(wrong)
    for one in outcomes:
        bad = one.status != Status.PASS
        wrong |= bad
        if not one.check.chosen or one.check.name in ("base drive", "driver current", "base drive, inrush"):
            fixed |= bad  # the window itself is empty, or it is not the network's doing
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
    "switch", FIELDS, complete, judge, eligible, cautions, FIGURES, GIVEN, network_says, network_object, BOUND_UNITS
)
