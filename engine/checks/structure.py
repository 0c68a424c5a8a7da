"""Structure."""

import numpy as np

from ..check import Compared, check
from ..duty.switch_case import SwitchCase
from ..formula import Term, given


@check("structure", "switch")
def structure(case: SwitchCase) -> Compared:
    """Is it the kind of transistor that this position needs?

    Unknown where nobody stated the structure, and for parts with built-in resistors, whose network is
    not ours to choose.
    """
    p = case.p
    right = p.pnp == case.sit.pnp
    known = p.known & ~(right & p.prebiased)
    values = np.where(known, np.where(right, 1.0, 0.0), np.nan)
    wanted = "PNP" if case.sit.pnp else "NPN"
    part = Term(f"is {wanted}", values, "", meaning="1 yes, 0 no", source="sheet", looked_up=("structure",))
    return Compared(part, given("wanted", 1.0, "", wanted), yes_no=True)
