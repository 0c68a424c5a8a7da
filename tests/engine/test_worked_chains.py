"""Whole published examples, one law after another: one file of `worked/chains` an example.

A step names a law of `engine.physics` and its arguments; a word stands for the result of an earlier step. What is
expected is what the source prints, within its own rounding; where the program is deliberately harsher than the
source's rule of thumb the step says "at least" or "at most".
"""

import importlib
import tomllib
from pathlib import Path
from typing import Any

import numpy as np
import pytest

from engine.formula import Formula
from engine.part import Limit, Part
from engine.prepared import prepare
from engine.rank import rank
from engine.shelf import Shelf
from tests.strategies import requirement_of

FILES = sorted((Path(__file__).parent / "worked" / "chains").glob("*.toml"))


def example(file: Path) -> dict[str, Any]:
    return tomllib.loads(file.read_text(encoding="utf-8"))


EXAMPLES = [pytest.param(example(file), id=file.stem) for file in FILES]


def argument(value: Any, found: dict[str, Any]) -> Any:
    if value == "inf":
        return np.inf
    if isinstance(value, str):
        return found[value]
    return np.array(value, dtype=np.float64) if isinstance(value, list) else value


def result(step: dict[str, Any], found: dict[str, Any]) -> Any:
    module, name = step["law"].split(".")
    law = getattr(importlib.import_module(f"engine.physics.{module}"), name)
    call = law.raw if isinstance(law, Formula) else law
    value = call(**{key: argument(given, found) for key, given in step["with"].items()})
    value = value[step["pick"]] if "pick" in step else value
    if isinstance(value, bool | np.bool_):
        return bool(value)
    one = float(np.asarray(value, dtype=np.float64).squeeze())
    return 100 * (one / found[step["rise_over"]] - 1) if "rise_over" in step else one


def agrees(value: Any, wanted: dict[str, Any]) -> bool:
    expected = wanted["expected"]
    match wanted.get("bound"):
        case "at least":
            return bool(value >= expected)
        case "at most":
            return bool(value <= expected)
    if isinstance(expected, bool):
        return value is expected
    return bool(abs(value - expected) <= wanted["within"] * (1 + 1e-9))


@pytest.mark.parametrize("told", EXAMPLES)
def test_laws_give_what_the_source_prints(told: dict[str, Any]) -> None:
    found: dict[str, Any] = {}
    compared = 0
    for step in told["step"]:
        value = result(step, found)
        found[step.get("name", "")] = value
        if "expected" in step:
            compared += 1
            assert agrees(value, step), f"{step['law']}: {value} instead of {step['expected']} ({told['source']})"
    assert compared, "an example that compares nothing"


@pytest.mark.parametrize("told", [one for one in EXAMPLES if "prepared" in one.values[0]])
def test_sheets_are_read_as_the_source_reads_them(told: dict[str, Any]) -> None:
    limits = []
    for row in told["prepared"]["limits"]:
        conditions = {key: row[key] for key in row if key not in ("symbol", "max")}
        limits.append(Limit(row["symbol"], max=row["max"], conditions=tuple(conditions.items())))
    ready = prepare(Shelf.from_parts([Part("BOOK-1", "npn", limits=tuple(limits))]))
    for wanted in told["prepared"]["value"]:
        assert agrees(float(getattr(ready, wanted["column"])[0]), wanted), wanted


@pytest.mark.parametrize("told", [one for one in EXAMPLES if "ranked" in one.values[0]])
def test_the_program_reaches_the_published_network(told: dict[str, Any]) -> None:
    """The book's assumptions: one gain, one VBE, one temperature, one drive level, exact resistors."""
    job = told["ranked"]
    ic = job["current"]
    part = Part(
        "BOOK-1",
        "npn",
        limits=(
            Limit("hFE", min=job["gain"], conditions=(("ic", ic), ("vce", 0.1))),
            Limit("VBE(sat)", max=job["vbe"], conditions=(("ib", job["base_current"]), ("ic", ic))),
            Limit("VCEO", max=500.0),
            Limit("IC", max=20 * ic),
            Limit("TJ", max=150.0),
            Limit("RthJA", max=1e-3),
        ),
    )
    requirement = requirement_of({
        "supply.min": job["supply"], "supply.max": job["supply"], "load.kind": "constant current", "load.current": ic,
        "drive.high_min": job["drive"], "drive.high_max": job["drive"], "drive.low_max": 0.0,
        "drive.current_max": ic, "ambient.min": 25.0, "ambient.max": 25.0, "resistors.tolerance": 0.0,
        "choice.overdrive": job["overdrive"],
    })  # fmt: skip
    ranking = rank(requirement, Shelf.from_parts([part]))
    for wanted in job["value"]:
        assert agrees(float(ranking.network[wanted["column"]][0]), wanted), (ranking.network, wanted)
    assert ranking.network["rb"][0] <= ranking.network["rb_high"][0]


def test_every_example_names_where_it_is_printed() -> None:
    assert len(FILES) >= 25
    for file in FILES:
        told = example(file)
        assert told["title"] and len(told["source"]) > 20, file.name
        for step in told["step"]:
            assert "expected" not in step or "within" in step or "bound" in step or isinstance(step["expected"], bool)
