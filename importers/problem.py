"""What is wrong in a file: where, what stands there, why, and how to mend it."""

from dataclasses import dataclass


class ReadError(Exception):
    """A file that cannot be read at all; one line that says why and what to do."""


@dataclass(frozen=True, slots=True)
class RowProblem:
    """One thing that is wrong in one row, or odd enough to be looked at."""

    row: int  # as a person counts lines; the heading is usually 1
    column: str
    value: str  # as it stands in the file
    kind: str  # stable word for scripts: "not-a-number", "unknown-symbol", …
    says: str  # what is wrong and how to mend it, one sentence
    rejects: bool = True  # False: the row landed all the same


class CellError(Exception):
    """A cell that cannot be read; becomes a RowProblem of its row."""

    def __init__(self, column: str, value: str, kind: str, says: str) -> None:
        super().__init__(says)
        self.column, self.value, self.kind, self.says = column, value, kind, says

    def at(self, row: int, rejects: bool = True) -> RowProblem:
        """The problem it is in `row`."""
        return RowProblem(row, self.column, self.value, self.kind, self.says, rejects)
