"""A page of the list costs the same whatever the length of the shelf."""

import statistics
import time

import numpy as np
import pytest

from engine.shelf import Shelf
from tui.screens.shelf import ShelfScreen
from tui.widgets.lines_view import LinesView

from .support import PARTS, FakeSource, running, shelf_of

MANY = 100_000


class BigSource(FakeSource):
    """The invented parts over and over."""

    def __init__(self, n: int) -> None:
        super().__init__()
        self.n = n

    def shelf(self) -> Shelf:
        small = shelf_of(PARTS)
        big = small.take(np.arange(self.n) % len(PARTS))
        big.names[:] = [f"T-{i:06}" for i in range(self.n)]
        return big


async def seconds_a_page(app) -> float:
    """Processor time of one page down on a screen of 120×40, the toolkit's own share included."""
    async with running(app, (120, 40)) as pilot:
        assert isinstance(pilot.app.screen, ShelfScreen)
        view = pilot.find(LinesView, "#parts")
        times = []
        for _ in range(25):
            begun = time.process_time()
            view.action_page(1)
            await pilot.pilot.pause()
            times.append(time.process_time() - begun)
        return statistics.median(times)


async def test_a_page_of_a_long_shelf_costs_what_a_page_of_a_short_one_costs(make_app) -> None:
    short, long = await seconds_a_page(make_app(BigSource(2000))), await seconds_a_page(make_app(BigSource(MANY)))
    print(f"a page of 2,000: {short * 1e3:.1f} ms; of {MANY:,}: {long * 1e3:.1f} ms")
    assert long < 2 * short + 0.005


@pytest.mark.parametrize("keys", [("slash", "9", "9", "9", "enter"), ("4", "4"), ("i",)])
async def test_a_long_shelf_is_searched_sorted_and_filtered(make_app, keys) -> None:
    async with running(make_app(BigSource(MANY)), (120, 40)) as pilot:
        await pilot.press(*keys)
        assert f"of {MANY:,}" in pilot.text
        assert sum(line.startswith("▶") for line in pilot.text.splitlines()) == 1
