"""A long shelf of invented parts, each with the limits a sheet usually has."""

from collections.abc import Mapping

import numpy as np

from engine.duty.switch_fields import FIELDS, complete
from engine.part import CONDITIONS
from engine.requirement import Requirement, Value, with_defaults
from engine.shelf import SYMBOL_CODES, LimitTable, Shelf

COIL: dict[str, Value] = {
    "supply.min": 21.6, "supply.max": 26.4, "load.kind": "coil", "load.resistance": 180.0, "load.tolerance": 0.1,
    "load.inductance": 0.35, "load.clamp": "diode", "drive.high_min": 4.4, "drive.high_max": 5.25,
    "drive.low_max": 0.4, "drive.current_max": 0.02, "ambient.min": -10.0, "ambient.max": 60.0,
    "limits.on_voltage_max": 0.8,
}  # fmt: skip


def requirement(values: Mapping[str, Value]) -> Requirement:
    """A requirement of stated values, completed as a file's would be."""
    full, problems, notes = complete(with_defaults(FIELDS, values))
    assert not problems, problems
    return Requirement("switch", "Bench", full, tuple(notes))


def table(n: int, seed: int = 1) -> LimitTable:
    """The limits of `n` parts: 16 each."""
    rng = np.random.default_rng(seed)
    ic, h = 10 ** rng.uniform(-1, 1.2, n), 10 ** rng.uniform(1.3, 2.5, n)
    stated: list[tuple[str, dict[str, object]]] = [
        ("VCEO", {"max": rng.choice([30, 45, 60, 80, 100, 300.0], n)}), ("IC", {"max": ic}), ("VEBO", {"max": 5.0}),
        ("TJ", {"max": 150.0}), ("RthJA", {"max": rng.choice([60, 120, 200, 350.0], n)}), ("PD", {"max": 0.6, "ta": 25.0}),
        ("ICBO", {"max": 1e-7, "vcb": rng.choice([30, 60.0], n)}),
    ]  # fmt: skip
    for share, of_gain in ((0.001, 0.6), (0.01, 0.9), (0.1, 1.0), (0.5, 0.5)):
        vce = np.where(rng.random(n) < 0.5, 1.0, 5.0)
        stated.append(("hFE", {"min": h * of_gain, "ic": ic * share, "vce": vce}))
    for share, volts in ((0.1, 0.2), (0.5, 0.6)):
        test = {"ic": ic * share, "ib": ic * share / 10}
        stated += [("VCE(sat)", {"max": volts, **test}), ("VBE(sat)", {"max": 0.9 + share * 0.4, **test})]
    columns = {
        name: np.concatenate([np.broadcast_to(np.asarray(said.get(name, np.nan), float), n) for _, said in stated])
        for name in ("min", "typ", "max", *CONDITIONS)
    }
    part = np.tile(np.arange(n), len(stated))
    symbol = np.repeat([SYMBOL_CODES[name] for name, _ in stated], n)
    order = np.argsort(part, kind="stable")
    return LimitTable(part[order], symbol[order], {name: column[order] for name, column in columns.items()})


def shelf(n: int) -> Shelf:
    """`n` parts, every second one a PNP."""
    words = ["npn", "pnp"] * (n // 2) + ["npn"] * (n % 2)
    return Shelf.from_table([f"P{i:07d}" for i in range(n)], words, ["TO-92"] * n, table(n))
