"""Parts and arrivals for the store's tests."""

from collections.abc import Iterator

from engine.part import Arrival, Limit, Part


def arrivals(parts: int = 3, limits: int = 4, stock: int | None = None) -> list[Arrival]:
    """Rows of the long form: `limits` gains for each of `parts` invented parts, then a stock row a part where asked."""
    return list(_rows(parts, limits, stock))


def _rows(parts: int, limits: int, stock: int | None) -> Iterator[Arrival]:
    row = 2
    for number in range(parts):
        for step in range(limits):
            limit = Limit("hFE", min=40.0 + step, conditions=(("ic", 0.001 * (step + 1)), ("vce", 1.0)), source="sheet")
            yield Arrival(row, Part(f"ZQ-{number:05d}", "npn", "TO-92", limits=(limit,)))
            row += 1
        if stock is not None:
            yield Arrival(row, Part(f"ZQ-{number:05d}"), stock=stock)
            row += 1
