"""Numbers as a practitioner reads them: engineering prefixes, few figures, a word for what is not known."""

import math

_PREFIXES = (
    (1e9, "G"),
    (1e6, "M"),
    (1e3, "k"),
    (1.0, ""),
    (1e-3, "m"),
    (1e-6, "µ"),
    (1e-9, "n"),
    (1e-12, "p"),
)
_PLAIN = {"", "°C", "K", "dB", "K/W", "%"}  # units that take no prefix
NOT_STATED = "not stated"


def number(value: float, digits: int = 4) -> str:
    """`value` with `digits` significant figures, no exponent for everyday sizes, no trailing zeros."""
    if math.isnan(value):
        return NOT_STATED
    if math.isinf(value):
        return "∞" if value > 0 else "−∞"
    text = f"{value:.{digits}g}"
    if "e" in text and 1e-4 <= abs(value) < 1e7:
        text = f"{value:.0f}" if abs(value) >= 1 else f"{value:.7f}".rstrip("0").rstrip(".")
    return text


def quantity(value: float | None, unit: str, digits: int = 4) -> str:
    """`value` in `unit` with the prefix that leaves 1 to 999 before the unit, such as `4.7 mA`.

    None and NaN read "not stated". Units that take no prefix (°C, K/W, a ratio) are left alone.
    """
    if value is None or math.isnan(value):
        return NOT_STATED
    if unit in _PLAIN or value == 0 or math.isinf(value):
        return f"{number(value, digits)} {unit}".strip()
    size = abs(value)
    for factor, prefix in _PREFIXES:
        if float(f"{size / factor:.{digits}g}") >= 1:
            return f"{number(value / factor, digits)} {prefix}{unit}"
    factor, prefix = _PREFIXES[-1]
    return f"{number(value / factor, digits)} {prefix}{unit}"


def headroom(value: float) -> str:
    """A headroom as `×1.26`; unlimited where there is no demand."""
    if math.isnan(value):
        return "?"
    if math.isinf(value):
        return "no demand"
    return f"×{value:.2f}" if value < 100 else f"×{value:.0f}"
