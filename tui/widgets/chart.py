"""A log–log chart as lines of text: a pure function, in braille dots or in plain characters.

Curves are told apart by their dashes and their names, marks by their signs; colour has no part in it.
"""

import math
from collections.abc import Iterable, Sequence
from dataclasses import dataclass

from rich.cells import set_cell_size

DASHES = ((1, 0), (5, 3), (1, 2), (7, 2), (2, 4))  # dots drawn, dots left out
PLAIN_SIGNS = "*-.+="
_DOTS = ((0x01, 0x08), (0x02, 0x10), (0x04, 0x20), (0x40, 0x80))  # braille: bit of (row, column) in a cell
_GUTTER = 6  # cells for the y labels and the axis
_PREFIXES = ((1e9, "G"), (1e6, "M"), (1e3, "k"), (1.0, ""), (1e-3, "m"), (1e-6, "µ"), (1e-9, "n"), (1e-12, "p"))


@dataclass(frozen=True, slots=True)
class Series:
    """A named curve through points in rising x; straight between them on log–log paper, gaps where y is NaN."""

    name: str
    x: Iterable[float]
    y: Iterable[float]


@dataclass(frozen=True, slots=True)
class Points:
    """Single points that share a sign, and what they are; `words` is written beside the first one if `beside`."""

    sign: str
    plain_sign: str
    name: str
    at: Sequence[tuple[float, float]]
    beside: str = ""


@dataclass(frozen=True, slots=True)
class Axes:
    """What the axes show and from where to where."""

    x_title: str
    x_unit: str
    x: tuple[float, float]
    y_title: str
    y_unit: str
    y: tuple[float, float]


def span(values: Sequence[float]) -> tuple[float, float]:
    """Ends of a log axis for `values`: a little beyond them, at least a factor of ten apart."""
    known = [v for v in values if v > 0 and math.isfinite(v)]
    if not known:
        return 1.0, 10.0
    low, high = min(known) / 1.25, max(known) * 1.25
    if high < 10 * low:
        middle = math.sqrt(low * high)
        low, high = middle / math.sqrt(10), middle * math.sqrt(10)
    return low, high


def chart(
    series: Sequence[Series],
    points: Sequence[Points],
    axes: Axes,
    width: int,
    height: int,
    *,
    plain: bool = False,
) -> list[str]:
    """`height` lines of `width` cells: plot, axis, x labels and a legend; with `plain` in ASCII only."""
    legend = _legend(series, points, width, plain=plain)
    rows = height - len(legend) - 3
    columns = width - _GUTTER
    if rows < 3 or columns < 12:
        return [_cut("(too small for a chart)" if i == 0 else "", width) for i in range(height)]
    paper = _Paper(axes, columns, rows, plain)
    for number, one in enumerate(series):
        paper.curve(one, number)
    cells = paper.cells()
    for number, one in enumerate(series):
        _name_curve(cells, paper, one, number)
    for group in points:
        _put_points(cells, paper, group)
    lines = _framed(cells, paper, width)
    return [*lines, *(_cut(line, width) for line in legend)][:height]


class _Paper:
    """The dots of the plot, two by four in a cell (one by one in plain characters)."""

    def __init__(self, axes: Axes, columns: int, rows: int, plain: bool) -> None:
        self.axes, self.columns, self.rows, self.plain = axes, columns, rows, plain
        self.fine_x, self.fine_y = (1, 1) if plain else (2, 4)
        self.dots: dict[tuple[int, int], int] = {}  # (column, row) in dots → number of the curve

    def x(self, value: float) -> float:
        """Place of an x value in cells from the left, 0 to `columns` - 1."""
        return _share(value, self.axes.x) * (self.columns - 1)

    def y(self, value: float) -> float:
        """Place of a y value in cells from the top, 0 to `rows` - 1."""
        return (1 - _share(value, self.axes.y)) * (self.rows - 1)

    def curve(self, one: Series, number: int) -> None:
        on, off = DASHES[number % len(DASHES)] if not self.plain else (1, 0)
        for drawn, dot in enumerate(self._path(one)):
            if drawn % (on + off) < on:
                self.dots.setdefault(dot, number)

    def _path(self, one: Series) -> list[tuple[int, int]]:
        """The dots a solid curve would take, in order and without gaps."""
        path: list[tuple[int, int]] = []
        for left, right in zip(_pairs(one), _pairs(one)[1:], strict=False):
            if math.isnan(left[1]) or math.isnan(right[1]):
                continue
            x0, y0, x1, y1 = *self._dot(*left), *self._dot(*right)
            steps = max(1, math.ceil(max(abs(x1 - x0), abs(y1 - y0))))
            for step in range(steps + 1):
                t = step / steps
                place = (round(x0 + t * (x1 - x0)), round(y0 + t * (y1 - y0)))
                inside = 0 <= place[0] < self.columns * self.fine_x and 0 <= place[1] < self.rows * self.fine_y
                if inside and (not path or path[-1] != place):
                    path.append(place)
        return path

    def _dot(self, x: float, y: float) -> tuple[float, float]:
        fine_x, fine_y = self.fine_x, self.fine_y
        return self.x(x) * fine_x + (fine_x - 1) / 2, self.y(y) * fine_y + (fine_y - 1) / 2

    def cells(self) -> list[list[str]]:
        cells = [[" "] * self.columns for _ in range(self.rows)]
        if self.plain:
            for (column, row), number in self.dots.items():
                cells[row][column] = PLAIN_SIGNS[number % len(PLAIN_SIGNS)]
            return cells
        bits: dict[tuple[int, int], int] = {}
        for column, row in self.dots:
            place = (row // 4, column // 2)
            bits[place] = bits.get(place, 0) | _DOTS[row % 4][column % 2]
        for (row, column), value in bits.items():
            cells[row][column] = chr(0x2800 + value)
        return cells


def _pairs(one: Series) -> list[tuple[float, float]]:
    return [(float(x), float(y)) for x, y in zip(one.x, one.y, strict=True) if x > 0 and not y <= 0]


def _share(value: float, ends: tuple[float, float]) -> float:
    return math.log(value / ends[0]) / math.log(ends[1] / ends[0])


def _name_curve(cells: list[list[str]], paper: _Paper, one: Series, number: int) -> None:
    """Write the name beside the curve where nothing else stands; leave it to the legend where there is no room."""
    known = [(x, y) for x, y in _pairs(one) if not math.isnan(y)]
    if not known:
        return
    sides = (-1, -2, 1, 2) if number == 0 else (1, 2, -1, -2)  # the first from above, the others from below
    for above in sides:
        for share in (0.08, 0.3, 0.55, 0.8):
            x, y = known[min(int(share * len(known)) + number, len(known) - 1)]
            if _write(cells, round(paper.y(y)) + above, round(paper.x(x)), one.name):
                return


def _write(cells: list[list[str]], row: int, column: int, text: str) -> bool:
    if not 0 <= row < len(cells) or column < 0 or column + len(text) > len(cells[0]):
        return False
    taken = cells[row][max(column - 1, 0) : column + len(text) + 1]
    if any(cell != " " for cell in taken):
        return False
    cells[row][column : column + len(text)] = list(text)
    return True


def _put_points(cells: list[list[str]], paper: _Paper, group: Points) -> None:
    sign = group.plain_sign if paper.plain else group.sign
    for x, y in group.at:
        if not (x > 0 and y > 0 and math.isfinite(x) and math.isfinite(y)):
            continue
        column, row = round(paper.x(x)), round(paper.y(y))
        if not (0 <= row < paper.rows and 0 <= column < paper.columns):
            continue
        cells[row][column] = sign
        if group.beside:
            for above in (0, -1, 1, -2, 2):
                after, before = column + 2, column - 1 - len(group.beside)
                if _write(cells, row + above, after, group.beside) or _write(cells, row + above, before, group.beside):
                    break


def _framed(cells: list[list[str]], paper: _Paper, width: int) -> list[str]:
    upright, corner, level, tick, cross = ("|", "+", "-", "+", "+") if paper.plain else ("│", "└", "─", "┤", "┴")
    labels: dict[int, str] = {}
    for value in _ticks(paper.axes.y, paper.rows / 2):
        labels.setdefault(round(paper.y(value)), _plain_text(axis_number(value), plain=paper.plain))
    axes = paper.axes
    title = f"{axes.y_title}{_in_unit(axes.y_unit)} over {axes.x_title}{_in_unit(axes.x_unit)}"
    lines = [_cut(_plain_text(title, plain=paper.plain), width)]
    for row, line in enumerate(cells):
        label = labels.get(row, "")
        lines.append(f"{label:>{_GUTTER - 2}} {tick if label else upright}{''.join(line)}")
    ruler = [level] * paper.columns
    below = [" "] * paper.columns
    for value in _ticks(paper.axes.x, paper.columns / 8):
        column = round(paper.x(value))
        text = _plain_text(axis_number(value), plain=paper.plain)
        start = min(max(column - len(text) // 2, 0), paper.columns - len(text))
        if all(c == " " for c in below[max(start - 1, 0) : start + len(text) + 1]):
            ruler[column] = cross
            below[start : start + len(text)] = list(text)
    lines.append(" " * (_GUTTER - 1) + corner + "".join(ruler))
    lines.append(_cut(" " * _GUTTER + "".join(below), width))
    return lines


def _cut(line: str, width: int) -> str:
    return set_cell_size(line, width)


def _in_unit(unit: str) -> str:
    return f" [{unit}]" if unit else ""


def _ticks(ends: tuple[float, float], most: float) -> list[float]:
    """Round values inside a log axis: 1-2-5 a decade where there is room, else 1-3, else whole decades."""
    low, high = ends
    first, last = math.floor(math.log10(low)), math.ceil(math.log10(high))
    for steps in ((1, 2, 5), (1, 3), (1,)):
        values = [s * 10.0**d for d in range(first, last + 1) for s in steps if low <= s * 10.0**d <= high]
        if len(values) <= most or steps == (1,):
            break
    return values


def axis_number(value: float) -> str:
    """A tick label with an SI prefix: 0.02 → `20m`."""
    for factor, prefix in _PREFIXES:
        if value >= factor * 0.9999:
            return f"{value / factor:.3g}{prefix}"
    return f"{value:.0e}"


def _legend(series: Sequence[Series], points: Sequence[Points], width: int, *, plain: bool) -> list[str]:
    entries = [f"{_sample(number, plain=plain)} {one.name}" for number, one in enumerate(series)]
    entries += [f"{group.plain_sign if plain else group.sign} {group.name}" for group in points if group.at]
    lines = [""]
    for entry in entries:
        entry = _plain_text(entry, plain=plain)
        joined = f"{lines[-1]}   {entry}" if lines[-1] else entry
        if len(joined) <= width:
            lines[-1] = joined
        else:
            lines.append(entry)
    return lines


def _sample(number: int, *, plain: bool) -> str:
    """Four cells of a curve's dashes."""
    if plain:
        return PLAIN_SIGNS[number % len(PLAIN_SIGNS)] * 4
    on, off = DASHES[number % len(DASHES)]
    drawn = [i % (on + off) < on for i in range(8)]
    return "".join(chr(0x2800 + 0x02 * drawn[i] + 0x10 * drawn[i + 1]) for i in range(0, 8, 2))


def _plain_text(text: str, *, plain: bool) -> str:
    if not plain:
        return text
    for fine, coarse in (("µ", "u"), ("−", "-"), ("°", "deg "), ("×", "x"), ("–", "-"), ("Ω", "Ohm")):
        text = text.replace(fine, coarse)
    return text.encode("ascii", "replace").decode()
