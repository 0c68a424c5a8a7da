"""Read a file into arrivals and problems; the form is recognised by its headings."""

from collections.abc import Callable
from dataclasses import dataclass
from pathlib import Path

from engine.part import Arrival

from .formats import long_form, wide_form
from .headings import condition_columns, plain_columns, wide_column
from .problem import ReadError, RowProblem
from .tables import Table, parse_table, read_table


@dataclass(frozen=True, slots=True)
class Reading:
    """What a file says. rows = arrivals + rejected rows."""

    file: str
    sha256: str
    form: str  # "long", "wide" or "structures"
    rows: int
    arrivals: tuple[Arrival, ...]
    problems: tuple[RowProblem, ...]

    @property
    def rejected(self) -> int:
        """Rows that do not land."""
        return self.rows - len(self.arrivals)


class Cancelled(Exception):
    """The caller no longer wants the file."""


def read_file(
    path: Path,
    *,
    polarity: str = "",
    progress: Callable[[int, int], None] = lambda done, total: None,
    cancelled: Callable[[], bool] = lambda: False,
) -> Reading:
    """Read a table of parts. `polarity` ("npn", "pnp") is for parts of which the file states none.

    Raises ReadError when the file cannot be read at all, Cancelled once `cancelled` says so.
    """
    return _read(read_table(path), polarity, progress, cancelled)


def read_bytes(data: bytes, name: str, *, polarity: str = "") -> Reading:
    """The same for a table that is already in memory."""
    return _read(parse_table(data, name), polarity, lambda done, total: None, lambda: False)


def _read(table: Table, polarity: str, progress: Callable[[int, int], None], cancelled: Callable[[], bool]) -> Reading:
    form, found = _recognised(table, polarity)
    landed: list[Arrival] = []
    problems = list(_unknown_columns(table, form))
    total = len(table.rows)
    for one in found:
        if isinstance(one, Arrival):
            landed.append(one)
            if len(landed) % 5000 == 0:
                progress(len(landed), total)
                if cancelled():
                    raise Cancelled
        else:
            problems.append(one)
    progress(total, total)
    return Reading(table.file, table.sha256, form, total, tuple(landed), tuple(problems))


def _recognised(table: Table, polarity: str):  # type: ignore[no-untyped-def]
    if long_form.recognise(table.header):
        return "long", long_form.arrivals(table, polarity)
    if wide_form.recognise(table.header):
        only_structure = plain_columns(table.header).keys() <= {"part", "polarity", "package", "source"}
        limits = any(wide_column(h) for h in table.header if h.casefold() not in ("package", "source"))
        return "structures" if only_structure and not limits else "wide", wide_form.arrivals(table, polarity)
    seen = ", ".join(" ".join(heading.split())[:40] or "(empty)" for heading in table.header[:12])
    raise ReadError(
        f"{table.file}: the headings are {seen}; wanted is part with symbol, min, typ and max (a limit a row), "
        "or part with columns such as VCEO and HFE_MIN (a part a row)"
    )


def _unknown_columns(table: Table, form: str) -> list[RowProblem]:
    """Each heading that means nothing here, reported once."""
    if form == "long":
        known = set(plain_columns(table.header).values()) | {
            place for place, _ in condition_columns(table.header).values()
        }
        names = [heading for place, heading in enumerate(table.header) if heading and place not in known]
    else:
        names = wide_form.unknown_columns(table.header)
    says = "not a column that is known here; it was passed over"
    return [RowProblem(table.header_row, name, name, "unknown-column", says, False) for name in names]
