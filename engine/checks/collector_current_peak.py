"""Peak collector current."""

from ..check import Compared, check
from ..duty.switch_case import SwitchCase


@check("peak collector current", "switch")
def collector_current_peak(case: SwitchCase) -> Compared | None:
    """May it carry the inrush of the cold lamp?

    Where the sheet states no peak rating, the continuous one counts.
    """
    if case.sit.ic_inrush is None:
        return None
    return Compared(case.sit.ic_inrush, case.rating("ICM", "icm", "A", case.policy.current))
