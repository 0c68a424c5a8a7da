"""Collector–emitter voltage."""

from ..check import Compared, check
from ..duty.switch_case import SwitchCase
from ..formula import Term


@check("collector–emitter voltage", "switch")
def collector_voltage(case: SwitchCase) -> Compared:
    """Does it withstand the highest voltage when off, with what the clamp adds?

    A coil that nothing clamps drives the part into breakdown: then only a rating of the energy it survives
    there counts.
    """
    if case.sit.coil_energy is not None:
        limit = Term(
            "ES/b", case.p.es_b, "J", meaning="energy survived in breakdown", source="rating", looked_up=("ES/b",)
        )
        return Compared(case.sit.coil_energy, limit)
    return Compared(case.b.vce_off_max, case.rating("VCEO", "vceo", "V", case.policy.voltage))
