"""No check passes on a guarantee that is not there, over random shelves with gaps."""

import numpy as np
import pytest

from engine.evidence import Evidence
from engine.rank import rank
from engine.ranking import Status, Verdict
from engine.shelf import SYMBOL_CODES
from tests.properties.changes import asked, is_pnp, pool, shelf_of, without

SEEDS = range(12)


@pytest.mark.parametrize("seed", SEEDS)
def test_silence_never_passes_on_a_guarantee_that_is_not_there(seed: int) -> None:
    """Without any limit: unknown, or passed on nothing that the part would have to promise."""
    req = asked(seed)
    parts, table, _ = pool(is_pnp(req))
    silent = shelf_of(parts, without(table, np.ones(len(table.part), dtype=bool)))
    for one in rank(req, silent).checks:
        passed = one.status == Status.PASS
        if one.name in ("structure", "package"):  # not limits
            continue
        promised = passed & (one.value > 0) & (one.evidence == Evidence.GUARANTEED)
        own = np.isclose(one.limit, np.nan_to_num(one.limit)) & promised
        # what the requirement or the driver promises may pass; a rating of the part may not
        assert not own.any() or one.name in ("driver current", "load current"), one.name


@pytest.mark.parametrize("symbol", sorted(SYMBOL_CODES))
def test_a_pass_never_rests_on_missing_evidence(symbol: str) -> None:
    req = asked(SYMBOL_CODES[symbol])
    parts, table, _ = pool(is_pnp(req))
    ranking = rank(req, shelf_of(parts, without(table, table.symbol == SYMBOL_CODES[symbol])))
    for one in ranking.checks:
        known = ~np.isnan(one.headroom)
        assert not (one.status[~known] == Status.PASS).any(), one.name
        assert not ((one.status == Status.PASS) & (one.evidence == Evidence.MISSING)).any(), one.name
        assert not ((one.evidence == Evidence.TYPICAL) & (ranking.verdict == Verdict.FITS)).any(), one.name


@pytest.mark.parametrize(
    ("check", "symbols"),
    [
        ("collector current", ("IC",)),
        ("collector–emitter voltage", ("VCEO", "V(BR)CEO", "ES/b")),
        ("saturation voltage", ("VCE(sat)",)),
        ("off-state current", ("ICBO", "ICES", "ICEX", "ICEO")),
        ("junction temperature", ("TJ",)),
    ],
)
@pytest.mark.parametrize("seed", SEEDS)
def test_a_check_without_its_symbol_never_passes_as_guaranteed(check: str, symbols: tuple[str, ...], seed: int) -> None:
    req = asked(seed)
    parts, table, _ = pool(is_pnp(req))
    gone = np.isin(table.symbol, [SYMBOL_CODES[symbol] for symbol in symbols])
    ranking = rank(req, shelf_of(parts, without(table, gone)))
    one = next(one for one in ranking.checks if one.name == check)
    assert not ((one.status == Status.PASS) & (one.evidence < Evidence.DERIVED)).any()
