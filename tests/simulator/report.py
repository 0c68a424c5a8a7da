"""The engine against the simulator, run by hand: `python -m tests.simulator.report --types 30 --requirements 60`."""

import argparse
import json
import time
from collections import Counter
from collections.abc import Iterator
from dataclasses import dataclass, field

import numpy as np

from engine.part import Part
from engine.rank import rank
from engine.ranking import Ranking, Status, Verdict
from engine.shelf import Shelf

from .circuits import Job, Numbers, jobs
from .datasheet import shelf_parts
from .feasible import find, possible
from .judge import Ratings, broken_bounds, by_ngspice, confirm, judge, shortfalls, switching_times
from .population import Type, population


@dataclass(frozen=True, eq=False)
class World:
    """An invented world: types with their sheets on a shelf, and requirements."""

    types: list[Type]
    parts: list[Part]
    shelf: Shelf
    jobs: list[Job]

    @classmethod
    def make(cls, types: int, devices: int, requirements: int, seed: int) -> "World":
        """The same arguments give the same world."""
        crowd = population(types, devices, seed)
        parts = shelf_parts(crowd, seed)
        return cls(crowd, parts, Shelf.from_parts(parts), jobs(requirements, seed))


@dataclass(eq=False)
class Tally:
    """What the comparison found."""

    judged: int = 0
    fits: int = 0
    false: list[str] = field(default_factory=list)
    broken: Counter[str] = field(default_factory=Counter)
    broken_cases: list[str] = field(default_factory=list)
    feasible: int = 0
    accepted: int = 0
    lost: Counter[str] = field(default_factory=Counter)
    lost_cases: dict[str, list[str]] = field(default_factory=dict)


def network_of(ranking: Ranking, row: int) -> tuple[float, float | None]:
    """(RB, RBE) that the engine chose, Ω."""
    rb, rbe = float(ranking.network["rb"][row]), float(ranking.network["rbe"][row])
    return rb, None if np.isnan(rbe) else rbe


def bounds_of(ranking: Ranking, row: int) -> dict[str, float]:
    """The engine's bounds of one part; NaN where it states none."""
    return {name: float(column[row]) for name, column in ranking.bounds.items()}


def simulate_fit(
    kind: Type, ratings: Ratings, n: Numbers, ranking: Ranking, row: int, *, thorough: bool
) -> tuple[list[str], list[str], dict[str, float]]:
    """Of a part that the engine calls fitting: what it misses in the simulator, which bounds break, the extremes."""
    rb, rbe = network_of(ranking, row)
    found = judge(kind, n, rb, rbe, by_ngspice) if thorough else confirm(kind, n, rb, rbe)
    if n.load == "resistive" and not np.isnan([n.turn_off, n.frequency]).all():
        found |= switching_times(kind, n, rb, rbe)
    return shortfalls(kind, ratings, n, found), broken_bounds(bounds_of(ranking, row), found), found


def compare(world: World, *, thorough: bool = False, feasibility: bool = True) -> Tally:
    """Judge every possible pair both ways."""
    tally = Tally()
    for job in world.jobs:
        n, ranking = job.numbers, rank(job.requirement, world.shelf)
        for row, (kind, part) in enumerate(zip(world.types, world.parts, strict=True)):
            tally.judged += 1
            fits = ranking.verdict[row] == Verdict.FITS
            ratings = Ratings.of(part)
            if fits:
                _count_fit(tally, world, job, kind, ratings, ranking, row, thorough)
            if feasibility and possible(kind, ratings, n):
                _count_feasible(tally, job, kind, ratings, ranking, row, fits)
    return tally


def _count_fit(
    tally: Tally, world: World, job: Job, kind: Type, ratings: Ratings, ranking: Ranking, row: int, thorough: bool
) -> None:
    missed, broken, found = simulate_fit(kind, ratings, job.numbers, ranking, row, thorough=thorough)
    tally.fits += 1
    tally.broken.update(broken)
    bounds = bounds_of(ranking, row)
    if broken:
        pairs = ", ".join(f"{name} {found[name]:.5g} against {bounds[name]:.5g}" for name in broken)
        tally.broken_cases.append(f"job {job.number} {kind.number} network {network_of(ranking, row)}: {pairs}")
    if missed:
        tally.false.append(
            f"job {job.number} {kind.number}: misses {', '.join(missed)}\n"
            f"  network {network_of(ranking, row)}\n  simulated {json.dumps(found)}\n  bounds    {json.dumps(bounds)}\n"
            + "".join(f"  {line}\n" for line in job.toml.splitlines())
            + "".join(f"  {one.symbol} {one.min} {one.max} {dict(one.conditions)}\n" for one in world.parts[row].limits)
        )


def _count_feasible(
    tally: Tally, job: Job, kind: Type, ratings: Ratings, ranking: Ranking, row: int, fits: bool
) -> None:
    if fits:  # judged already: a fit that holds is feasible with the engine's own network
        tally.feasible += 1
        tally.accepted += 1
        return
    answer = find(kind, ratings, job.numbers)
    if answer is None:
        return
    tally.feasible += 1
    reason = " + ".join(why_not(ranking, row))
    label = f"{Verdict(int(ranking.verdict[row])).words}: {reason}"
    tally.lost[label] += 1
    (rb, rbe), found = answer
    tally.lost_cases.setdefault(label, []).append(
        f"job {job.number} {kind.number} works with RB {rb:g} RBE {rbe}: VCE {found['vce_on_max']:.3g}, drive "
        f"{found['drive_current_max']:.3g}, off {found['ic_off_max']:.3g}; engine's network {network_of(ranking, row)}"
    )


def why_not(ranking: Ranking, row: int) -> list[str]:
    """Names of the checks that fail, or where none does, that cannot be answered."""
    for status in (Status.FAIL, Status.UNKNOWN):
        names = [check.name for check in ranking.checks if check.status[row] == status]
        if names:
            return names
    return ["typical values"]


def lines(tally: Tally) -> Iterator[str]:
    """The report."""
    yield f"pairs judged {tally.judged}, fits {tally.fits}"
    yield f"FALSE fits {len(tally.false)}"
    yield from tally.false
    yield f"broken bounds {sum(tally.broken.values())}: {dict(tally.broken)}"
    yield from (f"  {case}" for case in tally.broken_cases)
    share = tally.accepted / tally.feasible if tally.feasible else float("nan")
    yield f"feasible pairs {tally.feasible}, of them called fits {tally.accepted} ({share:.0%})"
    for label, count in tally.lost.most_common():
        yield f"  lost {count:4d}  {label}"
        yield from (f"           {case}" for case in tally.lost_cases[label][:3])


def main() -> None:
    """Parse the sizes, compare, print."""
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--types", type=int, default=24)
    parser.add_argument("--devices", type=int, default=20)
    parser.add_argument("--requirements", type=int, default=60)
    parser.add_argument("--seed", type=int, default=1)
    parser.add_argument("--thorough", action="store_true", help="every device and corner of the fits by ngspice")
    parser.add_argument("--no-feasible", action="store_true", help="leave out the search for workable pairs")
    asked = parser.parse_args()
    start = time.perf_counter()
    world = World.make(asked.types, asked.devices, asked.requirements, asked.seed)
    tally = compare(world, thorough=asked.thorough, feasibility=not asked.no_feasible)
    print("\n".join(lines(tally)))
    print(f"seed {asked.seed}, {asked.devices} devices a type, {time.perf_counter() - start:.0f} s")


if __name__ == "__main__":
    main()
