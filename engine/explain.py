"""The full explanation of one part, written from the arrays that judged it."""

from collections.abc import Mapping

from .ranking import Explanation
from .requirement import Requirement
from .shelf import Shelf


def explain(
    requirement: Requirement,
    shelf: Shelf,
    row: int,
    *,
    network: Mapping[str, float] | None = None,
) -> Explanation:
    """Judge the part at `row` again and tell every figure."""
    raise NotImplementedError
