"""Random parts with a mean of one, and bags lost by the batch."""

from __future__ import annotations

from math import log, sqrt

import numpy as np
from numpy.typing import NDArray

Floats = NDArray[np.float64]
Generator = np.random.Generator


def lognormal(rng: Generator, cv: float, shape: tuple[int, ...]) -> Floats:
    """Lognormal factors of mean one.

    Parameters
    ----------
    cv : float
        Coefficient of variation [-].
    shape : tuple of int
        Shape of what is given.

    Notes
    -----
    exp(s Z - s²/2) with s² = ln(1 + cv²).
    """
    if cv <= 0:
        return np.ones(shape)
    s = sqrt(log(1 + cv * cv))
    return np.exp(s * rng.standard_normal(shape) - s * s / 2)


def gamma(rng: Generator, cv: Floats | float, shape: tuple[int, ...]) -> Floats:
    """Gamma factors of mean one: shape 1/cv², scale cv²; the mean of n bags of cv c has a cv of c / sqrt(n).

    Parameters
    ----------
    cv : float or ndarray
        Coefficient of variation, of all or by row [-].
    """
    variance = np.broadcast_to(np.square(np.asarray(cv, dtype=np.float64)), shape[:1])
    found = np.ones(shape)
    random = variance > 0
    if random.any():
        k = 1 / variance[random]
        found[random] = rng.standard_gamma(np.broadcast_to(k[:, None], (len(k), shape[1]))) / k[:, None]
    return found


def lost_bags(rng: Generator, bags: Floats, share: Floats, correlation: float, draws: int) -> Floats:
    """Bags lost in each lot, beta-binomial [lot, draw].

    Parameters
    ----------
    bags : ndarray
        Bags of each lot [bags].
    share : ndarray
        Expected share lost [-].
    correlation : float
        Correlation between two bags of a lot; 0: binomial [-].

    Notes
    -----
    Each lot has a rate of its own, beta(p (1/r - 1), (1 - p) (1/r - 1)), so that its bags are lost together.
    """
    rate = np.repeat(share[:, None], draws, axis=1)
    random = (share > 0) & (share < 1)
    if correlation > 0 and random.any():
        weight = 1 / correlation - 1
        p = share[random]
        rate[random] = rng.beta((p * weight)[:, None], ((1 - p) * weight)[:, None], (len(p), draws))
    return rng.binomial(bags[:, None].astype(np.int64), np.clip(rate, 0.0, 1.0)).astype(np.float64)


def variance_parts(cv: float, farm_share: float, lot_share: float) -> tuple[float, float, float]:
    """Coefficients of variation of the farm's, the lot's and a bag's own part, whose product has the cv of a bag [-].

    Notes
    -----
    ln(1 + cv²) is shared out, as (1 + a²)(1 + b²)(1 + c²) = 1 + cv² for independent factors of mean one.

    Examples
    --------
    >>> parts = variance_parts(0.25, 0.15, 0.35)
    >>> round((1 + parts[0] ** 2) * (1 + parts[1] ** 2) * (1 + parts[2] ** 2) - 1, 6)  # 0.25²
    0.0625
    """
    whole = log(1 + cv * cv)
    shares = (farm_share, lot_share, max(0.0, 1 - farm_share - lot_share))
    a, b, c = (sqrt(np.expm1(share * whole)) for share in shares)
    return float(a), float(b), float(c)
