"""Base current."""

import numpy as np

from ..check import Compared, check
from ..duty.switch_case import SwitchCase
from ..duty.switch_design import base_limit
from ..evidence import Evidence
from ..formula import Term


@check("base current", "switch", chosen=True)
def base_current(case: SwitchCase) -> Compared:
    """May its base take the highest base current?

    A sheet without a base rating vouches for the base currents of its own saturation tests; a tenth of the
    collector rating is common practice (source `driver base`).
    """
    p = case.p
    grade = np.where(np.isnan(p.ib), Evidence.DERIVED, Evidence.GUARANTEED).astype(np.int8)
    limit = Term("IB", base_limit(p) * case.policy.current, "A", grade, "base current allowed", "rating or tests of the sheet",
                 ("IB",))  # fmt: skip
    return Compared(case.b.ib_on_max, limit)
