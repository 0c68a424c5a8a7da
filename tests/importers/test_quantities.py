"""Numbers with units as the trade writes them; value codes are those of IEC 60062."""

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from importers.quantities import QuantityError, read_number, read_quantity


@pytest.mark.parametrize(
    ("text", "unit", "value"),
    [
        # IEC 60062 codes
        ("R47", "Ω", 0.47), ("4R7", "Ω", 4.7), ("470R", "Ω", 470.0), ("4K7", "Ω", 4700.0), ("47K3", "Ω", 47300.0),
        ("4M7", "Ω", 4.7e6), ("4k7", "Ω", 4700.0),
        # common practice
        ("100n", "F", 100e-9), ("4u7", "F", 4.7e-6), ("150 mA", "A", 0.15), ("0,5 A", "A", 0.5), ("1 000 mA", "A", 1.0),
        ("1.000,5 V", "V", 1000.5), ("−5 V", "V", -5.0), ("50 uA", "A", 50e-6), ("50 µA", "A", 50e-6), ("50 μA", "A", 50e-6),
        ("25 °C", "°C", 25.0), ("25 C", "°C", 25.0), ("-10 degC", "°C", -10.0), ("62.5 K/W", "K/W", 62.5),
        ("62.5 °C/W", "K/W", 62.5), ("5 C/W", "K/W", 5.0), ("5.7 mW/C", "W/K", 5.7e-3), ("10 %", "", 0.1),
        ("180 ohm", "Ω", 180.0), ("4.7 kOhm", "Ω", 4700.0), ("1 mΩ", "Ω", 1e-3), ("1 MΩ", "Ω", 1e6), ("3.3V", "V", 3.3),
        ("10 µs", "s", 10e-6), ("20 MHz", "Hz", 20e6), ("2 dB", "dB", 2.0), ("1e-3", "A", 1e-3), ("58", "K/W", 58.0),
    ],
)  # fmt: skip
def test_spellings(text: str, unit: str, value: float) -> None:
    assert read_quantity(text, unit) == value


@pytest.mark.parametrize(
    ("text", "unit"),
    [
        ("1,234", "V"), ("9**9**9 V", "V"), ("nan A", "A"), ("inf V", "V"), ("12 W", "V"), ("", "V"), ("100 m", "s"),
        ("25 °F", "°C"), ("5 K", "°C"), ("3 apples", "A"), ("1.2.3 V", "V"), ("1e400", "A"), ("2 + 2 V", "V"), ("V", "V"),
        ("10 dB", "V"), ("5 W/K", "K/W"), ("5 K/W", "W/K"), ("4k7 Hz", "V"), ("__import__('os')", "V"),
    ],
)  # fmt: skip
def test_refusals_say_how_to_mend(text: str, unit: str) -> None:
    with pytest.raises(QuantityError) as error:
        read_quantity(text, unit)
    assert error.value.says and error.value.mend


PREFIXES = {"p": -12, "n": -9, "u": -6, "m": -3, "": 0, "k": 3, "M": 6, "G": 9}


@settings(max_examples=300, deadline=None)
@given(st.integers(1, 99_999), st.sampled_from(list(PREFIXES)), st.sampled_from(["V", "A", "W", "Hz", "F", "H", "Ω"]))
def test_units_round_trip(digits: int, prefix: str, unit: str) -> None:
    """A number written with any prefix reads as the float nearest to its decimal."""
    assert read_quantity(f"{digits / 100:.2f} {prefix}{unit}", unit) == float(f"{digits}e{PREFIXES[prefix] - 2}")


@given(st.text(max_size=30))
def test_no_text_does_anything_but_read_or_refuse(text: str) -> None:
    for unit in ("V", "Ω", "°C", "K/W", ""):
        try:
            read_quantity(text, unit)
        except QuantityError:
            continue


def test_a_bare_number_takes_no_unit() -> None:
    assert read_number("12") == 12
    with pytest.raises(QuantityError):
        read_number("12 V")
