"""Derating policies: which share of a rating may be used. Published sets only, named by their document."""

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Policy:
    """Shares of the ratings, and the highest junction temperature."""

    name: str
    voltage: float
    current: float
    power: float
    tj_max: float  # °C; infinite: the part's own
    source: str


POLICIES: dict[str, Policy] = {
    one.name: one
    for one in (
        Policy("none", 1.0, 1.0, 1.0, float("inf"), "full ratings, never above"),
        Policy("MIL-STD-975M", 0.75, 0.75, 0.50, 125.0, "MIL-STD-975M §3.15 (NASA, 1994, cancelled 1998: historical)"),
        Policy("RL-TR-92-11 I", 0.65, 0.60, 0.50, 95.0, "RL-TR-92-11 table 6-4 (Rome Laboratory), level I"),
        Policy("RL-TR-92-11 II", 0.75, 0.65, 0.60, 125.0, "RL-TR-92-11 table 6-4 (Rome Laboratory), level II"),
        Policy("RL-TR-92-11 III", 0.80, 0.70, 0.70, 135.0, "RL-TR-92-11 table 6-4 (Rome Laboratory), level III"),
    )
}
"""By the name that a requirement gives under `choice.derating`. Voltage and current are the sharper of the
published figures for breakdown and safe area."""
