"""A ranking and an explanation with made-up figures, so that pictures of screens do not hang on the engine's."""

import numpy as np

from engine.ranking import CheckColumn, CheckExplanation, Explanation, Ranking, Step, Verdict
from engine.requirement import Requirement
from engine.shelf import Floats, Shelf

NAMES = ("base drive", "collector–emitter voltage", "junction temperature")
BOUNDS = (
    "vce_on_max", "ic_on_max", "ic_on_min", "ib_on_min", "ib_on_max", "drive_current_max", "forced_beta_max", "power_max",
    "tj_max", "ic_off_max", "vce_off_max", "t_on_max", "t_off_max",
)  # fmt: skip


def ranking_of(shelf: Shelf, requirement: Requirement) -> Ranking:
    """Verdicts in turn over the shelf: fits, fits on typicals, cannot say, fails, fits, …"""
    n = len(shelf)
    verdict = np.array([i % 4 for i in range(n)], dtype=np.int8)
    room: Floats = np.where(verdict == Verdict.CANNOT_SAY, np.nan, np.where(verdict == Verdict.FAILS, 0.62, 1.26))
    grades = np.zeros(n, dtype=np.int8)
    checks = tuple(
        CheckColumn(name, f"Is {name} right?", "V", np.ones(n), room, room, np.zeros(n, dtype=np.int8), grades)
        for name in NAMES
    )
    score = np.where(verdict <= 1, 0.71, 0.0)
    order = np.lexsort((np.arange(n), verdict))
    network = {"rb": np.full(n, 4700.0), "rbe": np.where(verdict == 0, 47e3, np.nan)}
    network |= {"rb_low": np.full(n, 1200.0), "rb_high": np.full(n, 3300.0)}
    bounds = {name: np.full(n, 1.0) for name in BOUNDS}
    bounds |= {"tj_max": np.full(n, 71.4), "ic_on_max": np.full(n, 0.089), "forced_beta_max": np.full(n, 31.0)}
    worst = np.array([i % len(NAMES) for i in range(n)], dtype=np.int16)
    return Ranking(
        requirement,
        "none",
        shelf,
        checks,
        network,
        bounds,
        verdict,
        grades,
        worst,
        room,
        score,
        {"stock": score},
        order,
    )


def explanation_of(shelf: Shelf, row: int) -> Explanation:
    """One failing, one unknown and one passing check."""
    step = Step(
        "IB min", "base current", "(VOH min − VBE max) ÷ RB max", "(2.9 V − 0.9 V) ÷ 4.9 kΩ", "408 µA", "derived", ""
    )
    checks = (
        CheckExplanation("base drive", "Enough base current?", "fail", "derived", 4e-4, 6.5e-4, "A", 0.62, (),
                         "IB min 408 µA, must be at least IB needed 658 µA (×0.62)", (step,)),
        CheckExplanation("collector–emitter voltage", "Below the rating?", "pass", "guaranteed", 28.0, 45.0, "V", 1.61,
                         (),                         "VCE max 28 V, must be at most VCEO 45 V (×1.61)", ()),
        CheckExplanation("junction temperature", "Cool enough?", "unknown", "missing", None, 150.0, "°C", None,
                         ("RthJA",),                         "cannot say: no usable RthJA limit on file", ()),
    )  # fmt: skip
    return Explanation(
        duty="switch",
        part=str(shelf.names[row]),
        structure=shelf.structure_word(row),
        package=str(shelf.package[row]),
        verdict="fails",
        evidence="derived",
        says="fails: base drive: IB min 408 µA, must be at least IB needed 658 µA (×0.62)",
        network={"rb": 4700.0, "rbe": 47e3, "rb_low": 1200.0, "rb_high": 3300.0, "tolerance": 0.05},
        network_says="RB 4.7 kΩ, RBE 47 kΩ (E24, ±5 %); window of RB 1.2 kΩ to 3.3 kΩ",
        bounds=dict.fromkeys(BOUNDS, 1.0) | {"ic_on_max": 0.089, "forced_beta_max": 31.0, "tj_max": 71.4},
        checks=checks,
        cautions=("A transistor mostly fails short: the load then stays on.",),
        notes=("off current: 1 % of the load current taken as the limit, as none is stated",),
        sources=(),
    )
