"""What a person must be told about a switching requirement, whatever part is chosen."""

from ..requirement import Requirement

ES1 = 60.0  # V DC, IEC 62368-1
EXTRA_LOW = 120.0  # V DC, IEC 61140


def cautions(req: Requirement) -> tuple[str, ...]:
    """Cautions that this requirement calls for."""
    said = []
    supply = req.number("supply.max")
    if supply > EXTRA_LOW:
        said.append(
            f"The supply reaches {supply:g} V: hazardous (above 120 V DC, the extra-low voltage of IEC 61140). "
            "Work for a qualified person, under the local code."
        )
    elif supply > ES1:
        said.append(
            f"The supply reaches {supply:g} V: above 60 V DC it can hurt (ES1 of IEC 62368-1). "
            "Work for a qualified person, under the local code."
        )
    if req.word("load.kind") == "coil" and req.word("load.clamp") == "none":
        said.append(
            "Nothing clamps the coil: at turn-off its energy goes into the transistor. Fit a diode across the coil."
        )
    if req.word("load.kind") == "lamp":
        said.append("A cold filament draws many times its hot current; repeated inrush ages the transistor.")
    said.append("A transistor mostly fails short: the load then stays on. Provide for it where that is dangerous.")
    if req.has("heatsink.case_to_ambient"):
        said.append("The collector is on the tab of most power packages: insulate the sink or treat it as live.")
    said.append(
        "The junction temperature is an estimate for the mounting of the sheet (JESD51-2), not a promise in an enclosure."
    )
    said.append("Not for life-critical use without independent review.")
    return tuple(said)
