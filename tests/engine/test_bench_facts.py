"""What a small NPN does on the bench: gain about 258, VBE about 0.66 V, supply 5.27 V. Common practice, no source."""

import pytest

from engine.physics.saturation import operating_point

GAIN, VBE, SUPPLY = 258.0, 0.66, 5.27


@pytest.mark.parametrize(
    ("drive", "r_base", "r_collector", "base", "collector", "saturated"),
    [
        (12.0, 10e3, 1e3, 1.1e-3, 5.2e-3, True),
        (1.0, 10e3, 1e3, 33e-6, 5.1e-3, True),
        (2.0, 100e3, 1e3, 13e-6, 3.36e-3, False),
        (8.0, 100e3, 1e3, 73e-6, 5.2e-3, True),
        (10.0, 100e3, 100.0, 93e-6, 24e-3, False),
    ],
)
def test_currents_on_the_bench(
    drive: float, r_base: float, r_collector: float, base: float, collector: float, saturated: bool
) -> None:
    """Readings of a bench meter: within 5 %."""
    ib, ic, is_saturated = operating_point(drive, r_base, SUPPLY, r_collector, GAIN, VBE)
    assert ib == pytest.approx(base, rel=0.05)
    assert ic == pytest.approx(collector, rel=0.05)
    assert is_saturated is saturated


def test_a_stiff_base_cannot_exceed_what_the_collector_resistor_lets_through() -> None:
    ib, ic, saturated = operating_point(1.0, 100.0, SUPPLY, 100.0, GAIN, VBE)
    assert 2e-3 <= ib <= 4e-3
    assert ic == pytest.approx(50e-3, rel=0.05)
    assert saturated


def test_more_base_voltage_changes_nothing_once_the_load_limits() -> None:
    currents = {operating_point(volts, 10e3, SUPPLY, 1e3, GAIN, VBE)[1] for volts in (1.0, 2.0, 5.0, 12.0, 60.0)}
    assert len(currents) == 1
    assert currents.pop() < SUPPLY / 1e3


def test_below_the_junction_voltage_nothing_flows() -> None:
    assert operating_point(0.5, 10e3, SUPPLY, 1e3, GAIN, VBE)[:2] == (0.0, 0.0)
