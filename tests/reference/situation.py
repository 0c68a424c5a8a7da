"""The unkind corners of a requirement on plain floats, with their grades of evidence."""

from dataclasses import dataclass

from engine.evidence import Evidence
from engine.requirement import Requirement

from .ieee import NAN, known

G, D = int(Evidence.GUARANTEED), int(Evidence.DERIVED)


@dataclass(frozen=True)
class Situation:
    """What no part can change."""

    req: Requirement
    pnp: bool
    vs_min: float
    vs_max: float
    r_max: float  # NaN for a constant current
    ic_max: float
    ic_grade: int
    ic_least: float  # of a constant current, else NaN
    ic_inrush: float  # NaN but for a lamp
    corners: tuple[tuple[float, float], ...]  # (IC, drive level against the emitter)
    drive_max: float
    off_level: float
    off_leak: float
    off_open: bool
    v_off: float  # NaN where nothing clamps the coil
    energy: float  # NaN unless nothing clamps it
    inductive: bool

    def number(self, key: str) -> float:
        return self.req.number(key)

    @property
    def unclamped(self) -> bool:
        return known(self.energy)


def situation(req: Requirement) -> Situation:
    """The corners of `req`."""
    kind, tol = req.word("load.kind"), req.number("load.tolerance")
    vs_min, vs_max = req.number("supply.min"), req.number("supply.max")
    constant = coil = False
    r_max = ic_least = NAN
    if kind == "constant current":
        constant = True
        ic_max = ic_low = req.number("load.current") * (1 + tol)
        ic_least = req.number("load.current") * (1 - tol)
    else:
        r = req.number("load.resistance")
        r = r if known(r) else vs_max / req.number("load.current")
        coil = kind == "coil"
        r_min, r_max = r * (1 - tol), r * (1 + tol)
        if coil:  # copper, IEC 60028
            r_min *= (234.5 + req.number("ambient.min")) / 254.5
            r_max *= (234.5 + req.number("ambient.max")) / 254.5
        ic_max, ic_low = vs_max / r_min, vs_min / r_min
    pnp = req.word("position") == "high side"
    off_open = pnp and req.word("drive.off") == "open"
    if pnp:
        sink = req.number("drive.low_max")
        drive_max = vs_max - req.number("drive.low_min")
        at_min, at_max = (ic_low, vs_min - sink), (ic_max, vs_max - sink)
        corners = (at_min,) if constant else (at_min, at_max)
        off_level = 0.0 if off_open else req.number("drive.off_drop_max")
    else:
        drive_max = req.number("drive.high_max")
        corners = ((ic_max, req.number("drive.high_min")),)
        off_level = req.number("drive.low_max")
    v_off, energy = _turn_off(req, vs_max, ic_max)
    return Situation(
        req, pnp, vs_min, vs_max, r_max, ic_max, D if coil else G, ic_least,
        ic_max * req.number("load.inrush") if kind == "lamp" else NAN, corners, drive_max, off_level,
        req.number("drive.off_leakage_max") if off_open else 0.0, off_open, v_off, energy, coil,
    )  # fmt: skip


def _turn_off(req: Requirement, vs_max: float, ic_max: float) -> tuple[float, float]:
    """Highest voltage when off, and the energy of a coil that nothing clamps."""
    if req.word("load.kind") != "coil":
        return vs_max, NAN
    clamp = req.word("load.clamp")
    if clamp == "none":
        return NAN, req.number("load.inductance") * ic_max**2 / 2
    zener = 0.0
    if clamp == "zener":
        zener = req.number("load.clamp_voltage") * (1 + req.number("load.clamp_tolerance"))
    return vs_max + zener + req.number("load.clamp_drop"), NAN
