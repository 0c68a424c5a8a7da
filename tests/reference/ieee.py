"""Arithmetic of IEEE 754 on plain floats: what is not known is NaN and travels; a division by nothing is infinite.

Comparisons with NaN are false, as everywhere.
"""

import math

NAN = math.nan
INF = math.inf


def known(x: float) -> bool:
    """Whether there is a value at all."""
    return not math.isnan(x)


def div(a: float, b: float) -> float:
    """a ÷ b."""
    if b != 0:
        return a / b
    if a == 0 or math.isnan(a):
        return NAN
    return math.copysign(INF, a) * math.copysign(1.0, b)


def ln(x: float) -> float:
    """The natural logarithm; −∞ of zero, none of what is below."""
    if math.isnan(x) or x < 0:
        return NAN
    return -INF if x == 0 else math.log(x)


def exp(x: float) -> float:
    """eˣ, infinite where it overflows."""
    return INF if x > 709.7 else math.exp(x)


def least(*values: float) -> float:
    """The smallest; NaN if any is."""
    return NAN if any(math.isnan(v) for v in values) else min(values)


def most(*values: float) -> float:
    """The largest; NaN if any is."""
    return NAN if any(math.isnan(v) for v in values) else max(values)


def either(a: float, b: float) -> float:
    """The larger of two lower bounds where both are known, else the one that is."""
    if math.isnan(a):
        return b
    return a if math.isnan(b) else max(a, b)
