"""Timing and printing."""

import statistics
import time
from collections.abc import Callable


def seconds(work: Callable[[], object], runs: int = 5) -> float:
    """The median time of `work`, after one run that does not count."""
    work()
    return statistics.median(once(work) for _ in range(runs))


def once(work: Callable[[], object]) -> float:
    """The time of `work`, first run included."""
    begun = time.perf_counter()
    work()
    return time.perf_counter() - begun


def say(what: str, ours: float, other: str, theirs: float) -> None:
    """One line: a figure, what it is held against, and the ratio."""
    print(f"  {what:<52} {ours * 1e3:9.1f} ms   {other:<34} {theirs * 1e3:9.1f} ms   ratio {ours / theirs:8.2f}")
