"""What widgets and workers tell the screens and the app; none of them acts on another widget by itself."""

from typing import TYPE_CHECKING

from textual.message import Message

if TYPE_CHECKING:
    from engine.ranking import Ranking
    from engine.requirement import Problem, Requirement
    from engine.shelf import Shelf

    from .state import Draft


class ShelfOpened(Message):
    """The shelf has been read."""

    def __init__(self, shelf: "Shelf") -> None:
        super().__init__()
        self.shelf = shelf


class ShelfTrouble(Message):
    """The shelf cannot be read; one line says why and what to do."""

    def __init__(self, says: str) -> None:
        super().__init__()
        self.says = says


class DraftEdited(Message):
    """Something was written in the form."""

    def __init__(self, draft: "Draft") -> None:
        super().__init__()
        self.draft = draft


class Refused(Message):
    """The draft cannot be judged."""

    def __init__(self, problems: "tuple[Problem, ...]") -> None:
        super().__init__()
        self.problems = problems


class Ranked(Message):
    """The draft was judged: every part of the shelf is ranked."""

    def __init__(self, requirement: "Requirement", ranking: "Ranking") -> None:
        super().__init__()
        self.requirement = requirement
        self.ranking = ranking


class Progress(Message):
    """How far a long piece of work is; `share` is None when it has come to an end."""

    def __init__(self, words: str, share: float | None) -> None:
        super().__init__()
        self.words = words
        self.share = share
