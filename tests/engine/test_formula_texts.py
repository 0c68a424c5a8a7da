"""The words of a formula against its code, its source and its examples."""

import doctest
import importlib
import inspect
import pkgutil
import re
from pathlib import Path

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

import engine
import engine.physics
from engine.formula import FORMULAS, Formula
from engine.physics.sources import SOURCES

for _module in pkgutil.iter_modules(engine.physics.__path__):
    importlib.import_module(f"engine.physics.{_module.name}")

WITH_TEXT = sorted(name for name, law in FORMULAS.items() if law.text)
FUNCTIONS = {"max": max, "min": min, "sqrt": np.sqrt, "ln": np.log, "exp": np.exp}
CURRENTS = ("base_current", "drive_current", "load_current")  # cannot turn negative; the sheet leaves that unsaid
NEEDS_ABOVE_ONE = ("overdrive",)  # at 1 the charge of a turn-on is never reached


def arguments(law: Formula) -> list[str]:
    return list(inspect.signature(law.raw).parameters)


def test_there_are_laws() -> None:
    assert len(FORMULAS) >= 25
    assert len(WITH_TEXT) >= 20


@pytest.mark.parametrize("name", sorted(FORMULAS))
def test_a_law_says_what_it_does_and_where_it_is_published(name: str) -> None:
    law = FORMULAS[name]
    assert law.source in SOURCES
    assert bool(law.text) != bool(law.words), "either a relation or an algorithm in words"
    assert law.symbol and law.meaning


@pytest.mark.parametrize("name", WITH_TEXT)
def test_a_text_uses_the_names_of_the_arguments(name: str) -> None:
    law = FORMULAS[name]
    words = set(re.findall(r"[A-Za-z_]\w*", law.text)) - set(FUNCTIONS)
    assert words == set(arguments(law))


@pytest.mark.parametrize("name", WITH_TEXT)
@settings(max_examples=40)
@given(data=st.data())
def test_a_text_is_the_code(name: str, data: st.DataObject) -> None:
    law = FORMULAS[name]
    values = {}
    for word in arguments(law):
        low = 1.01 if word in NEEDS_ABOVE_ONE else 0.05
        values[word] = data.draw(st.floats(low, 20.0), label=word)
    told = eval(law.text, {"__builtins__": {}}, {**FUNCTIONS, **values})  # texts of this repository only
    if name.rsplit(".")[-1] in CURRENTS:
        told = max(told, 0.0)
    done = float(law.raw(**{word: np.array(value) for word, value in values.items()}))
    assert done == pytest.approx(told, rel=1e-9, abs=1e-12)


@pytest.mark.parametrize("name", sorted(FORMULAS))
def test_examples_of_a_law_hold(name: str) -> None:
    raw = FORMULAS[name].raw
    module = importlib.import_module(raw.__module__)
    tests = doctest.DocTestParser().get_doctest(raw.__doc__ or "", dict(vars(module)), name, None, None)
    assert tests.examples or not FORMULAS[name].text, "a law with a text shows an example"
    runner = doctest.DocTestRunner(verbose=False)
    runner.run(tests)
    assert runner.summarize(verbose=False).failed == 0


@pytest.mark.parametrize("module", ["constants", "area", "saturation", "load"])
def test_examples_of_plain_functions_hold(module: str) -> None:
    found = doctest.testmod(importlib.import_module(f"engine.physics.{module}"))
    assert found.attempted > 0
    assert found.failed == 0


def _code() -> str:
    """Everything the engine says, without the bibliography itself."""
    files = Path(engine.__file__).parent.rglob("*.py")
    return "\n".join(file.read_text(encoding="utf-8") for file in files if file.name != "sources.py")


@pytest.mark.parametrize("key", sorted(SOURCES))
def test_a_source_is_used(key: str) -> None:
    code = _code()
    assert f'"{key}"' in code or f"`{key}`" in code, "named by no law and no module"


def test_sources_name_their_work() -> None:
    assert len(set(SOURCES.values())) == len(SOURCES)
    for key, reference in SOURCES.items():
        assert len(reference) > 15, key
