"""Why the part under the cursor stands where it stands: verdict, network, and the checks with the worst first."""

from typing import TYPE_CHECKING

from .bars import headroom_word
from .cells import wrap

if TYPE_CHECKING:
    from engine.ranking import CheckExplanation, Explanation

_INDENT = 19
_URGENCY = {"fail": 0, "unknown": 1, "pass": 2}


def reasons(explained: "Explanation", width: int) -> list[str]:
    """Lines of at most `width` cells: verdict and reason, network, then check after check."""
    head = f"{explained.part}: {explained.says}"
    lines = [*wrap(head, width), *wrap(explained.network_says, width)]
    for check in sorted(explained.checks, key=_worst_first):
        room = headroom_word(check.headroom, check.status)
        head, *rest = wrap(f"{check.name}: {without_headroom(check.says)}", max(width - _INDENT, 20))
        lines.append(f"{check.status:<7} {room:>9}  {head}")
        lines.extend(" " * _INDENT + line for line in rest)
    for caution in explained.cautions:
        lines.extend(wrap(f"caution: {caution}", width))
    for note in explained.notes:
        lines.extend(wrap(f"note: {note}", width))
    return lines


def without_headroom(sentence: str) -> str:
    """A check's sentence without the headroom at its end, where that is shown beside it."""
    return sentence[: sentence.rindex(" (×")] if sentence.endswith(")") and " (×" in sentence else sentence


def _worst_first(check: "CheckExplanation") -> tuple[int, float]:
    room = check.headroom
    return _URGENCY.get(check.status, 3), float("inf") if room is None else room
