"""The judge's own instruments: its solver against ngspice, ngspice against published figures."""

import os

import numpy as np
import pytest

from . import spice
from .circuits import jobs
from .datasheet import gain, long_form, round_down, round_up, saturation, shelf_parts
from .feasible import possible
from .gummel_poon import PARAMETERS, Devices
from .judge import Ratings, by_ngspice, by_solver, off_corners, on_corners
from .population import population

pytestmark = pytest.mark.skipif(
    not spice.available() and not os.environ.get("CI"), reason="ngspice is not installed (apt-get install ngspice)"
)


def _ideal(**given: float) -> Devices:
    """One transistor with nothing but what is given."""
    plain = dict.fromkeys(PARAMETERS, 0.0) | {
        "NE": 1.5, "IKF": 1e6, "VAF": 1e6, "XTI": 3.0, "EG": 1.11, "RCO": 0.01, "VO": 1e3, "GAMMA": 1e-18,
    }  # fmt: skip
    return Devices({name: np.array([value]) for name, value in (plain | given).items()})


@pytest.mark.parametrize(("reverse_gain", "published"), [(1.0, 66.6e-3), (5.0, 32.6e-3)])
def test_ebers_moll_saturation_voltage(reverse_gain: float, published: float) -> None:
    # VCE(sat) = VT ln{[1 + (βf+1)/βR] / [1 − βf/βF]} at 25 °C, βF 100, βf 10: 66.6 mV and 32.6 mV (Ebers–Moll, derived)
    device = _ideal(IS=1e-14, BF=100.0, BR=reverse_gain)
    lines = [*spice.models(device, "npn"), "ib 0 b1 100u", "ic 0 c1 1m", *spice.transistor(device, 0, "1", 25.0)]
    raw = spice.run("Ebers-Moll", lines, ".op")
    assert raw["v(c1)"][0] == pytest.approx(published, rel=3e-3)


def test_saturation_voltage_against_forced_beta() -> None:
    # IS 1e-14, BF 150, BR 5, RC 1, RE 0.1, RB 10 at 27 °C, IC 10 mA: computed with the reference simulator alone
    device = _ideal(IS=1e-14, BF=150.0, BR=5.0, RC=1.0, RE=0.1, RB=10.0, RBM=10.0)
    lines = []
    for k, ib in enumerate((0.1e-3, 0.2e-3, 0.5e-3, 1e-3, 2e-3)):
        lines += [f"ib{k} 0 b{k} {ib}", f"ic{k} 0 c{k} 10m", f"q{k} c{k} b{k} 0 q0 temp=27"]
    model = spice.models(device, "npn")[0].replace("tnom=25", "tnom=27")
    raw = spice.run("forced beta", [model, *lines], ".op")
    found = [raw[f"v(c{k})"][0] for k in range(5)]
    assert found == pytest.approx([0.1184, 0.08399, 0.05739, 0.04297, 0.03247], rel=5e-3)


@pytest.mark.parametrize("seed", [1, 2])
def test_solver_agrees_with_ngspice(seed: int) -> None:
    types = population(12, 6, seed)
    compared = 0
    for job in jobs(9, seed):
        n = job.numbers
        for kind in types:
            if not possible(kind, Ratings(kind.current, np.inf), n) or not np.isfinite(n.overshoot):
                continue
            rows = np.arange(0, 6, 2)
            strongest = n.supply[1] if n.position == "high side" else n.drive[1]
            rb = max((strongest - 0.7) / n.drive_current, 100.0)
            corners = on_corners(kind, n, rb, 20e3, rows)
            corners = corners.take(np.arange(0, len(corners.row), 5))
            off = off_corners(kind, n, rb, 20e3, rows, np.full(3, n.ambient[1]))
            for circuits in (corners, off):
                ours, theirs = (run(kind.devices, circuits, kind.polarity) for run in (by_solver, by_ngspice))
                np.testing.assert_allclose(ours.vce, theirs.vce, rtol=1e-3, atol=1e-5)
                np.testing.assert_allclose(ours.ic, theirs.ic, rtol=2e-3, atol=1e-9)
                np.testing.assert_allclose(ours.ib, theirs.ib, rtol=2e-3, atol=1e-8)
                compared += len(circuits.row)
    assert compared > 150


def test_sheets_hold_for_their_own_devices() -> None:
    types = population(12, 10, seed=3)
    for kind, part in zip(types, shelf_parts(types), strict=True):
        for limit in part.limits:
            c = dict(limit.conditions)
            if limit.symbol == "hFE":
                values = gain(kind, c["ic"], c["vce"], c["tj"])
                assert limit.min is not None and values.min() >= limit.min
                assert limit.max is None or values.max() <= limit.max
            if limit.symbol == "VCE(sat)":
                assert limit.max is not None and saturation(kind, c["ic"], c["ib"])[0].max() <= limit.max
            if limit.symbol == "ICBO":
                assert limit.max is not None and kind.devices.leakage(np.full(10, c["tj"])).max() <= limit.max


def test_leakage_doubles_as_its_two_mechanisms_do() -> None:
    # generation doubles every 9.1 K near 27 °C and every 15.6 K near 125 °C, diffusion every 4.5 K and 7.8 K (derived
    # from T³ exp(−EG/kT) with EG 1.12 V; the intrinsic density's square root of it)
    one = np.ones(4)
    t = np.array([22.5, 31.6, 117.2, 132.8])
    generation = Devices({"IS": one}, leak=one, leak_diffusion=0 * one).leakage(t)
    assert generation[1] / generation[0] == pytest.approx(2, rel=0.03)
    assert generation[3] / generation[2] == pytest.approx(2, rel=0.03)
    t = np.array([24.75, 29.25, 121.1, 128.9])
    diffusion = Devices({"IS": one}, leak=one, leak_diffusion=one).leakage(t)
    assert diffusion[1] / diffusion[0] == pytest.approx(2, rel=0.03)
    assert diffusion[3] / diffusion[2] == pytest.approx(2, rel=0.03)


def test_rounding_is_on_the_makers_side() -> None:
    assert (round_down(0.0479), round_up(0.0471), round_down(99.9, 1), round_up(0.1)) == (0.047, 0.048, 90.0, 0.1)


def test_population_and_sheets_are_reproducible() -> None:
    one, two = (long_form(shelf_parts(population(6, 5, seed=4), seed=4)) for _ in range(2))
    assert one == two
    assert one.splitlines()[0].startswith("part,polarity,package")
