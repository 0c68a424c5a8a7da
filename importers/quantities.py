"""Text to SI numbers: the only place that reads a number with a unit.

The number is read here; only the unit's own text goes to pint, through a closed list of units, for its parser
would evaluate arithmetic. `4k7`, decimal commas, thousands and the prefixes of the trade are understood;
what can be read two ways is refused.
"""

import math
import re
from decimal import Decimal
from functools import cache
from typing import Any

_DEFINITIONS = """
pico- = 1e-12 = p-
nano- = 1e-9 = n-
micro- = 1e-6 = µ- = μ- = u-
milli- = 1e-3 = m-
kilo- = 1e3 = k-
mega- = 1e6 = M-
giga- = 1e9 = G-
second = [time] = s
volt = [potential] = V
ampere = [current] = A
kelvin = [temperature] = K
ohm = volt / ampere = Ω = Ω = R
watt = volt * ampere = W
joule = watt * second = J
farad = ampere * second / volt = F
henry = volt * second / ampere = H
hertz = 1 / second = Hz
siemens = ampere / volt = S
minute = 60 * second = min
""".strip().splitlines()

_OHM = re.compile(r"ohms?$", re.IGNORECASE)
_CELSIUS = re.compile(r"^(°\s*C|degC|deg\s*C|℃|C|°)$")
_PER_KELVIN = re.compile(r"^(?P<top>[a-zA-ZµμΩ]+)\s*/\s*(?:°\s*C|degC|deg\s*C|℃|C|K|kelvin)$")
_FAHRENHEIT = re.compile(r"^(°\s*F|degF)$")
_UNIT = re.compile(r"^[A-Za-zµμΩΩ°]+(\s*/\s*[A-Za-z°]+)?$")
_NUMBER = re.compile(r"^[+-]?(\d+(\.\d*)?|\.\d+)([eE][+-]?\d{1,3})?")
_CODE = re.compile(r"^(?P<whole>\d+)(?P<mark>[RKkMGmunpµμVA])(?P<part>\d+)$")
_CODE_FACTORS = {"R": 1.0, "V": 1.0, "A": 1.0, "K": 1e3, "k": 1e3, "M": 1e6, "G": 1e9, "m": 1e-3, "u": 1e-6, "µ": 1e-6,
                 "μ": 1e-6, "n": 1e-9, "p": 1e-12}  # fmt: skip
_PREFIXES = {"G": 1e9, "M": 1e6, "k": 1e3, "K": 1e3, "m": 1e-3, "u": 1e-6, "µ": 1e-6, "μ": 1e-6, "n": 1e-9, "p": 1e-12}


class QuantityError(ValueError):
    """A text that is no quantity of the wanted unit; says what is wrong and how to mend it."""

    def __init__(self, says: str, mend: str) -> None:
        super().__init__(f"{says}; {mend}")
        self.says, self.mend = says, mend


def read_number(text: str) -> float:
    """A bare number: decimal point or comma, blanks or repeated separators for thousands. Raises QuantityError."""
    value, rest = _split(text)
    if rest:
        raise QuantityError("not a number", f"write a number without {rest!r}")
    return value


def read_quantity(text: str, unit: str) -> float:
    """`text` in SI: `unit` is the SI unit wanted ("V", "Ω", "K/W", "°C", "" for a ratio). Raises QuantityError.

    A text without a unit is SI already. A ratio may be written in per cent.
    """
    coded = _code(text, unit)
    if coded is not None:
        return coded
    value, rest = _split(text)
    return scaled(value, _factor(rest, unit)) if rest else value


def scaled(value: float, factor: float) -> float:
    """Their product as a person would write it: 50 × 1e-6 is 5e-05 and not 4.9999999999999996e-05."""
    return _finite(float(Decimal(repr(value)) * Decimal(f"{factor:.12g}")))


def unit_factor(unit_text: str, wanted: str) -> float:
    """What a number in `unit_text` is to be multiplied with to be in `wanted`. Raises QuantityError."""
    return _factor(unit_text.strip(), wanted) if unit_text.strip() else 1.0


def _finite(value: float) -> float:
    if not math.isfinite(value):
        raise QuantityError("not a finite number", "write the number itself")
    return value


def _code(text: str, unit: str) -> float | None:
    """Values such as 4k7, R47 and 4u7, of IEC 60062 and the bench."""
    word = text.strip().removesuffix("Ω").removesuffix(unit or "\0")
    if word[:1] in ("R", "r") and word[1:].isdigit() and unit == "Ω":
        return float(f"0.{word[1:]}")
    match = _CODE.match(word)
    if match is None or unit in ("", "°C", "dB") or (match["mark"] in "VA" and match["mark"] != unit):
        return None
    return scaled(float(f"{match['whole']}.{match['part']}"), _CODE_FACTORS[match["mark"]])


def _split(text: str) -> tuple[float, str]:
    """The number at the start of a text, and what follows it."""
    plain = text.strip().replace("\u2212", "-").replace("\u00a0", " ").replace("\u202f", " ")
    if not plain:
        raise QuantityError("empty", "write a number")
    joined = re.sub(r"(?<=\d) (?=\d{3}(?:\D|$))", "", plain)
    joined = _decimal_point(joined)
    match = _NUMBER.match(joined)
    if match is None:
        raise QuantityError("not a number", "write a number such as 4.7 or 4k7")
    rest = joined[match.end() :].strip()
    if rest and (rest[0].isdigit() or rest[0] in ".,*+-^"):
        raise QuantityError("not one number", "write a single number with its unit")
    if rest and not re.search(r"[A-Za-zµμΩΩ°%]", rest):
        raise QuantityError("not a number", f"write it without {rest!r}")
    return _finite(float(match.group())), rest


def _decimal_point(text: str) -> str:
    """Decimal commas become points; thousands separators go; what can be read two ways is refused."""
    number = re.match(r"^[+-]?[\d.,']*", text)
    digits = number.group() if number else ""
    rest = text[len(digits) :]
    digits = digits.replace("'", "")
    commas, points = digits.count(","), digits.count(".")
    if commas and points:
        last = max(digits.rfind(","), digits.rfind("."))
        thousands = "." if digits[last] == "," else ","
        if digits.count(digits[last]) > 1:
            raise QuantityError("two decimal marks", "write one decimal mark")
        return digits.replace(thousands, "").replace(",", ".") + rest
    if commas > 1 or points > 1:
        mark = "," if commas else "."
        if not re.fullmatch(rf"[+-]?\d{{1,3}}(?:\{mark}\d{{3}})+", digits):
            raise QuantityError("several decimal marks", "write one decimal mark")
        return digits.replace(mark, "") + rest
    if commas and re.fullmatch(r"[+-]?[1-9]\d{0,2},\d{3}", digits):
        raise QuantityError("can be read two ways", "write 1234 or 1.234")
    return digits.replace(",", ".") + rest


def _factor(unit_text: str, wanted: str) -> float:
    word = _OHM.sub("ohm", unit_text)
    if wanted == "":
        if word in ("%", "per cent", "percent"):
            return 0.01
        raise QuantityError(f"unit {unit_text!r} on a plain number", "leave the unit out")
    if wanted == "°C":
        if _CELSIUS.match(word):
            return 1.0
        hint = "convert it to °C" if _FAHRENHEIT.match(word) or word == "K" else "write °C"
        raise QuantityError(f"unit {unit_text!r} is not °C", hint)
    if wanted == "dB":
        if word == "dB":
            return 1.0
        raise QuantityError(f"unit {unit_text!r} is not dB", "write dB")
    if word in _PREFIXES and (wanted != "s" or word != "m"):
        return _PREFIXES[word]  # a bare prefix: 4.7 k in a column of ohms
    return _by_pint(word, wanted, unit_text)


@cache
def _by_pint(word: str, wanted: str, shown: str) -> float:
    import pint

    mend = f"write it in {wanted}"
    if not _UNIT.match(word):
        raise QuantityError(f"unit {shown!r} is not known", mend)
    per_kelvin = _PER_KELVIN.match(word)
    top = per_kelvin["top"] if per_kelvin else word
    if wanted == "K/W":
        parts = [one.strip() for one in word.split("/")]
        kelvin = len(parts) == 2 and (_CELSIUS.match(parts[0]) or parts[0] in ("K", "mK"))
        if not kelvin:
            raise QuantityError(f"unit {shown!r} is not a thermal resistance", mend)
        scale = 1e-3 if parts[0] == "mK" else 1.0
        return scale / _by_pint(parts[1], "W", parts[1])
    if wanted == "W/K":
        if per_kelvin is None:
            raise QuantityError(f"unit {shown!r} is not a derating", "write it in mW/K")
        return _by_pint(top, "W", top)
    try:
        return float(_registry().Quantity(1.0, word).to(wanted).magnitude)
    except (pint.errors.UndefinedUnitError, pint.errors.DimensionalityError, AttributeError, ValueError) as error:
        raise QuantityError(f"unit {shown!r} does not measure what is wanted", mend) from error


@cache
def _registry() -> Any:
    import pint

    return pint.UnitRegistry(_DEFINITIONS)
