"""Requirement files as the texts of a form, in the writer's own units; and the examples that come along."""

import tomllib
from collections.abc import Mapping
from importlib import resources
from pathlib import Path

from .state import Draft


class RequirementTextError(ValueError):
    """One line that says why a text is no requirement file."""


def read(toml: str) -> tuple[Draft, dict[str, float]]:
    """The draft and the weights of a requirement file. Raises RequirementTextError.

    Values are taken as they are written; whether they make sense is said under the fields.
    """
    try:
        content = tomllib.loads(toml)
    except tomllib.TOMLDecodeError as error:
        raise RequirementTextError(f"not a requirement file: {error}") from error
    weights = content.pop("weights", {})
    title, duty = content.pop("title", ""), content.pop("duty", "switch")
    texts = {key: _text(value) for key, value in _flat(content, "")}
    numbers = {str(k): float(v) for k, v in weights.items() if isinstance(v, int | float)} if weights else {}
    return Draft(str(duty), str(title), {key: text for key, text in texts.items() if text}), numbers


def read_file(path: Path) -> tuple[Draft, dict[str, float]]:
    """The draft and the weights in a file. Raises RequirementTextError with the file's name."""
    try:
        text = path.read_text(encoding="utf-8")
    except OSError as error:
        raise RequirementTextError(f"{path}: {error.strerror or error}") from error
    except UnicodeDecodeError as error:
        raise RequirementTextError(f"{path}: not a text in UTF-8") from error
    try:
        return read(text)
    except RequirementTextError as error:
        raise RequirementTextError(f"{path}: {error}") from error


def _flat(table: Mapping[str, object], before: str) -> list[tuple[str, object]]:
    found: list[tuple[str, object]] = []
    for key, value in table.items():
        if isinstance(value, dict):
            found.extend(_flat(value, f"{before}{key}."))
        else:
            found.append((f"{before}{key}", value))
    return found


def _text(value: object) -> str:
    if isinstance(value, list):
        return ", ".join(map(str, value))
    return f"{value:.12g}" if isinstance(value, float) else str(value)


def examples() -> dict[str, str]:
    """The requirements that come with the program: title → TOML text."""
    found = {}
    for file in sorted(resources.files("tui.demo").iterdir(), key=lambda one: one.name):
        if file.name.endswith(".toml"):
            text = file.read_text(encoding="utf-8")
            found[read(text)[0].title or file.name] = text
    return found
