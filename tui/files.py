"""Files written whole or not at all."""

import os
import tempfile
from pathlib import Path


def write_whole(path: Path, content: bytes) -> None:
    """Put `content` at `path` in one step: what stood there stays until every byte is on the disk.

    Raises OSError; nothing half-written is left behind.
    """
    descriptor, temporary = tempfile.mkstemp(dir=path.parent, prefix=f".{path.name}.")
    try:
        with os.fdopen(descriptor, "wb") as file:
            file.write(content)
            file.flush()
            os.fsync(file.fileno())
        os.chmod(temporary, path.stat().st_mode if path.exists() else 0o666 & ~_umask())
        os.replace(temporary, path)
    except BaseException:
        Path(temporary).unlink(missing_ok=True)
        raise


def _umask() -> int:
    mask = os.umask(0)
    os.umask(mask)
    return mask


def why(error: OSError) -> str:
    """One line that tells a person what went wrong with a file."""
    name = error.filename or "the file"
    return f"{name}: {error.strerror or error}"
