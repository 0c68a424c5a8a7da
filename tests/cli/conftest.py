"""A demo shelf with its requirements, and the registered types, made once a session."""

from pathlib import Path

import pytest

from .support import ROOT, betafloor


@pytest.fixture(scope="session")
def demo(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """A folder with demo.shelf and the six requirement files. Not to be written."""
    folder = tmp_path_factory.mktemp("demo")
    assert betafloor("demo", "--write", folder).returncode == 0
    return folder


@pytest.fixture(scope="session")
def registered(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """A shelf of the registered types."""
    shelf = tmp_path_factory.mktemp("registered") / "r.shelf"
    data = ROOT / "tests" / "data"
    done = betafloor("import", data / "registered-types.csv", data / "registered-structures.csv", shelf=shelf)
    assert done.returncode == 0, done.stderr
    return shelf
