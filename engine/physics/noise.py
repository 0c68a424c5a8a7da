"""Noise of a bipolar transistor in mid-band: no 1/f, no high-frequency share."""

import numpy as np
from numpy.typing import NDArray

from ..formula import formula

Floats = NDArray[np.float64]


@formula("en", "V/√Hz", "noise voltage density", text="sqrt(4 * kT * (rbb + 1 / (2 * gm)))",
         source="transistor noise", exact=True)  # fmt: skip
def noise_voltage(kT: Floats, rbb: Floats, gm: Floats) -> Floats:
    """kT  thermal energy. [J]   rbb  base spreading resistance. [Ω]

    >>> round(float(noise_voltage.raw(4.1164e-21, 100.0, 38.92e-3)) * 1e9, 3)
    1.363
    """
    return np.sqrt(4 * kT * (rbb + 1 / (2 * gm)))


@formula("in", "A/√Hz", "noise current density", text="sqrt(2 * q * IC / hFE)", source="transistor noise",
         exact=True)  # fmt: skip
def noise_current(q: Floats, IC: Floats, hFE: Floats) -> Floats:
    """Shot noise of the base current; q is the charge of the electron. [A/√Hz]

    >>> round(float(noise_current.raw(1.602177e-19, 1e-3, 200.0)) * 1e12, 3)
    1.266
    """
    return np.sqrt(2 * q * IC / hFE)


@formula("RS opt", "Ω", "source resistance of least noise figure", text="sqrt(hFE * (1 + 2 * gm * rbb)) / gm",
         source="transistor noise", exact=True)  # fmt: skip
def best_source_resistance(hFE: Floats, gm: Floats, rbb: Floats) -> Floats:
    """en over in. [Ω]

    >>> round(float(best_source_resistance.raw(200.0, 38.92e-3, 100.0)))
    1077
    """
    return np.sqrt(hFE * (1 + 2 * gm * rbb)) / gm


@formula("F min", "", "least noise factor", text="1 + sqrt((1 + 2 * gm * rbb) / hFE)", source="transistor noise",
         exact=True)  # fmt: skip
def least_noise_factor(gm: Floats, rbb: Floats, hFE: Floats) -> Floats:
    """At the best source resistance, as a ratio of powers.

    >>> round(float(10 * np.log10(least_noise_factor.raw(38.92e-3, 100.0, 200.0))), 3)
    0.826
    """
    return 1 + np.sqrt((1 + 2 * gm * rbb) / hFE)
