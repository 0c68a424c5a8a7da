"""Off-state current."""

from ..check import Compared, check
from ..duty.switch_case import SwitchCase
from ..formula import given


@check("off-state current", "switch", chosen=True)
def off_current(case: SwitchCase) -> Compared:
    """Is the load off when the part is hottest, with leakage and the driver's low level at their worst?"""
    limit = given("I off limit", case.requirement.number("limits.off_current_max"), "A", "highest off current")
    return Compared(case.b.ic_off_max, limit)
