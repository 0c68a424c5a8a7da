"""What the checks of a switch look at: one requirement, the parts, and the bounds of their networks."""

from dataclasses import dataclass

import numpy as np

from ..formula import Term
from ..policy import Policy
from ..prepared import Prepared
from ..requirement import Requirement
from .switch_bounds import Bounds
from .switch_situation import Situation


@dataclass(frozen=True, eq=False)
class SwitchCase:
    """Everything a check may compare."""

    requirement: Requirement
    sit: Situation
    p: Prepared
    b: Bounds
    policy: Policy

    def rating(self, symbol: str, column: str, unit: str, share: float) -> Term:
        """A rating of the parts at the share that the policy allows."""
        meaning = f"{symbol} rating" if share == 1 else f"{symbol} rating × {share:g} ({self.policy.name})"
        values = getattr(self.p, column) * share
        return Term(symbol, values, unit, meaning=meaning, source="rating", looked_up=(symbol,))

    def scaled(self, term: Term, share: float) -> Term:
        """A limit at the share that the policy allows."""
        if share == 1:
            return term
        return Term(f"{share:g}·{term.symbol}", term.values * share, term.unit, term.evidence,
                    source=f"policy {self.policy.name}", inputs={"full": term})  # fmt: skip

    @property
    def tj_limit(self) -> Term:
        """The junction temperature allowed by part, requirement and policy."""
        limit = self.b.tj_limit
        if np.isinf(self.policy.tj_max):
            return limit
        values = np.minimum(limit.values, self.policy.tj_max)
        return Term(limit.symbol, values, "°C", limit.evidence, f"at most {self.policy.tj_max:g} °C ({self.policy.name})",
                    looked_up=("TJ",), inputs={"limit": limit})  # fmt: skip


def tightest(pairs: list[tuple[Term, Term]]) -> tuple[Term, Term]:
    """Of several (value, least value) pairs the one with the smaller ratio, part by part."""
    value, least = pairs[0]
    for other_value, other_least in pairs[1:]:
        with np.errstate(all="ignore"):
            # a NaN in either is the tighter: silence must not hide behind a number
            tighter = ~(other_value.values / other_least.values >= value.values / least.values)
        value = _pick(tighter, other_value, value)
        least = _pick(tighter, other_least, least)
    return value, least


def _pick(mask: np.ndarray, theirs: Term, mine: Term) -> Term:
    values = np.where(mask, theirs.values, mine.values)
    grades = np.where(mask, theirs.grades, mine.grades)
    return Term(mine.symbol, values, mine.unit, grades, mine.meaning, "the tighter supply corner",
                inputs={"highest supply": theirs, "lowest supply": mine})  # fmt: skip
