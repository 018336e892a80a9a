"""The random parts against closed forms from SciPy, one source of spread at a time, within Monte Carlo error."""

from __future__ import annotations

import numpy as np
import pytest
from scipy import stats

from scheduler.forecast.spread import gamma, lognormal, lost_bags, variance_parts

DRAWS = 40_000
LEVELS = (0.1, 0.5, 0.9)


def within_error(found: np.ndarray, distribution: object, levels: tuple[float, ...] = LEVELS) -> None:
    """Each percentile lies within four standard errors of its closed form: sqrt(p (1 - p) / n) / density."""
    for level in levels:
        right = distribution.ppf(level)  # type: ignore[attr-defined]
        error = np.sqrt(level * (1 - level) / found.size) / distribution.pdf(right)  # type: ignore[attr-defined]
        assert abs(np.quantile(found, level) - right) < 4 * error, level


@pytest.mark.parametrize("cv", [0.05, 0.2, 0.6])
def test_lognormal(cv: float) -> None:
    found = lognormal(np.random.default_rng(1), cv, (DRAWS,))
    s = np.sqrt(np.log1p(cv * cv))
    within_error(found, stats.lognorm(s, scale=np.exp(-s * s / 2)))
    assert found.mean() == pytest.approx(1, abs=4 * cv / np.sqrt(DRAWS))


@pytest.mark.parametrize(("cv", "bags"), [(0.2, 1), (0.2, 90), (0.5, 4)])
def test_mean_of_bags_is_gamma(cv: float, bags: int) -> None:
    """The mean of n gamma bags is gamma with n times the shape; drawn in one, and bag by bag."""
    found = gamma(np.random.default_rng(2), np.array([cv / np.sqrt(bags)]), (1, DRAWS))[0]
    k = bags / cv**2
    within_error(found, stats.gamma(k, scale=1 / k))
    bag_by_bag = gamma(np.random.default_rng(3), np.full(bags, cv), (bags, DRAWS)).mean(axis=0)
    within_error(bag_by_bag, stats.gamma(k, scale=1 / k))


@pytest.mark.parametrize(("bags", "share", "correlation"), [(90, 0.04, 0.1), (40, 0.3, 0.3), (200, 0.02, 0.02)])
def test_losses_are_beta_binomial(bags: int, share: float, correlation: float) -> None:
    found = lost_bags(np.random.default_rng(4), np.array([float(bags)]), np.array([share]), correlation, DRAWS)[0]
    weight = 1 / correlation - 1
    right = stats.betabinom(bags, share * weight, (1 - share) * weight)
    for lost in range(0, bags + 1, max(1, bags // 10)):
        chance = right.cdf(lost)
        assert abs((found <= lost).mean() - chance) < 4.5 * np.sqrt(max(chance * (1 - chance), 1e-6) / DRAWS) + 1e-4
    assert found.mean() == pytest.approx(bags * share, abs=4.5 * right.std() / np.sqrt(DRAWS))


def test_without_correlation_losses_are_binomial() -> None:
    found = lost_bags(np.random.default_rng(5), np.array([50.0]), np.array([0.1]), 0.0, DRAWS)[0]
    right = stats.binom(50, 0.1)
    for lost in range(12):
        assert abs((found <= lost).mean() - right.cdf(lost)) < 0.012


def test_no_spread_is_one() -> None:
    rng = np.random.default_rng(6)
    assert (lognormal(rng, 0.0, (3, 4)) == 1).all()
    assert (gamma(rng, 0.0, (3, 4)) == 1).all()
    assert (lost_bags(rng, np.array([9.0]), np.array([0.0]), 0.1, 7) == 0).all()


@pytest.mark.parametrize(("cv", "farm", "lot"), [(0.2, 0.15, 0.35), (0.5, 0.0, 1.0), (0.3, 1.0, 0.0), (0.25, 0.0, 0.0)])
def test_parts_make_up_the_whole(cv: float, farm: float, lot: float) -> None:
    a, b, c = variance_parts(cv, farm, lot)
    assert (1 + a * a) * (1 + b * b) * (1 + c * c) == pytest.approx(1 + cv * cv)
    assert (a == 0) == (farm == 0)
