"""What can be written to a file: the calculation sheet of a part, the shortlist. Text in, bytes out."""

import json
from collections.abc import Sequence
from dataclasses import dataclass, replace
from datetime import date
from pathlib import Path
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from engine.part import Part
    from engine.ranking import Ranking
    from reports.sheet import Sheet as Report

SHEET_ENDINGS = (".md", ".html", ".json")
SHORTLIST_ENDINGS = (".csv", ".json", ".md")


@dataclass(frozen=True, eq=False)
class Sheet:
    """The calculation sheet of one part."""

    part: str
    report: "Report"

    def lines(self, width: int) -> list[str]:
        """The sheet for a terminal, in lines of at most `width` cells."""
        from reports.sheet import blocks

        from .sheet_lines import sheet_lines

        return sheet_lines(blocks(self.report), width)

    def content(self, path: Path) -> bytes:
        """The sheet in the form that the file's ending asks for."""
        from reports.sheet import sheet_object
        from reports.sheet_html import sheet_html
        from reports.sheet_markdown import sheet_markdown

        if path.suffix == ".html":
            return sheet_html(self.report).encode()
        if path.suffix == ".json":
            return (json.dumps(sheet_object(self.report), ensure_ascii=False, indent=1) + "\n").encode()
        return sheet_markdown(self.report).encode()


def make_sheet(ranking: "Ranking", row: int, part: "Part") -> Sheet:
    """Write the sheet of the part at `row`, dated today."""
    from engine.explain import explain
    from engine.near_miss import near_misses
    from reports.sheet import Sheet as Report

    told = explain(ranking.requirement, ranking.shelf, row)
    told = replace(told, near_misses=near_misses(ranking.requirement, part))
    report = Report(ranking.requirement, told, ranking.shelf.fingerprint, date.today().isoformat(), part.limits)
    return Sheet(told.part, report)


def shortlist_content(ranking: "Ranking", rows: Sequence[int], ending: str) -> bytes:
    """Rows of a ranking, best first, in the form that the file's ending asks for; dated today."""
    from engine.explain import explain
    from reports.shortlist import Shortlisted, shortlist_csv, shortlist_json, shortlist_markdown

    told = tuple((row, explain(ranking.requirement, ranking.shelf, row)) for row in rows)
    shortlist = Shortlisted(ranking, told, date.today().isoformat())
    write = {".csv": shortlist_csv, ".json": shortlist_json, ".md": shortlist_markdown}[ending]
    return write(shortlist).encode()
