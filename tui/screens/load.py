"""Loading and saving requirements: examples, saved ones, files."""

import asyncio
import re
from collections.abc import Callable
from dataclasses import replace
from pathlib import Path
from typing import TYPE_CHECKING

from ..files import why, write_whole
from ..requirement_texts import RequirementTextError, examples, read, read_file
from ..source import SourceError
from ..state import Draft
from .ask import Ask, Doubt, doubt_file
from .picker import Choice, Picker

if TYPE_CHECKING:
    from ..app import BetafloorApp

_FILE, _EMPTY, _EXAMPLE, _SAVED = "file", "empty", "example:", "saved:"


def use(desk: "BetafloorApp", draft: Draft, weights: dict[str, float]) -> None:
    """Put a draft into the form; the last ranking stays, stale, until this one is judged."""
    from engine.duty import duties
    from engine.rank import DEFAULT_WEIGHTS

    if draft.duty not in duties():
        known = ", ".join(sorted(duties()))
        says = f"duty {draft.duty!r} is not known; known are: {known}"
        desk.tell(says, title="Not loaded", wrong=True)
        return
    known_keys = {field.key for field in duties()[draft.duty].fields}
    strangers = sorted(
        (draft.texts.keys() - known_keys) | {f"weights.{name}" for name in weights.keys() - DEFAULT_WEIGHTS}
    )
    if strangers:
        desk.tell(f"Left out, not known to this duty: {', '.join(strangers)}", wrong=True)
    texts = {key: text for key, text in draft.texts.items() if key in known_keys}
    desk.session = replace(
        desk.session,
        draft=Draft(draft.duty, draft.title, texts),
        weights={name: weight for name, weight in weights.items() if name in DEFAULT_WEIGHTS},
        stale=desk.session.ranking is not None,
    )


def load_file(desk: "BetafloorApp", path: Path) -> None:
    """Load a requirement file; say in one line why it cannot be read."""
    try:
        use(desk, *read_file(path))
    except RequirementTextError as error:
        desk.tell(str(error), title="Not loaded", wrong=True)


async def pick_requirement(desk: "BetafloorApp") -> None:
    """Let the user choose an example, a saved requirement or a file."""
    shipped = examples()
    try:
        saved = dict(await asyncio.to_thread(desk.source.requirements))
    except SourceError as trouble:
        saved = {}
        desk.tell(str(trouble), title="Saved requirements cannot be read", wrong=True)
    choices = [
        *(Choice(f"{_EXAMPLE}{title}", title, "example, invented") for title in shipped),
        *(Choice(f"{_SAVED}{title}", title, "saved in the shelf") for title in saved),
        Choice(_FILE, "A file …", "a requirement file, .toml"),
        Choice(_EMPTY, "An empty form"),
    ]

    async def take(answer: str | None) -> None:
        if answer is None:
            return
        if answer == _EMPTY:
            use(desk, Draft(desk.session.draft.duty), {})
        elif answer == _FILE:
            await _ask_file(desk)
        elif answer.startswith(_EXAMPLE):
            use(desk, *read(shipped[answer.removeprefix(_EXAMPLE)]))
        else:
            _use_saved(desk, saved[answer.removeprefix(_SAVED)])

    await desk.push_screen(Picker("Load a requirement", choices), take)


def _use_saved(desk: "BetafloorApp", toml: str) -> None:
    try:
        use(desk, *read(toml))
    except RequirementTextError as error:
        desk.tell(str(error), title="Not loaded", wrong=True)


async def _ask_file(desk: "BetafloorApp") -> None:
    def take(answer: str | None) -> None:
        if answer is not None:
            load_file(desk, Path(answer).expanduser())

    def doubt(text: str) -> Doubt | None:
        return None if Path(text).expanduser().is_file() else Doubt(f"There is no file {text}.", final=True)

    await desk.push_screen(Ask("Name of the requirement file", doubt=doubt), take)


async def save_requirement(desk: "BetafloorApp") -> None:
    """Save the requirement in the shelf, or as a TOML file whose name the user gives."""
    from importers.requirement_file import to_toml

    requirement = desk.session.requirement
    if requirement is None or desk.session.problems or desk.session.stale:
        desk.tell("Mend the form first; only a sound requirement is saved.", title="Not saved", wrong=True)
        return
    toml = to_toml(requirement, desk.session.weights)
    title = requirement.title or "without a title"

    async def take(answer: str | None) -> None:
        if answer == _SAVED:
            try:
                desk.tell(await asyncio.to_thread(desk.source.keep_requirement, title, toml))
            except SourceError as trouble:
                desk.tell(str(trouble), title="Not saved", wrong=True)
        elif answer == _FILE:
            name = f"{file_stem(title)}.toml"
            await ask_and_write(desk, "Save the requirement as", name, (".toml",), lambda path: toml.encode())

    choices = [
        Choice(_SAVED, "In the shelf", "comes back under F6"),
        Choice(_FILE, "As a file …", "TOML, for betafloor rank"),
    ]
    await desk.push_screen(Picker(f"Save the requirement: {title}", choices), take)


async def ask_and_write(
    desk: "BetafloorApp",
    question: str,
    name: str,
    endings: tuple[str, ...],
    content: Callable[[Path], bytes],
) -> None:
    """Ask for a file name, confirm where a file exists, write it whole, and say so."""

    async def take(answer: str | None) -> None:
        if answer is None:
            return
        path = Path(answer).expanduser()
        try:
            await asyncio.to_thread(lambda: write_whole(path, content(path)))
        except OSError as error:
            desk.tell(why(error), title="Not written", wrong=True)
            return
        desk.tell(f"Written: {path}")

    await desk.push_screen(Ask(f"{question} ({', '.join(endings)})", name, doubt_file(endings)), take)


def file_stem(title: str) -> str:
    """A plain file name for a title."""
    return re.sub(r"[^a-z0-9]+", "-", title.casefold()).strip("-") or "requirement"
