"""What the corners need of the base on plain floats, and the network chosen for it."""

from dataclasses import dataclass

from . import preferred
from .ieee import INF, NAN, div, either, known, least, ln, most
from .laws import area_current, hot_factor, leakage, over_temperature, thermal_voltage, vbe_highest, vbe_lowest
from .saturation import Saturation, at_current, beta_allowed, v_promised
from .sheet import Sheet
from .situation import Situation


@dataclass(frozen=True)
class Need:
    """What one corner asks of the base."""

    ic: float
    drive: float
    sat: Saturation
    gain: float  # gain floor that the sheet states at room temperature
    beta: float
    ib: float
    vbe: float


@dataclass(frozen=True)
class Needs:
    """What all corners ask."""

    corners: tuple[Need, ...]
    inrush: Need | None
    v_on: float
    guess: float  # highest junction temperature if every other demand is met
    tj_limit: float
    vbe_min: float
    ib_limit: float
    leak: float
    v_base: float  # base voltage allowed when off

    @property
    def drives(self) -> tuple[Need, ...]:
        return self.corners if self.inrush is None else (*self.corners, self.inrush)


@dataclass(frozen=True)
class Network:
    """Ω; RBE infinite: none."""

    rb: float
    rbe: float
    low: float
    high: float


# --- what a part can take


def junction_limit(sit: Situation, s: Sheet) -> float:
    asked = sit.number("limits.junction_max")
    return least(s.tj_max, asked) if known(asked) else s.tj_max


def thermal_resistance(sit: Situation, s: Sheet) -> float:
    sink = sit.number("heatsink.case_to_ambient")
    return s.rth_jc + sink if known(sink) else s.rth_ja


def base_limit(s: Sheet) -> float:
    """The rating, else the larger of what the sheet tests and a tenth of IC."""
    return s.ib if known(s.ib) else either(s.ib_tested, s.ic / 10)


def cold_rise(sit: Situation, s: Sheet) -> float:
    return 2.5e-3 * max(25 - sit.number("ambient.min"), 0.0) if s.darlington else 0.0


def lightest_load(sit: Situation, v_on: float) -> float:
    if known(sit.ic_least):
        return sit.ic_least
    return max((sit.vs_min - v_on) / sit.r_max, 1e-3 * sit.ic_max)


# --- what the corners ask


def needs(sit: Situation, s: Sheet) -> Needs:
    asked = sit.number("limits.on_voltage_max")
    unstated = 2.5 if s.darlington else 1.0
    v_on = asked if known(asked) else unstated
    guess = _tj_guess(sit, s, v_on)
    hot = hot_factor(guess)
    coldest = sit.number("ambient.min")
    cold = ((min(coldest, 25.0) + 273.15) / 298.15) ** s.cold_exponent
    corners = tuple(_need(sit, s, ic, drive, v_on / hot - cold_rise(sit, s), cold) for ic, drive in sit.corners)
    inrush = None
    if known(sit.ic_inrush):
        ic = sit.ic_inrush
        asks = _need(sit, s, ic, sit.corners[-1][1], unstated, cold)
        survives = s.soa_dc and area_current(s.soa, sit.vs_max) >= ic
        ib = 0.0 if survives else ic / asks.beta
        vbe = 0.0 if survives else vbe_highest(s, ic, ib, coldest)
        inrush = Need(ic, asks.drive, asks.sat, asks.gain, asks.beta, ib, vbe)
    promised = [v_promised(one.sat, one.beta) for one in corners]
    promised_most = max(v if known(v) else INF for v in promised)
    guess = min(guess, _tj_guess(sit, s, promised_most * hot + cold_rise(sit, s)))
    leak = leakage(s, sit.vs_max, guess)
    spare = sit.number("limits.off_current_max") - leak
    v_base = (
        over_temperature(s.floor_v, guess) + thermal_voltage(guess) * ln(div(spare, s.floor_i)) if spare > 0 else NAN
    )
    vbe_min = vbe_lowest(s, lightest_load(sit, v_on), guess)
    return Needs(corners, inrush, v_on, guess, junction_limit(sit, s), vbe_min, base_limit(s), leak, v_base)


def _need(sit: Situation, s: Sheet, ic: float, drive: float, v_room: float, cold: float) -> Need:
    sat = at_current(s, ic, cold)
    gain = s.proven_gain(ic)
    beta = beta_allowed(sat, v_room)
    ib = most(ic / beta, ic * sit.number("choice.overdrive") / gain if known(gain) else 0.0)
    return Need(ic, drive, sat, gain, beta, ib, vbe_highest(s, ic, ib, sit.number("ambient.min")))


def _tj_guess(sit: Situation, s: Sheet, v_on: float) -> float:
    """With the on-voltage and the driver at their limits, at most the part's own limit."""
    i_most = least(base_limit(s), sit.number("drive.current_max"))
    loss = sit.ic_max * v_on + i_most * max(1.0, *(x.value for x in s.vbe), 1.0)
    rise = thermal_resistance(sit, s) * loss
    limit = junction_limit(sit, s)
    hottest = sit.number("ambient.max")
    return max(min(hottest + (rise if known(rise) else INF), limit if known(limit) else 150.0), hottest)


# --- the network


class Designer:
    """Chooses networks for one part under one requirement."""

    def __init__(self, sit: Situation, n: Needs) -> None:
        self.sit, self.n = sit, n
        self.tol, self.r_drive = sit.number("resistors.tolerance"), sit.number("drive.resistance")
        self.series = sit.req.word("resistors.series")

    def window(self, rbe: float) -> tuple[float, float]:
        """RB from the driver and the base upwards, to what every corner needs."""
        n, over = self.n, self.sit.drive_max - self.n.vbe_min
        share = n.ib_limit + n.vbe_min / (rbe * (1 + self.tol))
        currents = [self.sit.number("drive.current_max")] + ([share] if known(share) else [])
        low = most(1.0, 0.0, *((div(over, i) - self.r_drive) / (1 - self.tol) for i in currents))
        high = least(
            INF,
            *(
                (div(d.drive - d.vbe, d.ib + d.vbe / (rbe * (1 - self.tol))) - self.r_drive) / (1 + self.tol)
                for d in n.drives
            ),
        )
        return low, high

    def design(self) -> Network:
        """RB in the middle of its window; RBE only where turning off needs it."""
        low, high = self.window(INF)
        usable = high
        if self.sit.off_open:
            usable = least(high, -INF)
        else:
            quiet = (div(self.n.v_base - self.sit.off_level, self.n.leak) - self.r_drive) / (1 + self.tol)
            usable = least(high, quiet if known(quiet) else high)
        if preferred.at_least(low, self.series) <= usable:
            return Network(self._inside(low, usable), INF, low, high)
        return self._with_rbe(Network(self._inside(low, high), INF, low, high))

    def at_an_end(self, first: Network, place: float, stiff: bool) -> Network:
        """RB at a place of the window, RBE the smallest that the drive can pay for or the largest that turns off."""
        rb = self._at_place(first.low, first.high, place)
        bottom, top = self._rbe_interval(rb)
        rbe = preferred.at_least(bottom, self.series) if stiff else preferred.at_most(top, self.series)
        return Network(rb, rbe, *self.window(rbe))

    def _with_rbe(self, plain: Network) -> Network:
        if plain.low <= plain.high:
            rb, rbe = self._comfortable(plain.low, plain.high)
            if known(rb):
                return Network(rb, rbe, *self.window(rbe))
        # no drive can pay for it: one that at least turns the part off
        _, top = self._rbe_interval(plain.rb)
        rbe = preferred.at_most(top, self.series) if 10.0 <= top < INF else INF
        low, high = self.window(rbe)
        serves = preferred.at_most(high, self.series)
        return Network(serves if 0 < serves < INF else plain.rb, rbe, low, high)

    def _comfortable(self, low: float, high: float) -> tuple[float, float]:
        """The first RB, from the largest down, that leaves RBE a comfortable interval; else the widest."""
        enough = 1.5 * preferred.largest_step(self.series)
        best, widest, kept = NAN, 0.0, (NAN, NAN)
        for eighths in range(8, -1, -1):
            rb = self._at_place(low, high, eighths / 8)
            bottom, top = self._rbe_interval(rb)
            if widest >= enough or not bottom < INF or not preferred.at_least(bottom, self.series) <= top:
                continue
            if div(top, bottom) > widest:
                best, widest, kept = rb, div(top, bottom), (bottom, top)
        return best, self._inside(kept[0], least(kept[1], kept[0] * 10))

    def _rbe_interval(self, rb: float) -> tuple[float, float]:
        """The smallest RBE that every corner can pay for, the largest that turns off when hot."""
        n, tol = self.n, self.tol
        upper, lower = rb * (1 + tol) + self.r_drive, rb * (1 - tol) + self.r_drive
        bottom = 0.0
        for d in n.drives:
            spare = div(d.drive - d.vbe, upper) - d.ib
            bottom = most(bottom, d.vbe / spare / (1 - tol) if spare > 0 else INF)
        if self.sit.off_open:
            return bottom, div(n.v_base, n.leak + self.sit.off_leak) / (1 + tol)
        excess = div(self.sit.off_level + n.leak * upper - n.v_base, lower)
        return bottom, INF if excess <= 0 else n.v_base / (excess if excess > 0 else 1.0) / (1 + tol)

    def _at_place(self, low: float, high: float, place: float) -> float:
        """The preferred value at a place of a window on a ratio scale, inside it if one is."""
        spread = high / low if high > low > 0 else 1.0
        wanted = preferred.nearest((low if low > 0 else high) * spread**place, self.series)
        if wanted < low:
            return preferred.at_least(low, self.series)
        return preferred.at_most(high, self.series) if wanted > high else wanted

    def _inside(self, low: float, high: float) -> float:
        """The preferred value in the middle; of an empty window the largest that serves the base."""
        top = low * 10 if high == INF else high
        bottom = low if low > 0 else top / 10
        lowest, highest = preferred.at_least(bottom, self.series), preferred.at_most(top, self.series)
        if lowest > top or not known(top):
            serves = lowest if high == INF else highest
            return serves if 0 < serves < INF else lowest
        return self._at_place(bottom, top, 0.5)
