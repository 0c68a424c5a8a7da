"""Invented parts, a source without a file, and the text of a screen."""

from collections.abc import AsyncIterator, Mapping, Sequence
from contextlib import asynccontextmanager
from dataclasses import dataclass, field, replace
from typing import TypeVar

from textual.app import App
from textual.pilot import Pilot as TextualPilot
from textual.widget import Widget
from textual.widgets import Input

from engine.part import Limit, Part
from engine.ranking import Ranking
from engine.shelf import Shelf
from tui.app import BetafloorApp
from tui.screens.bench import BenchScreen
from tui.source import SourceError
from tui.state import Draft, Session

W = TypeVar("W", bound=Widget)


def screen_text(app: App[int]) -> str:
    """What the terminal shows, a line a row; the only place that touches a private name."""
    strips = app.screen._compositor.render_strips()
    return "\n".join("".join(segment.text for segment in strip).rstrip() for strip in strips)


def at(**conditions: float) -> tuple[tuple[str, float], ...]:
    return tuple(sorted(conditions.items()))


def npn(
    name: str,
    *,
    structure: str = "npn",
    package: str = "TO-92",
    vceo: float = 45.0,
    ic: float = 0.8,
    gains: Mapping[float, float] | None = None,
    saturated: bool = True,
) -> Part:
    """An invented part with a lifelike set of limits."""
    gains = {0.01: 80.0, 0.15: 100.0, 0.5: 40.0} if gains is None else gains
    limits = [
        Limit("VCEO", max=vceo, source="invented sheet, rev 2"),
        Limit("VCBO", max=vceo * 1.5, source="invented sheet, rev 2"),
        Limit("VEBO", max=6.0, source="invented sheet, rev 2"),
        Limit("IC", max=ic, source="invented sheet, rev 2"),
        Limit("ICM", max=2 * ic, source="invented sheet, rev 2"),
        Limit("IB", max=ic / 5, source="invented sheet, rev 2"),
        Limit("PD", max=0.625, conditions=at(ta=25.0), source="invented sheet, rev 2"),
        Limit("TJ", max=150.0, source="invented sheet, rev 2"),
        Limit("RthJA", max=200.0, source="invented sheet, rev 2"),
        Limit("ICBO", max=1e-8, conditions=at(vcb=vceo), source="invented sheet, rev 2"),
        Limit("VBE(sat)", min=0.6, max=1.2, conditions=at(ic=0.15, ib=0.015), source="invented sheet, rev 2"),
        Limit("fT", min=2.5e8, conditions=at(ic=0.02, vce=20.0), source="invented sheet, rev 2"),
    ]
    limits += [
        Limit("hFE", min=gain, conditions=at(ic=current, vce=1.0), pulsed=current > 0.1, source="invented sheet, rev 2")
        for current, gain in gains.items()
    ]
    if saturated:
        limits.append(Limit("VCE(sat)", max=0.3, conditions=at(ic=0.15, ib=0.015), source="invented sheet, rev 2"))
        limits.append(Limit("VCE(sat)", max=0.9, conditions=at(ic=0.5, ib=0.05), source="invented sheet, rev 2"))
    return Part(name, structure, package, "Quillbrook", limits=tuple(limits))


PARTS: tuple[Part, ...] = (
    npn("QX-110"),
    npn("QX-111", structure="pnp"),
    npn("QX-112", package="SOT-23", gains={0.01: 200.0, 0.15: 220.0, 0.5: 90.0}),
    npn("QX-114", vceo=20.0),
    npn("QX-116", saturated=False),
    npn("QX-118", structure="", package=""),
    npn("QX-130", package="TO-126", vceo=80.0, ic=3.0, gains={0.15: 60.0, 1.0: 40.0, 2.0: 20.0}),
    npn("[/]oops", package="[red]SOT-23[/red]"),
    npn("line\nbreak\x1b[31m"),
    npn("QX-190", gains={}),
)

COIL: dict[str, str] = {
    "position": "low side",
    "supply.min": "21.6 V",
    "supply.max": "26.4 V",
    "load.kind": "coil",
    "load.resistance": "330 ohm",
    "load.tolerance": "10 %",
    "load.inductance": "0.9 H",
    "load.clamp": "diode",
    "drive.high_min": "2.9 V",
    "drive.high_max": "3.4 V",
    "drive.low_max": "0.3 V",
    "drive.current_max": "10 mA",
    "ambient.min": "-5 degC",
    "ambient.max": "55 degC",
    "limits.on_voltage_max": "0.5 V",
    "limits.off_current_max": "200 uA",
}
"""A 24 V valve, as the texts of the form."""


def shelf_of(parts: tuple[Part, ...] = PARTS) -> Shelf:
    import numpy as np

    shelf = Shelf.from_parts(parts)
    stock = np.array([(7 * i) % 10 for i in range(len(parts))], dtype=np.int64)
    return shelf.with_stock(stock, np.zeros(len(parts), np.int64), np.full(len(parts), np.nan))


@dataclass
class FakeSource:
    """A shelf in memory."""

    parts: tuple[Part, ...] = PARTS
    trouble: str = ""
    name: str = "test shelf"
    requirements_kept: dict[str, str] = field(default_factory=dict)
    shortlists: list[list[str]] = field(default_factory=list)

    def shelf(self) -> Shelf:
        if self.trouble:
            raise SourceError(self.trouble)
        return shelf_of(self.parts)

    def part(self, type_number: str) -> Part:
        return next(part for part in self.parts if part.type_number == type_number)

    def requirements(self) -> Mapping[str, str]:
        return self.requirements_kept

    def keep_requirement(self, title: str, toml: str) -> str:
        self.requirements_kept[title] = toml
        return f"Saved: {title}"

    def keep_shortlist(self, ranking: Ranking, rows: Sequence[int], weights: Mapping[str, float]) -> str:
        self.shortlists.append([str(ranking.shelf.names[row]) for row in rows])
        return f"Saved: {len(rows)} parts"


class BigSource(FakeSource):
    """The invented parts over and over."""

    def __init__(self, n: int) -> None:
        super().__init__()
        self.n = n

    def shelf(self) -> Shelf:
        import numpy as np

        small = shelf_of(PARTS)
        big = small.take(np.arange(self.n) % len(PARTS))
        big.names[:] = [f"T-{i:06}" for i in range(self.n)]
        return big


class Pilot:
    """Presses keys and waits until the screen has come to rest: no worker runs, no timer is due."""

    def __init__(self, app: BetafloorApp, pilot: TextualPilot[int]) -> None:
        self.app, self.pilot = app, pilot

    async def rest(self) -> None:
        """Until every worker is done and the last ranking belongs to the last draft."""
        for _ in range(200):
            await self.pilot.pause()
            await self.app.workers.wait_for_complete()
            await self.pilot.pause()
            bench = self.app.screen
            if not (isinstance(bench, BenchScreen) and bench.waiting):
                return
        raise AssertionError("the screen does not come to rest")

    async def press(self, *keys: str) -> None:
        await self.pilot.press(*keys)
        await self.rest()

    async def write(self, text: str) -> None:
        """Write a text, key by key."""
        await self.press(*(_KEYS.get(c, c) for c in text))

    async def answer(self, text: str) -> None:
        """Put a text into the question that is open and answer it."""
        self.app.screen.query_one(Input).value = text
        await self.press("enter")

    @property
    def text(self) -> str:
        return screen_text(self.app)

    @property
    def told(self) -> str:
        """What was told in passing."""
        return "\n".join(f"{one.title}: {one.message}" for one in self.app._notifications)

    @property
    def session(self) -> Session:
        return self.app.session

    def find(self, kind: type[W], selector: str = "*") -> W:
        """The one widget of a kind on the screen."""
        return self.app.screen.query_one(selector if selector != "*" else kind.__name__, kind)

    async def fill(self, texts: Mapping[str, str] = COIL, title: str = "Valve") -> None:
        """Go to the bench and put a draft into the form."""
        await self.press("f3")
        self.app.session = replace(self.app.session, draft=Draft("switch", title, texts))
        await self.rest()


_KEYS = {" ": "space", "/": "slash", ".": "full_stop", "-": "minus", "_": "underscore", "[": "left_square_bracket"}


@asynccontextmanager
async def running(app: BetafloorApp, size: tuple[int, int] = (80, 24)) -> AsyncIterator[Pilot]:
    """The app on a screen of `size`, its shelf opened."""
    async with app.run_test(size=size) as pilot:
        one = Pilot(app, pilot)
        await one.rest()
        yield one
