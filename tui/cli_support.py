"""What the commands share: where the shelf is, one-line failures, and output to a file or the terminal."""

import sys
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path
from typing import TYPE_CHECKING, NoReturn

import click

if TYPE_CHECKING:
    from db.store import Store
    from engine.shelf import Shelf
    from importers.requirement_file import RequirementFile

NOTHING_FITS, BAD_INPUT, SHELF_TROUBLE = 1, 2, 3


def fail(says: str, code: int) -> NoReturn:
    """One clear line on standard error, and the exit code."""
    click.echo(f"betafloor: {says}", err=True)
    sys.exit(code)


def shelf_path(context: click.Context) -> Path:
    """The shelf that was named, else the one in the user data folder (whose folder is made)."""
    named = context.find_root().obj
    if isinstance(named, Path):
        return named
    import platformdirs

    folder = Path(platformdirs.user_data_dir("betafloor", appauthor=False))
    try:
        folder.mkdir(parents=True, exist_ok=True)
    except OSError as error:
        fail(f"{folder}: {error.strerror or error}; name a shelf with --shelf", SHELF_TROUBLE)
    return folder / "parts.shelf"


@contextmanager
def open_store(context: click.Context, *, create: bool = False) -> "Iterator[Store]":
    """The shelf, with its troubles as one line and exit code 3; what is not on it is bad input."""
    from db.errors import NotFound, StoreError
    from db.store import Store

    try:
        with Store.open(shelf_path(context), create=create) as store:
            yield store
    except NotFound as error:
        fail(str(error), BAD_INPUT)
    except StoreError as error:
        fail(str(error), SHELF_TROUBLE)


def read_requirement_file(path: Path) -> "RequirementFile":
    """A requirement file; its problems go out as one line each, exit code 2."""
    from engine.requirement import RequirementError
    from importers.requirement_file import read_requirement

    try:
        text = path.read_text(encoding="utf-8")
    except UnicodeDecodeError:
        fail(f"{path} is not UTF-8 text; a requirement is a TOML file", BAD_INPUT)
    except OSError as error:
        fail(f"{path}: {error.strerror or error}; name a requirement file", BAD_INPUT)
    try:
        return read_requirement(text, str(path))
    except RequirementError as error:
        fail(f"{path}: {'; '.join(str(problem).rstrip('.') for problem in error.problems)}", BAD_INPUT)


def rows_of(shelf: "Shelf", names: tuple[str, ...]) -> list[int]:
    """Rows of the parts that were named; an unknown one ends the command and names the nearest."""
    from difflib import get_close_matches

    rows = []
    for name in names:
        try:
            rows.append(shelf.index(name))
        except KeyError:
            near = get_close_matches(name.upper(), [str(one) for one in shelf.names], n=3, cutoff=0.5)
            hint = f"nearest are {', '.join(near)}" if near else "list them with: betafloor part list"
            fail(f"no part called {name!r} on the shelf; {hint}", BAD_INPUT)
    return rows


def give(text: str, output: Path | None) -> None:
    """To standard output, or whole into a file."""
    if output is None:
        click.echo(text, nl=False)
        return
    from .files import why, write_whole

    try:
        write_whole(output, text.encode())
    except OSError as error:
        fail(f"not written: {why(error)}", BAD_INPUT)
    click.echo(f"written: {output}", err=True)


def today() -> str:
    """The date for documents."""
    from datetime import date

    return date.today().isoformat()
