"""Invented transistor types, each a nominal Gummel–Poon model and a crowd of devices spread around it.

No type here is, or is modelled on, a registered one. The spreads are wider than one production lot: a sheet must
hold for every lot that a maker may ship.
"""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from .gummel_poon import PARAMETERS, Devices, Floats


@dataclass(frozen=True, slots=True)
class Family:
    """What the types of one family have in common. Pairs are (lowest, highest) of the nominal values."""

    name: str
    current: tuple[float, ...]  # rated IC, A
    vceo: tuple[float, ...]
    gain: tuple[float, float]
    knee: tuple[float, float]  # IKF over rated IC
    recombination: tuple[float, float]  # collector current where recombination equals the ideal base current, over IC
    epitaxy: tuple[float, float]  # RCO·IC over VO
    mobility: tuple[float, float]  # CN: the lighter the doping, the faster mobility falls when hot
    vo: tuple[float, float]  # V
    doping: tuple[float, float]  # GAMMA
    reverse_gain: tuple[float, float]
    ft: tuple[float, float]  # Hz
    leak: tuple[float, float]  # A at 25 °C
    packages: tuple[tuple[str, float, float], ...]  # name, RthJA, RthJC in K/W
    sheet_vce: tuple[float, ...]  # VCE of the hFE table
    weight: int  # types of this family in every twelve


SMALL = (("TO-92", 200.0, 83.0), ("SOT-23", 350.0, 120.0), ("TO-18", 350.0, 100.0))
MEDIUM = (("TO-39", 175.0, 35.0), ("TO-126", 100.0, 10.0), ("SOT-223", 83.0, 12.0), ("TO-92L", 125.0, 45.0))
POWER = (("TO-220", 62.5, 2.5), ("TO-3", 35.0, 1.2), ("TO-247", 40.0, 1.0))

FAMILIES = (
    Family("small", (0.1, 0.2, 0.5, 0.6, 0.8), (25, 30, 40, 45, 60, 80), (110, 260), (0.6, 1.5), (1e-5, 1e-3),
           (0.05, 0.2), (1.5, 1.9), (3, 8), (1e-12, 1e-10), (2, 12), (8e7, 3e8), (2e-9, 2e-8),
           SMALL, (1.0, 5.0, 10.0), 4),
    Family("medium", (1.0, 1.5, 2.0, 3.0), (30, 45, 60, 80, 100), (90, 200), (0.5, 1.2), (1e-5, 1e-3),
           (0.05, 0.2), (1.7, 2.1), (4, 10), (1e-11, 1e-9), (1, 8), (3e7, 1.2e8), (5e-9, 8e-8),
           MEDIUM, (1.0, 2.0, 5.0), 3),
    Family("power", (4.0, 6.0, 8.0, 10.0, 15.0), (40, 60, 80, 100), (50, 120), (0.3, 0.7), (1e-4, 3e-3),
           (0.06, 0.22), (1.9, 2.3), (5, 14), (1e-10, 4e-9), (0.4, 4), (2e6, 1.5e7), (1e-7, 3e-5),
           POWER, (2.0, 4.0), 2),
    Family("high voltage", (0.1, 0.3, 0.5, 1.0), (150, 200, 300, 400, 500), (60, 140), (0.5, 1.2), (3e-5, 2e-3),
           (0.08, 0.3), (2.0, 2.4), (12, 35), (1e-9, 4e-8), (0.4, 4), (1.5e7, 6e7), (1e-8, 1e-7),
           MEDIUM[:2] + SMALL[:1], (5.0, 10.0), 2),
    Family("darlington", (0.5, 1.0, 4.0, 8.0), (30, 45, 60, 80, 100), (70, 160), (0.4, 1.0), (1e-5, 1e-3),
           (0.05, 0.25), (1.8, 2.2), (4, 12), (1e-11, 2e-9), (0.8, 5), (1e7, 1e8), (1e-8, 3e-7),
           MEDIUM + POWER[:1], (3.0, 5.0), 1),
)  # fmt: skip


@dataclass(frozen=True, eq=False)
class Type:
    """One invented type: what its maker aims at, and the devices he ships."""

    number: str
    family: Family
    polarity: str  # "npn" or "pnp"
    current: float  # rated IC
    vceo: float
    package: str
    rth_ja: float
    rth_jc: float
    tj_max: float
    devices: Devices

    @property
    def darlington(self) -> bool:
        return self.devices.driver is not None

    @property
    def structure(self) -> str:
        """As the engine's records spell it."""
        return self.polarity + ("-darlington" if self.darlington else "")


def population(types: int = 24, devices: int = 20, seed: int = 1) -> list[Type]:
    """`types` invented types of `devices` devices each; the same seed gives the same population."""
    pattern = [family for family in FAMILIES for _ in range(family.weight)]
    return [
        _type(row, pattern[row % len(pattern)], devices, np.random.default_rng([seed, row])) for row in range(types)
    ]


def _type(row: int, family: Family, n: int, rng: np.random.Generator) -> Type:
    current, vceo = float(rng.choice(family.current)), float(rng.choice(family.vceo))
    if family.name == "darlington":  # a package that suits the current
        package, rth_ja, rth_jc = POWER[0] if current > 2 else MEDIUM[int(rng.integers(len(MEDIUM)))]
    else:
        package, rth_ja, rth_jc = family.packages[int(rng.integers(len(family.packages)))]
    hot = package in ("TO-18", "TO-39", "TO-3") and rng.random() < 0.6
    nominal = _nominal(family, current, rng)
    output = _spread(nominal, n, rng)
    driver = None
    r_driver = r_output = None
    if family.name == "darlington":
        driver = _spread(_smaller(nominal, 6.0), n, rng)
        inner = rng.random() < 0.7
        middle = 0.65 / (0.001 * current) if inner else np.inf  # takes a thousandth of the current
        r_output = np.full(n, middle) * rng.uniform(0.7, 1.4, n)
        r_driver = np.full(n, 40 * middle) * rng.uniform(0.7, 1.4, n)
    devices = Devices(
        output,
        driver,
        r_driver,
        r_output,
        leak=_log(rng, *family.leak) * np.exp(rng.uniform(np.log(0.05), 0, n)),
        leak_diffusion=np.full(n, _log(rng, 1e-4, 0.012)),
    )
    letters = {"small": "S", "medium": "M", "power": "P", "high voltage": "H", "darlington": "D"}
    number = f"Y{letters[family.name]}{'N' if row % 2 == 0 else 'P'}-{row + 1:02d}"
    polarity = "npn" if row % 2 == 0 else "pnp"
    tj_max = 200.0 if hot else (175.0 if package == "SOT-223" else 150.0)
    return Type(number, family, polarity, current, vceo, package, rth_ja, rth_jc, tj_max, devices)


def _log(rng: np.random.Generator, low: float, high: float) -> float:
    return float(np.exp(rng.uniform(np.log(low), np.log(high))))


def _nominal(family: Family, current: float, rng: np.random.Generator) -> dict[str, float]:
    """The nominal model of a type of rated `current`."""
    p: dict[str, float] = {
        "XTI": 3.0,
        "EG": 1.11,
        "CN": rng.uniform(*family.mobility),
        "D": 0.87,
        "TRC1": rng.uniform(3e-3, 6e-3),
    }
    p["BF"] = _log(rng, *family.gain) * 1.3  # the peak of the curve stays below BF
    p["IS"] = _log(rng, 2e-14, 2e-13) * current
    p["NE"] = rng.uniform(1.4, 2.0)
    crossing = _log(rng, *family.recombination) * current
    v = 0.025693 * np.log(crossing / p["IS"])
    p["ISE"] = crossing / p["BF"] / np.exp(v / (p["NE"] * 0.025693))
    p["IKF"] = _log(rng, *family.knee) * current
    p["VAF"] = rng.uniform(60, 150)
    p["BR"] = _log(rng, *family.reverse_gain)
    p["RC"], p["RE"] = rng.uniform(0.06, 0.2) / current, rng.uniform(0.02, 0.07) / current
    p["RB"] = rng.uniform(1.0, 5.0) / current
    p["RBM"] = p["RB"] * rng.uniform(0.15, 0.4)
    p["XTB"] = rng.uniform(1.4, 2.1)
    p["VO"] = rng.uniform(*family.vo)
    p["RCO"] = rng.uniform(*family.epitaxy) * p["VO"] / current
    p["GAMMA"] = _log(rng, *family.doping)
    p["TF"] = 1 / (2 * np.pi * _log(rng, *family.ft))
    p["TR"] = p["TF"] * _log(rng, 10, 60)
    p["CJE"], p["CJC"] = 60e-12 * current**0.8, 20e-12 * current**0.8
    return p


def _smaller(p: dict[str, float], ratio: float) -> dict[str, float]:
    """The same transistor with `ratio` times less area."""
    scaled = dict(p)
    for name in ("IS", "ISE", "IKF", "CJE", "CJC"):
        scaled[name] = p[name] / ratio
    for name in ("RC", "RE", "RB", "RBM", "RCO"):
        scaled[name] = p[name] * ratio
    return scaled


def _spread(nominal: dict[str, float], n: int, rng: np.random.Generator) -> dict[str, Floats]:
    """`n` devices around a nominal model."""

    def between(low: float, high: float) -> Floats:
        return np.exp(rng.uniform(np.log(low), np.log(high), n))

    p = {name: np.full(n, nominal[name]) for name in PARAMETERS}
    gain = np.clip(np.exp(rng.normal(0, 0.42, n)), 0.4, 2.2)
    p["BF"] *= gain
    p["IS"] *= between(0.5, 2)
    p["ISE"] *= between(0.4, 2.5) / gain * (p["IS"] / nominal["IS"]) ** (1 / nominal["NE"])
    for name, low, high in (
        ("IKF", 0.7, 1.4), ("RC", 0.7, 1.4), ("RCO", 0.75, 1.3), ("RB", 0.6, 1.6), ("BR", 0.5, 2), ("TR", 0.5, 2),
        ("TF", 0.8, 1.25),
    ):  # fmt: skip
        p[name] *= between(low, high)
    p["RBM"] = np.minimum(p["RBM"] * between(0.7, 1.4), p["RB"])
    p["XTB"] = np.clip(p["XTB"] + rng.uniform(-0.25, 0.25, n), 1.2, 2.3)
    return p


def by_number(types: Sequence[Type]) -> dict[str, Type]:
    """The types by type number."""
    return {one.number: one for one in types}
