"""What lots that are over say about a strain card: conjugate updates of what was believed before."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from math import fsum, log1p, sqrt

from models.farm.spread import LOSS_CORRELATION

PRIOR_LOTS = 2.0
"""Lots that the card's value counts for, beside those that were seen [lots]; assumed."""
PRIOR_SPREAD_LOTS = 4.0
"""Degrees of freedom that the card's coefficient of variation counts for [-]; assumed."""
LEAST_CV = 0.02
"""Coefficient of variation taken where the card has a smaller one, as no two lots are alike [-]; assumed."""
LOT_CORRELATION = LOSS_CORRELATION
"""Correlation of losses among the bags of one lot, as moulds and slips at the bench reach many at once [-]; assumed."""
LEAST_LOSS = 0.005
"""Loss taken as the centre of the belief where the card says less, so that it can be learned [-]; assumed."""


@dataclass(frozen=True, slots=True)
class NormalBelief:
    """What is believed of the mean and the spread of something that differs from lot to lot.

    Attributes
    ----------
    mean : float
        Expected mean, in the unit of what is seen.
    lots : float
        Lots that this mean counts for [lots].
    freedom : float
        Degrees of freedom of the spread [-].
    spread : float
        Standard deviation from lot to lot, in the unit of the mean.

    Notes
    -----
    The normal-inverse-gamma distribution: the variance is inverse-gamma with shape ``freedom / 2`` and scale
    ``freedom × spread² / 2``, and the mean, given the variance, is normal with ``variance / lots`` (A. Gelman et al.
    (2013), Bayesian Data Analysis, 3rd edition, section 3.3). Seen lots leave it one of the same kind.
    """

    mean: float
    lots: float
    freedom: float
    spread: float

    def __post_init__(self) -> None:
        if not (self.lots > 0 and self.freedom > 0 and self.spread > 0):
            raise ValueError(
                f"lots, freedom and spread above 0 were expected;"
                f" found {self.lots:g}, {self.freedom:g}, {self.spread:g}"
            )

    def updated(self, seen: Sequence[float]) -> NormalBelief:
        """What is believed once lots were seen.

        Parameters
        ----------
        seen : sequence of float
            One value for each lot, in the unit of the mean.

        Examples
        --------
        Two lots of 90 and 100 %, where 85 % counted for two lots: 360 over 4.

        >>> after = NormalBelief(mean=85.0, lots=2.0, freedom=4.0, spread=17.0).updated([90.0, 100.0])
        >>> after.mean, after.lots, after.freedom, round(after.spread, 3)
        (90.0, 4.0, 6.0, 14.754)
        """
        count = len(seen)
        if count == 0:
            return self
        average = fsum(seen) / count
        lots, freedom = self.lots + count, self.freedom + count
        squares = (
            self.freedom * self.spread**2
            + fsum((value - average) ** 2 for value in seen)
            + self.lots * count / lots * (average - self.mean) ** 2
        )
        mean = (self.lots * self.mean + count * average) / lots
        return NormalBelief(mean, lots, freedom, sqrt(squares / freedom))

    def interval(self, share: float = 0.90) -> tuple[float, float]:
        """Range in which the mean lies with a probability, by Student's t, in the unit of the mean.

        Examples
        --------
        >>> low, high = NormalBelief(mean=85.0, lots=2.0, freedom=4.0, spread=17.0).interval()
        >>> round(low, 1), round(high, 1)  # 85 ± 2.132 × 17 / √2
        (59.4, 110.6)
        """
        return self._range(share, 1 / self.lots)

    def predicted(self, lots: int, share: float = 0.95) -> tuple[float, float]:
        """Range in which the average of lots to come lies with a probability, in the unit of the mean.

        Parameters
        ----------
        lots : int
            How many lots are averaged, from 1 [lots].
        share : float
            The probability [-].

        Raises
        ------
        ValueError
            Fewer than one lot is asked for.
        """
        if lots < 1:
            raise ValueError(f"1 lot or more was expected; found {lots}")
        return self._range(share, 1 / self.lots + 1 / lots)

    def _range(self, share: float, variances: float) -> tuple[float, float]:
        from scipy.special import stdtrit

        half = float(stdtrit(self.freedom, 0.5 + _probability(share) / 2)) * self.spread * sqrt(variances)
        return self.mean - half, self.mean + half


@dataclass(frozen=True, slots=True)
class LossBelief:
    """What is believed of the share of bags that are lost.

    Attributes
    ----------
    lost, kept : float
        Bags lost and bags kept that it rests on, counted as if each had its own luck [bags].

    Notes
    -----
    The beta distribution with these two parameters, conjugate to the binomial.
    """

    lost: float
    kept: float

    def __post_init__(self) -> None:
        if not (self.lost > 0 and self.kept > 0):
            raise ValueError(f"lost and kept bags above 0 were expected; found {self.lost:g} and {self.kept:g}")

    @property
    def mean(self) -> float:
        """Expected share lost [-]."""
        return self.lost / (self.lost + self.kept)

    def updated(self, seen: Sequence[tuple[int, int]], correlation: float = LOT_CORRELATION) -> LossBelief:
        """What is believed once lots were seen.

        Parameters
        ----------
        seen : sequence of (int, int)
            Bags of each lot, and how many of them were lost [bags].
        correlation : float
            Correlation of losses among the bags of a lot, 0 to 1 [-].

        Examples
        --------
        A hundred bags of one lot count as 100 / (1 + 99 × 0.05) = 16.8:

        >>> after = LossBelief(1.6, 38.4).updated([(100, 10)])
        >>> round(after.lost + after.kept, 2), round(after.mean, 4)
        (56.81, 0.0578)
        """
        lost, kept = self.lost, self.kept
        for bags, gone in seen:
            if not 0 <= gone <= bags:
                raise ValueError(f"0 to {bags} lost bags were expected; found {gone}")
            if bags:
                weight = effective_bags(bags, correlation) / bags
                lost, kept = lost + gone * weight, kept + (bags - gone) * weight
        return LossBelief(lost, kept)

    def interval(self, share: float = 0.90) -> tuple[float, float]:
        """Range in which the share lost lies with a probability, the same chance on either side [-].

        Examples
        --------
        >>> [round(end, 3) for end in LossBelief(1.6, 38.4).interval()]
        [0.005, 0.1]
        """
        from scipy.special import betaincinv

        tail = (1 - _probability(share)) / 2
        return float(betaincinv(self.lost, self.kept, tail)), float(betaincinv(self.lost, self.kept, 1 - tail))

    def most(self, bags: float, share: float = 0.95) -> float:
        """Share lost that the next bags stay below with a probability [-].

        Parameters
        ----------
        bags : float
            Bags to come, counted as if each had its own luck [bags].
        share : float
            The probability of a range that leaves the same chance on either side, of which this is the upper end [-].

        Notes
        -----
        The share among N bags to come has the mean m of this belief and the variance
        ``m (1 - m) / N × (1 + (N - 1) / (lost + kept + 1))`` (beta-binomial); its quantile is taken from the beta
        distribution of that mean and variance.
        """
        spread = (1 + (max(bags, 1.0) - 1) / (self.lost + self.kept + 1)) / max(bags, 1.0)
        strength = max(1 / spread - 1, 1e-6)
        return LossBelief(self.mean * strength, (1 - self.mean) * strength).interval(share)[1]


def effective_bags(bags: int, correlation: float = LOT_CORRELATION) -> float:
    """How many bags with a luck of their own the bags of one lot count for.

    Parameters
    ----------
    bags : int
        Bags of the lot [bags].
    correlation : float
        Correlation of losses among them, 0 to 1 [-].

    Returns
    -------
    float
        ``bags / (1 + (bags - 1) × correlation)``, the design effect of a cluster (L. Kish (1965), Survey Sampling,
        section 5.4) [bags].

    Raises
    ------
    ValueError
        The correlation is not within 0 to 1.

    Examples
    --------
    >>> [round(effective_bags(bags), 1) for bags in (1, 20, 100, 10_000)]
    [1.0, 10.3, 16.8, 20.0]
    """
    if not 0 <= correlation <= 1:
        raise ValueError(f"a correlation within 0 to 1 was expected; found {correlation:g}")
    return bags / (1 + (bags - 1) * correlation)


def value_belief(value: float, cv: float) -> NormalBelief:
    """What a card believes of a value such as a yield, before any lot was seen.

    Parameters
    ----------
    value : float
        The card's value, above 0, in any unit.
    cv : float
        Its coefficient of variation from lot to lot [-].

    Examples
    --------
    >>> value_belief(85.0, 0.20)
    NormalBelief(mean=85.0, lots=2.0, freedom=4.0, spread=17.0)
    """
    return NormalBelief(value, PRIOR_LOTS, PRIOR_SPREAD_LOTS, value * max(cv, LEAST_CV))


def days_belief(cv: float) -> NormalBelief:
    """What a card believes of the logarithm of days over the card's days, before any lot was seen.

    Parameters
    ----------
    cv : float
        The card's coefficient of variation of growing times [-].

    Notes
    -----
    Days are log-normal: the logarithm has the standard deviation ``√(ln(1 + cv²))``.

    Examples
    --------
    >>> round(days_belief(0.10).spread, 5)
    0.09975
    """
    return NormalBelief(0.0, PRIOR_LOTS, PRIOR_SPREAD_LOTS, sqrt(log1p(max(cv, LEAST_CV) ** 2)))


def loss_belief(loss: float, correlation: float = LOT_CORRELATION) -> LossBelief:
    """What a card believes of a loss, before any lot was seen.

    Parameters
    ----------
    loss : float
        The card's loss, 0 to below 1 [-].
    correlation : float
        Correlation of losses among the bags of a lot, above 0 [-].

    Notes
    -----
    It counts for `PRIOR_LOTS` large lots, each ``1 / correlation`` bags with a luck of their own.

    Examples
    --------
    >>> loss_belief(0.04)
    LossBelief(lost=1.6, kept=38.4)
    """
    strength, centre = PRIOR_LOTS / correlation, max(loss, LEAST_LOSS)
    return LossBelief(strength * centre, strength * (1 - centre))


def _probability(share: float) -> float:
    if not 0 < share < 1:
        raise ValueError(f"a probability between 0 and 1 was expected; found {share:g}")
    return share
