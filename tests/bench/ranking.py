"""Ranking: against one read of the same arrays, against ten times the parts, against plain Python."""

from engine.rank import prepared, rank
from engine.shelf import Shelf
from tests.reference.judge import judge
from tests.strategies import random_parts

from .measure import once, say, seconds
from .shelves import COIL, requirement, shelf

MANY, MORE, FEW = 100_000, 1_000_000, 300


def run() -> None:
    """Print the ratios."""
    wanted, many = requirement(COIL), shelf(MANY)
    first = once(lambda: prepared(many))
    ours = seconds(lambda: rank(wanted, many))
    say(f"rank {MANY:,} parts, network chosen", ours, "one read of the shelf's arrays", seconds(lambda: _read(many)))
    say(f"prepare {MANY:,} parts, once a shelf", first, f"rank {MANY:,} parts", ours)
    more = shelf(MORE)
    prepared(more)
    say(f"rank {MORE:,} parts", seconds(lambda: rank(wanted, more), 3), f"rank {MANY:,} parts", ours)
    parts = random_parts(3, FEW, structures=("npn",))
    some = Shelf.from_parts(parts * (MANY // FEW))
    prepared(some)
    plain = once(lambda: [judge(wanted, part) for part in parts]) * (len(some) / FEW)
    say(
        f"plain Python over {len(some):,} parts, from {FEW}",
        plain,
        "rank the same",
        seconds(lambda: rank(wanted, some)),
    )


def _read(shelf: Shelf) -> float:
    """Every number of the shelf, once."""
    columns = [*shelf.ratings.values(), *(column for group in shelf.points.values() for column in group.values())]
    return float(sum(column.sum() for column in columns))
