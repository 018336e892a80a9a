"""Learning recovers the truth from simulated seasons; its 90 % ranges hold it nine times in ten."""

from __future__ import annotations

from math import exp, log, sqrt

import numpy as np

from models.growth.learning import MeanBelief, ShareBelief
from scheduler.learning.learn import PRIOR_BAGS, PRIOR_LOTS, PRIOR_SPREAD_LOTS

SEASONS = 1200


def test_yields() -> None:
    """The true efficiency scatters round the card as the card's own weight says; lots scatter round it."""
    rng = np.random.default_rng(1)
    card, cv, held, errors = 85.0, 0.2, 0, []
    for _ in range(SEASONS):
        lots = int(rng.integers(3, 25))
        variance = (cv * card) ** 2 * PRIOR_SPREAD_LOTS / rng.chisquare(PRIOR_SPREAD_LOTS)
        truth = card + rng.standard_normal() * sqrt(variance / PRIOR_LOTS)
        values = truth + rng.standard_normal(lots) * sqrt(variance)
        after = MeanBelief.prior(card, cv * card, PRIOR_LOTS, PRIOR_SPREAD_LOTS).after(values.tolist())
        low, high = after.interval(0.9)
        held += low <= truth <= high
        errors.append(abs(after.mean - truth) - abs(card - truth))
    assert 0.85 <= held / SEASONS <= 0.95
    assert np.mean(errors) < -3


def test_days() -> None:
    rng = np.random.default_rng(2)
    card, spread, held = 16.0, sqrt(log(1 + 0.1**2)), 0
    for _ in range(SEASONS):
        lots = int(rng.integers(3, 25))
        variance = spread**2 * PRIOR_SPREAD_LOTS / rng.chisquare(PRIOR_SPREAD_LOTS)
        factor = rng.standard_normal() * sqrt(variance / PRIOR_LOTS)
        days = card * np.exp(factor + rng.standard_normal(lots) * sqrt(variance))
        after = MeanBelief.prior(0.0, spread, PRIOR_LOTS, PRIOR_SPREAD_LOTS).after(np.log(days / card).tolist())
        low, high = (card * exp(value) for value in after.interval(0.9))
        held += low <= card * exp(factor) <= high
    assert 0.85 <= held / SEASONS <= 0.95


def test_losses() -> None:
    """Rates scatter round the card as its bags say; each lot has a rate of its own, alike by the correlation."""
    rng = np.random.default_rng(3)
    card, correlation, held = 0.06, 0.1, 0
    for _ in range(SEASONS):
        truth = rng.beta(card * PRIOR_BAGS, (1 - card) * PRIOR_BAGS)
        weight = 1 / correlation - 1
        lots = []
        for _ in range(int(rng.integers(3, 25))):
            bags = int(rng.integers(40, 110))
            rate = rng.beta(max(truth * weight, 1e-6), (1 - truth) * weight)
            lots.append((float(bags), float(rng.binomial(bags, rate))))
        low, high = ShareBelief.prior(card, PRIOR_BAGS).after(lots, correlation).interval(0.9)
        held += low <= truth <= high
    assert 0.85 <= held / SEASONS <= 0.95
