"""Driver current."""

from ..check import Compared, check
from ..duty.switch_case import SwitchCase
from ..formula import given


@check("driver current", "switch", chosen=True)
def driver_current(case: SwitchCase) -> Compared:
    """Does the driver hold its level at the highest current it must give?"""
    limit = given(
        "I drive limit", case.requirement.number("drive.current_max"), "A", "current up to which the level holds"
    )
    return Compared(case.b.drive_current_max, limit)
