"""Text cells of a fixed width: data is shown as it is, never taken for markup or control characters."""

from rich.cells import cell_len, set_cell_size

ELLIPSIS = "…"


def clean(text: str) -> str:
    """`text` on one line, every character that could move a cursor shown as a middle dot."""
    return text if text.isprintable() else "".join(c if c.isprintable() else "·" for c in text)


def fit(text: str, width: int, *, right: bool = False) -> str:
    """`text` in exactly `width` cells, cut with an ellipsis where it is too long."""
    text = clean(text)
    size = len(text) if text.isascii() else cell_len(text)
    if size > width:
        return set_cell_size(text, max(width - 1, 0)) + ELLIPSIS[:width]
    blank = " " * (width - size)
    return blank + text if right else text + blank


def wrap(text: str, width: int) -> list[str]:
    """`text` in lines of at most `width` cells, broken between words (a longer word is cut)."""
    width = max(width, 4)
    lines: list[str] = []
    line = ""
    for word in clean(text).split(" "):
        while cell_len(word) > width:
            head = set_cell_size(word, width)
            lines.extend([line] if line else [])
            lines.append(head.rstrip())
            word, line = word[len(head.rstrip()) :], ""
        joined = f"{line} {word}" if line else word
        if cell_len(joined) <= width:
            line = joined
        else:
            lines.append(line)
            line = word
    return [*lines, line] if line or not lines else lines
