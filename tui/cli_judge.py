"""Commands that judge: rank, sheet, judge."""

import json
from collections.abc import Mapping
from dataclasses import replace
from pathlib import Path
from typing import TYPE_CHECKING

import click

from .cli_support import BAD_INPUT, NOTHING_FITS, fail, give, open_store, read_requirement_file, rows_of, today

if TYPE_CHECKING:
    from engine.ranking import NearMiss, Ranking

FILE = click.Path(path_type=Path)
OUTPUT = click.option("--output", "-o", type=FILE, help="Write into this file, whole or not at all.")
REQUIREMENT = click.argument("requirement", type=FILE, metavar="REQUIREMENT.toml")
TOP = 20
NEAREST = 5  # parts that do not fit for which it is worked out what would make them


_ENDINGS = {".json": "json", ".csv": "csv", ".md": "markdown", ".html": "html"}


def one_format(output: Path | None, otherwise: str, **flags: bool) -> str:
    """The one format that was asked for, else what the file's name ends in, else `otherwise`."""
    asked = [name.removesuffix("_") for name, yes in flags.items() if yes]
    if len(asked) > 1:
        raise click.UsageError(f"--{asked[0]} and --{asked[1]} exclude each other")
    by_name = _ENDINGS.get(output.suffix.casefold(), "") if output else ""
    if not asked and by_name and by_name not in (name.removesuffix("_") for name in flags):
        raise click.UsageError(f"{output}: no {by_name} of this can be written; choose another ending or a format")
    return asked[0] if asked else by_name or otherwise


@click.command()
@REQUIREMENT
@click.option("--part", "parts", multiple=True, metavar="TYPE", help="Judge only these parts (may be repeated).")
@click.option("--top", type=click.IntRange(1), default=TOP, show_default=True, help="At most this many parts.")
@click.option("--all", "everything", is_flag=True, help="Every part, whatever its verdict.")
@click.option("--json", "json_", is_flag=True, help="One JSON object.")
@click.option("--csv", is_flag=True, help="CSV in SI units.")
@click.option("--markdown", is_flag=True, help="A Markdown table.")
@OUTPUT
@click.pass_context
def rank(context: click.Context, requirement: Path, parts: tuple[str, ...], top: int, everything: bool, json_: bool,
         csv: bool, markdown: bool, output: Path | None) -> None:  # fmt: skip
    """Rank the parts on the shelf under a requirement."""
    form = one_format(output, "text", json_=json_, csv=csv, markdown=markdown)
    stated = read_requirement_file(requirement)
    with open_store(context) as store:
        shelf = store.shelf()
    from engine.rank import rank as rank_shelf
    from engine.ranking import Verdict

    if parts:
        import numpy as np

        shelf = shelf.take(np.array(rows_of(shelf, parts), dtype=np.intp))
    ranking = rank_shelf(stated.requirement, shelf, weights=stated.weights)
    order = [int(row) for row in ranking.order]
    if not everything and not parts:
        best = [row for row in order if ranking.verdict[row] <= Verdict.FITS_ON_TYPICALS]
        order = (order if form == "json" else best)[:top]
    near = {}
    if form == "json" or (form == "text" and not order):
        near = _near(context, ranking, order or [int(row) for row in ranking.order[:NEAREST]])
    give(_ranked(ranking, order, form, near), output)
    if form == "text":
        click.echo(_tally(ranking), err=True)
    if ranking.count(Verdict.FITS) == 0:
        context.exit(NOTHING_FITS)


def _near(context: click.Context, ranking: "Ranking", rows: list[int]) -> dict[int, tuple["NearMiss", ...]]:
    """What alone would make the nearest of `rows` fit that do not; by row."""
    from engine.near_miss import near_misses
    from engine.ranking import Verdict

    open_ = [row for row in rows if ranking.verdict[row] != Verdict.FITS][:NEAREST]
    with open_store(context) as store:
        parts = [store.part(str(ranking.shelf.names[row])).part for row in open_]
    return {row: near_misses(ranking.requirement, part) for row, part in zip(open_, parts, strict=True)}


def _ranked(ranking: "Ranking", rows: list[int], form: str, near: Mapping[int, tuple["NearMiss", ...]]) -> str:
    from reports import ranking_table
    from reports.ranking_json import ranking_object

    if form == "json":
        from engine.explain import explain_rows

        each = explain_rows(ranking.requirement, ranking.shelf, rows)
        told = [(row, replace(one, near_misses=near.get(row, ()))) for row, one in zip(rows, each, strict=True)]
        return json.dumps(ranking_object(ranking, told), ensure_ascii=False, indent=1, allow_nan=False) + "\n"
    if form == "csv":
        return ranking_table.csv_table(ranking, rows)
    if form == "markdown":
        return ranking_table.markdown_table(ranking, rows)
    if rows:
        return ranking_table.text_table(ranking, rows)
    nearest = [int(row) for row in ranking.order[:NEAREST]]
    if not nearest:
        return "the shelf is empty\n"
    lines = ["nothing fits; the nearest are", ranking_table.text_table(ranking, nearest)]
    changes = [f"{ranking.shelf.names[row]} would fit: {one.says}" for row in nearest for one in near.get(row, ())]
    lines += changes or ["no single change would make one of them fit"]
    return "\n".join(lines).rstrip() + "\n"


def _tally(ranking: "Ranking") -> str:
    from engine.ranking import Verdict

    counts = ", ".join(f"{ranking.count(verdict)} {verdict.words}" for verdict in Verdict)
    notes = "".join(f"\nnote: {note}" for note in ranking.requirement.notes)
    n = len(ranking.shelf)
    return f"{n} part{'s' if n != 1 else ''}: {counts}{notes}"


@click.command()
@click.argument("type_number", metavar="TYPE")
@REQUIREMENT
@click.option("--markdown", is_flag=True, help="Markdown (the default).")
@click.option("--json", "json_", is_flag=True, help="One JSON object.")
@click.option("--html", is_flag=True, help="One self-contained HTML file.")
@OUTPUT
@click.pass_context
def sheet(context: click.Context, type_number: str, requirement: Path, markdown: bool, json_: bool, html: bool,
          output: Path | None) -> None:  # fmt: skip
    """The calculation sheet of one part: every formula with its numbers, evidence and source."""
    form = one_format(output, "markdown", markdown=markdown, json_=json_, html=html)
    stated = read_requirement_file(requirement)
    with open_store(context) as store:
        shelf = store.shelf()
        part = store.part(type_number).part
    from engine.explain import explain
    from engine.near_miss import near_misses
    from reports.sheet import Sheet, sheet_object
    from reports.sheet_html import sheet_html
    from reports.sheet_markdown import sheet_markdown

    (row,) = rows_of(shelf, (type_number,))
    told = explain(stated.requirement, shelf, row)
    told = replace(told, near_misses=near_misses(stated.requirement, part))
    one = Sheet(stated.requirement, told, shelf.fingerprint, today(), part.limits)
    if form == "json":
        give(json.dumps(sheet_object(one), ensure_ascii=False, indent=1, allow_nan=False) + "\n", output)
    else:
        give(sheet_html(one) if form == "html" else sheet_markdown(one), output)


@click.command()
@REQUIREMENT
@click.option("--part", "type_number", required=True, metavar="TYPE", help="The part.")
@click.option("--network", required=True, metavar="rb=2200,rbe=10000", help="The base network, in Ω or as 2k2.")
@click.option("--json", "json_", is_flag=True, help="The object of `rank --json` for this part and network.")
@OUTPUT
@click.pass_context
def judge(context: click.Context, requirement: Path, type_number: str, network: str, json_: bool,
          output: Path | None) -> None:  # fmt: skip
    """Judge a given base network instead of choosing one."""
    stated = read_requirement_file(requirement)
    given = read_network(network, stated.requirement.duty)
    with open_store(context) as store:
        shelf = store.shelf()
    import numpy as np

    from engine.explain import explain
    from engine.rank import rank as rank_shelf
    from engine.ranking import Verdict
    from reports.ranking_json import ranking_object

    shelf = shelf.take(np.array(rows_of(shelf, (type_number,)), dtype=np.intp))
    ranking = rank_shelf(stated.requirement, shelf, weights=stated.weights, network=given)
    told = explain(stated.requirement, shelf, 0, network=given)
    if json_:
        text = json.dumps(ranking_object(ranking, [(0, told)]), ensure_ascii=False, indent=1, allow_nan=False) + "\n"
    else:
        lines = [
            f"{told.part}: {told.verdict}",
            told.network_says,
            *(f"{c.status:8}{c.name}: {c.says}" for c in told.checks),
        ]
        text = "\n".join(lines) + "\n"
    give(text, output)
    if ranking.verdict[0] != Verdict.FITS:
        context.exit(NOTHING_FITS)


def read_network(text: str, duty: str) -> Mapping[str, float]:
    """The values that the duty lets a user give, in SI, from text such as `rb=2200,rbe=10k`."""
    from engine.duty import duties
    from importers.quantities import QuantityError, read_quantity

    known = {one.key: one for one in duties()[duty].given}
    all_of_them = ",".join(f"{name}=2k2" for name in known)
    found: dict[str, float] = {}
    for piece in text.split(","):
        name, _, value = piece.partition("=")
        name = name.strip()
        if name not in known:
            fail(f"--network: {piece.strip()!r} is not known; write {all_of_them}", BAD_INPUT)
        try:
            found[name] = read_quantity(value, known[name].unit)
        except QuantityError as error:
            fail(f"--network: {name} is {value!r}: {error.says}; {error.mend}", BAD_INPUT)
        if found[name] <= 0:
            fail(f"--network: {name} is {value!r}; it is above zero", BAD_INPUT)
    for name, one in known.items():
        if one.needed and name not in found:
            fail(f"--network: {name} is missing; write {name}=2200", BAD_INPUT)
    return found
