"""Text that is data, made safe for the formats it goes into."""

from collections.abc import Sequence

_FORMULA = ("=", "+", "-", "@")


def neutral(text: str) -> str:
    """A cell on one line that a spreadsheet shows instead of running."""
    line = " ".join(text.split())
    return f"'{line}" if line.startswith(_FORMULA) else line


def markdown_cell(text: str) -> str:
    """A cell of a Markdown table."""
    return " ".join(text.split()).replace("\\", "\\\\").replace("|", "\\|").replace("<", "&lt;")


def markdown_row(cells: Sequence[str]) -> str:
    """A row of a Markdown table."""
    return "| " + " | ".join(markdown_cell(cell) for cell in cells) + " |"
