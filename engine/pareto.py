"""The Pareto front: what nothing else beats in one respect without losing in another."""

import numpy as np
from numpy.typing import NDArray

Floats = NDArray[np.float64]


def pareto_front(wanted: Floats) -> NDArray[np.bool_]:
    """Which rows nothing dominates, larger being better in every column; equal rows both stay. (n, c) → (n,).

    Rows in order of falling sum: a row can only be dominated by one before it.
    """
    n = len(wanted)
    order = np.argsort(-wanted.sum(axis=1), kind="stable")
    front = np.empty((0, wanted.shape[1]))
    on_front = np.zeros(n, dtype=bool)
    for row in order:
        candidate = wanted[row]
        dominated = ((front >= candidate).all(axis=1) & (front > candidate).any(axis=1)).any()
        if not dominated:
            on_front[row] = True
            front = np.vstack([front, candidate])
    return on_front
