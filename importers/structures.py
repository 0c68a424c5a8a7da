"""What kind of part a word means."""

from .problem import CellError


def read_structure(text: str, column: str) -> str:
    """One of engine.part.STRUCTURES from words such as NPN, "PNP Darlington", N; "" for an empty cell.

    Raises CellError.
    """
    word = text.strip().casefold().replace("_", " ").replace("-", " ")
    if not word:
        return ""
    polarity = (
        "npn"
        if word.startswith(("npn", "n ")) or word == "n"
        else "pnp"
        if word.startswith(("pnp", "p ")) or word == "p"
        else ""
    )
    if not polarity:
        polarity = "npn" if " npn" in f" {word}" else "pnp" if " pnp" in f" {word}" else ""
    if not polarity:
        raise CellError(column, text, "unknown-structure", "not a structure that is known; write NPN, PNP, NPN Darlington or "
                        "PNP pre-biased")  # fmt: skip
    if "darl" in word:
        return f"{polarity}-darlington"
    if "bias" in word or "resistor" in word:
        return f"{polarity}-prebiased"
    return polarity
