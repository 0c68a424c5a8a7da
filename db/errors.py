"""What can go wrong with a shelf file that its user can mend.

StoreError
├── NotAShelf      damaged, another program's, or not a database
├── NewerShelf     written by a newer version
├── Busy           another session is writing
├── NotWritable    read-only file or folder, full disk
└── NotFound       no such part, shortlist or requirement
"""

import sqlite3
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path


class StoreError(Exception):
    """One line that says what is the matter and what to do."""


class NotAShelf(StoreError):
    """The file is damaged, belongs to another program, or is no database."""


class NewerShelf(StoreError):
    """The file's schema is newer than this program."""


class Busy(StoreError):
    """Another session holds the file for writing."""


class NotWritable(StoreError):
    """The file cannot be written."""


class NotFound(StoreError):
    """What was asked for is not on the shelf."""


@contextmanager
def mended(path: Path) -> Iterator[None]:
    """Turn the faults that a user can mend into StoreErrors about `path`; bugs pass through."""
    try:
        yield
    except sqlite3.DatabaseError as error:
        raise _as_store_error(path, error) from error


def _as_store_error(path: Path, error: sqlite3.DatabaseError) -> Exception:
    says = str(error)
    if "locked" in says or "busy" in says:
        return Busy(f"{path} is in use by another session; try again when it has finished writing")
    if "readonly" in says or "read-only" in says:
        return NotWritable(f"{path} cannot be written; check the rights of the file and its folder")
    if "disk is full" in says or "disk I/O" in says:
        return NotWritable(f"{path}: {says}; nothing was changed; make room on the disk")
    if "unable to open" in says:
        return NotWritable(f"{path} cannot be opened; check that its folder exists and may be written")
    if "malformed" in says or "not a database" in says:
        return NotAShelf(f"{path} is damaged or no shelf ({says}); restore a backup; the file was left as it is")
    return error
