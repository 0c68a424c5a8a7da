"""Text that is data, made safe for the formats it goes into."""

from collections.abc import Sequence

_FORMULA = ("=", "+", "-", "@", "\t", "\r")


def neutral(text: str) -> str:
    """A cell that a spreadsheet shows instead of running."""
    return f"'{text}" if text.startswith(_FORMULA) else text


def markdown_cell(text: str) -> str:
    """A cell of a Markdown table."""
    return text.replace("\\", "\\\\").replace("|", "\\|").replace("\n", " ").replace("<", "&lt;")


def markdown_row(cells: Sequence[str]) -> str:
    """A row of a Markdown table."""
    return "| " + " | ".join(markdown_cell(cell) for cell in cells) + " |"
