"""Updates by hand, their limits, and what holds for any lots."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy import stats

from models.growth.learning import MeanBelief, ShareBelief

VALUES = st.lists(st.floats(20, 200), min_size=1, max_size=30)


def test_by_hand() -> None:
    """Prior 80 worth 2 lots, spread 10 worth 4; lots 70, 90, 110: mean 90, squares 800, shift 2 x 3 x 100 / 10."""
    after = MeanBelief.prior(80, 10, 2, 4).after([70, 90, 110])
    assert after.mean == pytest.approx((2 * 80 + 270) / 5)
    assert (after.lots, after.shape) == (5, 2 + 1.5)
    assert after.scale == pytest.approx(2 * 100 + 800 / 2 + 2 * 3 * 10**2 / (2 * 5))
    low, high = after.interval(0.9)
    half = stats.t.ppf(0.95, 7) * np.sqrt(after.scale / 3.5 / 5)
    assert (low, high) == pytest.approx((after.mean - half, after.mean + half))


def test_no_lots_no_change() -> None:
    prior = MeanBelief.prior(80, 10, 3, 4)
    assert prior.after([]) == prior
    assert ShareBelief.prior(0.05, 40).after([], 0.1) == ShareBelief.prior(0.05, 40)


def test_many_lots_overrule_the_card() -> None:
    values = np.random.default_rng(1).normal(110, 15, 2000)
    after = MeanBelief.prior(80, 10, 3, 4).after(values.tolist())
    assert after.mean == pytest.approx(values.mean(), abs=0.1)
    assert after.scale / after.shape == pytest.approx(values.var(), rel=0.02)


@given(values=VALUES, card=st.floats(50, 150))
def test_between_card_and_lots(values: list[float], card: float) -> None:
    after = MeanBelief.prior(card, 15, 3, 4).after(values)
    mean = sum(values) / len(values)
    assert min(card, mean) - 1e-9 <= after.mean <= max(card, mean) + 1e-9
    low, high = after.interval()
    assert low <= after.mean <= high
    wide_low, wide_high = after.of_next(0.95)
    assert wide_low <= low
    assert wide_high >= high


@given(values=VALUES)
def test_order_does_not_matter(values: list[float]) -> None:
    prior = MeanBelief.prior(90, 15, 3, 4)
    at_once, one_by_one = prior.after(values), prior
    for value in values:
        one_by_one = one_by_one.after([value])
    assert at_once.mean == pytest.approx(one_by_one.mean)
    assert at_once.scale == pytest.approx(one_by_one.scale)


def test_losses_by_hand() -> None:
    """4 % worth 50 bags; a lot of 50 with 8 lost. Fully alike, the lot counts as one bag."""
    prior = ShareBelief.prior(0.04, 50)
    assert prior.after([(50, 8)], 0.0).mean == pytest.approx(10 / 100)
    assert prior.after([(50, 8)], 1.0).mean == pytest.approx((2 + 8 / 50) / 51)
    low, high = prior.after([(50, 8)], 0.0).interval(0.9)
    assert (low, high) == pytest.approx(tuple(stats.beta(10, 90).ppf([0.05, 0.95])))


@given(lots=st.lists(st.tuples(st.integers(1, 200), st.floats(0, 1)), min_size=1, max_size=10), r=st.floats(0, 0.9))
def test_more_alike_bags_say_less(lots: list[tuple[int, float]], r: float) -> None:
    counted = [(float(bags), bags * share) for bags, share in lots]
    prior = ShareBelief.prior(0.05, 40)
    alone, alike = prior.after(counted, 0.0), prior.after(counted, r)
    assert alike.lost + alike.kept <= alone.lost + alone.kept + 1e-9
    assert 0 < alike.mean < 1
