"""The safe operating area read off its corners."""

import numpy as np
from numpy.typing import NDArray

Floats = NDArray[np.float64]


def allowed_current(v: Floats, corner_v: Floats, corner_i: Floats) -> Floats:
    """Collector current allowed at `v`, straight lines on log–log paper between corners (k, n). [A]

    Corners rise in voltage, NaN anywhere is padding. Left of the first corner its current holds; right of
    the last nothing is promised: NaN. Shapes: v (); result (n,).

    >>> round(float(allowed_current(np.array(20.0), np.array([[10.0], [40.0]]), np.array([[8.0], [2.0]]))[0]), 3)
    4.0
    """
    with np.errstate(all="ignore"):
        x, xs, ys = np.log(v), np.log(corner_v), np.log(corner_i)
        result = np.full(corner_v.shape[1], np.nan)
        last_x, last_y = np.full_like(result, np.nan), np.full_like(result, np.nan)
        for here_x, here_y in zip(xs, ys, strict=True):
            known = ~np.isnan(here_x)
            before_first = known & np.isnan(last_x) & (x <= here_x)
            result = np.where(before_first, here_y, result)
            inside = known & (last_x < x) & (x <= here_x)
            result = np.where(inside, last_y + (here_y - last_y) * (x - last_x) / (here_x - last_x), result)
            last_x, last_y = np.where(known, here_x, last_x), np.where(known, here_y, last_y)
        allowed: Floats = np.exp(result)
        return allowed


def forbidden_current(v: Floats, corner_v: Floats, corner_i: Floats) -> Floats:
    """Collector current above which `v` is surely outside: right of the last corner no more than there. [A]

    Infinite without corners. Shapes as of `allowed_current`.

    >>> forbidden_current(np.array(60.0), np.array([[10.0], [40.0]]), np.array([[8.0], [2.0]])).tolist()
    [2.0]
    """
    last = np.min(np.where(np.isnan(corner_i), np.inf, corner_i), axis=0)
    inside = allowed_current(v, corner_v, corner_i)
    return np.where(np.isnan(inside), last, inside)
