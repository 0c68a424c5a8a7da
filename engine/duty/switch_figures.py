"""What a ranking, a sheet and a script show of a switch."""

from collections.abc import Mapping

from .. import show
from ..requirement import Requirement
from .base import Figure, Given

FIGURES = (
    Figure("RB", "Ω", "rb", width=5),
    Figure("RB from", "Ω", "rb_low"),
    Figure("RB to", "Ω", "rb_high"),
    Figure("RBE", "Ω", "rbe", width=5, spare=2),
    Figure("VCE on", "V", "vce_on_max"),
    Figure("TJ", "°C", "tj_max", width=3, spare=1),
)
GIVEN = (Given("rb", "Ω", needed=True), Given("rbe", "Ω"))
BOUND_UNITS = {
    "vce_on_max": "V", "ic_on_max": "A", "ic_on_min": "A", "ib_on_min": "A", "ib_on_max": "A", "drive_current_max": "A",
    "forced_beta_max": "", "power_max": "W", "tj_max": "°C", "ic_off_max": "A", "vce_off_max": "V", "t_on_max": "s",
    "t_off_max": "s",
}  # fmt: skip


def network_says(network: Mapping[str, float | None], req: Requirement, chosen_here: bool) -> str:
    """The base network in one sentence."""
    rb, rbe, low, high = (network.get(name) for name in ("rb", "rbe", "rb_low", "rb_high"))
    if rb is None:
        return "no base resistor can be chosen"
    series, tol = req.word("resistors.series"), req.number("resistors.tolerance")
    made = f"RB {show.quantity(rb, 'Ω')}" + (f", RBE {show.quantity(rbe, 'Ω')}" if rbe is not None else ", no RBE")
    how = f"{made} ({series}, ±{tol * 100:g} %)" if chosen_here else f"{made} (given)"
    if low is None or high is None:
        return f"{how}; the window of RB cannot be stated"
    if high < low:
        return (
            f"{how}; the window of RB is empty: the driver and the base need at least {show.quantity(low, 'Ω')}, "
            f"saturation at most {show.quantity(max(high, 0.0), 'Ω')}"
        )
    return f"{how}; window of RB {show.quantity(low, 'Ω')} to {show.quantity(high, 'Ω')}"


def network_object(network: Mapping[str, float | None]) -> dict[str, object]:
    """The base network under the names that scripts rely on."""
    low, high = network.get("rb_low"), network.get("rb_high")
    return {
        "rb": network.get("rb"),
        "rb_window": None if low is None or high is None else [low, high],
        "rbe": network.get("rbe"),
        "tolerance": network.get("tolerance"),
    }
