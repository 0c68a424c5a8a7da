"""Package."""

import numpy as np

from ..check import Compared, check
from ..duty.switch_case import SwitchCase
from ..formula import Term, given


@check("package", "switch")
def package(case: SwitchCase) -> Compared | None:
    """Is its package one of those that will do?"""
    wanted = {word.casefold() for word in case.requirement.words("choice.packages")}
    if not wanted:
        return None
    words = [str(word).casefold() for word in case.p.package]
    values = np.array([np.nan if not word else float(word in wanted) for word in words])
    part = Term("package will do", values, "", meaning="1 yes, 0 no", source="sheet", looked_up=("package",))
    return Compared(part, given("wanted", 1.0, ""), yes_no=True)
