"""Check after check as a line with its word, its headroom and a bar on a log scale: a pure function."""

import math
from collections.abc import Sequence
from typing import TYPE_CHECKING

from rich.cells import cell_len

from .cells import fit

if TYPE_CHECKING:
    from engine.ranking import CheckExplanation

LEAST, MOST = 0.25, 16.0  # headrooms at the two ends of a bar
_WORD, _ROOM = 7, 7


def headroom_word(headroom: float | None, status: str) -> str:
    """A headroom as `×1.26`, `×∞` where nothing is asked of the part, `?` where it is not known."""
    if headroom is None:
        return "×∞" if status == "pass" else "?"
    return f"×{headroom:.2f}" if headroom < 100 else f"×{headroom:.0f}"


def bar(headroom: float | None, width: int, *, plain: bool = False) -> str:
    """A bar that grows with the headroom; the upright stroke is a headroom of one, exactly at the limit."""
    full, stroke = ("#", "|") if plain else ("━", "┃")
    at_limit = _place(1.0, width)
    filled = 0 if headroom is None or math.isnan(headroom) else _place(headroom, width)
    if headroom is not None and headroom < 1:
        filled = min(filled, at_limit - 1)  # a gap, however close to the limit
    cells = [full if i < filled else " " for i in range(width)]
    cells[at_limit] = stroke
    return "".join(cells)


def _place(headroom: float, width: int) -> int:
    """Cells of the bar that a headroom fills, 0 to `width` - 1."""
    if headroom <= LEAST:
        return 0
    share = math.log(min(headroom, MOST) / LEAST) / math.log(MOST / LEAST)
    return min(round(share * (width - 1)), width - 1)


def scale(width: int) -> str:
    """A heading for the bars: where a headroom of 1 and a few others stand."""
    line = [" "] * width
    for value in (1, 2, 4, 8):
        text = f"×{value}"
        start = _place(float(value), width)
        if start + len(text) <= width and all(c == " " for c in line[max(start - 1, 0) : start + len(text)]):
            line[start : start + len(text)] = list(text)
    return "".join(line)


def check_lines(checks: "Sequence[CheckExplanation]", width: int, *, plain: bool = False) -> list[str]:
    """A heading and a line a check in `width` cells: name, word, headroom, bar."""
    name = max((cell_len(check.name) for check in checks), default=5)
    bars = min(width - name - _WORD - _ROOM - 4, 60)
    lines = [f"{fit('check', name)} {'says':<{_WORD}} {'headroom':>{_ROOM + 1}} {scale(bars) if bars > 4 else ''}"]
    for check in checks:
        room = headroom_word(check.headroom, check.status)
        text = f"{fit(check.name, name)} {check.status:<{_WORD}} {room:>{_ROOM}}"
        known = math.inf if room == "×∞" else check.headroom
        lines.append(f"{text}  {bar(known, bars, plain=plain)}" if bars > 4 else text)
    return [fit(line.replace("×", "x").replace("∞", "inf") if plain else line, width) for line in lines]
