"""A part and its limits as plain records: what importers draft, what the store keeps."""

from dataclasses import dataclass, field

STRUCTURES = (
    "npn",
    "pnp",
    "npn-darlington",
    "pnp-darlington",
    "npn-prebiased",
    "pnp-prebiased",
)
"""What a part can be; a part whose structure nobody stated carries the empty string."""

CONDITION_UNITS = {
    "ic": "A", "ib": "A", "ib2": "A", "ie": "A", "vce": "V", "vbe": "V", "vcb": "V", "veb": "V", "vcc": "V", "rs": "Ω",
    "f": "Hz", "t": "s", "tj": "°C", "ta": "°C", "tc": "°C",
}  # fmt: skip
CONDITIONS = tuple(CONDITION_UNITS)
"""Names of the test conditions a limit can carry: SI units, temperatures in °C, magnitudes
(a PNP's signs are taken off), `t` a pulse width; `ib` is IB1 and `ib2` the turn-off current IB2.
`vbe` keeps its sign: negative means the junction is reverse biased."""


@dataclass(frozen=True, slots=True)
class Limit:
    """One value of one letter symbol: bounds, test conditions and source. SI units, °C."""

    symbol: str  # a key of SYMBOLS, or the file's own word for a symbol that is kept aside
    min: float | None = None
    typ: float | None = None
    max: float | None = None
    conditions: tuple[tuple[str, float], ...] = ()  # pairs (name in CONDITIONS, value), sorted by name
    pulsed: bool = False
    source: str = ""
    note: str = ""  # words of the conditions that were read but carry no number
    flag: str = ""  # why a person should look at this value, empty when nothing is odd

    def at(self, name: str) -> float | None:
        """The value of one test condition, or None where the sheet does not state it."""
        return dict(self.conditions).get(name)


@dataclass(frozen=True, slots=True)
class Part:
    """One transistor type with every limit known of it."""

    type_number: str
    structure: str = ""  # one of STRUCTURES, or "" when nobody stated it
    package: str = ""
    maker: str = ""
    note: str = ""
    limits: tuple[Limit, ...] = field(default=())


@dataclass(frozen=True, slots=True)
class Arrival:
    """One row of a file as it should land on the shelf."""

    row: int  # as a person counts: the heading is row 1
    part: Part  # with the limits of this row only
    stock: int | None = None  # pieces the row says are on hand
    cost: float | None = None  # of one piece
    set_aside: bool = False  # kept with its own words, but its symbol is not one of SYMBOLS
