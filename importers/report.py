"""What became of files, as text for a person and as an object for a script."""

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

from .read import Reading


@dataclass(frozen=True, slots=True)
class Landed:
    """A reading with what the store made of it."""

    reading: Reading
    accepted: int
    unchanged: int
    set_aside: int
    refused: tuple[tuple[int, str], ...] = ()  # rows that contradict the shelf: row, says
    notices: tuple[tuple[int, str], ...] = ()  # rows that landed, with something to know

    @property
    def rejected(self) -> int:
        return self.reading.rejected + len(self.refused)


def json_report(landed: Sequence[Landed], parts: int) -> dict[str, Any]:
    """The object of `import --json`; rows = accepted + unchanged + set_aside + rejected in every file."""
    return {"files": [_file(one) for one in landed], "parts": parts}


def _file(one: Landed) -> dict[str, Any]:
    problems = [
        {"row": p.row, "column": p.column, "value": p.value, "kind": p.kind, "says": p.says}
        for p in one.reading.problems
    ]
    problems += [
        {"row": row, "column": "", "value": "", "kind": kind, "says": says}
        for kind, rows in (("contradiction", one.refused), ("ledger", one.notices))
        for row, says in rows
    ]
    return {
        "file": one.reading.file,
        "form": one.reading.form,
        "rows": one.reading.rows,
        "accepted": one.accepted,
        "unchanged": one.unchanged,
        "set_aside": one.set_aside,
        "rejected": one.rejected,
        "problems": problems,
    }


def text_report(landed: Sequence[Landed], parts: int, *, dry_run: bool = False) -> str:
    """A line a file, a line a problem, and the number of parts on the shelf."""
    lines = []
    for one in landed:
        lines.append(
            f"{one.reading.file}: {one.reading.rows} rows ({one.reading.form} form): {one.accepted} accepted, "
            f"{one.unchanged} unchanged, {one.set_aside} set aside, {one.rejected} rejected"
        )
        lines += [
            f"  row {p.row}, {p.column}{f' {p.value!r}' if p.value else ''}: {p.says} [{p.kind}]"
            for p in one.reading.problems
        ]
        lines += [f"  row {row}: {says} [contradiction]" for row, says in one.refused]
        lines += [f"  row {row}: {says} [ledger]" for row, says in one.notices]
    end = "nothing was written (dry run); the shelf would hold" if dry_run else "the shelf holds"
    lines.append(f"{end} {parts} part{'s' if parts != 1 else ''}")
    return "\n".join(lines) + "\n"
