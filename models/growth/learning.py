"""Conjugate Bayesian updates: a mean with unknown spread, and a share of losses, each from a prior and from lots."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from math import sqrt


@dataclass(frozen=True, slots=True)
class MeanBelief:
    """What is believed of a mean and of the spread round it: normal-inverse-gamma.

    Attributes
    ----------
    mean : float
        Expected mean.
    lots : float
        How many lots the belief in the mean is worth [-].
    shape, scale : float
        Of the inverse gamma of the variance; ``scale / shape`` is about the variance.
    """

    mean: float
    lots: float
    shape: float
    scale: float

    @classmethod
    def prior(cls, mean: float, spread: float, lots: float, spread_lots: float) -> MeanBelief:
        """A belief before any lot.

        Parameters
        ----------
        mean : float
            The mean that is believed.
        spread : float
            Standard deviation between lots that is believed, above 0.
        lots, spread_lots : float
            How many lots the beliefs in mean and in spread are worth [-].
        """
        return cls(mean, lots, spread_lots / 2, spread_lots / 2 * spread**2)

    def after(self, values: Sequence[float]) -> MeanBelief:
        """The belief after some lots.

        Notes
        -----
        With n values of mean x and sum of squares S about it: lots k + n, mean (k m + n x) / (k + n), shape a + n/2,
        scale b + S/2 + k n (x - m)² / (2 (k + n)) (DeGroot 1970, Optimal Statistical Decisions, section 9.6; from
        memory).

        Examples
        --------
        A belief of 80 worth two lots, and lots of 90 and 100: (2 × 80 + 190) / 4.

        >>> MeanBelief.prior(80, 10, 2, 2).after([90, 100]).mean
        87.5
        """
        n = len(values)
        if n == 0:
            return self
        x = sum(values) / n
        total = self.lots + n
        squares = sum((value - x) ** 2 for value in values)
        return MeanBelief(
            mean=(self.lots * self.mean + n * x) / total,
            lots=total,
            shape=self.shape + n / 2,
            scale=self.scale + squares / 2 + self.lots * n * (x - self.mean) ** 2 / (2 * total),
        )

    def interval(self, level: float = 0.9) -> tuple[float, float]:
        """Range that holds the mean with a probability: Student's t with 2 × shape degrees of freedom."""
        return self._range(level, sqrt(self.scale / self.shape / self.lots))

    def of_next(self, level: float = 0.95, count: int = 1) -> tuple[float, float]:
        """Range that holds the mean of the next so many lots with a probability."""
        return self._range(level, sqrt(self.scale / self.shape * (1 / self.lots + 1 / count)))

    def _range(self, level: float, width: float) -> tuple[float, float]:
        from scipy.stats import t

        half = float(t.ppf(0.5 + level / 2, 2 * self.shape)) * width
        return self.mean - half, self.mean + half


@dataclass(frozen=True, slots=True)
class ShareBelief:
    """What is believed of a share of bags lost: a beta distribution with so many bags lost and kept [-]."""

    lost: float
    kept: float

    @classmethod
    def prior(cls, share: float, bags: float) -> ShareBelief:
        """A belief worth so many bags of their own; a share of nothing is taken for half a bag."""
        lost = min(max(share * bags, 0.5), bags - 0.5)
        return cls(lost, bags - lost)

    @property
    def mean(self) -> float:
        """Expected share [-]."""
        return self.lost / (self.lost + self.kept)

    def after(self, lots: Sequence[tuple[float, float]], correlation: float) -> ShareBelief:
        """The belief after lots of (bags, bags lost).

        Notes
        -----
        Bags of a lot are lost together, so that a lot of n bags says as much as n / (1 + (n - 1) r) bags of their own
        at a correlation r (Kish's design effect; Kish 1965, Survey Sampling; from memory).

        Examples
        --------
        Without correlation each bag counts: 2 of 50 believed, 8 of 50 lost.

        >>> ShareBelief.prior(0.04, 50).after([(50, 8)], 0.0).mean
        0.1
        """
        lost, kept = self.lost, self.kept
        for bags, gone in lots:
            if bags > 0:
                weight = 1 / (1 + (bags - 1) * correlation)
                lost += weight * gone
                kept += weight * (bags - gone)
        return ShareBelief(lost, kept)

    def interval(self, level: float = 0.9) -> tuple[float, float]:
        """Range that holds the share with a probability [-]."""
        from scipy.stats import beta

        tails = (0.5 - level / 2, 0.5 + level / 2)
        low, high = (float(beta.ppf(tail, self.lost, self.kept)) for tail in tails)
        return low, high
