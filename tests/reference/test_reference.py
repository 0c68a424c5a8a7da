"""The engine's columns against the plain judgement of one part after another."""

import math
from collections.abc import Mapping

from hypothesis import given, settings
from hypothesis import strategies as st

from engine.part import Part
from engine.rank import rank
from engine.ranking import Ranking
from engine.requirement import Requirement
from engine.shelf import Shelf
from tests.reference.judge import Judgement, judge
from tests.strategies import random_parts, random_requirement, seeds

SAME = 1e-9
PARTS = 12


def agrees(a: float, b: float) -> bool:
    """To 1e-9 relative; what is not known on one side is not known on the other."""
    if math.isnan(a) or math.isnan(b):
        return math.isnan(a) and math.isnan(b)
    return a == b or math.isclose(a, b, rel_tol=SAME, abs_tol=1e-15)


def differences(ranking: Ranking, row: int, told: Judgement) -> list[str]:
    """Where the row of a ranking differs from the plain judgement."""
    found = []

    def hold(what: str, engine: float, plain: float) -> None:
        if not agrees(float(engine), float(plain)):
            found.append(f"{what}: engine {engine!r}, plain {plain!r}")

    for name, column in ranking.network.items():
        plain = {
            "rb": told.network.rb,
            "rbe": told.network.rbe,
            "rb_low": told.network.low,
            "rb_high": told.network.high,
        }
        hold(name, column[row], math.nan if math.isinf(plain[name]) else plain[name])
    for name, column in ranking.bounds.items():
        hold(name, column[row], told.bounds[name])
    if {one.name for one in ranking.checks} != set(told.answers):
        found.append(f"checks: {[one.name for one in ranking.checks]} and {list(told.answers)}")
        return found
    for one in ranking.checks:
        answer = told.answers[one.name]
        for figure in ("value", "limit", "headroom"):
            hold(f"{one.name}, {figure}", getattr(one, figure)[row], getattr(answer, figure))
        hold(f"{one.name}, status", one.status[row], answer.status)
        hold(f"{one.name}, evidence", one.evidence[row], answer.grade)
    hold("verdict", ranking.verdict[row], told.verdict)
    hold("evidence", ranking.evidence[row], told.grade)
    return found


def hold_against(req: Requirement, parts: list[Part], network: Mapping[str, float] | None = None) -> None:
    """Raise with every difference, and with the part and the requirement that show it."""
    ranking = rank(req, Shelf.from_parts(parts), network=network)
    for row, part in enumerate(parts):
        if part.structure and part.structure.startswith("pnp") != (req.word("position") == "high side"):
            assert ranking.verdict[row] == 3  # the wrong kind: judged no further
            continue
        found = differences(ranking, row, judge(req, part, network))
        assert not found, "\n".join([*found, repr(part), repr(dict(req.values)), repr(network)])


@settings(max_examples=150, derandomize=True, deadline=None)
@given(seeds)
def test_every_figure_of_the_ranking_is_that_of_the_plain_judgement(seed: int) -> None:
    hold_against(random_requirement(seed), random_parts(seed, PARTS))


@settings(max_examples=60, derandomize=True, deadline=None)
@given(seeds)
def test_whole_sheets_are_judged_alike(seed: int) -> None:
    req = random_requirement(seed)
    structures = ("pnp", "pnp-darlington") if req.word("position") == "high side" else ("npn", "npn-darlington")
    hold_against(req, random_parts(seed, PARTS, gaps=0.0, structures=structures))


@settings(max_examples=60, derandomize=True, deadline=None)
@given(seeds, st.floats(1.0, 1e6), st.one_of(st.none(), st.floats(10.0, 1e6)))
def test_a_given_network_is_judged_alike(seed: int, rb: float, rbe: float | None) -> None:
    network = {"rb": rb} if rbe is None else {"rb": rb, "rbe": rbe}
    hold_against(random_requirement(seed), random_parts(seed, PARTS), network)
