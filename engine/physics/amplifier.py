"""Small-signal laws of an amplifying stage: gain, resistances, corner frequencies, swing."""

import numpy as np
from numpy.typing import NDArray

from ..formula import formula

Floats = NDArray[np.float64]
PI = 3.141592653589793  # written out in the texts


@formula("gm", "S", "transconductance", text="IC / VT", source="hybrid-pi", exact=True)
def transconductance(IC: Floats, VT: Floats) -> Floats:
    """Slope of the collector current over the base–emitter voltage. [S]

    >>> round(transconductance.raw(1e-3, 25.6926e-3) * 1e3, 2)
    38.92
    """
    return IC / VT


@formula("rπ", "Ω", "small-signal base resistance", text="hfe * VT / IC", source="hybrid-pi", exact=True)
def base_resistance(hfe: Floats, VT: Floats, IC: Floats) -> Floats:
    """Resistance between base and emitter. [Ω]

    >>> round(base_resistance.raw(100.0, 26e-3, 0.793e-3))
    3279
    """
    return hfe * VT / IC


@formula("Z base", "Ω", "resistance seen into the base", text="r_pi + (1 + hfe) * RE", source="hybrid-pi", exact=True)
def resistance_into_base(r_pi: Floats, hfe: Floats, RE: Floats) -> Floats:
    """RE is what stands in the emitter for the signal: not bypassed, and with the load of a follower. [Ω]

    >>> round(resistance_into_base.raw(1203.7, 100.0, 400.0))
    41604
    """
    return r_pi + (1 + hfe) * RE


@formula("gain", "", "voltage gain from the base", text="hfe * RL / (r_pi + (1 + hfe) * RE)", source="hybrid-pi",
         exact=True)  # fmt: skip
def collector_gain(hfe: Floats, RL: Floats, r_pi: Floats, RE: Floats) -> Floats:
    """Magnitude of the gain of a common emitter; RL is RC with the load (and ro where it counts).

    >>> round(collector_gain.raw(100.0, 2000.0, 1203.7, 400.0), 3)
    4.807
    """
    return hfe * RL / (r_pi + (1 + hfe) * RE)


@formula("gain", "", "voltage gain of a follower", text="(1 + hfe) * RE / (r_pi + (1 + hfe) * RE)", source="hybrid-pi",
         exact=True)  # fmt: skip
def follower_gain(hfe: Floats, RE: Floats, r_pi: Floats) -> Floats:
    """From the base to the emitter; RE is the emitter resistor with the load.

    >>> round(follower_gain.raw(100.0, 1951.2, 3279.0), 3)
    0.984
    """
    return (1 + hfe) * RE / (r_pi + (1 + hfe) * RE)


@formula("Z emitter", "Ω", "resistance seen into the emitter", text="(r_pi + RB) / (1 + hfe)", source="hybrid-pi",
         exact=True)  # fmt: skip
def resistance_into_emitter(r_pi: Floats, RB: Floats, hfe: Floats) -> Floats:
    """RB is the resistance at the base as the signal sees it: source beside divider. [Ω]

    >>> round(resistance_into_emitter.raw(2600.0, 7500.0, 100.0))
    100
    """
    return (r_pi + RB) / (1 + hfe)


@formula(
    "share", "", "part of the source's voltage that arrives", text="Z / (Z + RS)", source="circuit law", exact=True
)
def share_arriving(Z: Floats, RS: Floats) -> Floats:
    """Voltage division between source resistance and input.

    >>> share_arriving.raw(3.0, 1.0)
    0.75
    """
    return Z / (Z + RS)


@formula("Cπ", "F", "base–emitter capacitance", text="gm / (2 * 3.141592653589793 * fT) - C_mu", source="hybrid-pi",
         exact=True)  # fmt: skip
def emitter_capacitance(gm: Floats, fT: Floats, C_mu: Floats) -> Floats:
    """From the transition frequency at this current. [F]

    >>> round(emitter_capacitance.raw(38.5e-3, 500e6, 0.3e-12) * 1e12, 2)
    11.95
    """
    return gm / (2 * PI * fT) - C_mu


@formula("C in", "F", "input capacitance with the Miller effect", text="C_pi + C_mu * (1 + gain)", source="miller",
         exact=True)  # fmt: skip
def miller_capacitance(C_pi: Floats, C_mu: Floats, gain: Floats) -> Floats:
    """gain is a magnitude. [F]

    >>> round(miller_capacitance.raw(20e-12, 2.4e-12, 99.0) * 1e12)
    260
    """
    return C_pi + C_mu * (1 + gain)


@formula("f corner", "Hz", "corner frequency", text="1 / (2 * 3.141592653589793 * R * C)", source="circuit law",
         exact=True)  # fmt: skip
def corner_frequency(R: Floats, C: Floats) -> Floats:
    """−3 dB point of one resistance with one capacitance. [Hz]

    >>> round(corner_frequency.raw(377.8, 260.6e-12) / 1e6, 2)
    1.62
    """
    return 1 / (2 * PI * R * C)


@formula("C", "F", "capacitance for a corner", text="1 / (2 * 3.141592653589793 * R * f)", source="circuit law",
         exact=True)  # fmt: skip
def capacitance_for(R: Floats, f: Floats) -> Floats:
    """The capacitance that puts the corner of R at f. [F]

    >>> round(capacitance_for.raw(47.0, 20.0) * 1e6)
    169
    """
    return 1 / (2 * PI * R * f)


@formula("swing", "V", "largest output amplitude", text="min(IC * RL, VCE - VCE_least)", source="load line", exact=True)
def largest_swing(IC: Floats, RL: Floats, VCE: Floats, VCE_least: Floats) -> Floats:
    """Peak, to cut-off or to the lowest VCE at which the stage still amplifies, whichever comes first. [V]

    RL is the collector's load for the signal.

    >>> float(round(largest_swing.raw(0.15, 72.0, 9.0, 0.0), 3))
    9.0
    """
    return np.minimum(IC * RL, VCE - VCE_least)
