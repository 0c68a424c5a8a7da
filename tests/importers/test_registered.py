"""The published limits of real registered types import whole; expected values are read off the file by hand."""

from pathlib import Path

import pytest

from engine.part import Arrival
from importers.read import Reading, read_file

DATA = Path(__file__).parents[1] / "data"


@pytest.fixture(scope="module")
def types() -> Reading:
    return read_file(DATA / "registered-types.csv")


def at(reading: Reading, row: int) -> Arrival:
    return next(arrival for arrival in reading.arrivals if arrival.row == row)


def test_every_row_is_accounted_for(types: Reading) -> None:
    assert (types.form, types.rows, len(types.arrivals), types.rejected) == ("long", 409, 409, 0)
    assert sum(arrival.set_aside for arrival in types.arrivals) == 3
    assert {problem.value for problem in types.problems} == {"ton+toff", "rbbCc"}
    assert len({arrival.part.type_number for arrival in types.arrivals}) == 20


# row, type, symbol, min, max, conditions, pulsed: SI, read off the file (its source stands in each row)
ROWS = [
    (2, "2N2905A", "VCEO", None, 60, {}, False),
    (5, "2N2905A", "IC", None, 0.6, {}, False),
    (6, "2N2905A", "TJ", -65, 200, {}, False),
    (7, "2N2905A", "PD", None, 0.8, {"ta": 25}, False),
    (8, "2N2905A", "derating(TA)", None, 5.7e-3, {"ta": 60}, False),
    (9, "2N2905A", "PD", None, 3.0, {"tc": 25}, False),
    (11, "2N2905A", "RthJA", None, 175, {}, False),
    (12, "2N2905A", "RthJC", None, 58, {}, False),
    (13, "2N2905A", "V(BR)CEO", 60, None, {"ic": 0.01, "ib": 0}, False),
    (15, "2N2905A", "V(BR)EBO", 5, None, {"ie": 10e-6}, False),
    (16, "2N2905A", "ICES", None, 1000e-9, {"vce": 30, "veb": 0.5}, False),
    (17, "2N2905A", "ICBO", None, 10e-9, {"vcb": 50, "ie": 0}, False),
    (18, "2N2905A", "ICBO", None, 10000e-9, {"vcb": 50, "ie": 0, "ta": 150}, False),
    (20, "2N2905A", "hFE", 75, None, {"ic": 0.1e-3, "vce": 10}, False),
    (21, "2N2905A", "hFE", 100, 450, {"ic": 1e-3, "vce": 10}, False),
    (22, "2N2905A", "hFE", 50, None, {"ic": 1e-3, "vce": 10, "ta": -55}, False),
    (24, "2N2905A", "hFE", 100, 300, {"ic": 0.15, "vce": 10}, True),
    (25, "2N2905A", "hFE", 50, None, {"ic": 0.5, "vce": 10}, True),
    (26, "2N2905A", "VCE(sat)", None, 0.4, {"ic": 0.15, "ib": 0.015}, False),
    (29, "2N2905A", "VBE(sat)", None, 2.6, {"ic": 0.5, "ib": 0.05}, False),
    (30, "2N2905A", "hfe", 100, None, {"ic": 1e-3, "vce": 10, "f": 1e3}, False),
    (31, "2N2905A", "Cobo", None, 8e-12, {"vcb": 10}, False),
    (33, "2N2905A", "ton", None, 45e-9, {"vcc": 30, "ic": 0.15, "ib": 0.015}, False),
    (34, "2N2905A", "toff", None, 300e-9, {"vcc": 6, "ic": 0.15, "ib": 0.015, "ib2": 0.015}, False),
    (51, "2N3485A", "|hfe|", 2, 10, {"vce": 20, "ic": 0.05, "f": 100e6}, False),
    (124, "2N3019", "hfe", 80, 400, {"ic": 1e-3, "vce": 5, "f": 1e3}, False),
    (125, "2N3019", "fT", 100e6, None, {"ic": 0.05, "vce": 10, "f": 20e6}, False),
    (128, "2N3019", "NF", None, 4, {"ic": 0.1e-3, "vce": 10, "f": 1e3, "rs": 1e3}, False),
    (120, "2N3019", "hFE", 40, None, {"ic": 0.15, "vce": 10, "ta": -55}, True),
    (121, "2N3019", "VCE(sat)", None, 0.2, {"ic": 0.15, "ib": 0.015}, True),
    (135, "2N3715", "IB", None, 4, {}, False),
    (136, "2N3715", "PD", None, 5, {"ta": 25}, False),
    (138, "2N3715", "PD", None, 117, {"tc": 25}, False),
    (141, "2N3715", "ICBO", None, 10e-6, {"vcb": 80}, False),
    (142, "2N3715", "ICEX", None, 10e-6, {"vce": 60, "vbe": -1.5}, False),
    (144, "2N3715", "IEBO", None, 1e-3, {"veb": 7}, False),
    (145, "2N3715", "hFE", 50, 150, {"ic": 1, "vce": 2}, True),
    (150, "2N3715", "VCE(sat)", None, 2.5, {"ic": 10, "ib": 2}, False),
    (156, "2N3715", "SOA", 10, None, {"vce": 15, "tc": 25, "t": 1}, False),
    (158, "2N3715", "SOA", 0.9, None, {"vce": 55, "tc": 25, "t": 1}, False),
    (238, "2N6300", "PD", None, 75, {"tc": 0}, False),
    (239, "2N6300", "PD", None, 32, {"tc": 100}, False),
    (240, "2N6300", "derating(TC)", None, 0.428, {"tc": 0}, False),
    (241, "2N6300", "hFE", 750, 18000, {"ic": 4, "vce": 3}, True),
    (245, "2N6300", "ton", None, 2e-6, {}, False),
]


@pytest.mark.parametrize(
    ("row", "name", "symbol", "low", "high", "conditions", "pulsed"), ROWS, ids=lambda v: str(v)[:24]
)
def test_a_row_reads_as_it_stands(
    types: Reading,
    row: int,
    name: str,
    symbol: str,
    low: float | None,
    high: float | None,
    conditions: dict[str, float],
    pulsed: bool,
) -> None:
    arrival = at(types, row)
    (limit,) = arrival.part.limits
    assert (arrival.part.type_number, limit.symbol) == (name, symbol)
    assert (limit.min, limit.max) == (pytest.approx(low), pytest.approx(high))
    assert dict(limit.conditions) == pytest.approx(conditions)
    assert limit.pulsed is pulsed
    assert limit.source


def test_remarks_stay_with_the_value(types: Reading) -> None:
    assert at(types, 143).part.limits[0].note == "60 V"  # ICES without the name of the voltage: not guessed
    assert "look swapped" in at(types, 153).part.limits[0].note


def test_structures_come_from_their_own_table() -> None:
    reading = read_file(DATA / "registered-structures.csv")
    kinds = {arrival.part.type_number: arrival.part.structure for arrival in reading.arrivals}
    assert (reading.form, reading.rows, len(kinds)) == ("structures", 20, 20)
    assert (kinds["2N2905A"], kinds["2N3019"], kinds["2N6287"]) == ("pnp", "npn", "pnp-darlington")
