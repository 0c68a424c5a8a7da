"""Every part the engine calls fitting, built in the simulator: no bound broken, none fails to do the job.

Devices and requirements are invented (`population`, `circuits`); the judge is ngspice, a general-purpose circuit
simulator that shares nothing with the engine.
"""

import os

import numpy as np
import pytest

from engine.rank import rank
from engine.ranking import Verdict
from engine.shelf import Shelf

from . import spice
from .circuits import jobs
from .datasheet import shelf_parts
from .feasible import E24
from .judge import Ratings, by_solver, judge, shortfalls
from .population import population
from .report import World, compare, simulate_fit

pytestmark = pytest.mark.skipif(
    not spice.available() and not os.environ.get("CI"), reason="ngspice is not installed (apt-get install ngspice)"
)


@pytest.fixture(scope="module")
def world() -> World:
    return World.make(types=24, devices=20, requirements=45, seed=11)


def test_no_fit_is_false_and_no_bound_breaks(world: World, capsys: pytest.CaptureFixture[str]) -> None:
    fits, wrong = 0, []
    for job in world.jobs:
        ranking = rank(job.requirement, world.shelf)
        n = job.numbers
        fitting = np.flatnonzero(ranking.verdict == Verdict.FITS)
        for place, row in enumerate(fitting):
            kind, ratings = world.types[row], Ratings.of(world.parts[row])
            # every device and corner by ngspice for the first of a job, the deciding ones for the rest
            missed, broken, found = simulate_fit(kind, ratings, n, ranking, int(row), thorough=place == 0)
            fits += 1
            if missed + broken:
                wrong.append(f"{kind.number} misses {missed}, breaks {broken} of\n{job.toml}\n{found}")
    with capsys.disabled():
        print(f"\nsimulated {len(world.jobs)} requirements: {fits} fits, {len(wrong)} of them false or out of bounds")
    assert not wrong, "\n".join(wrong)
    assert fits >= 40  # an engine that promises nothing is of no use


def test_darlingtons_leak_and_conduct_within_their_bounds() -> None:
    """Their leakage feeds a second base, their least VBE is that of one junction at light loads."""
    types = [kind for kind in population(108, 16, 302) if kind.darlington]
    parts = shelf_parts(types, 302)
    shelf, fits, wrong = Shelf.from_parts(parts), 0, []
    for job in jobs(60, 302):
        ranking, n = rank(job.requirement, shelf), job.numbers
        for row in np.flatnonzero(ranking.verdict == Verdict.FITS):
            found = simulate_fit(types[row], Ratings.of(parts[row]), n, ranking, int(row), thorough=False)
            fits += 1
            if found[0] + found[1]:
                wrong.append(f"{types[row].number} misses {found[0]}, breaks {found[1]} of\n{job.toml}\n{found[2]}")
    assert not wrong, "\n".join(wrong)
    assert fits >= 5


def test_given_networks_are_judged_truly(world: World) -> None:
    """Networks drawn at random sit at the edge more often than designed ones do."""
    rng = np.random.default_rng(5)
    for job in world.jobs[:20]:
        n = job.numbers
        strongest = n.supply[1] if n.position == "high side" else n.drive[1]
        least = max((strongest - 0.7) / n.drive_current - n.drive_resistance, 10.0)
        decade = 10.0 ** np.floor(np.log10(least))
        for _ in range(2):
            rb = float(rng.choice(E24)) / 10 * decade * float(rng.choice([1, 10]))
            rbe = float(rng.choice([1e3, 4.7e3, 22e3, 100e3, np.nan]))
            given = {"rb": rb} if np.isnan(rbe) else {"rb": rb, "rbe": rbe}
            ranking = rank(job.requirement, world.shelf, network=given)
            for row in np.flatnonzero(ranking.verdict == Verdict.FITS):
                kind, ratings = world.types[row], Ratings.of(world.parts[row])
                missed, broken, found = simulate_fit(kind, ratings, n, ranking, int(row), thorough=False)
                assert not missed + broken, f"{kind.number} {given}: {missed} {broken} of\n{job.toml}\n{found}"


def test_workable_pairs_are_not_thrown_away(capsys: pytest.CaptureFixture[str]) -> None:
    """A network search with the simulator finds the pairs that work; a plain guaranteed-limit rule accepts 29 %."""
    tally = compare(World.make(types=24, devices=20, requirements=24, seed=31))
    share = tally.accepted / tally.feasible
    with capsys.disabled():
        print(
            f"\nworkable pairs {tally.feasible}, called fits {tally.accepted} ({share:.0%}); false fits {len(tally.false)}"
        )
    assert not tally.false and not tally.broken
    assert share >= 0.6


def test_the_judge_finds_the_thumb_rule_wrong(world: World) -> None:
    """Forced beta 10, VBE 0.7 V and no RBE: a judge that finds no fault with that would be asleep."""
    called_good = wrong = 0
    for job in world.jobs:
        n = job.numbers
        heavy = n.current[1] if n.load == "constant current" else n.supply[1] / n.resistance[0]
        level = n.supply[0] - n.drive[0] if n.position == "high side" else n.drive[0]
        for kind, part in zip(world.types, world.parts, strict=True):
            matched = (kind.polarity == "pnp") == (n.position == "high side") and not kind.darlington
            if not matched or heavy / 10 > n.drive_current or not n.supply[1] + n.overshoot < kind.vceo:
                continue
            rb = (level - 0.7) / (heavy / 10) - n.drive_resistance
            if heavy > kind.current or rb <= 0:
                continue
            called_good += 1
            wrong += bool(shortfalls(kind, Ratings.of(part), n, judge(kind, n, rb, None, by_solver, np.arange(8))))
    assert called_good > 20
    assert wrong > 0.2 * called_good
