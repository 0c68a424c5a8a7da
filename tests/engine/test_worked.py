"""Published worked examples against the engine's laws: one TOML an example, with its source."""

import importlib
import tomllib
from pathlib import Path

import numpy as np
import pytest

from engine.formula import Formula

EXAMPLES = sorted((Path(__file__).parent / "worked").glob("*.toml"))


@pytest.mark.parametrize("path", EXAMPLES, ids=lambda path: path.stem)
def test_the_law_agrees_with_the_book(path: Path) -> None:
    example = tomllib.loads(path.read_text(encoding="utf-8"))
    module, _, name = example["law"].rpartition(".")
    law = getattr(importlib.import_module(module), name)
    function = law.raw if isinstance(law, Formula) else law
    inputs = {key: _number(value) for key, value in example["inputs"].items()}
    found = np.ravel(np.array(function(**inputs), dtype=float))
    expected = np.ravel(np.array(example["expected"], dtype=float))
    assert example["source"]
    assert found == pytest.approx(expected, rel=example["tolerance"])


def _number(value: object) -> object:
    if isinstance(value, list):
        return np.array(value, dtype=float)
    return float("inf") if value == "inf" else value


def test_there_are_enough_of_them() -> None:
    assert len(EXAMPLES) >= 40
