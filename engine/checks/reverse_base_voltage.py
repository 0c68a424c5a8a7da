"""Reverse base voltage."""

import numpy as np

from ..check import Compared, check
from ..duty.switch_case import SwitchCase
from ..formula import Term, given


@check("reverse base voltage", "switch")
def reverse_base_voltage(case: SwitchCase) -> Compared:
    """Does the base–emitter junction withstand the reverse drive?

    A driver that never goes below the emitter asks nothing of it.
    """
    least = min(case.requirement.number("drive.low_min"), 0.0) if not case.sit.pnp else 0.0
    vebo = np.where(np.isnan(case.p.vebo) & (least == 0), np.inf, case.p.vebo * case.policy.voltage)
    limit = Term("VEBO", vebo, "V", meaning="emitter–base voltage rating", source="rating", looked_up=("VEBO",))
    return Compared(given("V reverse", abs(least), "V", "driver below the emitter"), limit)
