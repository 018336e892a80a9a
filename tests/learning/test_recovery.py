"""Simulated seasons, whose truth is known: it is found again, and 90 % ranges hold it nine times in ten.

The generator shares no formula with the updates. A farm has a yield, a colonisation time and a loss of its own; each
lot has its luck, each bag its own on top; days are log-normal and are written down as whole days; losses are
beta-binomial.
"""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date, timedelta
from pathlib import Path

import numpy as np
import pytest

from models.farm import Farm
from models.growth import colonisation_days
from scheduler.folder import read_farm_folder
from scheduler.learning.learned import LearnAnswer, learn
from scheduler.learning.lots import Flush, PickedLot
from scheduler.learning.picks import Picks

FARM = read_farm_folder(Path(__file__).parents[1] / "broken_farms" / "base").farm
CARD = FARM.strain_called("OYS")
DRY_KG = 2.3 * 0.38
SHELF_FACTOR = colonisation_days(CARD, 22.0) / CARD.colonise_days
FIRST = date(2027, 1, 4)
SEASONS = 400
LOT_SHARE = 0.9
"""Share of the variance of yields that is common to a lot; the rest is each bag's own."""
CORRELATION = 0.05


@dataclass(frozen=True)
class Truth:
    be_pct: float
    colonise_days: float
    loss_pct: float


def a_farm_like_the_card(rng: np.random.Generator) -> Truth:
    """A farm drawn from what a card of that sureness allows: as far off as the mean of two lots may be."""
    return Truth(
        CARD.be_pct * (1 + CARD.yield_cv / np.sqrt(2) * rng.standard_normal()),
        CARD.colonise_days * np.exp(CARD.days_cv / np.sqrt(2) * rng.standard_normal()),
        100 * rng.beta(40 * CARD.loss_pct / 100, 40 * (1 - CARD.loss_pct / 100)),
    )


def season(rng: np.random.Generator, truth: Truth, lots: int, bags: int = 100) -> Picks:
    """The pickings of one season."""
    spread = CARD.yield_cv * truth.be_pct / 100
    made = []
    for number in range(lots):
        inoculated = FIRST + timedelta(days=7 * number)
        days = truth.colonise_days * SHELF_FACTOR * np.exp(CARD.days_cv * rng.standard_normal())
        ready = inoculated + timedelta(days=int(np.ceil(days)))
        loss = truth.loss_pct / 100
        rate = rng.beta(loss * (1 / CORRELATION - 1), (1 - loss) * (1 / CORRELATION - 1))
        stand = bags - int(rng.binomial(bags, rate))
        luck = truth.be_pct / 100 + spread * np.sqrt(LOT_SHARE) * rng.standard_normal()
        luck += spread * np.sqrt((1 - LOT_SHARE) / max(stand, 1)) * rng.standard_normal()
        flushes = []
        for flush, share in enumerate(CARD.flush_share, start=1):
            day = ready + timedelta(days=7 + 12 * (flush - 1))
            flushes.append(Flush(flush, day, day, stand, max(0.0, luck) * share * DRY_KG * stand))
        code = f"27W{number % 53 + 1:02d}-OYS-{number // 53 + 1}"
        made.append(
            PickedLot(code, "OYS", tuple(flushes) if stand else (), inoculated, ready, ready, bags,
                      None if stand else ready)
        )  # fmt: skip
    return Picks("picks.csv", tuple(made))


def keys(farm: Farm, picks: Picks) -> dict[str, tuple[float, float, float]]:
    answer: LearnAnswer = learn(farm, picks)
    return {one.key: (one.low, one.after, one.high) for one in answer.strains[0].keys}


@pytest.mark.parametrize("lots", [4, 12])
def test_ranges_hold_the_truth_nine_times_in_ten(lots: int) -> None:
    rng = np.random.default_rng(2027)
    held = dict.fromkeys(("be_pct", "colonise_days", "loss_pct"), 0)
    for _ in range(SEASONS):
        truth = a_farm_like_the_card(rng)
        found = keys(FARM, season(rng, truth, lots))
        for key in held:
            low, _, high = found[key]
            held[key] += low <= getattr(truth, key) <= high
    shares = {key: count / SEASONS for key, count in held.items()}
    assert all(0.85 <= share <= 0.95 for share in shares.values()), shares


def test_a_farm_far_from_the_card_is_found() -> None:
    rng = np.random.default_rng(7)
    truth = Truth(be_pct=62.0, colonise_days=21.0, loss_pct=11.0)
    found = keys(FARM, season(rng, truth, 300))
    assert found["be_pct"][1] == pytest.approx(62.0, rel=0.03)
    assert found["colonise_days"][1] == pytest.approx(21.0, rel=0.02)
    assert found["loss_pct"][1] == pytest.approx(11.0, abs=1.0)
    assert found["flush_share"][1] == CARD.flush_share
    assert (found["pin_days"][1], found["rest_days"][1]) == (7, 12)


def test_learning_does_better_than_the_card_and_than_the_lots_alone() -> None:
    """Mean square error of the yield after four lots, over farms that the card allows."""
    rng = np.random.default_rng(11)
    errors = []
    for _ in range(SEASONS):
        truth = a_farm_like_the_card(rng)
        picks = season(rng, truth, 4)
        alone = np.mean(
            [100 * sum(one.kg for one in lot.flushes) / (lot.flushes[0].bags * DRY_KG) for lot in picks.lots]
        )
        errors.append([CARD.be_pct - truth.be_pct, alone - truth.be_pct, keys(FARM, picks)["be_pct"][1] - truth.be_pct])
    card, lots, learned = np.sqrt(np.mean(np.square(errors), axis=0))
    assert learned < lots < card
