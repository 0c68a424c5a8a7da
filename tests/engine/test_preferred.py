"""Preferred values against the tables of IEC 60063:2015 (the series as printed there)."""

import math

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from engine import preferred

E3 = "10 22 47"
E6 = "10 15 22 33 47 68"
E12 = "10 12 15 18 22 27 33 39 47 56 68 82"
E24 = "10 11 12 13 15 16 18 20 22 24 27 30 33 36 39 43 47 51 56 62 68 75 82 91"
E48 = (
    "100 105 110 115 121 127 133 140 147 154 162 169 178 187 196 205 215 226 237 249 261 274 287 301 316 332 348 365 "
    "383 402 422 442 464 487 511 536 562 590 619 649 681 715 750 787 825 866 909 953"
)
E96 = (
    "100 102 105 107 110 113 115 118 121 124 127 130 133 137 140 143 147 150 154 158 162 165 169 174 178 182 187 191 "
    "196 200 205 210 215 221 226 232 237 243 249 255 261 267 274 280 287 294 301 309 316 324 332 340 348 357 365 374 "
    "383 392 402 412 422 432 442 453 464 475 487 499 511 523 536 549 562 576 590 604 619 634 649 665 681 698 715 732 "
    "750 768 787 806 825 845 866 887 909 931 953 976"
)
E192_ONLY = (
    "101 104 106 109 111 114 117 120 123 126 129 132 135 138 142 145 149 152 156 160 164 167 172 176 180 184 189 193 "
    "198 203 208 213 218 223 229 234 240 246 252 258 264 271 277 284 291 298 305 312 320 328 336 344 352 361 370 379 "
    "388 397 407 417 427 437 448 459 470 481 493 505 517 530 542 556 569 583 597 612 626 642 657 673 690 706 723 741 "
    "759 777 796 816 835 856 876 898 920 942 965 988"
)
TABLES = {
    "E3": E3, "E6": E6, "E12": E12, "E24": E24, "E48": E48, "E96": E96,
    "E192": " ".join(sorted([*E96.split(), *E192_ONLY.split()], key=int)),
}  # fmt: skip


@pytest.mark.parametrize("series", TABLES)
def test_series_as_printed_in_the_standard(series: str) -> None:
    printed = [int(word) for word in TABLES[series].split()]
    digits = 10 if printed[0] == 10 else 100
    assert len(printed) == int(series[1:])
    assert preferred.SERIES[series].tolist() == pytest.approx([value / digits for value in printed], abs=1e-12)


@pytest.mark.parametrize(("right", "wrong"), [(298, 297), (499, 491), (953, 959), (920, 919)])
def test_values_that_circulate_wrongly(right: int, wrong: int) -> None:
    """Wrong copies of the E192 table print the second; 920 is the standard's exception to its own formula."""
    values = {round(value * 100) for value in preferred.SERIES["E192"]}
    assert right in values
    assert wrong not in values


@pytest.mark.parametrize("value", [27, 30, 33, 36, 39, 43, 47, 82])
def test_e24_keeps_its_historical_values(value: int) -> None:
    """Where 10^(k/24) rounds to something else, the standard keeps the older value."""
    assert value in {round(one * 10) for one in preferred.SERIES["E24"]}
    formula = {round(10 ** (k / 24) * 10) for k in range(24)}
    assert value not in formula


ohms = st.floats(1e-3, 1e9).filter(lambda x: x > 0)


@settings(max_examples=60)
@given(ohms, st.sampled_from(sorted(TABLES)))
def test_rounding_finds_the_neighbours(value: float, series: str) -> None:
    ladder = np.array([v * 10.0**d for d in range(-4, 11) for v in preferred.SERIES[series]])
    low, high = (float(f(np.array([value]), series)[0]) for f in (preferred.at_most, preferred.at_least))
    assert low == pytest.approx(ladder[ladder <= value * (1 + 1e-9)].max(), rel=1e-9)
    assert high == pytest.approx(ladder[ladder >= value * (1 - 1e-9)].min(), rel=1e-9)
    near = float(preferred.nearest(np.array([value]), series)[0])
    assert near in (low, high)
    assert max(near / value, value / near) <= min(max(x / value, value / x) for x in (low, high)) * (1 + 1e-9)


@pytest.mark.parametrize("series", TABLES)
def test_a_preferred_value_is_itself(series: str) -> None:
    values = np.array([v * 10.0**d for d in range(0, 6) for v in preferred.SERIES[series]])
    for rounding in (preferred.at_least, preferred.at_most, preferred.nearest):
        assert np.allclose(rounding(values, series), values, rtol=1e-12)


def test_what_is_not_known_stays_so() -> None:
    for rounding in (preferred.at_least, preferred.at_most, preferred.nearest):
        nothing, endless = rounding(np.array([math.nan, math.inf]), "E24")
        assert math.isnan(nothing)
        assert math.isinf(endless)


def test_the_largest_step() -> None:
    """E3 steps 10 → 22 → 47 → 100: the largest ratio is 2.2."""
    assert preferred.step("E3") == pytest.approx(2.2)
    assert preferred.step("E24") == pytest.approx(15 / 13)
