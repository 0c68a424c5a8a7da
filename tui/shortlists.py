"""Freezing parts of a ranking as a shortlist, for the command line and the interface alike."""

import json
from collections.abc import Sequence
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from db.store import Store
    from engine.ranking import Ranking
    from reports.shortlist import Shortlisted


def frozen(ranking: "Ranking", rows: Sequence[int], date: str) -> "Shortlisted":
    """The rows of a ranking with their explanations, best first."""
    from engine.explain import explain
    from reports.shortlist import Shortlisted

    place = {int(row): i for i, row in enumerate(ranking.order)}
    told = ((row, explain(ranking.requirement, ranking.shelf, row)) for row in sorted(rows, key=lambda one: place[one]))
    return Shortlisted(ranking, tuple(told), date)


def keep(store: "Store", ranking: "Ranking", rows: Sequence[int], toml: str) -> int:
    """Save the rows as a shortlist with their requirement; gives back its number."""
    from db.shortlists import Entry
    from reports.program import program
    from reports.ranking_json import explanation_object

    requirement = store.save_requirement(ranking.requirement.title, toml)
    entries = [
        Entry(i + 1, told.part, told.verdict, json.dumps(explanation_object(told), ensure_ascii=False, allow_nan=False))
        for i, (_, told) in enumerate(frozen(ranking, rows, "").rows)
    ]
    return store.save_shortlist(requirement, ranking.policy, program(), ranking.shelf.fingerprint, entries)
