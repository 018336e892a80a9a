"""What lots say about a card: worked out by hand for a few, in the limits, and as properties."""

from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy import stats

from models.growth.learning import (
    LEAST_CV,
    LossBelief,
    NormalBelief,
    days_belief,
    effective_bags,
    loss_belief,
    value_belief,
)

CARD = value_belief(85.0, 0.20)
seen_values = st.lists(st.floats(1.0, 300.0), min_size=1, max_size=40)


def test_one_lot_by_hand() -> None:
    """(2 × 85 + 115) / 3 = 95; 4 × 17² + 2 × 1 / 3 × 30² = 1756 over 5 degrees of freedom."""
    after = CARD.updated([115.0])
    assert (after.mean, after.lots, after.freedom) == (95.0, 3.0, 5.0)
    assert after.spread == pytest.approx(math.sqrt(1756 / 5))
    low, high = after.interval(0.90)
    assert high - 95 == pytest.approx(95 - low) == pytest.approx(2.015048 * math.sqrt(1756 / 5 / 3), rel=1e-6)


def test_ranges_are_those_of_students_t() -> None:
    after = CARD.updated([80.0, 95.0, 70.0, 102.0])
    assert after.interval(0.9) == pytest.approx(
        stats.t.interval(0.9, after.freedom, after.mean, after.spread / math.sqrt(after.lots))
    )
    assert after.predicted(3, 0.95) == pytest.approx(
        stats.t.interval(0.95, after.freedom, after.mean, after.spread * math.sqrt(1 / after.lots + 1 / 3))
    )


def test_the_posterior_is_the_product_of_prior_and_likelihood() -> None:
    """Normal-inverse-gamma before, times the lots' likelihood, over the one after: the same at every point."""

    def log_density(belief: NormalBelief, mean: float, variance: float) -> float:
        shape, scale = belief.freedom / 2, belief.freedom * belief.spread**2 / 2
        return float(
            stats.invgamma.logpdf(variance, shape, scale=scale)
            + stats.norm.logpdf(mean, belief.mean, math.sqrt(variance / belief.lots))
        )

    seen = [80.0, 95.0, 70.0]
    after = CARD.updated(seen)
    left_over = [
        log_density(CARD, mean, variance)
        + float(sum(stats.norm.logpdf(seen, mean, math.sqrt(variance))))
        - log_density(after, mean, variance)
        for mean, variance in ((85.0, 289.0), (60.0, 100.0), (110.0, 900.0), (82.0, 150.0))
    ]
    assert left_over == pytest.approx([left_over[0]] * 4)


def test_no_lots_leave_the_card() -> None:
    assert CARD.updated([]) == CARD
    assert loss_belief(0.04).updated([]) == loss_belief(0.04)
    assert loss_belief(0.04).mean == pytest.approx(0.04)
    assert math.exp(days_belief(0.1).mean) == 1.0


def test_many_lots_leave_nothing_of_the_card() -> None:
    seen = [60.0, 70.0, 65.0] * 2000
    after = CARD.updated(seen)
    assert after.mean == pytest.approx(65.0, abs=0.01)
    assert after.spread == pytest.approx(math.sqrt(50 / 3), rel=0.01)
    low, high = after.interval()
    assert high - low < 0.2
    assert loss_belief(0.04).updated([(100, 12)] * 3000).mean == pytest.approx(0.12, abs=1e-4)


@given(seen_values)
def test_the_mean_lies_between_card_and_lots(seen: list[float]) -> None:
    average = math.fsum(seen) / len(seen)
    after = CARD.updated(seen).mean
    assert min(85.0, average) - 1e-9 <= after <= max(85.0, average) + 1e-9


@given(seen_values, seen_values)
def test_lots_may_come_in_two_parts(first: list[float], second: list[float]) -> None:
    once, twice = CARD.updated(first + second), CARD.updated(first).updated(second)
    assert (once.mean, once.lots, once.freedom, once.spread) == pytest.approx(
        (twice.mean, twice.lots, twice.freedom, twice.spread)
    )


@given(st.integers(1, 30), st.floats(0.0, 30.0), st.floats(60.0, 110.0))
def test_more_lots_of_the_same_narrow_the_range(pairs: int, half: float, centre: float) -> None:
    """Lots that differ as before: the second half of them says the same as the first."""
    few, many = (
        CARD.updated([centre - half, centre + half] * pairs),
        CARD.updated([centre - half, centre + half] * 4 * pairs),
    )
    width = [high - low for low, high in (few.interval(), many.interval())]
    assert width[1] < width[0]


@given(st.lists(st.tuples(st.integers(0, 300), st.floats(0, 1)), min_size=1, max_size=30))
def test_the_loss_lies_between_card_and_lots_and_its_range_is_within_0_and_1(lots: list[tuple[int, float]]) -> None:
    seen = [(bags, round(bags * share)) for bags, share in lots]
    card, after = loss_belief(0.04), loss_belief(0.04).updated(seen)
    rates = [gone / bags for bags, gone in seen if bags] or [0.04]
    assert min(0.04, *rates) - 1e-9 <= after.mean <= max(0.04, *rates) + 1e-9
    low, high = after.interval()
    assert 0 <= low <= high <= 1
    assert after.lost + after.kept >= card.lost + card.kept


def test_bags_of_a_lot_count_less_than_bags_of_many() -> None:
    assert effective_bags(1) == 1
    assert effective_bags(100, 0.0) == 100
    assert effective_bags(100, 1.0) == 1
    assert effective_bags(10**6, 0.05) == pytest.approx(20, rel=1e-3)
    one, many = loss_belief(0.04).updated([(100, 10)]), loss_belief(0.04).updated([(10, 1)] * 10)
    assert one.mean < many.mean


def test_beta_interval_by_hand() -> None:
    """With one bag kept, the chance of less than x lost is x to the power of the bags lost."""
    low, high = LossBelief(2.0, 1.0).interval(0.90)
    assert (low, high) == pytest.approx((math.sqrt(0.05), math.sqrt(0.95)))


def test_the_most_that_bags_to_come_lose() -> None:
    """Very many bags to come: only what is believed is unsure. One bag: the beta that has all or nothing."""
    belief = LossBelief(4.0, 96.0)
    assert belief.most(1e9) == pytest.approx(belief.interval(0.95)[1], rel=0.01)
    assert belief.most(20) > belief.most(200) > belief.interval(0.95)[1]


def test_a_card_that_is_sure_of_everything_can_still_learn() -> None:
    assert value_belief(85.0, 0.0).spread == pytest.approx(85 * LEAST_CV)
    assert days_belief(0.0).spread == pytest.approx(LEAST_CV, rel=1e-3)
    assert loss_belief(0.0).mean > 0


@pytest.mark.parametrize(
    "wrong",
    [
        lambda: NormalBelief(1.0, 0.0, 1.0, 1.0),
        lambda: LossBelief(0.0, 1.0),
        lambda: CARD.interval(1.0),
        lambda: CARD.predicted(0),
        lambda: loss_belief(0.04).updated([(10, 11)]),
        lambda: effective_bags(10, 1.5),
    ],
)
def test_nonsense_is_refused(wrong) -> None:
    with pytest.raises(ValueError, match="expected; found"):
        wrong()
