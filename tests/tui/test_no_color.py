"""NO_COLOR (https://no-color.org): no colour is sent, and nothing is lost by it."""

import pytest

from .support import running


def colours(app) -> set[object]:
    strips = app.screen._compositor.render_strips()
    lines = [
        strip.apply_filter(one, app.screen.background_colors[1])
        for strip in strips
        for one in app._filters
        if one.enabled
    ]
    styles = [segment.style for strip in lines for segment in strip if segment.style]
    return {colour.name for style in styles for colour in (style.color, style.bgcolor) if colour is not None}


@pytest.mark.usefixtures("fixed_engine")
@pytest.mark.parametrize("size", [(80, 24), (120, 40)])
async def test_with_no_color_only_the_default_colours_are_sent(monkeypatch, make_app, size) -> None:
    monkeypatch.setenv("NO_COLOR", "1")
    async with running(make_app(), size) as pilot:
        for keys in (("down",), ("f3",), ("f5",), ("f1",)):
            await pilot.press(*keys)
            assert colours(pilot.app) <= {"default"}


@pytest.mark.usefixtures("fixed_engine")
async def test_the_words_are_the_same_with_and_without_colour(monkeypatch, make_app) -> None:
    seen = []
    for wish in ("", "1"):
        if wish:
            monkeypatch.setenv("NO_COLOR", wish)
        async with running(make_app(), (120, 40)) as pilot:
            await pilot.fill()
            await pilot.press("f5", "down")
            seen.append(pilot.text)
    assert seen[0] == seen[1]
