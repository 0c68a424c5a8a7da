"""What a duty is to the rest of the program: fields to state, and a way to judge all parts."""

from collections.abc import Callable, Mapping
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from ..check import Outcome
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


@dataclass(frozen=True)
class Duty:
    """One kind of circuit."""

    name: str
    fields: tuple[Field, ...]
    complete: Callable[[dict[str, Value]], tuple[dict[str, Value], list[Problem], list[str]]]
    judge: Callable[[Requirement, Prepared, Mapping[str, float] | None], Judged]
    eligible: Callable[[Requirement, Prepared], NDArray[np.bool_]]  # False: the wrong kind of part, not worth a design
    cautions: Callable[[Requirement], tuple[str, ...]]
