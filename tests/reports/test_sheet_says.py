"""What a calculation sheet says: what each figure rests on, and what is missing."""

from engine.explain import explain
from engine.part import Limit, Part
from engine.physics.sources import SOURCES
from engine.rank import rank
from engine.ranking import Ranking, Verdict
from engine.shelf import Shelf
from importers.requirement_file import parse_fields
from reports.sheet import Sheet
from reports.sheet_markdown import sheet_markdown
from tests.tui.support import COIL, PARTS, shelf_of


def ranking(shelf: Shelf | None = None) -> Ranking:
    return rank(parse_fields("switch", COIL, title="Valve"), shelf or shelf_of())


def sheet(found: Ranking, row: int, limits: tuple[Limit, ...] = ()) -> Sheet:
    told = explain(found.requirement, found.shelf, row)
    return Sheet(found.requirement, told, found.shelf.fingerprint, "2026-01-02", limits)


def test_every_figure_of_a_sheet_says_what_it_rests_on() -> None:
    """Numbers of the working: put into the relation they give the result; each is stated, looked up or worked out."""
    found = ranking()
    row = next(int(row) for row in found.order if found.verdict[row] == Verdict.FITS)
    told = explain(found.requirement, found.shelf, row)
    steps = [step for one in told.checks for step in one.steps]
    assert len(steps) > 40
    for step in steps:
        assert step.evidence in ("stated", "chosen", "guaranteed", "derived", "measured", "typical", "missing", "")
        assert step.relation or step.source, step
    assert set(told.sources) <= set(SOURCES.values())
    assert len(told.sources) >= 8
    text = sheet_markdown(sheet(found, row, PARTS[row].limits))
    for limit in PARTS[row].limits:
        assert f"| {limit.symbol} |" in text and limit.source in text
    for caution in told.cautions:
        assert caution in text


def test_a_part_that_is_unknown_says_what_is_missing() -> None:
    bare = Part("QZ-1", "npn", limits=(Limit("VCEO", max=60.0), Limit("IC", max=1.0)))
    found = ranking(Shelf.from_parts([bare]))
    text = sheet_markdown(sheet(found, 0))
    assert found.verdict[0] == Verdict.CANNOT_SAY
    for symbol in ("VCE(sat)", "VBE(sat)"):
        assert symbol in text
    assert "nan" not in text.lower().replace("quench", "")
