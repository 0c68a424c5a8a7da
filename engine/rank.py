"""Judge every part of a shelf under one requirement and order them."""

from collections.abc import Callable, Mapping

from .ranking import Ranking
from .requirement import Requirement
from .shelf import Shelf

DEFAULT_WEIGHTS: dict[str, float] = {
    "electrical margin": 3.0,
    "junction margin": 2.0,
    "not oversized": 1.0,
    "stock": 2.0,
    "cost": 1.0,
    "evidence": 1.0,
}
"""Criterion → weight; the user's own replace them one by one."""


def rank(
    requirement: Requirement,
    shelf: Shelf,
    *,
    weights: Mapping[str, float] | None = None,
    network: Mapping[str, float] | None = None,
    cancelled: Callable[[], bool] = lambda: False,
) -> Ranking:
    """The ranking of `shelf`; with `network` (rb, rbe in Ω) judge that network instead of choosing one."""
    raise NotImplementedError
