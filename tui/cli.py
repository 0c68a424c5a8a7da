"""The command line: `betafloor`. Every command answers on standard output and complains on standard error.

Exit codes: 0 answered, 1 answered and nothing fits, 2 bad input (one line), 3 trouble with the shelf.
Textual, pandas, numpy and the rest are imported by the command that needs them.
"""

import os
import sys
from pathlib import Path

import click

from .cli_judge import judge, rank, sheet
from .cli_shelf import backup, check, import_, part, shortlist, stock
from .cli_support import BAD_INPUT, fail


@click.group(
    invoke_without_command=True, context_settings={"help_option_names": ["-h", "--help"], "max_content_width": 100}
)
@click.option("--shelf", type=click.Path(path_type=Path), envvar="BETAFLOOR_SHELF", help="The shelf file to work on.")
@click.version_option(package_name="betafloor", prog_name="betafloor")
@click.pass_context
def cli(context: click.Context, shelf: Path | None) -> None:
    """Which transistor on your shelf is certain to do the job, on the limits its data sheet guarantees.

    Without a command: the interface on your shelf (--shelf, BETAFLOOR_SHELF, else the user data folder).
    """
    context.obj = shelf
    if context.invoked_subcommand is None:
        from .cli_support import shelf_path

        context.exit(_interface(shelf_path(context), demo=False))


@cli.command()
@click.option("--write", type=click.Path(path_type=Path), metavar="FOLDER",
              help="Write the demo shelf and its requirement files into FOLDER instead of opening the interface.")  # fmt: skip
@click.pass_context
def demo(context: click.Context, write: Path | None) -> None:
    """The interface on an invented shelf, a fresh copy each time."""
    from .demo_shelf import REQUIREMENTS, example, write_demo

    if write is not None:
        try:
            write.mkdir(parents=True, exist_ok=True)
            shelf = write_demo(write)
            for name in REQUIREMENTS:
                (write / name).write_text(example(name), encoding="utf-8")
        except OSError as error:
            fail(f"{write}: {error.strerror or error}; name a folder that can be written", BAD_INPUT)
        click.echo(f"{shelf}: invented demo data; {len(REQUIREMENTS)} requirement files beside it")
        return
    import tempfile

    _need_terminal()
    with tempfile.TemporaryDirectory(prefix="betafloor-demo-") as folder:
        click.echo("The parts, their limits and the stock of this shelf are invented.", err=True)
        asked = Path(folder) / REQUIREMENTS[0]
        asked.write_text(example(asked.name), encoding="utf-8")
        context.exit(_interface(write_demo(Path(folder)), demo=True, requirement=asked))


for _command in (import_, rank, sheet, judge, part, shortlist, stock, backup, check):
    cli.add_command(_command)


def _need_terminal() -> None:
    """The interface draws on a terminal; anywhere else the commands answer."""
    if not sys.stdout.isatty() or not sys.stdin.isatty():
        fail("the interface needs a terminal; use a command such as `betafloor rank`, see --help", BAD_INPUT)


def _interface(path: Path, *, demo: bool, requirement: Path | None = None) -> int:
    """Show the interface on a shelf file, with a requirement loaded if one is given."""
    _need_terminal()
    from .app import run

    return run(path, demo=demo, requirement=requirement)


def main() -> None:
    """The entry point: no traceback for what a user can mend, a quiet end when nobody reads on."""
    try:
        cli(standalone_mode=True)
    except BrokenPipeError:
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
        sys.exit(0)


if __name__ == "__main__":
    main()
