"""A ranking as the JSON object that scripts rely on; a figure that cannot be stated is null."""

from collections.abc import Sequence
from typing import Any

from engine.duty import duties
from engine.ranking import Explanation, Ranking

from .program import program


def ranking_object(ranking: Ranking, rows: Sequence[tuple[int, Explanation]]) -> dict[str, Any]:
    """The ranking with the parts in `rows` (row of the shelf, its explanation), best first."""
    place = {int(row): i + 1 for i, row in enumerate(ranking.order)}
    return {
        "program": program(),
        "requirement": requirement_object(ranking),
        "policy": ranking.policy,
        "shelf": {"parts": len(ranking.shelf), "fingerprint": ranking.shelf.fingerprint},
        "results": [_result(ranking, row, place[row], explanation) for row, explanation in rows],
    }


def requirement_object(ranking: Ranking) -> dict[str, Any]:
    """The requirement, complete and in SI, by dotted key."""
    req = ranking.requirement
    values = {key: list(value) if isinstance(value, tuple) else value for key, value in sorted(req.values.items())}
    return {"title": req.title, "duty": req.duty, **values, "notes": list(req.notes)}


def _result(ranking: Ranking, row: int, place: int, told: Explanation) -> dict[str, Any]:
    return {
        "part": told.part,
        "structure": told.structure,
        "package": told.package,
        "verdict": told.verdict,
        "evidence": told.evidence,
        "rank": place,
        "score": round(float(ranking.score[row]), 6),
        "stock": int(ranking.shelf.stock[row]),
        "reserved": int(ranking.shelf.reserved[row]),
        **explanation_object(told),
        "near_misses": near_misses_object(told),
    }


def near_misses_object(told: Explanation) -> list[dict[str, Any]]:
    """What alone would make the part fit, the easiest first."""
    return [
        {
            "change": one.change,
            "from": one.was,
            "to": one.to,
            "unit": one.unit,
            "says": one.says,
            **dict(one.conditions),
        }
        for one in told.near_misses
    ]


def explanation_object(told: Explanation) -> dict[str, Any]:
    """Network, bounds and checks of one part."""
    return {
        "network": duties()[told.duty].network_object(told.network),
        "bounds": dict(told.bounds),
        "checks": [
            {
                "name": one.name,
                "status": one.status,
                "evidence": one.evidence,
                "value": one.value,
                "limit": one.limit,
                "unit": one.unit,
                "headroom": one.headroom,
                "missing": list(one.missing),
                "says": one.says,
            }
            for one in told.checks
        ],
    }
