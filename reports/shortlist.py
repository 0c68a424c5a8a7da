"""A shortlist: marked parts frozen with requirement, policy, versions and date."""

import json
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

from engine import show
from engine.ranking import Explanation, Ranking

from .program import program
from .ranking_json import ranking_object, requirement_object
from .ranking_table import csv_table
from .text import markdown_row, markdown_text


@dataclass(frozen=True, eq=False)
class Shortlisted:
    """The parts of a shortlist with the ranking they come from; the date is the caller's."""

    ranking: Ranking
    rows: tuple[tuple[int, Explanation], ...]  # row of the shelf and its explanation, best first
    date: str


def shortlist_object(shortlist: Shortlisted) -> dict[str, Any]:
    """The shortlist as an object: the ranking's own, with its date."""
    return {"date": shortlist.date, **ranking_object(shortlist.ranking, shortlist.rows)}


def shortlist_json(shortlist: Shortlisted) -> str:
    """The shortlist as JSON."""
    return json.dumps(shortlist_object(shortlist), ensure_ascii=False, indent=1, allow_nan=False) + "\n"


def shortlist_csv(shortlist: Shortlisted) -> str:
    """The shortlist as CSV."""
    return csv_table(shortlist.ranking, [row for row, _ in shortlist.rows])


def shortlist_markdown(shortlist: Shortlisted) -> str:
    """The shortlist as Markdown: what was asked, what was found, what to mind."""
    ranking = shortlist.ranking
    lines = [f"# Shortlist: {markdown_text(ranking.requirement.title or ranking.requirement.duty)}", ""]
    lines.append(f"{program()}, {shortlist.date}, policy {ranking.policy}, shelf of {len(ranking.shelf)} parts "
                 f"({ranking.shelf.fingerprint}).")  # fmt: skip
    lines += ["", markdown_row(["part", "package", "verdict", "evidence", "network", "on hand", "reserved"])]
    lines.append(markdown_row(["---"] * 7))
    shelf = ranking.shelf
    for row, told in shortlist.rows:
        cells = [told.part, told.package, told.verdict, told.evidence, told.network_says, str(shelf.stock[row])]
        lines.append(markdown_row([*cells, str(shelf.reserved[row])]))
    for _, told in shortlist.rows:
        lines += [
            "",
            f"## {markdown_text(told.part)}",
            "",
            f"{markdown_text(told.says[0].upper() + told.says[1:])}.",
            "",
        ]
        lines.append(markdown_row(["check", "status", "value", "limit", "headroom"]))
        lines.append(markdown_row(["---"] * 5))
        for one in told.checks:
            room = "–" if one.headroom is None else show.headroom(one.headroom)
            cells = [one.name, one.status, show.quantity(one.value, one.unit), show.quantity(one.limit, one.unit), room]
            lines.append(markdown_row(cells))
    lines += ["", "## Requirement", ""]
    lines += [
        f"- {key}: {markdown_text(str(value))}"
        for key, value in requirement_object(ranking).items()
        if value not in ([], "")
    ]
    cautions: Sequence[str] = shortlist.rows[0][1].cautions if shortlist.rows else ()
    lines += ["", "## Cautions", "", *(f"- {markdown_text(one)}" for one in cautions)]
    return "\n".join(lines) + "\n"
