"""The long and the wide form: what a cell means, and what is said of one that means nothing."""

import pytest

from engine.part import Limit
from importers.problem import ReadError, RowProblem
from importers.read import Reading, read_bytes


def read(text: str, **options: str) -> Reading:
    return read_bytes(text.encode(), "table.csv", **options)


def only_limit(text: str) -> Limit:
    (arrival,) = read(text).arrivals
    (limit,) = arrival.part.limits
    return limit


def only_problem(text: str) -> RowProblem:
    (problem,) = read(text).problems
    return problem


def long(row: str) -> str:
    return f"part,polarity,symbol,min,typ,max,unit,conditions,source\n{row}\n"


def test_a_pnps_signs_are_taken_off() -> None:
    limit = only_limit(long('Q1,PNP,hFE,100,,300,,"IC -150 mA, VCE -10 V",s'))
    assert dict(limit.conditions) == {"ic": 0.15, "vce": 10.0}
    assert only_limit(long("Q1,PNP,VCEO,,,-60,V,,s")).max == 60
    signed = only_limit(long("Q1,PNP,VBE(on),-0.8,,-0.6,V,IC -1 mA,s"))
    assert (signed.min, signed.max) == (0.6, 0.8)


def test_a_rating_counts_as_a_maximum_wherever_it_stands() -> None:
    for row in ("Q1,NPN,VCEO,60,,,V,,s", "Q1,NPN,VCEO,,60,,V,,s", "Q1,NPN,VCEO,,,60,V,,s"):
        limit = only_limit(long(row))
        assert (limit.min, limit.typ, limit.max) == (None, None, 60)


def test_a_pulsed_current_rating_is_the_peak() -> None:
    assert only_limit(long("Q1,NPN,IC,,,2,A,pulsed,s")).symbol == "ICM"


def test_ranges_and_bounds_in_one_cell() -> None:
    assert (only_limit(long("Q1,NPN,hFE,100-300,,,,IC 1 mA,s")).max, only_limit(long("Q1,NPN,hFE,>40,,,,,s")).min) == (
        300,
        40,
    )
    assert only_limit(long("Q1,NPN,VCE(sat),,,<0.4,V,,s")).max == 0.4


def test_conditions_in_columns_with_units_in_the_heading() -> None:
    text = "part,symbol,max,unit,ic [mA],ib (mA),tj\nQ1,VCE(sat),300,mV,150,15,25\n"
    limit = only_limit(text)
    assert (limit.max, dict(limit.conditions)) == (0.3, {"ic": 0.15, "ib": 0.015, "tj": 25.0})


@pytest.mark.parametrize(
    ("row", "column", "kind"),
    [
        ("Q1,NPN,hFE,40~,,,,,s", "min", "not-a-number"),
        ("Q1,NPN,VCEO,,,60,A,,s", "unit", "unit"),
        ("Q1,NPN,hFE,300,,100,,,s", "min", "min-above-max"),
        ("Q1,NPN,VCEO,,,0,V,,s", "max", "impossible"),
        ("Q1,NPN,hFE,,,,,,s", "max", "no-value"),
        (",NPN,hFE,40,,,,,s", "part", "no-part"),
        ("Q1,XYZ,hFE,40,,,,,s", "polarity", "unknown-structure"),
        ("Q1,NPN,,40,,,,,s", "symbol", "no-symbol"),
        ("Q1,NPN,hFE,40,,,,,s,extra", "row", "too-many-cells"),
    ],
)
def test_a_rejected_row_is_named_with_its_fault_and_mend(row: str, column: str, kind: str) -> None:
    reading = read(long(row))
    (problem,) = reading.problems
    assert (reading.rejected, problem.row, problem.column, problem.kind) == (1, 2, column, kind)
    assert ";" in problem.says  # what is wrong; what to do


def test_an_odd_value_lands_with_a_flag() -> None:
    problem = only_problem(long("Q1,NPN,Cobo,,,80,nF,,s"))
    assert (problem.kind, problem.rejects) == ("implausible", False)
    assert only_limit(long("Q1,NPN,RthJA,,,0.2,K/W,,s")).flag


def test_an_unknown_symbol_is_kept_aside() -> None:
    (arrival,) = read(long("Q1,NPN,Qgd,,,12,nC,,s")).arrivals
    assert arrival.set_aside and arrival.part.limits[0].symbol == "Qgd" and "12" in arrival.part.limits[0].note


def test_static_and_small_signal_gain_are_told_apart() -> None:
    assert [only_limit(long(f"Q1,NPN,{s},40,,,,IC 1 mA,s")).symbol for s in ("hFE", "hfe", "HFE")] == [
        "hFE",
        "hfe",
        "hFE",
    ]
    assert "static" in only_limit(long('Q1,NPN,hfe,40,,,,"IC 1 A, pulsed",s')).flag


WIDE = (
    "part,type,package,stock,price,VCEO,IC [mA],TJMAX,RTHJA,HFE_MIN,HFE_MAX,HFE_IC,HFE_VCE,HFE_MIN_2,HFE_IC_2,HFE_VCE_2,"
    "VCESAT_MAX [mV],VCESAT_IC,VCESAT_IB,VBESAT_MAX,ICBO_MAX,ICBO_VCB,FT_MIN,COB_MAX,colour\n"
    "Q7,NPN,TO-92,12,0.08,45,800,150,200,100,300,100 mA,1,40,500 mA,1,300,150 mA,15 mA,1.0,50 nA,30,100 MHz,8 pF,red\n"
)


def test_a_part_a_row() -> None:
    (arrival,) = read(WIDE).arrivals
    limits = {(one.symbol, one.at("ic")): one for one in arrival.part.limits}
    assert (arrival.part.structure, arrival.stock, arrival.cost) == ("npn", 12, 0.08)
    assert limits["IC", None].max == 0.8
    assert (limits["hFE", 0.1].min, limits["hFE", 0.5].min, limits["hFE", 0.1].max) == (100, 40, 300)
    assert limits["VCE(sat)", 0.15].max == 0.3
    assert limits["VBE(sat)", 0.15].at("ib") == 0.015  # taken at the conditions of VCE(sat)
    assert limits["ICBO", None].max == 50e-9
    assert limits["fT", None].min == 100e6
    assert [problem.value for problem in read(WIDE).problems] == ["colour"]


def test_a_bad_cell_of_the_wide_form_costs_its_limit_only() -> None:
    reading = read("part,type,VCEO,IC\nQ8,NPN,sixty,1\n")
    assert reading.rejected == 0
    assert [limit.symbol for limit in reading.arrivals[0].part.limits] == ["IC"]
    assert (reading.problems[0].column, reading.problems[0].value) == ("VCEO", "sixty")


def test_polarity_of_the_command_line_fills_what_is_not_stated() -> None:
    assert read("part,VCEO\nQ9,60\n", polarity="pnp").arrivals[0].part.structure == "pnp"


@pytest.mark.parametrize("text", ["", "\n\n", "hello\nworld\n", "a,b\n1,2\n", "# only a comment\n"])
def test_what_is_no_table_of_parts_is_refused_in_one_line(text: str) -> None:
    with pytest.raises(ReadError) as error:
        read(text)
    assert "\n" not in str(error.value)


def test_encodings_and_delimiters() -> None:
    german = "part;polarity;symbol;max;unit\nQ1;NPN;ICBO;0,1;µA\n"
    for data in (
        german.encode("cp1252"),
        german.encode("utf-8"),
        german.encode("utf-16"),
        german.replace(";", "\t").encode(),
    ):
        (arrival,) = read_bytes(data, "t").arrivals
        assert arrival.part.limits[0].max == 100e-9
