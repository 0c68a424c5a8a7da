"""Commands about the shelf itself: import, part, shortlist, stock, backup, check."""

import json
from collections.abc import Callable
from pathlib import Path
from typing import Any

import click

from .cli_judge import FILE, OUTPUT, REQUIREMENT, one_format
from .cli_support import BAD_INPUT, SHELF_TROUBLE, fail, give, open_store, read_requirement_file, rows_of, today

MOVEMENTS = ("receive", "issue", "count", "scrap", "reserve", "release")


@click.command("import")
@click.argument("paths", nargs=-1, required=True, type=FILE, metavar="FILE…")
@click.option("--dry-run", is_flag=True, help="Say what would happen and write nothing.")
@click.option("--json", "json_", is_flag=True, help="The report as one JSON object.")
@click.option("--polarity", type=click.Choice(["npn", "pnp"]), help="For parts of which the file states none.")
@click.pass_context
def import_(context: click.Context, paths: tuple[Path, ...], dry_run: bool, json_: bool, polarity: str | None) -> None:
    """Read tables of limits, parts or stock into the shelf, one transaction a file."""
    from importers.problem import ReadError
    from importers.read import read_file
    from importers.report import Landed, json_report, text_report

    landed, parts = [], 0
    with open_store(context, create=True) as store:
        for path in paths:
            try:
                reading = read_file(path, polarity=polarity or "", progress=_progress(path))
            except ReadError as error:
                fail(str(error), BAD_INPUT)
            result = store.land(reading.arrivals, file=path.name, sha256=reading.sha256, dry_run=dry_run)
            landed.append(
                Landed(reading, result.accepted, result.unchanged, result.set_aside, result.refused, result.notices)
            )
            parts = result.parts
    if json_:
        click.echo(json.dumps(json_report(landed, parts), ensure_ascii=False, indent=1))
    else:
        click.echo(text_report(landed, parts, dry_run=dry_run), nl=False)
    if all(one.rejected == one.reading.rows and one.reading.rows for one in landed):
        context.exit(BAD_INPUT)


def _progress(path: Path) -> Callable[[int, int], None]:
    """A line on the terminal that is written over, for files that take a while."""
    import sys

    def show(done: int, total: int) -> None:
        if total > 20_000 and sys.stderr.isatty():
            click.echo(f"\r{path.name}: {done:,} of {total:,} rows", nl=done == total, err=True)

    return show


@click.group()
def part() -> None:
    """List, show and set parts."""


@part.command("list")
@click.option("--json", "json_", is_flag=True, help="A JSON list.")
@click.pass_context
def part_list(context: click.Context, json_: bool) -> None:
    """A line a part."""
    with open_store(context) as store:
        found = store.parts()
    if json_:
        rows = [{name: getattr(one, name) for name in one.__slots__} for one in found]
        click.echo(json.dumps(rows, ensure_ascii=False, indent=1))
        return
    for one in found:
        click.echo(
            f"{one.type_number:16}{one.structure or 'not stated':16}{one.package or '–':10}{one.limits:4} limits"
        )


@part.command("show")
@click.argument("type_number", metavar="TYPE")
@click.option("--json", "json_", is_flag=True, help="One JSON object.")
@click.pass_context
def part_show(context: click.Context, type_number: str, json_: bool) -> None:
    """Every limit of one part with conditions and source."""
    with open_store(context) as store:
        stored = store.part(type_number)
    from engine.symbols import SYMBOLS

    one = stored.part
    limits = []
    for limit in one.limits:
        symbol = SYMBOLS.get(limit.symbol)
        fact: dict[str, Any] = {
            "symbol": limit.symbol, "kind": symbol.kind if symbol else "set aside", "min": limit.min, "typ": limit.typ,
            "max": limit.max, "unit": symbol.unit if symbol else "", **dict(limit.conditions), "pulsed": limit.pulsed,
            "source": limit.source, "note": limit.note or None, "flag": limit.flag or None,
        }  # fmt: skip
        if "tj" not in fact:
            fact["tj"] = fact.get("ta", fact.get("tc"))
        limits.append(fact)
    if json_:
        head = {"part": one.type_number, "structure": one.structure, "package": one.package, "maker": one.maker}
        click.echo(json.dumps({**head, "limits": limits, "stock": stored.stock}, ensure_ascii=False, indent=1))
        return
    click.echo(
        f"{one.type_number}  {one.structure or 'structure not stated'}  {one.package}  {one.maker}  stock {stored.stock}"
    )
    for limit in one.limits:
        click.echo(_limit_line(limit))


def _limit_line(limit: Any) -> str:
    from engine import show
    from engine.part import CONDITION_UNITS
    from engine.symbols import SYMBOLS

    unit = SYMBOLS[limit.symbol].unit if limit.symbol in SYMBOLS else ""
    bounds = ", ".join(
        f"{name} {show.quantity(getattr(limit, name), unit)}"
        for name in ("min", "typ", "max")
        if getattr(limit, name) is not None
    )
    stated = ", ".join(
        f"{name.upper()} {show.quantity(value, CONDITION_UNITS[name])}" for name, value in limit.conditions
    )
    tail = "; ".join(piece for piece in (stated, "pulsed" if limit.pulsed else "", limit.note) if piece)
    flag = f"  [look: {limit.flag}]" if limit.flag else ""
    return f"  {limit.symbol:12}{bounds}{f' at {tail}' if tail else ''}{flag}  ({limit.source})"


@part.command("set")
@click.argument("type_number", metavar="TYPE")
@click.argument("field")
@click.argument("value")
@click.pass_context
def part_set(context: click.Context, type_number: str, field: str, value: str) -> None:
    """Set structure, package, maker, pin_order or note of a part."""
    from db.errors import NotFound, NotWritable, StoreError

    with open_store(context) as store:
        try:
            store.set_part(type_number, field, value)
        except (NotFound, NotWritable):
            raise
        except StoreError as error:
            fail(str(error), BAD_INPUT)
    click.echo(f"{type_number}: {field} is {value}")


@click.group()
def shortlist() -> None:
    """Freeze parts of a ranking, list and export them."""


@shortlist.command("save")
@REQUIREMENT
@click.option("--part", "parts", multiple=True, required=True, metavar="TYPE", help="A part (may be repeated).")
@click.pass_context
def shortlist_save(context: click.Context, requirement: Path, parts: tuple[str, ...]) -> None:
    """Judge parts under a requirement and keep them as a shortlist."""
    stated = read_requirement_file(requirement)
    with open_store(context) as store:
        from engine.rank import rank

        from .shortlists import keep

        shelf = store.shelf()
        ranking = rank(stated.requirement, shelf, weights=stated.weights)
        number = keep(store, ranking, rows_of(shelf, parts), stated.text)
    click.echo(f"shortlist {number}: {len(parts)} parts")


@shortlist.command("list")
@click.option("--json", "json_", is_flag=True, help="A JSON list.")
@click.pass_context
def shortlist_list(context: click.Context, json_: bool) -> None:
    """A line a shortlist."""
    with open_store(context) as store:
        found = store.shortlists()
    if json_:
        rows = [{"id": s.id, "title": s.title, "at": s.at, "policy": s.policy, "fingerprint": s.fingerprint,
                 "parts": [e.part for e in s.entries]} for s in found]  # fmt: skip
        click.echo(json.dumps(rows, ensure_ascii=False, indent=1))
        return
    for one in found:
        click.echo(f"{one.id:4}  {one.at}  {one.title}: {', '.join(entry.part for entry in one.entries)}")


@shortlist.command("export")
@REQUIREMENT
@click.option("--part", "parts", multiple=True, required=True, metavar="TYPE", help="A part (may be repeated).")
@click.option("--json", "json_", is_flag=True)
@click.option("--csv", is_flag=True)
@click.option("--markdown", is_flag=True, help="Markdown (the default).")
@OUTPUT
@click.pass_context
def shortlist_export(context: click.Context, requirement: Path, parts: tuple[str, ...], json_: bool, csv: bool,
                     markdown: bool, output: Path | None) -> None:  # fmt: skip
    """Judge parts under a requirement and write them as a document."""
    form = one_format(output, "markdown", json_=json_, csv=csv, markdown=markdown)
    stated = read_requirement_file(requirement)
    with open_store(context) as store:
        shelf = store.shelf()
    from engine.rank import rank
    from reports.shortlist import shortlist_csv, shortlist_json, shortlist_markdown

    from .shortlists import frozen

    ranking = rank(stated.requirement, shelf, weights=stated.weights)
    one = frozen(ranking, rows_of(shelf, parts), today())
    write = {"json": shortlist_json, "csv": shortlist_csv}.get(form, shortlist_markdown)
    give(write(one), output)


@click.group()
def stock() -> None:
    """The stock ledger: receive, issue, count, scrap, reserve, release, list."""


@stock.command("list")
@click.option("--json", "json_", is_flag=True, help="A JSON list.")
@click.pass_context
def stock_list(context: click.Context, json_: bool) -> None:
    """What is on hand, reserved and free."""
    with open_store(context) as store:
        found = store.stock()
    if json_:
        rows = [
            {"part": line.part, "on_hand": line.on_hand, "reserved": line.reserved, "free": line.free,
             "lots": [{name: getattr(lot, name) for name in lot.__slots__} for lot in line.lots]}
            for line in found
        ]  # fmt: skip
        click.echo(json.dumps(rows, ensure_ascii=False, indent=1))
        return
    for line in found:
        click.echo(f"{line.part:16}on hand {line.on_hand:6}  reserved {line.reserved:5}  free {line.free:6}")


def _movement(kind: str) -> click.Command:
    @click.argument("type_number", metavar="TYPE")
    @click.option("--quantity", type=int, required=True, help="Pieces (for a count: those found).")
    @click.option("--location", default="", help="Where the lot lies.")
    @click.option("--job", default="", help="What they are for.")
    @click.option("--note", default="", help="A remark.")
    @click.pass_context
    def command(context: click.Context, type_number: str, quantity: int, location: str, job: str, note: str) -> None:
        from db.errors import NotFound, NotWritable, StoreError

        with open_store(context) as store:
            try:
                line = store.move(kind, type_number, quantity, location=location, job=job, note=note)
            except (NotFound, NotWritable):
                raise
            except StoreError as error:
                fail(str(error), BAD_INPUT)
        click.echo(f"{line.part}: on hand {line.on_hand}, reserved {line.reserved}, free {line.free}")

    return click.command(kind, help=f"Enter a movement in the ledger: {kind}.")(command)


for _kind in MOVEMENTS:
    stock.add_command(_movement(_kind))


@click.command()
@click.argument("target", type=FILE)
@click.pass_context
def backup(context: click.Context, target: Path) -> None:
    """Write a verified copy of the shelf while others go on working."""
    with open_store(context) as store:
        store.backup(target)
    click.echo(f"backup: {target}")


@click.command()
@click.pass_context
def check(context: click.Context) -> None:
    """Look for damage in the shelf file."""
    with open_store(context) as store:
        problems = store.check()
    for one in problems:
        click.echo(one)
    if problems:
        context.exit(SHELF_TROUBLE)
    click.echo("the shelf is sound")
