"""A ranking as a table: for a terminal, as CSV and as Markdown."""

from collections.abc import Callable, Sequence

import numpy as np

from engine import show
from engine.duty import duties
from engine.ranking import Ranking, Verdict

from .text import markdown_row, markdown_text, neutral

Cell = Callable[[Ranking, int], float | str]

BEFORE: tuple[tuple[str, str, Cell], ...] = (
    ("part", "", lambda r, i: str(r.shelf.names[i])),
    ("verdict", "", lambda r, i: Verdict(int(r.verdict[i])).words),
    ("deciding check", "", lambda r, i: r.checks[int(r.worst[i])].name),
    ("headroom", "", lambda r, i: float(r.headroom[i])),
)
AFTER: tuple[tuple[str, str, Cell], ...] = (
    ("package", "", lambda r, i: str(r.shelf.package[i])),
    ("free", "", lambda r, i: float(r.shelf.stock[i] - r.shelf.reserved[i])),
    ("score", "", lambda r, i: float(r.score[i])),
)


def columns(ranking: Ranking) -> tuple[tuple[str, str, Cell], ...]:
    """Heading, unit and value of each column; those in the middle are the figures of the duty."""
    figures = duties()[ranking.requirement.duty].figures
    return BEFORE + tuple((one.heading, one.unit, _figure(one.key)) for one in figures) + AFTER


def _figure(key: str) -> Cell:
    return lambda r, i: float((r.network if key in r.network else r.bounds)[key][i])


def places(ranking: Ranking) -> dict[int, int]:
    """Row of the shelf → place in the ranking, from 1."""
    return {int(row): i + 1 for i, row in enumerate(ranking.order)}


def text_table(ranking: Ranking, rows: Sequence[int]) -> str:
    """Aligned columns for a terminal."""
    place = places(ranking)
    lines = [["#", *(heading for heading, _, _ in columns(ranking))]]
    lines += [[str(place[row]), *(_shown(ranking, row, column) for column in columns(ranking))] for row in rows]
    widths = [max(len(line[i]) for line in lines) for i in range(len(lines[0]))]
    padded = ("  ".join(cell.ljust(width) for cell, width in zip(line, widths, strict=True)).rstrip() for line in lines)
    return "\n".join(padded) + "\n"


def markdown_table(ranking: Ranking, rows: Sequence[int]) -> str:
    """The same as a Markdown table under its title."""
    place = places(ranking)
    lines = [
        f"# {markdown_text(ranking.requirement.title or 'Ranking')}",
        "",
        markdown_row(["#", *(h for h, _, _ in columns(ranking))]),
    ]
    lines.append(markdown_row(["---"] * (len(columns(ranking)) + 1)))
    lines += [
        markdown_row([str(place[row]), *(_shown(ranking, row, column) for column in columns(ranking))]) for row in rows
    ]
    return "\n".join(lines) + "\n"


def csv_table(ranking: Ranking, rows: Sequence[int]) -> str:
    """SI numbers for a spreadsheet; text that it would run as a formula is neutralised."""
    import pandas as pd

    place = places(ranking)
    data: dict[str, list[object]] = {"rank": [place[row] for row in rows]}
    for heading, unit, value in columns(ranking):
        data[f"{heading} [{unit}]" if unit else heading] = [_plain(value(ranking, row)) for row in rows]
    return pd.DataFrame(data).to_csv(index=False, lineterminator="\n")


def _shown(ranking: Ranking, row: int, column: tuple[str, str, Cell]) -> str:
    heading, unit, value = column
    cell = value(ranking, row)
    if isinstance(cell, str):
        return cell
    if np.isnan(cell):
        return "–"
    if heading == "headroom":
        return show.headroom(cell)
    if heading == "free":
        return f"{cell:.0f}"
    return show.quantity(cell, unit, 3)


def _plain(cell: float | str) -> float | str | None:
    if isinstance(cell, str):
        return neutral(cell)
    return None if not np.isfinite(cell) else cell
