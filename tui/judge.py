"""From the texts of a form to a ranking, away from the screen: runs in worker threads."""

from collections.abc import Callable
from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Mapping

    from engine.ranking import Ranking
    from engine.requirement import Problem, Requirement
    from engine.shelf import Shelf

    from .state import Draft


@dataclass(frozen=True, eq=False)
class Outcome:
    """What became of a draft: its problems, or its requirement with the ranking."""

    problems: "tuple[Problem, ...]" = ()
    requirement: "Requirement | None" = None
    ranking: "Ranking | None" = None


def judge(
    draft: "Draft",
    shelf: "Shelf",
    weights: "Mapping[str, float]",
    stopped: Callable[[], bool],
    progress: Callable[[float], None] = lambda share: None,
) -> Outcome | None:
    """Read a draft and rank the shelf by it; None once `stopped` says that nobody waits for it any more."""
    from engine.rank import BLOCK, Cancelled, rank
    from engine.requirement import RequirementError
    from importers.requirement_file import parse_fields

    try:
        requirement = parse_fields(draft.duty, dict(draft.texts), title=draft.title)
    except RequirementError as error:
        return Outcome(problems=error.problems)
    blocks = max(-(-len(shelf) // BLOCK), 1)
    begun = 0

    def asked() -> bool:  # the engine asks once before each block
        nonlocal begun
        progress(begun / blocks)
        begun += 1
        return stopped()

    try:
        ranking = rank(requirement, shelf, weights=weights, cancelled=asked)
    except Cancelled:
        return None
    return None if stopped() else Outcome(requirement=requirement, ranking=ranking)


def warm() -> None:
    """Import what judging needs, so that the first requirement does not wait for it."""
    import importers.requirement_file  # noqa: F401
