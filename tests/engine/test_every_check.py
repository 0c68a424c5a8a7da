"""Every check that is found in its folder: it asks, it is answered for every part, and silence is no answer."""

import importlib
import pkgutil
from dataclasses import replace

import numpy as np
import pytest

import engine.checks
from engine.check import Check, checks
from engine.duty import duties
from engine.evidence import Evidence
from engine.explain import explain
from engine.part import Limit, Part
from engine.rank import rank
from engine.ranking import Ranking, Status, Verdict
from engine.requirement import Value
from engine.shelf import Shelf
from tests.strategies import requirement_of


def at(**conditions: float) -> tuple[tuple[str, float], ...]:
    return tuple(sorted(conditions.items()))


LIMITS = (
    Limit("VCEO", max=60.0), Limit("VEBO", max=6.0), Limit("IC", max=1.0), Limit("ICM", max=2.0), Limit("IB", max=0.2),
    Limit("TJ", max=150.0), Limit("RthJA", max=150.0), Limit("PD", max=0.8, conditions=at(ta=25.0)),
    Limit("hFE", min=100.0, conditions=at(ic=0.01, vce=1.0)), Limit("hFE", min=100.0, conditions=at(ic=0.1, vce=1.0)),
    Limit("hFE", min=50.0, conditions=at(ic=0.5, vce=1.0)),
    Limit("VCE(sat)", max=0.2, conditions=at(ic=0.1, ib=0.01)), Limit("VCE(sat)", max=0.5, conditions=at(ic=0.5, ib=0.05)),
    Limit("VBE(sat)", max=0.85, conditions=at(ic=0.1, ib=0.01)), Limit("VBE(sat)", max=1.0, conditions=at(ic=0.5, ib=0.05)),
    Limit("ICBO", max=1e-8, conditions=at(vcb=50.0)),
    Limit("ton", max=5e-8, conditions=at(ic=0.1, ib=0.01, vcc=30.0)),
    Limit("toff", max=3e-7, conditions=at(ic=0.1, ib=0.01, ib2=0.01, vcc=30.0)),
)  # fmt: skip
GOOD = Part("QZ-1", "npn", "TO-92", limits=LIMITS)
ASKED: dict[str, Value] = {
    "supply.min": 11.0, "supply.max": 13.0, "load.kind": "lamp", "load.resistance": 600.0, "load.inrush": 10.0,
    "drive.high_min": 4.4, "drive.high_max": 5.25, "drive.low_max": 0.3, "drive.low_min": -0.5, "drive.current_max": 0.01,
    "ambient.min": 0.0, "ambient.max": 40.0, "limits.on_voltage_max": 0.4, "limits.off_current_max": 1e-5,
    "limits.turn_off_max": 1e-4, "limits.turn_on_max": 1e-4, "limits.load_current_min": 0.015,
    "choice.packages": ("TO-92",),
}  # fmt: skip
NEEDS = {
    "base drive": ("VBE(sat)",),
    "base drive, inrush": ("VBE(sat)",),
    "collector current": ("IC",),
    "collector–emitter voltage": ("VCEO",),
    "junction temperature": ("TJ",),
    "load current": ("VCE(sat)", "hFE"),
    "off-state current": ("ICBO",),
    "power dissipation": ("RthJA", "PD"),
    "saturation voltage": ("VCE(sat)", "hFE"),
    "turn-off time": ("toff",),
    "turn-on time": ("ton",),
}
"""What a check cannot be answered without."""


def judged(part: Part) -> Ranking:
    return rank(requirement_of(ASKED), Shelf.from_parts([part]))


def without(*symbols: str) -> Part:
    return replace(GOOD, limits=tuple(one for one in LIMITS if one.symbol not in symbols))


def every() -> list[Check]:
    return [one for name in duties() for one in checks(name)]


def test_a_file_a_check() -> None:
    files = [one.name for one in pkgutil.iter_modules(engine.checks.__path__)]
    for name in files:
        module = importlib.import_module(f"engine.checks.{name}")
        assert len([one for one in vars(module).values() if isinstance(one, Check)]) == 1, name
    assert len(files) >= 15


def test_a_check_asks_a_question_under_a_name_of_its_own() -> None:
    for duty in duties():
        found = checks(duty)
        assert len({one.name for one in found}) == len(found)
    for one in every():
        assert one.question.endswith("?") and one.question[0].isupper(), one.name


def test_the_good_part_is_asked_everything_and_fits() -> None:
    found = judged(GOOD)
    names = {one.name for one in found.checks}
    assert set(NEEDS) <= names
    assert {one.name for one in checks("switch")} == names
    assert [(one.name, int(one.status[0])) for one in found.checks if one.status[0] != Status.PASS] == []
    assert found.verdict[0] == Verdict.FITS
    told = explain(found.requirement, found.shelf, 0)
    assert [one.name for one in told.checks] == [one.name for one in found.checks]


@pytest.mark.parametrize("name", sorted(NEEDS))
def test_silence_is_no_answer(name: str) -> None:
    found = judged(without(*NEEDS[name]))
    column = next(one for one in found.checks if one.name == name)
    assert column.status[0] == Status.UNKNOWN
    assert np.isnan(column.headroom[0]) and column.evidence[0] == Evidence.MISSING
    assert found.verdict[0] == Verdict.CANNOT_SAY
    told = next(one for one in explain(found.requirement, found.shelf, 0).checks if one.name == name)
    assert set(told.missing) & {*NEEDS[name], "ICES", "ICEO", "derating(TA)"}, told.missing


@pytest.mark.parametrize("symbol", sorted({one.symbol for one in LIMITS}))
def test_no_symbol_left_out_makes_a_guaranteed_figure_of_nothing(symbol: str) -> None:
    """What is answered without a symbol is answered by another limit, or as derived."""
    for one in judged(without(symbol)).checks:
        if one.status[0] == Status.PASS:
            assert one.evidence[0] in (Evidence.GUARANTEED, Evidence.DERIVED), one.name


def test_nothing_on_file_decides_nothing() -> None:
    found = judged(Part("QZ-2"))
    assert found.verdict[0] == Verdict.CANNOT_SAY
    assert all(one.status[0] != Status.FAIL for one in found.checks)
