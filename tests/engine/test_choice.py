"""Desirability, the Pareto front, the derating policies and the grades of evidence against what is published."""

import itertools
import math

import numpy as np
import pytest

from engine.desirability import larger_is_better, overall, smaller_is_better
from engine.evidence import Evidence, weakest
from engine.pareto import pareto_front
from engine.policy import POLICIES


@pytest.mark.parametrize(
    ("shares", "together"),
    [
        ((0.34, 1.0, 0.49, 0.76), 0.596),  # NIST/SEMATECH e-Handbook of Statistical Methods, 5.5.3.2.2
        ((0.189, 1.000, 0.656, 0.932), 0.583),  # Derringer, Suich, J. Quality Technology 12(4) (1980), the optimum
    ],
)
def test_overall_desirability(shares: tuple[float, ...], together: float) -> None:
    wanted = {str(i): np.array([share]) for i, share in enumerate(shares)}
    assert float(overall(wanted, dict.fromkeys(wanted, 1.0))[0]) == pytest.approx(together, abs=0.001)
    assert float(overall(wanted, dict.fromkeys(wanted, 7.0))[0]) == pytest.approx(together, abs=0.001), (
        "weights sum to 1"
    )


def test_one_undesirable_response_rules_out() -> None:
    """Derringer, Suich 1980: any d of 0 gives D of 0."""
    wanted = {"a": np.array([0.0, 1.0]), "b": np.array([1.0, 1.0])}
    assert overall(wanted, {"a": 0.01, "b": 1.0}).tolist() == [0.0, 1.0]


def test_a_criterion_without_weight_does_not_count() -> None:
    wanted = {"a": np.array([0.0]), "b": np.array([0.25])}
    assert float(overall(wanted, {"a": 0.0, "b": 2.0})[0]) == pytest.approx(0.25)


@pytest.mark.parametrize(
    ("y", "s", "d"), [(0.9, 1, 0), (1.0, 1, 0), (1.5, 1, 0.5), (2, 1, 1), (3, 1, 1), (1.5, 2, 0.25)]
)
def test_one_sided_desirability(y: float, s: float, d: float) -> None:
    """((y − L)/(T − L))^s between 0 and 1 with L 1 and T 2, and its mirror (Derringer, Suich 1980)."""
    assert float(larger_is_better(np.array(y), 1.0, 2.0, s)) == pytest.approx(d)
    assert float(smaller_is_better(np.array(3 - y), 1.0, 2.0, s)) == pytest.approx(d)


def front(points: list[tuple[float, float]]) -> list[tuple[float, float]]:
    """The front with both coordinates to be made small."""
    kept = pareto_front(-np.array(points, dtype=np.float64))
    return [point for point, stays in zip(points, kept, strict=True) if stays]


def test_pareto_front() -> None:
    """Worked out by hand from the definition, in every order of the points."""
    points = [(1, 5), (2, 2), (4, 1), (3, 3), (2, 5)]
    for order in itertools.permutations(points):
        assert set(front(list(order))) == {(1, 5), (2, 2), (4, 1)}


def test_equal_points_both_stay() -> None:
    assert front([(1, 1), (1, 1), (2, 1)]) == [(1, 1), (1, 1)]


@pytest.mark.parametrize(
    ("name", "voltage", "current", "power", "tj"),
    [
        ("none", 1.0, 1.0, 1.0, math.inf),
        ("MIL-STD-975M", 0.75, 0.75, 0.50, 125),  # §3.15, NASA 1994
        # RL-TR-92-11 table 6-4: the sharper of breakdown voltage 65/85/90 % and VCE in the safe area 70/75/80 %,
        # IC in the safe area 60/65/70 %, power 50/60/70 %, TJ 95/125/135 °C
        ("RL-TR-92-11 I", min(0.65, 0.70), 0.60, 0.50, 95),
        ("RL-TR-92-11 II", min(0.85, 0.75), 0.65, 0.60, 125),
        ("RL-TR-92-11 III", min(0.90, 0.80), 0.70, 0.70, 135),
    ],
)
def test_published_derating_policies(name: str, voltage: float, current: float, power: float, tj: float) -> None:
    policy = POLICIES[name]
    assert (policy.voltage, policy.current, policy.power, policy.tj_max) == (voltage, current, power, tj)
    assert policy.source


def test_there_is_no_other_policy() -> None:
    """Nothing shipped from memory."""
    assert set(POLICIES) == {"none", "MIL-STD-975M", "RL-TR-92-11 I", "RL-TR-92-11 II", "RL-TR-92-11 III"}


def test_a_result_is_as_good_as_its_weakest_figure() -> None:
    order = [Evidence.GUARANTEED, Evidence.MEASURED, Evidence.DERIVED, Evidence.TYPICAL, Evidence.MISSING]
    for a, b in itertools.product(order, repeat=2):
        assert int(weakest(a, b)) == order[max(order.index(a), order.index(b))]
    columns = weakest(np.array([0, 2, 4], dtype=np.int8), Evidence.MEASURED)
    assert columns.tolist() == [1, 2, 4]
    assert [one.word for one in order] == ["guaranteed", "measured", "derived", "typical", "missing"]
