"""Base drive."""

from ..check import Compared, check
from ..duty.switch_case import SwitchCase, tightest


@check("base drive", "switch", chosen=True)
def base_drive(case: SwitchCase) -> Compared:
    """Does the base get the current that saturation and overdrive ask for, at the gain floor?

    Worst case: heaviest load, weakest drive, largest RB, smallest RBE, highest VBE, coldest.
    """
    demand, limit = tightest([(c.ib_min, c.ib_needed) for c in case.b.corners])
    return Compared(demand, limit, at_least=True)
