"""Judge every part of a shelf under one requirement and order them."""

import os
from collections.abc import Callable, Mapping
from concurrent.futures import ThreadPoolExecutor
from dataclasses import dataclass
from functools import lru_cache
from typing import Any

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
BLOCK = 25_000  # parts judged at once, one block a processor

__all__ = ["DEFAULT_WEIGHTS", "Cancelled", "prepared", "rank"]


class Cancelled(Exception):
    """The caller no longer wants the ranking."""


@lru_cache(maxsize=4)
def prepared(shelf: Shelf) -> Prepared:
    """What every requirement needs of `shelf`, worked out once a shelf."""
    return prepare(shelf)


@lru_cache(maxsize=4)
def _worth_judging(ready: Prepared, mask: bytes) -> Prepared:
    """The parts of a mask, kept from one ranking to the next: of a polarity they are always the same."""
    return ready.take(np.flatnonzero(np.frombuffer(mask, dtype=np.bool_)))


def rank(
    requirement: Requirement,
    shelf: Shelf,
    *,
    weights: Mapping[str, float] | None = None,
    network: Mapping[str, float] | None = None,
    cancelled: Callable[[], bool] = lambda: False,
) -> Ranking:
    """The ranking of `shelf`; with `network` (the duty's names, SI) judge that network instead of choosing one.

    Raises Cancelled between two blocks of parts once `cancelled` says so.
    """
    duty = duties()[requirement.duty]
    ready = prepared(shelf)
    mask = duty.eligible(requirement, ready)
    worth, ready = np.flatnonzero(mask), _worth_judging(ready, mask.tobytes())

    pieces = max(round(len(worth) / BLOCK), 1)
    edges = np.linspace(0, len(worth), pieces + 1).astype(int).tolist()

    def judge(start: int, end: int) -> _Block:
        if cancelled():
            raise Cancelled
        judged = duty.judge(requirement, ready.take(slice(start, end)), network)
        return _block(judged)

    if pieces == 1:
        blocks = [judge(0, len(worth))]
    else:  # numpy lets go of the interpreter's lock while it computes
        with ThreadPoolExecutor(max_workers=os.cpu_count()) as pool:
            blocks = list(pool.map(judge, edges, edges[1:]))
    return _ranking(requirement, shelf, blocks, worth, weights or {})


@dataclass(frozen=True, eq=False)
class _Block:
    """Some parts judged, without their terms."""

    columns: tuple[CheckColumn, ...]
    decided: tuple[NDArray[np.int8], NDArray[np.int8], NDArray[np.int16], Floats]
    network: Mapping[str, Floats]
    bounds: Mapping[str, Floats]
    size: Floats


def _block(judged: Judged) -> _Block:
    """What was judged, with what was judged again in its place."""
    columns = tuple(one.column() for one in judged.outcomes)
    for places, better in judged.again:
        for column, other in zip(columns, (one.column() for one in better.outcomes), strict=True):
            for name in ("value", "limit", "headroom", "status", "evidence"):
                getattr(column, name)[places] = getattr(other, name)
        for mine, theirs in ((judged.network, better.network), (judged.bounds, better.bounds)):
            for name, values in theirs.items():
                mine[name][places] = values
    return _Block(columns, decide(columns), judged.network, judged.bounds, judged.size)


def _ranking(
    req: Requirement, shelf: Shelf, blocks: list[_Block], worth: NDArray[np.intp], weights: Mapping[str, float]
) -> Ranking:
    spread = _Spread(len(shelf), worth)
    columns = tuple(_whole([block.columns[i] for block in blocks], spread) for i in range(len(blocks[0].columns)))
    network = {name: spread([b.network[name] for b in blocks], np.nan) for name in blocks[0].network}
    bounds = {name: spread([b.bounds[name] for b in blocks], np.nan) for name in blocks[0].bounds}
    verdict = spread([b.decided[0] for b in blocks], np.int8(Verdict.FAILS))
    evidence = spread([b.decided[1] for b in blocks], np.int8(Evidence.MISSING))
    structure = next((i for i, one in enumerate(columns) if one.name == "structure"), 0)
    worst = spread([b.decided[2] for b in blocks], np.int16(structure))
    headroom = spread([b.decided[3] for b in blocks], 0.0)
    size = spread([b.size for b in blocks], np.nan)
    wanted = criteria(columns, headroom, evidence, size, shelf, req.number("choice.quantity"))
    score = overall(wanted, {**DEFAULT_WEIGHTS, **weights})
    score = np.where(verdict <= Verdict.FITS_ON_TYPICALS, score, 0.0)
    closeness = np.where(np.isnan(headroom), -1.0, headroom)
    order = np.lexsort((shelf.alphabetical, -np.minimum(closeness, 1e6), -score, verdict))
    return Ranking(
        req, req.word("choice.derating") or "none", shelf, columns, network, bounds, verdict, evidence, worst, headroom,
        score, wanted, order,
    )  # fmt: skip


class _Spread:
    """Puts the columns of the parts that were judged back among all parts."""

    def __init__(self, n: int, rows: NDArray[np.intp]) -> None:
        self.n, self.rows = n, rows

    def __call__(self, pieces: list[Any], elsewhere: Any) -> Any:
        joined = pieces[0] if len(pieces) == 1 else np.concatenate(pieces)
        if len(joined) == self.n:
            return joined
        whole = np.full(self.n, elsewhere, dtype=joined.dtype)
        whole[self.rows] = joined
        return whole


def _whole(pieces: list[CheckColumn], spread: _Spread) -> CheckColumn:
    """A check over all parts; those of the wrong kind fail the question of structure and are asked no other."""
    first = pieces[0]
    wrong_kind = first.name == "structure"
    elsewhere = {
        "value": 0.0 if wrong_kind else np.nan,
        "limit": 1.0 if wrong_kind else np.nan,
        "headroom": 0.0 if wrong_kind else np.nan,
        "status": np.int8(Status.FAIL if wrong_kind else Status.UNKNOWN),
        "evidence": np.int8(Evidence.GUARANTEED if wrong_kind else Evidence.MISSING),
    }
    arrays = [spread([getattr(one, name) for one in pieces], value) for name, value in elsewhere.items()]
    return CheckColumn(first.name, first.question, first.unit, *arrays)


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
