"""Grades of evidence, and how they combine: a result is as good as its weakest figure.

The grades are small integers so that they travel as numpy columns; a larger number is weaker,
so combining is `np.maximum`.
"""

from enum import IntEnum

import numpy as np
from numpy.typing import NDArray

Grades = NDArray[np.int8]
"""One grade a part, shape (n,), values of `Evidence`."""


class Evidence(IntEnum):
    """How a figure is known."""

    GUARANTEED = 0  # a data-sheet limit whose conditions cover the operating point
    MEASURED = 1  # a tolerance bound from readings of the lot
    DERIVED = 2  # from guaranteed limits by a law inside its validity
    TYPICAL = 3  # rests on a typical value somewhere
    MISSING = 4  # no value

    @property
    def word(self) -> str:
        return self.name.lower()


def weakest(*grades: Grades | Evidence) -> Grades:
    """The grade of a figure made from figures of these grades. Shapes broadcast."""
    combined: Grades = np.asarray(grades[0], dtype=np.int8)
    for grade in grades[1:]:
        combined = np.maximum(combined, np.asarray(grade, dtype=np.int8))
    return combined
