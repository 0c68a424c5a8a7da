"""Turn-on time."""

from ..check import Compared, check
from ..duty.switch_case import SwitchCase
from ..formula import given


@check("turn-on time", "switch", chosen=True)
def turn_on_time(case: SwitchCase) -> Compared | None:
    """Is the load on in time with the smallest base current?"""
    if not case.requirement.has("limits.turn_on_max"):
        return None
    return Compared(case.b.t_on_max, given("t on limit", case.requirement.number("limits.turn_on_max"), "s"))
