"""Delimited text files as located rows of text; no cell is interpreted here."""

import csv
import hashlib
import io
from dataclasses import dataclass
from pathlib import Path

from .problem import ReadError

MOST_BYTES = 200_000_000
MOST_COLUMNS = 2_000
_DELIMITERS = ",;\t|"


@dataclass(frozen=True, slots=True)
class Table:
    """A file's heading and its records, each with the line on which it starts."""

    file: str
    sha256: str
    header: tuple[str, ...]
    header_row: int
    rows: tuple[tuple[int, tuple[str, ...]], ...]


def read_table(path: Path) -> Table:
    """Read a delimited file whole. Raises ReadError with one line."""
    try:
        if path.is_dir():
            raise ReadError(f"{path} is a directory; name the file in it")
        if path.stat().st_size > MOST_BYTES:
            raise ReadError(f"{path} is larger than {MOST_BYTES // 1_000_000} MB; split it")
        data = path.read_bytes()
    except FileNotFoundError:
        raise ReadError(f"{path} does not exist; check its name") from None
    except OSError as error:
        raise ReadError(f"{path} cannot be read: {error.strerror}") from error
    return parse_table(data, str(path))


def parse_table(data: bytes, name: str) -> Table:
    """The table in `data`; `name` is what messages call it. Raises ReadError."""
    text = _decoded(data, name)
    records = _records(text, name)
    if not records:
        raise ReadError(f"{name} holds no table; a heading row with a column for the part is wanted")
    (header_row, header), *rows = records
    if len(header) > MOST_COLUMNS:
        raise ReadError(f"{name} has {len(header)} columns, more than {MOST_COLUMNS}; is it a table of parts?")
    return Table(name, hashlib.sha256(data).hexdigest(), header, header_row, tuple(rows))


def _decoded(data: bytes, name: str) -> str:
    """Text by byte-order mark, then strict UTF-8, then UTF-16 where NULs show it, else Windows Latin-1."""
    if data.startswith((b"\xff\xfe", b"\xfe\xff")):
        return data.decode("utf-16", errors="replace")
    try:
        text = data.decode("utf-8-sig")
    except UnicodeDecodeError:
        text = data.decode("cp1252", errors="replace")
    if "\0" in text:
        if data[1::2].count(0) > len(data) // 4:
            return data.decode("utf-16-le", errors="replace")
        raise ReadError(f"{name} holds NUL bytes and is no text; save the table as CSV")
    return text


def _records(text: str, name: str) -> list[tuple[int, tuple[str, ...]]]:
    """Records with their starting lines; blank lines and lines that begin with # are passed over."""
    reader = csv.reader(io.StringIO(text, newline=""), delimiter=_delimiter(text), strict=False)
    records = []
    line = 1
    csv.field_size_limit(10_000_000)
    try:
        for record in reader:
            cells = tuple(cell.strip() for cell in record)
            if any(cells) and not cells[0].startswith("#"):
                records.append((line, cells))
            line = reader.line_num + 1
    except csv.Error as error:
        raise ReadError(f"{name}, line {line}: {error}; mend the quotes there") from error
    return records


def _delimiter(text: str) -> str:
    """The mark that splits the first lines into the most equal number of fields, at least two."""
    lines = [line for line in text.splitlines()[:50] if line.strip() and not line.startswith("#")]
    best, most = ",", 0.0
    for mark in _DELIMITERS:
        counts = [len(row) for row in csv.reader(lines, delimiter=mark)] if lines else []
        if not counts or counts[0] < 2:
            continue
        score = sum(count == counts[0] for count in counts) / len(counts) + counts[0] / 1000
        if score > most:
            best, most = mark, score
    return best
