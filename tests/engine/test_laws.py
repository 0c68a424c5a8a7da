"""Published check values of the laws, each with its source beside it."""

import math

import numpy as np
import pytest

from engine.conditions import gain_floor_curve
from engine.part import Limit, Part
from engine.physics import junction, leakage, load, saturation, speed, thermal
from engine.physics.constants import K_BOLTZMANN, Q_ELECTRON, ZERO_CELSIUS, thermal_voltage
from engine.prepared import prepare
from engine.shelf import Shelf


def test_constants_are_the_exact_ones_of_the_si() -> None:
    """The International System of Units, 9th edition (BIPM 2019)."""
    assert K_BOLTZMANN == 1.380649e-23
    assert Q_ELECTRON == 1.602176634e-19


@pytest.mark.parametrize(
    ("t", "millivolts"),
    [(-55, 18.7987), (0, 23.5382), (25, 25.6926), (27, 25.8649), (85, 30.8630), (125, 34.3099), (150, 36.4642)],
)
def test_thermal_voltage(t: float, millivolts: float) -> None:
    """kT/q from the exact constants, worked out by hand to six figures."""
    assert float(thermal_voltage(t)) * 1e3 == pytest.approx(millivolts, abs=0.00005)


@pytest.mark.parametrize(("beta_r", "millivolts"), [(1, 66.6), (5, 32.6)])
def test_saturation_voltage_of_the_intrinsic_transistor(beta_r: float, millivolts: float) -> None:
    """Ebers, Moll 1954 at 25 °C, forced beta 10 of 100, worked out by hand."""
    assert saturation.vce_sat_ebers_moll(10.0, 100.0, beta_r, 25.0) * 1e3 == pytest.approx(millivolts, abs=0.05)


def test_saturation_voltage_of_a_published_problem() -> None:
    """βF 200, βR 20, VT 25.865 mV, 160 mA at 0.98924 mA of base current: 0.1000 V."""
    assert saturation.vce_sat_ebers_moll(160 / 0.98924, 200.0, 20.0, 27.0) == pytest.approx(0.1000, abs=0.00005)


@pytest.mark.parametrize(
    ("ib", "volts"), [(0.1e-3, 0.1184), (0.2e-3, 0.08399), (0.5e-3, 0.05739), (1e-3, 0.04297), (2e-3, 0.03247)]
)
def test_saturation_voltage_of_a_simulator(ib: float, volts: float) -> None:
    """ngspice-39: IS 1e-14, BF 150, BR 5, RC 1, RE 0.1, RB 10 Ω at 10 mA and 27 °C, four figures printed."""
    ic = 10e-3
    ohmic = ic * 1.0 + (ic + ib) * 0.1
    found = saturation.vce_sat_ebers_moll(ic / ib, 150.0, 5.0, 27.0) + ohmic
    assert found == pytest.approx(volts, rel=5e-4)


def test_on_voltage_grows_with_temperature_no_less_than_was_simulated() -> None:
    """Simulated populations reached 1.49 at 125 °C; the ratio of absolute temperatures is 1.34 (derived)."""
    factor = float(saturation.hot_factor.raw(np.array(125.0)))
    assert factor >= 1.49
    assert factor >= (125 + ZERO_CELSIUS) / (25 + ZERO_CELSIUS)
    assert float(saturation.hot_factor.raw(np.array(-40.0))) == 1.0


@pytest.mark.parametrize("vbe", [0.70, 0.65, 0.60, 0.55])
def test_junction_voltage_falls_at_the_published_rate(vbe: float) -> None:
    """dVBE/dT = (VBE − EG − XTI·VT)/T at constant current, here with the unkind band gap of 1.17 eV."""
    rate = (junction.over_temperature(np.array(vbe), np.array(25.01)) - vbe) / 0.01
    law = (vbe - 1.17 - 3.0 * float(thermal_voltage(25.0))) / (25 + ZERO_CELSIUS)
    assert float(rate) == pytest.approx(law, rel=1e-3)
    assert float(rate) <= -1.6e-3  # common practice: −1.6 to −2.2 mV/K


def test_a_floor_and_the_current_under_it_are_inverses() -> None:
    """A decade of current is VT·ln 10 = 59.16 mV at 25 °C (kT/q of the exact constants)."""
    v0, i0 = np.array(0.6), np.array(10e-3)
    assert float(junction.junction_floor(np.array(100e-3), np.array(25.0), v0, i0)) - 0.6 == pytest.approx(
        59.16e-3, abs=5e-6
    )
    for t in (25.0, 85.0, 150.0):
        v = junction.junction_floor(np.array(3e-3), np.array(t), v0, i0)
        if t == 25.0:
            assert float(junction.current_ceiling(v, np.array(t), v0, i0)) == pytest.approx(3e-3)
        # hotter, the floor at the smaller current was moved at its own voltage: the ceiling may only be above
        assert float(junction.current_ceiling(v, np.array(t), v0, i0)) >= 3e-3 * (1 - 1e-9)


def test_leakage_bound_is_at_or_above_the_trade_rule() -> None:
    """Common practice, ×2 every 10 K: 10 nA at 25 °C is 10.24 µA at 125 °C; 2.4 times that was seen at 85 °C."""
    for t in np.linspace(25.0, 150.0, 26):
        found = _leakage(t, [(25.0, 10e-9)])
        assert found >= 10e-9 * 2 ** ((t - 25) / 10) * (1 - 1e-12)
    assert _leakage(125.0, [(25.0, 10e-9)]) >= 10.24e-6
    assert _leakage(85.0, [(25.0, 10e-9)]) >= 10e-9 * 2**6 * 2.4 * 0.75


def test_a_printed_hot_limit_wins_over_the_growth_rule() -> None:
    """The common pair of limits 10 nA at 25 °C and 10 µA at 150 °C (MIL-PRF-19500 slash sheets)."""
    pair = [(25.0, 10e-9), (150.0, 10e-6)]
    assert _leakage(150.0, pair) == pytest.approx(10e-6)
    assert _leakage(100.0, pair) < 10e-6
    assert _leakage(100.0, pair) >= 10e-9
    # log I over 1/T is convex for a sum of activated currents: the chord, worked out by hand at 87.5 °C
    a, b, x = 1 / 298.15, 1 / 423.15, 1 / 360.65
    chord = math.exp(math.log(10e-9) + (a - x) / (a - b) * math.log(1000))
    assert _leakage(87.5, pair) == pytest.approx(min(chord, 10e-9 * 2 ** (60 / 8 + 2.5 / 10)))


def test_leakage_above_the_tested_voltage_is_scaled_up_and_ends_at_vceo() -> None:
    """Multiplication 1/(1 − (V/VBR)³) lies above 1: a higher voltage leaks more (S. L. Miller, Phys. Rev. 99, 1955)."""
    at = {v: _leakage(25.0, [(25.0, 10e-9)], v=v, tested=30.0, vceo=60.0) for v in (20.0, 30.0, 45.0, 60.0, 61.0)}
    assert at[20.0] == at[30.0] == pytest.approx(10e-9)
    assert at[30.0] < at[45.0] < at[60.0]
    assert at[45.0] >= 10e-9 * 45 / 30
    assert math.isnan(at[61.0])


def _leakage(
    t: float, limits: list[tuple[float, float]], v: float = 20.0, tested: float = 50.0, vceo: float = 60.0
) -> float:
    temps, amps = (np.array([[one[i]] for one in limits]) for i in (0, 1))
    return float(
        leakage.leakage_most(
            v, np.array([t]), np.full_like(temps, tested), temps, amps, np.array([vceo]), np.array([False])
        )[0]
    )


@pytest.mark.parametrize(
    ("tj", "rth", "rating", "t", "watts", "within"),
    [
        # MIL-PRF-19500/290, TO-39: 0.8 W, 5.7 mW/K above 60 °C, RthJA 175, TJ 200
        (200, 175, 0.8, 25, 0.8, 0.0005),
        (200, 175, 0.8, 60, 0.8, 0.005),
        (200, 175, 0.8, 130, 0.8 - 5.7e-3 * 70, 0.005),
        # 5 W and 28.57 mW/K, 35 K/W, TJ 200
        (200, 35, 5.0, 100, 5 - 28.57e-3 * 75, 0.005),
        # small plastic: 625 mW, 5 mW/K, RthJA 200, RthJC 83.3, TJ 150; 1.5 W at the case
        (150, 200, 0.625, 25, 0.625, 0.0005),
        (150, 200, 0.625, 85, 0.625 - 5e-3 * 60, 0.0005),
        (150, 83.3, 1.5, 25, 1.5, 0.0005),
    ],
)
def test_published_derating_lines(tj: float, rth: float, rating: float, t: float, watts: float, within: float) -> None:
    found = thermal.power_allowed.raw(*(np.array(float(x)) for x in (tj, t, rth, rating)))
    assert float(found) == pytest.approx(watts, abs=within)


def test_derating_line_ends_at_the_junction_limit() -> None:
    assert float(thermal.power_allowed.raw(np.array(200.0), np.array(200.0), np.array(175.0), np.array(0.8))) == 0.0


def test_runaway_has_no_temperature() -> None:
    """A kelvin that heats by more than a kelvin: Rth·dP/dT ≥ 1 never settles (definition of runaway)."""
    settled = thermal.junction_temperature.raw(*(np.array(x) for x in (50.0, 100.0, 0.0, 1.0, 0.006)))
    # by hand: TJ = 50 + 100·(1 + 0.006·(TJ − 25))
    assert float(settled) == pytest.approx(50 + 100 * (1 + 0.006 * (float(settled) - 25)))
    assert float(settled) == pytest.approx(337.5)
    assert np.isinf(thermal.junction_temperature.raw(*(np.array(x) for x in (50.0, 100.0, 0.0, 1.0, 0.01))))


def test_edge_energies() -> None:
    """B. R. Gupta, V. Singhal, Power Electronics, ex. 1.7 (as transcribed); a clamped coil's edge is three times it."""
    resistive = float(speed.edge_energy.raw(*(np.array(x) for x in (200.0, 80.0, 40e-6, 60e-6, 6.0))))
    clamped = float(speed.edge_energy.raw(*(np.array(x) for x in (200.0, 80.0, 40e-6, 60e-6, 2.0))))
    assert resistive == pytest.approx(0.10667 + 0.160, abs=5e-6)
    assert clamped == pytest.approx(3 * resistive)


@pytest.mark.parametrize(("t", "ratio"), [(20, 1.0), (-10, 224.5 / 254.5), (60, 294.5 / 254.5), (100, 334.5 / 254.5)])
def test_copper(t: float, ratio: float) -> None:
    """IEC 60028: 234.5 °C and 0.00393/K at 20 °C."""
    found = float(load.copper.raw(np.array(180.0), np.array(float(t)), np.array(1.0)))
    assert found == pytest.approx(180 * ratio)
    assert found == pytest.approx(180 * (1 + 0.00393 * (t - 20)), rel=1e-3)


@pytest.mark.parametrize(("clamp", "milliseconds"), [(0.8, 5.55), (24.8, 0.79)])
def test_release_time_of_a_relay(clamp: float, milliseconds: float) -> None:
    """t = (L/R)·ln(1 + I·R/V) of 12 V, 100 Ω, 0.2 H, worked out by hand."""
    assert load.release_time(0.2, 100.0, 0.12, clamp) * 1e3 == pytest.approx(milliseconds, abs=0.005)


def test_storage_ends_never_without_reverse_drive() -> None:
    """Charge control (Beaufoy, Sparkes 1957): nothing is promised where no reverse current flows."""
    arguments = [9.16e-9, 2e-3, 0.0, 10e-3, 5.0, 10e-3, 2e-3, 1e-3, 5.0, 50.0, 25.0]
    with np.errstate(all="ignore"):
        assert np.isnan(speed.turn_off_time.raw(*(np.array(x) for x in arguments)))


def test_turn_on_at_the_test_itself_is_no_faster_than_the_test() -> None:
    """Charge control: the test's own charge, carried by the test's own base current."""
    arguments = [45e-9, 0.15, 0.15, 30.0, 30.0, 0.015, 0.015, 1000.0]
    found = float(speed.turn_on_time.raw(*(np.array(x) for x in arguments)))
    assert 45e-9 <= found <= 45e-9 * 1.01


def _cold_gain(structure: str, *cold: Limit) -> Shelf:
    room = Limit("hFE", min=75.0, conditions=(("ic", 0.01), ("vce", 10.0)))
    return Shelf.from_parts([Part("PAIR", structure, limits=(Limit("IC", max=0.8), room, *cold))])


def test_the_cold_gain_pair_gives_its_own_exponent() -> None:
    """MIL-PRF-19500 slash sheet practice: 75 at 10 mA and 25 °C with 35 at −55 °C; ratio 0.467, exponent 2.44."""
    shelf = _cold_gain("npn", Limit("hFE", min=35.0, conditions=(("ic", 0.01), ("ta", -55.0), ("vce", 10.0))))
    assert float(prepare(shelf).cold_exponent[0]) == pytest.approx(2.44, abs=0.005)
    assert float(gain_floor_curve(shelf, 0, np.array([0.01]), -55.0)[0]) == pytest.approx(35.0, rel=1e-9)
    assert float(gain_floor_curve(shelf, 0, np.array([0.01]), 25.0)[0]) == pytest.approx(75.0)
    assert float(gain_floor_curve(shelf, 0, np.array([0.01]), 85.0)[0]) == pytest.approx(75.0), (
        "no gain claimed when hot"
    )


def test_without_a_cold_point_the_exponent_is_no_kinder_than_the_pair() -> None:
    """Two junctions of a Darlington count twice."""
    single = float(prepare(_cold_gain("npn")).cold_exponent[0])
    double = float(prepare(_cold_gain("npn-darlington")).cold_exponent[0])
    assert single >= math.log(35 / 75) / math.log(218.15 / 298.15)
    assert double == 2 * single
    floor = float(gain_floor_curve(_cold_gain("npn"), 0, np.array([0.01]), -55.0)[0])
    assert floor <= 35.0, "a flat 1.5 would leave 47"
