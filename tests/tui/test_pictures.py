"""What the screens look like, as text: golden files under `snapshots/`.

`BETAFLOOR_PICTURES=write pytest tests/tui/test_pictures.py` writes them anew; look at the difference before
it is committed. The figures in them are made up (`fixed.py`), so that only a change of the layout shows.
"""

import os
from pathlib import Path

import pytest

from .support import running

FOLDER = Path(__file__).parent / "snapshots"
SIZES = [(80, 24), (120, 40)]
PICTURES: dict[str, tuple[str, ...]] = {
    "shelf": ("down", "space"),
    "shelf-picker": ("p",),
    "bench-form": ("f3",),
    "bench-ranking": ("f3", "f5", "down"),
    "bench-problem": ("f3", "down", "down", "end", "x"),
    "weights": ("f3", "f8"),
    "part-limits": ("f3", "f5", "enter", "down"),
    "part-gain": ("f3", "f5", "enter", "2"),
    "part-checks": ("f3", "f5", "enter", "3"),
    "part-plain": ("f3", "f5", "enter", "2", "a"),
    "shortlist": ("space", "space", "f3", "f4"),
    "shortlist-export": ("space", "f3", "f4", "e"),
    "help": ("f1",),
}


@pytest.mark.usefixtures("fixed_engine")
@pytest.mark.parametrize("size", SIZES, ids=lambda size: f"{size[0]}x{size[1]}")
@pytest.mark.parametrize("name", PICTURES)
async def test_the_screen_looks_as_it_did(make_app, name: str, size: tuple[int, int]) -> None:
    async with running(make_app(), size) as pilot:
        if "f3" in PICTURES[name]:
            await pilot.fill()
            await pilot.press("f2")
        await pilot.press(*PICTURES[name])
        seen = pilot.text + "\n"
    path = FOLDER / f"{name}.{size[0]}x{size[1]}.txt"
    if os.environ.get("BETAFLOOR_PICTURES") == "write":
        FOLDER.mkdir(exist_ok=True)
        path.write_text(seen, encoding="utf-8")
    assert seen == path.read_text(encoding="utf-8")


@pytest.mark.parametrize("path", sorted(FOLDER.glob("*.txt")), ids=lambda path: path.name)
def test_a_picture_fits_its_screen_and_belongs_to_a_test(path: Path) -> None:
    name, size, _ = path.name.rsplit(".", 2)
    width, height = map(int, size.split("x"))
    lines = path.read_text(encoding="utf-8").splitlines()
    assert name in PICTURES
    assert len(lines) == height and max(map(len, lines)) <= width
    assert lines[0].startswith(" Betafloor · ") and "invented demo data" in lines[0]
