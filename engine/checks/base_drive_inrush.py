"""Base drive in a lamp's inrush."""

from ..check import Compared, check
from ..duty.switch_case import SwitchCase


@check("base drive, inrush", "switch", chosen=True)
def base_drive_inrush(case: SwitchCase) -> Compared | None:
    """Does it stay saturated while the lamp is cold, or does its safe area take the inrush?"""
    if case.b.inrush is None:
        return None
    return Compared(case.b.inrush.ib_min, case.b.inrush.ib_needed, at_least=True)
