"""How desirable a part is among those that fit: Derringer and Suich's desirabilities.

Source: G. Derringer, R. Suich, J. Quality Technology 12(4) (1980) 214; NIST e-Handbook 5.5.3.2.2.
"""

from collections.abc import Mapping

import numpy as np
from numpy.typing import NDArray

from .evidence import Grades
from .ranking import CheckColumn
from .shelf import Shelf

Floats = NDArray[np.float64]

DEFAULT_WEIGHTS: dict[str, float] = {
    "electrical margin": 3.0,
    "junction margin": 2.0,
    "not oversized": 1.0,
    "stock": 2.0,
    "cost": 1.0,
    "evidence": 1.0,
}
"""Criterion → weight; the user's own replace them one by one."""

LEAST = 0.05  # of a criterion that is no reason to rule a part out
_THERMAL = ("junction temperature", "power dissipation")


def larger_is_better(y: Floats, low: float, target: float, s: float = 1.0) -> Floats:
    """((y − low) / (target − low))^s between 0 and 1.

    >>> float(larger_is_better(np.array(1.5), 1.0, 2.0))
    0.5
    """
    shares: Floats = np.clip((y - low) / (target - low), 0.0, 1.0) ** s
    return shares


def smaller_is_better(y: Floats, target: float, high: float, s: float = 1.0) -> Floats:
    """The mirror of `larger_is_better`."""
    shares: Floats = np.clip((high - y) / (high - target), 0.0, 1.0) ** s
    return shares


def overall(wanted: Mapping[str, Floats], weights: Mapping[str, float]) -> Floats:
    """Π d^w with the weights scaled to sum 1; any d of 0 gives 0. Shape (n,)."""
    total = sum(weights.get(name, 0.0) for name in wanted)
    if total <= 0:
        return np.ones(len(next(iter(wanted.values()))))
    with np.errstate(all="ignore"):
        logs = sum(
            weights.get(name, 0.0) / total * np.log(d) for name, d in wanted.items() if weights.get(name, 0.0) > 0
        )
        combined: Floats = np.exp(np.asarray(logs))
        return combined


def criteria(
    columns: tuple[CheckColumn, ...], headroom: Floats, evidence: Grades, size: Floats, shelf: Shelf, quantity: float
) -> dict[str, Floats]:
    """Each criterion's desirability, 0…1, for all parts."""
    electrical = np.full(len(shelf), np.inf)
    thermal = np.full(len(shelf), np.inf)
    for column in columns:
        if column.name in _THERMAL:
            thermal = np.minimum(thermal, column.headroom)
        else:
            electrical = np.minimum(electrical, column.headroom)
    free = (shelf.stock - shelf.reserved).astype(np.float64)
    want = max(quantity, 1.0) if not np.isnan(quantity) else 1.0
    with np.errstate(all="ignore"):
        spare = np.log10(np.where(np.isnan(size), 1.0, np.maximum(size, 1e-9)))
        cheap = np.log10(np.where(np.isnan(shelf.cost) | (shelf.cost <= 0), 1.0, shelf.cost))
    return {
        "electrical margin": np.maximum(larger_is_better(electrical, 0.9, 2.0), LEAST),
        "junction margin": np.maximum(larger_is_better(thermal, 0.9, 2.0), LEAST),
        "not oversized": np.maximum(smaller_is_better(spare, np.log10(4.0), np.log10(400.0)), LEAST),
        "stock": np.where(free < want, LEAST, np.maximum(larger_is_better(free / want, 0.0, 5.0), LEAST)),
        "cost": np.maximum(smaller_is_better(cheap, -2.0, 1.5), LEAST),
        "evidence": np.maximum(1.0 - 0.2 * evidence.astype(np.float64), LEAST),
    }
