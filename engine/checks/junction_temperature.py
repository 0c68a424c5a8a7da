"""Junction temperature."""

from ..check import Compared, check
from ..duty.switch_case import SwitchCase
from ..formula import given
from ..physics.thermal import rise


@check("junction temperature", "switch", chosen=True)
def junction_temperature(case: SwitchCase) -> Compared:
    """Does the junction stay below its limit at the hottest ambient?

    The electro-thermal fixed point; a part that heats itself without end has no temperature and fails.
    Compared as rises over the ambient.
    """
    ambient = given("TA max", case.requirement.number("ambient.max"), "°C", "hottest ambient")
    demand = rise("rise", "rise of the junction", TJ=case.b.tj_max, T_A=ambient)
    return Compared(demand, rise("rise allowed", "rise up to the limit", TJ=case.tj_limit, T_A=ambient))
