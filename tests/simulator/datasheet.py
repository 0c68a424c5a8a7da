"""The limits that a maker would print for an invented type: measured on its devices, guarded, rounded, with gaps."""

import math
from collections.abc import Sequence
from typing import Any

import numpy as np

from engine.part import Limit, Part

from .gummel_poon import Floats, solve
from .population import Type
from .transient import step_times

COLUMNS = (
    "part", "polarity", "package", "maker", "symbol", "min", "typ", "max", "unit",
    "ic", "ib1", "ib2", "vce", "vbe", "vcb", "vcc", "tj", "ta", "tc", "source",
)  # fmt: skip
UNITS = {"hFE": "", "TJ": "degC", "PD": "W", "RthJA": "K/W", "RthJC": "K/W", "ton": "s", "toff": "s"}


def gain(kind: Type, ic: float, vce: float, t: float = 25.0) -> Floats:
    """hFE of every device of a type, shape (n,)."""
    n = len(kind.devices)
    point = solve(kind.devices, np.full(n, t), lambda vb, vc, ib, i, _: ((i - ic) / ic, vc - vce))
    return np.where(point.converged, ic / point.ib, np.nan)


def saturation(kind: Type, ic: float, ib: float, t: float = 25.0) -> tuple[Floats, Floats]:
    """VCE(sat) and VBE(sat) of every device, shapes (n,); inf where the device does not saturate."""
    n = len(kind.devices)
    point = solve(kind.devices, np.full(n, t), lambda vb, vc, b, i, _: ((i - ic) / ic, (b - ib) / ib))
    return np.where(point.converged & (point.vce < 5), point.vce, np.inf), point.vbe


def round_down(value: float, figures: int = 2) -> float:
    """A printed minimum: never above the value."""
    size = 10 ** (math.floor(math.log10(value)) - figures + 1)
    return float(f"{math.floor(value / size + 1e-9) * size:.6g}")


def round_up(value: float, figures: int = 2) -> float:
    """A printed maximum: never below the value."""
    size = 10 ** (math.floor(math.log10(value)) - figures + 1)
    return float(f"{math.ceil(value / size - 1e-9) * size:.6g}")


class _Sheet:
    """A sheet being written: guard bands and rounding in one place."""

    def __init__(self, kind: Type, seed: int) -> None:
        self.kind = kind
        self.rng = np.random.default_rng([seed, *kind.number.encode()])
        self.limits: list[Limit] = []

    def chance(self, share: float) -> bool:
        return bool(self.rng.random() < share)

    def add(self, symbol: str, low: float | None = None, high: float | None = None, **conditions: float) -> None:
        pairs = tuple(sorted((name, float(value)) for name, value in conditions.items()))
        self.limits.append(Limit(symbol, min=low, max=high, conditions=pairs, source="invented sheet"))

    def least(self, values: Floats) -> float:
        return round_down(float(values.min()) * self.rng.uniform(0.85, 0.97))

    def most(self, values: Floats) -> float:
        return round_up(float(values.max()) * self.rng.uniform(1.03, 1.18))


def part(kind: Type, seed: int = 1) -> Part:
    """The type's sheet as the engine's record."""
    sheet = _Sheet(kind, seed)
    _ratings(sheet)
    _gains(sheet)
    _saturations(sheet)
    _leakage(sheet)
    if sheet.chance(0.75) and not kind.darlington:
        _times(sheet)
    return Part(kind.number, kind.structure, kind.package, "Invented Devices", "", tuple(sheet.limits))


def _ratings(sheet: _Sheet) -> None:
    kind = sheet.kind
    sheet.add("VCEO", high=kind.vceo)
    sheet.add("VCBO", high=round_up(kind.vceo * sheet.rng.uniform(1.0, 1.6)))
    sheet.add("VEBO", high=float(sheet.rng.choice([5, 6, 7])))
    sheet.add("IC", high=kind.current)
    if sheet.chance(0.6):
        sheet.add("ICM", high=round_up(kind.current * sheet.rng.uniform(1.5, 2.5)))
    if sheet.chance(0.5):
        sheet.add("IB", high=round_down(kind.current / (50 if kind.darlington else 6)))
    sheet.add("TJ", high=kind.tj_max)
    sheet.add("PD", high=round_down((kind.tj_max - 25) / kind.rth_ja), ta=25)
    sheet.add("RthJA", high=kind.rth_ja)
    if sheet.chance(0.9):
        sheet.add("PD", high=round_down((kind.tj_max - 25) / kind.rth_jc), tc=25)
        sheet.add("RthJC", high=kind.rth_jc)


def _gains(sheet: _Sheet) -> None:
    kind, rng = sheet.kind, sheet.rng
    vce = float(rng.choice(kind.family.sheet_vce))
    shares = sorted(rng.choice([0.001, 0.003, 0.01, 0.03, 0.1, 0.2, 0.3, 0.5, 1.0], int(rng.integers(3, 6)), False))
    middle = shares[len(shares) // 2]
    for share in shares:
        ic = round_down(share * kind.current, 1)
        values = gain(kind, ic, vce)
        if not values.min() > 8:  # no maker prints a gain where the worst device has none left
            continue
        high = sheet.most(values) if share == middle and sheet.chance(0.8) else None
        sheet.add("hFE", sheet.least(values), high, ic=ic, vce=vce, tj=25)
        if share == middle and sheet.chance(0.35):
            cold = gain(kind, ic, vce, -55.0)
            if cold.min() > 5:
                sheet.add("hFE", sheet.least(cold), ic=ic, vce=vce, tj=-55)


def _saturations(sheet: _Sheet) -> None:
    kind, rng = sheet.kind, sheet.rng
    beta = float(rng.choice([250, 500])) if kind.darlington else float(rng.choice([10, 10, 10, 20]))
    # a maker tests saturation near the currents he sells the part for, and often at smaller ones too
    shares = {float(rng.choice([0.5, 0.5, 1.0])), *rng.choice([0.02, 0.1, 0.2, 0.5], int(rng.integers(0, 3)), False)}
    for share in sorted(shares):
        ic, forced, vce, vbe = _saturated(kind, round_down(share * kind.current, 1), beta)
        if not np.isfinite(vce).all():
            continue
        ib = ic / forced
        sheet.add("VCE(sat)", high=sheet.most(vce), ic=ic, ib=ib, tj=25)
        if sheet.chance(0.98):
            low = sheet.least(vbe) if sheet.chance(0.3) else None
            sheet.add("VBE(sat)", low, sheet.most(vbe), ic=ic, ib=ib, tj=25)


def _saturated(kind: Type, ic: float, beta: float) -> tuple[float, float, Floats, Floats]:
    """Collector current, IC ÷ IB, VCE(sat) and VBE(sat) of a test: a maker tests where every device saturates."""
    for current, forced in ((ic, beta), (ic, beta / 2), (ic / 2, beta / 2), (ic / 4, beta / 2)):
        vce, vbe = saturation(kind, current, current / forced)
        if np.isfinite(vce).all():
            break
    return current, forced, vce, vbe


def _leakage(sheet: _Sheet) -> None:
    kind = sheet.kind
    leak = kind.devices.leakage
    n = len(kind.devices)
    vcb = round_down(0.8 * kind.vceo, 1)
    if sheet.chance(0.6 if kind.darlington else 0.2):
        for t in (25.0, 125.0):
            short = solve(kind.devices, np.full(n, t), lambda vb, vc, ib, ic, _: (vb, vc - vcb), off=np.full(n, vcb))
            if short.converged.all():
                sheet.add("ICES", high=sheet.most(short.ic), vce=vcb, vbe=0.0, tj=t)
    if kind.darlington and sheet.chance(0.7):
        half = round_down(0.5 * kind.vceo, 1)
        for t in (25.0, 125.0):
            opened = solve(
                kind.devices, np.full(n, t), lambda vb, vc, ib, ic, _: (ib / 1e-6, vc - half), off=np.full(n, half)
            )
            if opened.converged.all():
                sheet.add("ICEO", high=sheet.most(opened.ic), vce=half, tj=t)
    sheet.add("ICBO", high=sheet.most(leak(np.full(n, 25.0))), vcb=vcb, tj=25)
    if sheet.chance(0.5):
        hot = float(sheet.rng.choice([100.0, 125.0, 150.0]))
        sheet.add("ICBO", high=sheet.most(leak(np.full(n, hot))), vcb=vcb, tj=hot)


def _times(sheet: _Sheet) -> None:
    kind = sheet.kind
    ic = round_down(0.3 * kind.current, 1)
    ib = ic / 10
    on, off = step_times(kind, ic, ib, ib, vcc=30.0)
    if np.isfinite(on).all() and np.isfinite(off).all():
        sheet.add("ton", high=sheet.most(on), ic=ic, ib=ib, vcc=30.0, tj=25)
        sheet.add("toff", high=sheet.most(off), ic=ic, ib=ib, ib2=ib, vcc=30.0, tj=25)


def shelf_parts(types: Sequence[Type], seed: int = 1) -> list[Part]:
    """The sheets of a population."""
    return [part(kind, seed) for kind in types]


def long_form(parts: Sequence[Part]) -> str:
    """The same sheets as a long-form table (CSV text, one limit a row)."""
    lines = [",".join(COLUMNS)]
    for one in parts:
        polarity = one.structure.replace("-darlington", " Darlington").replace("npn", "NPN").replace("pnp", "PNP")
        for limit in one.limits:
            row: dict[str, Any] = {
                "part": one.type_number, "polarity": polarity, "package": one.package, "maker": one.maker,
                "symbol": limit.symbol, "min": limit.min, "max": limit.max, "source": limit.source,
                "unit": UNITS.get(limit.symbol, "V" if limit.symbol.startswith("V") else "A"),
            }  # fmt: skip
            row |= {"ib1" if name == "ib" else name: value for name, value in limit.conditions}
            lines.append(",".join("" if row.get(name) is None else f"{_cell(row[name])}" for name in COLUMNS))
    return "\n".join(lines) + "\n"


def _cell(value: Any) -> str:
    return f"{value:.9g}" if isinstance(value, float) else str(value)
