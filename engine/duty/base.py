"""What a duty is to the rest of the program: fields to state, and a way to judge all parts."""

from collections.abc import Callable, Mapping
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from ..check import Outcome
from ..part import Limit
from ..prepared import Prepared
from ..requirement import Field, Problem, Requirement, Value

Floats = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Judged:
    """Some parts judged under one requirement, with every term still attached. Shapes (n,)."""

    outcomes: tuple[Outcome, ...]
    network: Mapping[str, Floats]
    bounds: Mapping[str, Floats]
    size: Floats  # rated over needed collector current: how far a part is oversized
    again: "tuple[tuple[NDArray[np.intp], Judged], ...]" = ()  # places judged anew with another network, which holds


@dataclass(frozen=True)
class Figure:
    """A figure of the network or a bound that a ranking shows in a column of its own."""

    heading: str
    unit: str
    key: str  # in the network, else in the bounds
    width: int = 0  # cells in the interface; 0: only in reports
    spare: int = 0  # the higher, the sooner a narrow view leaves it out


@dataclass(frozen=True)
class Given:
    """A value of the network that a user may state instead of having it chosen."""

    key: str
    unit: str
    needed: bool = False


@dataclass(frozen=True)
class Lever:
    """A demand that could be eased."""

    key: str  # dotted place in the requirement file
    unit: str
    says: str  # "let the driver give"
    span: Callable[
        [Requirement], tuple[float, float]
    ]  # from what is asked to the most it could be eased; NaN: not asked


@dataclass(frozen=True)
class Reading:
    """A limit that a sheet could state for the circuit, from a value that would surely do to one that would not."""

    symbol: str
    bound: str  # "min" or "max"
    unit: str
    conditions: tuple[tuple[str, float], ...]
    surely: float
    hardly: float

    def limit(self, value: float, source: str = "") -> Limit:
        """The limit as a sheet would state it."""
        low, high = (value, None) if self.bound == "min" else (None, value)
        return Limit(self.symbol, min=low, max=high, conditions=self.conditions, source=source)


@dataclass(frozen=True)
class Duty:
    """One kind of circuit."""

    name: str
    fields: tuple[Field, ...]
    complete: Callable[[dict[str, Value]], tuple[dict[str, Value], list[Problem], list[str]]]
    judge: Callable[[Requirement, Prepared, Mapping[str, float] | None], Judged]
    eligible: Callable[[Requirement, Prepared], NDArray[np.bool_]]  # False: the wrong kind of part, not worth a design
    cautions: Callable[[Requirement], tuple[str, ...]]
    figures: tuple[Figure, ...]
    given: tuple[Given, ...]
    network_says: Callable[[Mapping[str, float | None], Requirement, bool], str]  # the bool: chosen here, not given
    network_object: Callable[[Mapping[str, float | None]], dict[str, object]]  # the network in JSON
    bound_units: Mapping[str, str]
    levers: tuple[Lever, ...]
    readings: Callable[[Requirement], tuple[Reading, ...]]
