"""Text that is data, made safe for the formats it goes into."""

from collections.abc import Sequence

_FORMULA = ("=", "+", "-", "@", "\t", "\r")


def neutral(text: str) -> str:
    """A cell that a spreadsheet shows instead of running."""
    safe = f"'{text}" if text.startswith(_FORMULA) else text
    return safe.replace("\r\n", "\n").replace("\r", "\n")  # a bare CR ends a row for some readers, quoted or not


def markdown_cell(text: str) -> str:
    """A cell of a Markdown table."""
    return markdown_text(text.replace("\\", "\\\\").replace("|", "\\|"))


def markdown_text(text: str) -> str:
    """Text outside a table: one line, no tags."""
    return " ".join(text.splitlines()).replace("<", "&lt;")


def markdown_row(cells: Sequence[str]) -> str:
    """A row of a Markdown table."""
    return "| " + " | ".join(markdown_cell(cell) for cell in cells) + " |"
