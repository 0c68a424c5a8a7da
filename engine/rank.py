"""Judge every part of a shelf under one requirement and order them."""

from collections.abc import Callable, Mapping
from functools import lru_cache

import numpy as np
from numpy.typing import NDArray

from .desirability import DEFAULT_WEIGHTS, criteria, overall
from .duty import duties
from .duty.base import Judged
from .evidence import Evidence
from .prepared import Prepared, prepare
from .ranking import CheckColumn, Ranking, Status, Verdict
from .requirement import Requirement
from .shelf import Shelf

Floats = NDArray[np.float64]
BLOCK = 8192  # parts judged at once: their columns stay in the processor's cache

__all__ = ["DEFAULT_WEIGHTS", "Cancelled", "prepared", "rank"]


class Cancelled(Exception):
    """The caller no longer wants the ranking."""


@lru_cache(maxsize=4)
def prepared(shelf: Shelf) -> Prepared:
    """What every requirement needs of `shelf`, worked out once a shelf."""
    return prepare(shelf)


def rank(
    requirement: Requirement,
    shelf: Shelf,
    *,
    weights: Mapping[str, float] | None = None,
    network: Mapping[str, float] | None = None,
    cancelled: Callable[[], bool] = lambda: False,
) -> Ranking:
    """The ranking of `shelf`; with `network` (rb, rbe in Ω) judge that network instead of choosing one.

    Raises Cancelled between two blocks of parts once `cancelled` says so.
    """
    judge = duties()[requirement.duty].judge
    ready = prepared(shelf)
    blocks = []
    for start in range(0, max(len(shelf), 1), BLOCK):
        if cancelled():
            raise Cancelled
        rows = slice(start, min(start + BLOCK, len(shelf)))
        judged = judge(requirement, ready.take(rows), shelf.take(rows), network)
        blocks.append((tuple(one.column() for one in judged.outcomes), judged))
    return _ranking(requirement, shelf, blocks, weights or {})


def _ranking(
    req: Requirement,
    shelf: Shelf,
    blocks: list[tuple[tuple[CheckColumn, ...], Judged]],
    weights: Mapping[str, float],
) -> Ranking:
    columns = tuple(_joined([block[0][i] for block in blocks]) for i in range(len(blocks[0][0])))
    network = _joined_maps([judged.network for _, judged in blocks])
    bounds = _joined_maps([judged.bounds for _, judged in blocks])
    verdict, evidence, worst, headroom = decide(columns)
    size = np.concatenate([judged.size for _, judged in blocks])
    wanted = criteria(columns, headroom, evidence, size, shelf, req.number("choice.quantity"))
    score = overall(wanted, {**DEFAULT_WEIGHTS, **weights})
    score = np.where(verdict <= Verdict.FITS_ON_TYPICALS, score, 0.0)
    closeness = np.where(np.isnan(headroom), -1.0, headroom)
    names = np.argsort(np.argsort(shelf.names.astype(str), kind="stable"), kind="stable")
    order = np.lexsort((names, -np.minimum(closeness, 1e6), -score, verdict))
    return Ranking(
        req, req.word("choice.derating") or "none", shelf, columns, network, bounds, verdict, evidence, worst, headroom,
        score, wanted, order,
    )  # fmt: skip


def decide(
    columns: tuple[CheckColumn, ...],
) -> tuple[NDArray[np.int8], NDArray[np.int8], NDArray[np.int16], Floats]:
    """Verdict, weakest evidence, index of the deciding check and its headroom, for all parts.

    The deciding check is the failing one with the least headroom, else the first that is unknown, else the
    tightest.
    """
    status = np.stack([column.status for column in columns])
    headroom = np.stack([column.headroom for column in columns])
    failing = status == Status.FAIL
    unknown = status == Status.UNKNOWN
    evidence = np.max(np.stack([column.evidence for column in columns]), axis=0)
    verdict = np.where(evidence >= Evidence.TYPICAL, Verdict.FITS_ON_TYPICALS, Verdict.FITS)
    verdict = np.where(unknown.any(axis=0), Verdict.CANNOT_SAY, verdict)
    verdict = np.where(failing.any(axis=0), Verdict.FAILS, verdict).astype(np.int8)
    tightness = np.where(np.isnan(headroom), np.inf, headroom)
    tightness = np.where(failing, tightness - 1e9, np.where(unknown, -1e6, tightness))
    worst = np.argmin(tightness, axis=0).astype(np.int16)
    decisive = np.take_along_axis(headroom, worst[None, :].astype(np.intp), 0)[0]
    return verdict, evidence.astype(np.int8), worst, decisive


def _joined(parts: list[CheckColumn]) -> CheckColumn:
    first = parts[0]
    if len(parts) == 1:
        return first
    arrays = (
        np.concatenate([getattr(one, name) for one in parts])
        for name in ("value", "limit", "headroom", "status", "evidence")
    )
    return CheckColumn(first.name, first.question, first.unit, *arrays)


def _joined_maps(maps: list[Mapping[str, Floats]]) -> dict[str, Floats]:
    return {name: np.concatenate([one[name] for one in maps]) for name in maps[0]}
