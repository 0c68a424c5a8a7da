"""Preferred values of IEC 60063, found by going through them all."""

import itertools

from .ieee import INF, known

E24 = (
    1.0,
    1.1,
    1.2,
    1.3,
    1.5,
    1.6,
    1.8,
    2.0,
    2.2,
    2.4,
    2.7,
    3.0,
    3.3,
    3.6,
    3.9,
    4.3,
    4.7,
    5.1,
    5.6,
    6.2,
    6.8,
    7.5,
    8.2,
    9.1,
)
DECADE = {
    "E12": E24[::2],
    "E24": E24,
    "E96": tuple(round(10 ** (i / 96), 2) for i in range(96)),
}
LADDER = {name: [float(f"{v:.2f}e{d}") for d in range(-6, 13) for v in values] for name, values in DECADE.items()}
SAME = 1e-9  # a value this close to a preferred one is that one


def largest_step(series: str) -> float:
    """The largest ratio between neighbours."""
    values = (*DECADE[series], 10.0)
    return max(b / a for a, b in itertools.pairwise(values))


def _usable(x: float) -> bool:
    return known(x) and 1e-5 < x < 1e12 and x != INF


def at_least(x: float, series: str) -> float:
    """The smallest preferred value not below `x`."""
    return next(v for v in LADDER[series] if v >= x * (1 - SAME)) if _usable(x) else x


def at_most(x: float, series: str) -> float:
    """The largest preferred value not above `x`."""
    return next(v for v in reversed(LADDER[series]) if v <= x * (1 + SAME)) if _usable(x) else x


def nearest(x: float, series: str) -> float:
    """The preferred value nearest by ratio."""
    low, high = at_most(x, series), at_least(x, series)
    return low if x * x < low * high else high
