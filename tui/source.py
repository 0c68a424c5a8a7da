"""Where parts and requirements are kept, as the interface needs it.

Every call opens the store, asks and closes it again: calls come from worker threads, and a connection
belongs to one thread. The store is imported at the first call, after the first paint.
"""

from collections.abc import Mapping, Sequence
from typing import TYPE_CHECKING, Protocol

if TYPE_CHECKING:
    from engine.part import Part
    from engine.ranking import Ranking
    from engine.shelf import Shelf


class SourceError(Exception):
    """One line that says what is the matter with the shelf and how to mend it."""


class Source(Protocol):
    """A shelf file, or what stands for one in a test. Every method raises SourceError."""

    @property
    def name(self) -> str: ...

    def shelf(self) -> "Shelf": ...

    def part(self, type_number: str) -> "Part": ...

    def requirements(self) -> Mapping[str, str]:
        """Saved requirements: title → TOML text."""
        ...

    def keep_requirement(self, title: str, toml: str) -> str:
        """Save a requirement; gives back what was done, in words."""
        ...

    def keep_shortlist(self, ranking: "Ranking", rows: Sequence[int], weights: Mapping[str, float]) -> str:
        """Save rows of a ranking, best first, as a shortlist; gives back what was done, in words."""
        ...
