"""Safe operating area."""

import numpy as np

from ..check import Compared, check
from ..duty.switch_case import SwitchCase
from ..evidence import Evidence
from ..formula import Term
from ..physics.area import allowed_current, forbidden_current

SECOND_BREAKDOWN = 30.0  # V: below it second breakdown is not to be feared (common practice)


@check("safe area", "switch")
def safe_area(case: SwitchCase) -> Compared:
    """Does the turn-off locus stay inside the safe operating area?

    A clamped coil meets the full voltage at the full current; a resistive edge half of both. Where no area
    for direct current covers the point: the box of VCEO and the peak current for small types and low voltages;
    for power types above 30 V only up to half the power line, beyond which nothing can be said. Corners for
    pulses, or at lower voltages, still forbid what lies outside them.
    """
    p, factor = case.p, 1.0 if case.sit.inductive else 0.5
    volts = case.b.vce_off_max.values * factor
    amps = case.sit.ic_max.values * factor
    with np.errstate(all="ignore"):
        line = np.minimum((case.tj_limit.values - case.requirement.number("ambient.max")) / p.rth_jc, p.pd_case)
    printed = allowed_current(volts, p.soa_v, p.soa_i) * volts
    feared = p.power & (volts > SECOND_BREAKDOWN)
    box = np.where(feared, 0.5 * line, p.vceo * p.icm)
    covered = p.soa_dc & ~np.isnan(printed)
    outside = forbidden_current(volts, p.soa_v, p.soa_i) * volts
    # NaN of the box travels: a corner elsewhere does not replace it
    values = np.where(covered, printed, np.minimum(box, outside))
    grade = np.where(covered, Evidence.GUARANTEED, Evidence.DERIVED).astype(np.int8)
    limit = Term("V·I allowed", values, "W", grade, "safe operating area at that voltage", "corners on file, or the box",
                 ("SOA",))  # fmt: skip
    demand = Term("V·I", np.asarray(volts * amps), "W", Evidence.DERIVED, "largest product on the turn-off locus",
                  "turn-off locus", inputs={"V": case.b.vce_off_max, "I": case.sit.ic_max})  # fmt: skip
    return Compared(demand, limit, undecided=feared & ~covered & (volts * amps <= outside))
