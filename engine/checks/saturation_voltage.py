"""Saturation voltage."""

import numpy as np

from ..check import Compared, check
from ..duty.switch_case import SwitchCase
from ..duty.switch_situation import UNSTATED_DARLINGTON, UNSTATED_ON_VOLTAGE
from ..evidence import Evidence
from ..formula import Term, given


@check("saturation voltage", "switch", chosen=True)
def saturation_voltage(case: SwitchCase) -> Compared:
    """Is its on-voltage low enough at the heaviest load, the weakest drive and the hottest junction?

    Where no on-voltage is asked, 1 V (a Darlington 2.5 V) still counts as saturated.
    """
    if case.requirement.has("limits.on_voltage_max"):
        asked = case.requirement.number("limits.on_voltage_max")
        return Compared(case.b.vce_on_max, given("VCE on limit", asked, "V", "highest on-voltage asked"))
    values = np.where(case.p.darlington, UNSTATED_DARLINGTON, UNSTATED_ON_VOLTAGE)
    limit = Term("saturated", values, "V", Evidence.GUARANTEED, "what still counts as saturated", "common practice")
    return Compared(case.b.vce_on_max, limit)
