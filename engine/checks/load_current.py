"""Load current."""

from ..check import Compared, check
from ..duty.switch_case import SwitchCase
from ..formula import given


@check("load current", "switch", chosen=True)
def load_current(case: SwitchCase) -> Compared | None:
    """Does the load get its least current at the lowest supply?"""
    if not case.requirement.has("limits.load_current_min"):
        return None
    least = given("I load min", case.requirement.number("limits.load_current_min"), "A", "least load current asked")
    return Compared(case.b.ic_on_min, least, at_least=True)
