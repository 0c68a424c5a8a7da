"""A shelf of a hundred thousand parts is searched, sorted and filtered like a short one."""

import pytest

from .support import BigSource, running

MANY = 100_000


@pytest.mark.parametrize("keys", [("slash", "9", "9", "9", "enter"), ("4", "4"), ("i",)])
async def test_a_long_shelf_is_searched_sorted_and_filtered(make_app, keys) -> None:
    async with running(make_app(BigSource(MANY)), (120, 40)) as pilot:
        await pilot.press(*keys)
        assert f"of {MANY:,}" in pilot.text
        assert sum(line.startswith("▶") for line in pilot.text.splitlines()) == 1
