"""A calculation sheet as lines for a terminal: headings underlined, every step with its result at the right."""

from collections.abc import Iterable
from typing import TYPE_CHECKING

from .widgets.cells import clean, fit, wrap

if TYPE_CHECKING:
    from reports.sheet import Block, Grid

_STEP = ("quantity", "relation", "with numbers", "result", "evidence")


def sheet_lines(blocks: "Iterable[Block]", width: int) -> list[str]:
    """The blocks of a sheet in lines of at most `width` cells."""
    from reports.sheet import Bullets, Heading, Paragraph

    lines: list[str] = []
    for block in blocks:
        if isinstance(block, Heading):
            text = fit(block.text, width).rstrip()
            lines += ["", text, ("═" if block.depth == 1 else "─" if block.depth == 2 else "·") * len(text)]
        elif isinstance(block, Paragraph):
            lines += ["", *wrap(block.text, width)]
        elif isinstance(block, Bullets):
            lines.append("")
            for item in block.items:
                lines += _hanging("• ", item, width)
        else:
            lines += ["", *(_steps(block, width) if block.head == _STEP else _grid(block, width))]
    return lines[1:]


def _hanging(sign: str, text: str, width: int) -> list[str]:
    first, *rest = wrap(text, width - len(sign))
    return [sign + first, *(" " * len(sign) + line for line in rest)]


def _steps(grid: "Grid", width: int) -> list[str]:
    """Quantity and result on one line; under it the relation and the numbers."""
    lines = []
    for quantity, relation, numbers, result, evidence in grid.rows:
        tail = f"{clean(result)}  {evidence:<10}"
        head, *rest = wrap(quantity, max(width - len(tail) - 2, 20))
        lines.append(f"{fit(head, max(width - len(tail) - 1, len(head)))} {tail}")
        lines += ["  " + line for line in rest]
        if relation:
            lines += _hanging("    ", relation, width)
        if numbers:
            lines += _hanging("  = ", numbers, width)
    return lines


def _grid(grid: "Grid", width: int) -> list[str]:
    """Columns under each other; the last one is broken to what is left."""
    sizes = [max(len(clean(row[i])) for row in (grid.head, *grid.rows)) for i in range(len(grid.head))]
    if sum(sizes) + 2 * len(sizes) > width:
        sizes = [min(size, max(width // len(sizes), 12)) for size in sizes]
    sizes = sizes[:-1]
    left = max(width - sum(sizes) - 2 * len(sizes), 12)
    lines = []
    shown = grid.rows if len(grid.head) == 2 else (grid.head, *grid.rows)  # two columns speak for themselves
    for row in shown:
        first, *rest = wrap(row[-1], left)
        lines.append("  ".join([*(fit(cell, size) for cell, size in zip(row, sizes, strict=False)), first]))
        lines += [" " * (width - left) + line for line in rest]
    return lines
