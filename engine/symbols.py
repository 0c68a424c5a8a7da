"""Every quantity once: its letter symbol, SI unit, meaning, kind, plausible range and other spellings.

Letter symbols follow JEDEC JESD77 and IEC 60747-7.
"""

from dataclasses import dataclass
from typing import Literal

Kind = Literal["rating", "characteristic"]


@dataclass(frozen=True, slots=True)
class Symbol:
    """One letter symbol of a data sheet."""

    name: str  # as printed and stored
    unit: str  # SI unit; °C for temperatures; "" for a ratio
    meaning: str
    kind: Kind  # a rating is never to be exceeded; a characteristic is what the sheet guarantees
    low: float  # plausible range of values, SI
    high: float
    spellings: tuple[str, ...] = ()  # older and regional spellings that readers accept


def _table(*symbols: Symbol) -> dict[str, Symbol]:
    return {symbol.name: symbol for symbol in symbols}


SYMBOLS: dict[str, Symbol] = _table(
    # --- ratings
    Symbol("VCEO", "V", "collector–emitter voltage, base open", "rating", 3, 2000, ("UCEO", "VCE0", "UCE0")),
    Symbol("VCBO", "V", "collector–base voltage, emitter open", "rating", 3, 3000, ("UCBO", "VCB0", "UCB0")),
    Symbol("VEBO", "V", "emitter–base voltage, collector open", "rating", 0.3, 100, ("UEBO", "VEB0", "UEB0")),
    Symbol("IC", "A", "collector current, continuous", "rating", 1e-3, 500, ("ICMAX", "IC(DC)", "IC(max)")),
    Symbol("ICM", "A", "collector current, peak", "rating", 1e-3, 1000, ("ICP", "IC(peak)", "IC(pulse)")),
    Symbol("IB", "A", "base current, continuous", "rating", 1e-4, 200, ("IBMAX", "IB(max)")),
    Symbol("IBM", "A", "base current, peak", "rating", 1e-4, 400, ("IBP", "IB(peak)")),
    Symbol("PD", "W", "power dissipation", "rating", 0.02, 1000, ("PT", "PTOT", "PC", "PD(max)")),
    Symbol("TJ", "°C", "junction temperature", "rating", -100, 300, ("TJMAX", "TJ(max)", "TVJ")),
    Symbol(
        "derating(TA)", "W/K", "power derating over ambient temperature", "rating", 1e-4, 1,
        ("derate_TA", "derating_TA", "KTA"),
    ),
    Symbol(
        "derating(TC)", "W/K", "power derating over case temperature", "rating", 1e-4, 20,
        ("derate_TC", "derating_TC", "KTC"),
    ),
    Symbol(
        "RthJA", "K/W", "thermal resistance, junction to ambient", "rating", 0.5, 1500,
        ("Rth(j-a)", "RθJA", "θJA", "RTHJ-A", "RJA"),
    ),
    Symbol(
        "RthJC", "K/W", "thermal resistance, junction to case", "rating", 0.05, 500,
        ("Rth(j-c)", "RθJC", "θJC", "RTHJ-C", "RJC", "RthJMB"),
    ),
    Symbol("SOA", "A", "collector current allowed at VCE for a pulse width", "rating", 1e-3, 1000, ("IS/b", "ISB")),
    Symbol("ES/b", "J", "energy survived in second breakdown, reverse", "rating", 1e-7, 10, ("ESB",)),
    # --- characteristics
    Symbol("V(BR)CEO", "V", "collector–emitter breakdown voltage", "characteristic", 3, 2000, ("BVCEO", "VCEO(sus)")),
    Symbol("V(BR)CBO", "V", "collector–base breakdown voltage", "characteristic", 3, 3000, ("BVCBO",)),
    Symbol("V(BR)EBO", "V", "emitter–base breakdown voltage", "characteristic", 0.3, 100, ("BVEBO",)),
    Symbol("hFE", "", "static forward current gain", "characteristic", 1, 100_000, ("h21E", "BETA", "β")),
    Symbol("VCE(sat)", "V", "collector–emitter saturation voltage", "characteristic", 0.005, 10, ("UCEsat", "VCEsat")),
    Symbol("VBE(sat)", "V", "base–emitter saturation voltage", "characteristic", 0.3, 10, ("UBEsat", "VBEsat")),
    Symbol("VBE(on)", "V", "base–emitter voltage, conducting", "characteristic", 0.2, 10, ("VBE", "UBE")),
    Symbol("ICBO", "A", "collector–base leakage, emitter open", "characteristic", 1e-13, 0.1, ("ICB0",)),
    Symbol("ICES", "A", "collector leakage, base shorted to emitter", "characteristic", 1e-13, 0.1),
    Symbol("ICEX", "A", "collector leakage, base reverse biased", "characteristic", 1e-13, 0.1, ("ICEV",)),
    Symbol("ICEO", "A", "collector leakage, base open", "characteristic", 1e-12, 1, ("ICE0",)),
    Symbol("IEBO", "A", "emitter–base leakage", "characteristic", 1e-13, 0.1, ("IEB0",)),
    Symbol("fT", "Hz", "transition frequency", "characteristic", 1e4, 2e11, ("GBW",)),
    Symbol("Cobo", "F", "output capacitance, common base", "characteristic", 1e-14, 2e-8, ("Cob", "CCBO", "COB")),
    Symbol("Cibo", "F", "input capacitance, common base", "characteristic", 1e-14, 1e-7, ("Cib", "CEBO")),
    Symbol("td", "s", "delay time", "characteristic", 1e-11, 1e-3),
    Symbol("tr", "s", "rise time", "characteristic", 1e-11, 1e-3),
    Symbol("ts", "s", "storage time", "characteristic", 1e-11, 1e-3, ("tstg",)),
    Symbol("tf", "s", "fall time", "characteristic", 1e-11, 1e-3),
    Symbol("ton", "s", "turn-on time", "characteristic", 1e-11, 1e-3),
    Symbol("toff", "s", "turn-off time", "characteristic", 1e-11, 1e-3),
    Symbol("NF", "dB", "noise figure", "characteristic", 0, 40),
    Symbol("hfe", "", "small-signal current gain", "characteristic", 1, 100_000, ("h21e",)),
    Symbol("|hfe|", "", "small-signal current gain at high frequency", "characteristic", 0.1, 10_000, ("|h21e|",)),
    Symbol("hie", "Ω", "small-signal input resistance", "characteristic", 0.1, 1e6, ("h11e",)),
    Symbol("hoe", "S", "small-signal output conductance", "characteristic", 1e-9, 1, ("h22e",)),
)  # fmt: skip


def find_symbol(text: str) -> Symbol | None:
    """The symbol a sheet means by `text`, whatever its spelling; None when nobody knows it.

    Case is ignored except between hFE and hfe, which are different quantities.
    """
    word = text.strip()
    if word in SYMBOLS:
        return SYMBOLS[word]
    return _BY_KEY.get(_key(word))


def _key(text: str) -> str:
    kept = [c for c in text.casefold() if c.isalnum() or c in "|/"]
    return "".join(kept).replace("ϑ", "θ")


def _index() -> dict[str, Symbol]:
    keys: dict[str, Symbol] = {}
    for symbol in SYMBOLS.values():
        for spelling in (symbol.name, *symbol.spellings):
            keys.setdefault(_key(spelling), symbol)
    return keys


_BY_KEY = _index()
