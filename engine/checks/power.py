"""Power dissipation."""

from ..check import Compared, check
from ..duty.switch_case import SwitchCase


@check("power dissipation", "switch", chosen=True)
def power(case: SwitchCase) -> Compared:
    """Does it stay below its derating line at the hottest ambient?"""
    return Compared(case.b.power, case.scaled(case.b.power_allowed, case.policy.power))
