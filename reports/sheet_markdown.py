"""A calculation sheet as Markdown."""

from .sheet import Block, Bullets, Heading, Paragraph, Sheet, blocks
from .text import markdown_row, markdown_text


def sheet_markdown(sheet: Sheet) -> str:
    """The sheet as a Markdown document."""
    return "\n\n".join(_block(block) for block in blocks(sheet)) + "\n"


def _block(block: Block) -> str:
    if isinstance(block, Heading):
        return f"{'#' * block.depth} {markdown_text(block.text)}"
    if isinstance(block, Paragraph):
        return markdown_text(block.text)
    if isinstance(block, Bullets):
        return "\n".join(f"- {markdown_text(item)}" for item in block.items)
    lines = [
        markdown_row(block.head),
        markdown_row(["---"] * len(block.head)),
        *(markdown_row(row) for row in block.rows),
    ]
    return "\n".join(lines)
