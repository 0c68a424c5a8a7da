"""Collector current."""

from ..check import Compared, check
from ..duty.switch_case import SwitchCase


@check("collector current", "switch")
def collector_current(case: SwitchCase) -> Compared:
    """May it carry the heaviest load current for good?"""
    return Compared(case.b.ic_on_max, case.rating("IC", "ic", "A", case.policy.current))
