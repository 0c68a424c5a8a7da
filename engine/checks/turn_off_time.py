"""Turn-off time."""

from ..check import Compared, check
from ..duty.switch_case import SwitchCase
from ..formula import given


@check("turn-off time", "switch", chosen=True)
def turn_off_time(case: SwitchCase) -> Compared | None:
    """Is the load off in time, with the largest base current before and the smallest reverse current after?"""
    if not case.requirement.has("limits.turn_off_max"):
        return None
    return Compared(case.b.t_off_max, given("t off limit", case.requirement.number("limits.turn_off_max"), "s"))
