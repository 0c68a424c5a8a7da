"""Where parts and requirements are kept, as the interface needs it.

Every call opens the store, asks and closes it again: calls come from worker threads, and a connection
belongs to one thread. The store is imported at the first call, after the first paint.
"""

from collections.abc import Mapping
from pathlib import Path
from typing import TYPE_CHECKING, Protocol

if TYPE_CHECKING:
    from engine.part import Part
    from engine.shelf import Shelf


class SourceTrouble(Exception):
    """One line that says what is the matter with the shelf and how to mend it."""


class Source(Protocol):
    """A shelf file, or what stands for one in a test. Every method raises SourceTrouble."""

    @property
    def name(self) -> str: ...

    def shelf(self) -> "Shelf": ...

    def part(self, type_number: str) -> "Part": ...

    def requirements(self) -> Mapping[str, str]:
        """Saved requirements: title → TOML text."""
        ...
