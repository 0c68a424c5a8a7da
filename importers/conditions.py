"""Test conditions as text: `IC 150 mA, IB 15 mA, pulsed` to named SI values; what is not understood stays words."""

import re
from dataclasses import dataclass

from .quantities import QuantityError, read_quantity

_UNITS = {
    "ic": "A", "ib": "A", "ib1": "A", "ib2": "A", "ie": "A", "vce": "V", "vbe": "V", "vcb": "V", "veb": "V", "vcc": "V",
    "rs": "Ω", "rg": "Ω", "f": "Hz", "t": "s", "tp": "s", "tj": "°C", "ta": "°C", "tc": "°C", "tamb": "°C", "tcase": "°C",
}  # fmt: skip
_SAME = {"ib1": "ib", "rg": "rs", "tp": "t", "tamb": "ta", "tcase": "tc"}
_SIGNED = {"vbe", "tj", "ta", "tc"}
_VALUE = r"[-+\u2212]?\s*[\d.,]+(?:[eE][-+]?\d+)?[RkKM]?\d*\s*[A-Za-zµμΩΩ°]*"
_CLAUSE = re.compile(
    rf"^(?:for\s+|at\s+|above\s+|over\s+)*(?P<names>[A-Za-z]+\d?(?:\s*=\s*[A-Za-z]+\d?)*)\s*(?:=|:|above|over)?\s*"
    rf"(?P<value>{_VALUE})(?P<rest>.*)$"
)
_FREQUENCY = re.compile(r"^[\d.,]+\s*[kMG]?Hz$")
_REMARK = re.compile(r"\(([^)]*)\)")
_PULSED = re.compile(r"^(pulsed?|pulse test|pulse)$", re.IGNORECASE)


@dataclass(frozen=True, slots=True)
class Conditions:
    """What a text of conditions says."""

    values: dict[str, float]
    pulsed: bool
    note: str


def condition_unit(name: str) -> str | None:
    """The SI unit of a condition called `name`, whatever its case; None when there is no such condition."""
    return _UNITS.get(name.strip().casefold())


def condition_name(name: str) -> str:
    """The name under which a condition is kept: ib1 is ib."""
    key = name.strip().casefold()
    return _SAME.get(key, key)


def magnitude(name: str, value: float, *, pnp: bool) -> float:
    """A condition with a PNP's sign taken off; temperatures and the sign of VBE (as of an NPN) stay."""
    if name == "vbe":
        return -value if pnp else value
    return value if name in _SIGNED else abs(value)


def read_conditions(text: str, *, pnp: bool = False) -> Conditions:
    """Named values, whether the test is pulsed, and the words that were not understood."""
    notes = [remark.strip() for remark in _REMARK.findall(text)]
    values: dict[str, float] = {}
    pulsed = False
    for piece in re.split(r"[;,](?=\s|$|[A-Za-z])", _REMARK.sub("", text)):
        clause = piece.strip()
        if not clause:
            continue
        if _PULSED.match(clause):
            pulsed = True
            continue
        left_over = _read_clause(clause, values, pnp)
        if left_over:
            notes.append(left_over)
    return Conditions(values, pulsed, "; ".join(note for note in notes if note))


def _read_clause(clause: str, values: dict[str, float], pnp: bool) -> str:
    """Take what a clause states into `values`; give back the words that remain."""
    if _FREQUENCY.match(clause):
        values["f"] = read_quantity(clause, "Hz")
        return ""
    match = _CLAUSE.match(clause)
    if match is None:
        return clause
    names = [condition_name(name) for name in match["names"].split("=")]
    if any(name not in _UNITS for name in names):
        return clause
    try:
        value = read_quantity(match["value"], _UNITS[names[0]])
    except QuantityError:
        return clause
    for name in names:
        values[name] = magnitude(name, value, pnp=pnp)
    return match["rest"].strip()
