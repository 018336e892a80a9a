"""Transient conduction into a bag: eigenfunctions of the finite cylinder and the brick.

A bag starts at one temperature and its surroundings change. The temperature inside is that of the surroundings less a
sum of modes; each mode decays at its own rate and is fed by the change of the surroundings (Duhamel). The sum is exact
up to the modes left out.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache
from math import inf, pi

import numpy as np
from numpy.typing import NDArray

from models.farm import Bag

Floats = NDArray[np.float64]
MODES_A_SIDE = 14
FINE = 5
"""How many times as many roots a side tell what the modes left out add up to."""
SMALL_REST = 1e-4
"""Modes left out that weigh less than this together have no amplitude after a change of surroundings [-]."""


def plate_roots(biot: float, count: int) -> Floats:
    """First roots of x tan x = Bi, for a plate of half thickness L [-].

    Parameters
    ----------
    biot : float
        h L / k, may be infinite [-].
    count : int
        Number of roots.

    Examples
    --------
    Incropera table 5.1 gives 0.8603 for Bi = 1 (from memory):

    >>> round(float(plate_roots(1.0, 1)[0]), 4)
    0.8603
    """
    low = np.asarray(pi * np.arange(count), dtype=np.float64)
    if biot == inf:
        return low + pi / 2
    return _bisect(lambda x: x * np.sin(x) - biot * np.cos(x), low, low + pi / 2)


def cylinder_roots(biot: float, count: int) -> Floats:
    """First roots of x J1(x) = Bi J0(x), for a cylinder of radius R [-].

    Examples
    --------
    Incropera table 5.1 gives 1.2558 for Bi = 1 (from memory):

    >>> round(float(cylinder_roots(1.0, 1)[0]), 4)
    1.2558
    """
    from scipy.special import j0, j1, jn_zeros

    zeros0 = np.asarray(jn_zeros(0, count))
    if biot == inf:
        return zeros0
    low = np.concatenate(([0.0], np.asarray(jn_zeros(1, count - 1)))) if count > 1 else np.zeros(1)
    return _bisect(lambda x: x * j1(x) - biot * j0(x), low, zeros0)


def sphere_roots(biot: float, count: int) -> Floats:
    """First roots of 1 - x cot x = Bi, for a sphere of radius R [-].

    Examples
    --------
    Incropera table 5.1 gives 1.5708 for Bi = 1 (from memory):

    >>> round(float(sphere_roots(1.0, 1)[0]), 4)
    1.5708
    """
    low = np.asarray(pi * np.arange(count), dtype=np.float64)
    if biot == inf:
        return low + pi
    return _bisect(lambda x: (1 - biot) * np.sin(x) - x * np.cos(x), low + 1e-9, low + pi - 1e-12)


def _bisect(function: object, low: Floats, high: Floats) -> Floats:
    assert callable(function)  # noqa: S101  (a private helper)
    a, b = low.astype(float), high.astype(float)
    sign = np.sign(function(b))
    for _ in range(80):
        middle = (a + b) / 2
        upper = np.sign(function(middle)) == sign
        b = np.where(upper, middle, b)
        a = np.where(upper, a, middle)
    return np.asarray((a + b) / 2)


@dataclass(frozen=True)
class Side:
    """One direction of a body: roots, weights of the expansion of one, means and surface values of its modes [-]."""

    roots: Floats
    weights: Floats
    means: Floats
    length_m: float
    biot: float
    round_: bool

    def finer(self, count: int) -> Side:
        """The same side with another number of roots."""
        return (cylinder_side if self.round_ else plate_side)(self.length_m, self.biot, count)

    def central_means(self, share: float) -> Floats:
        """Means of the modes over the central share of the length [-, by root]; all of it gives ``means``."""
        x = self.roots * share
        if not self.round_:
            return np.asarray(np.sin(x) / x)
        from scipy.special import j1

        return np.asarray(2 * j1(x) / x)


def plate_side(half_m: float, biot: float, count: int = MODES_A_SIDE) -> Side:
    """Modes of a plate of half thickness ``half_m`` [m]."""
    x = plate_roots(biot, count)
    weights = 4 * np.sin(x) / (2 * x + np.sin(2 * x))
    return Side(x, weights, np.sin(x) / x, half_m, biot, round_=False)


def cylinder_side(radius_m: float, biot: float, count: int = MODES_A_SIDE) -> Side:
    """Modes of a long cylinder of radius ``radius_m`` [m]."""
    from scipy.special import j0, j1

    x = cylinder_roots(biot, count)
    weights = 2 * j1(x) / (x * (j0(x) ** 2 + j1(x) ** 2))
    return Side(x, weights, 2 * j1(x) / x, radius_m, biot, round_=True)


@dataclass(frozen=True)
class Modes:
    """A body's modes as products over its sides, and two more in place of all the faster ones that are left out.

    Attributes
    ----------
    rates : ndarray
        Decay rates [1/s, by mode].
    core, mean : ndarray
        Share of each mode in the temperature deficit of the centre and of the mean [-, by mode]; they add up to 1.
    sides : tuple of Side
        The directions the modes are products of.
    """

    rates: Floats
    core: Floats
    mean: Floats
    sides: tuple[Side, ...]

    def centre_theta(self, seconds: float) -> float:
        """(T - T_inf) / (T_0 - T_inf) at the centre after a step of the surroundings [-]."""
        return float(self.core @ np.exp(-self.rates * seconds))

    def mean_theta(self, seconds: float) -> float:
        """The same for the mean temperature [-]."""
        return float(self.mean @ np.exp(-self.rates * seconds))

    def central_mean(self, stack_factor: float) -> Floats:
        """Share of each mode in the deficit of the innermost bag of a stack [-, by mode]; 1: the whole body's mean."""
        weights = np.ones(1)
        for side in self.sides:
            weights = np.multiply.outer(weights, side.weights * side.central_means(1 / stack_factor)).ravel()
        return np.append(weights, [0.0, 1.0 - weights.sum()])


def product_modes(sides: tuple[Side, ...], diffusivity_m2_s: float) -> Modes:
    """Modes of a body that is the product of its sides (finite cylinder, brick).

    Notes
    -----
    The modes left out decay within minutes, but they keep the centre from moving too early. One mode stands for their
    share in the centre, one for their share in the mean, each with the rate that gives the right deficit when the
    surroundings rise evenly: sum of w over sum of w / rate. The sums run to `FINE` times as many roots a side.
    """
    rates, core, mean = _products(sides, diffusivity_m2_s)
    fine = _products(tuple(side.finer(FINE * len(side.roots)) for side in sides), diffusivity_m2_s)
    rest_core, rest_mean = 1.0 - core.sum(), 1.0 - mean.sum()
    rate_core = _rest_rate(rest_core, float((fine[1] / fine[0]).sum() - (core / rates).sum()), rates)
    rate_mean = _rest_rate(rest_mean, float((fine[2] / fine[0]).sum() - (mean / rates).sum()), rates)
    return Modes(
        np.append(rates, [rate_core, rate_mean]), np.append(core, [rest_core, 0.0]), np.append(mean, [0.0, rest_mean]),
        sides,
    )  # fmt: skip


def _products(sides: tuple[Side, ...], diffusivity_m2_s: float) -> tuple[Floats, Floats, Floats]:
    rates, core, mean = np.zeros(1), np.ones(1), np.ones(1)
    for side in sides:
        rate = diffusivity_m2_s * (side.roots / side.length_m) ** 2
        rates = np.add.outer(rates, rate).ravel()
        core = np.multiply.outer(core, side.weights).ravel()
        mean = np.multiply.outer(mean, side.weights * side.means).ravel()
    return rates, core, mean


def _rest_rate(weight: float, over_rates: float, rates: Floats) -> float:
    """Rate of the mode that stands for those left out [1/s]; never slower than half of the fastest kept."""
    rate = weight / over_rates if weight * over_rates > 0 else float("inf")
    return float(np.clip(rate, rates.max() / 2, 1e6))


@lru_cache(maxsize=512)
def bag_modes(
    bag: Bag, diffusivity_m2_s: float, conductivity_w_m_k: float, surface_w_m2_k: float, stack_factor: float = 1.0
) -> Modes:
    """Modes of a bag in surroundings with a surface coefficient; all faces see them.

    Parameters
    ----------
    bag : Bag
        Shape and full lengths.
    diffusivity_m2_s, conductivity_w_m_k : float
        Of the filled bag [m²/s], [W/m K].
    surface_w_m2_k : float
        Surface coefficient, may be infinite [W/m² K].
    stack_factor : float
        How many times as long the sides of the conducting body are as those of one bag, where bags touch [-].

    Notes
    -----
    Bags stacked without gaps shade each other. They are taken for bodies of the bag's shape with every side
    ``stack_factor`` times as long and nothing but substrate inside: no steam between the bags, no resistance where
    they touch. Time then goes with the factor's square where the surface does not limit.
    """

    def biot(half_m: float) -> float:
        return surface_w_m2_k * half_m / conductivity_w_m_k

    longer = stack_factor / 2000
    if bag.diameter_mm is not None:
        radius, half = bag.diameter_mm * longer, bag.height_mm * longer
        return product_modes((cylinder_side(radius, biot(radius)), plate_side(half, biot(half))), diffusivity_m2_s)
    assert bag.length_mm is not None  # noqa: S101  (held by the farm file)
    assert bag.width_mm is not None  # noqa: S101
    halves = [length * longer for length in (bag.length_mm, bag.width_mm, bag.height_mm)]
    sides = tuple(plate_side(half, biot(half), count=9) for half in halves)
    return product_modes(sides, diffusivity_m2_s)


def project(state: Floats, old: Modes, new: Modes) -> Floats:
    """The state of the modes after the surface coefficient has changed, or after a stack was taken apart.

    Parameters
    ----------
    state : ndarray
        Amplitudes in the old modes: the deficit is the sum of amplitude times weight times shape [K, by mode].
    old, new : Modes
        Modes of the same body under two surface coefficients; the new one may be the innermost bag of a stack.

    Returns
    -------
    ndarray
        Amplitudes in the new modes for the same deficit field [K, by mode].

    Notes
    -----
    The new set is orthogonal on the new body; the overlap of one direction is integrated by Gauss-Legendre
    quadrature. Of a smaller new body the old field is taken round its centre, where a stack is hottest. The modes that
    stand for those left out keep centre and mean where they were.
    """
    shape = tuple(len(side.roots) for side in old.sides)
    field = (state[:-2] * old.core[:-2]).reshape(shape)
    for axis, (a, b) in enumerate(zip(old.sides, new.sides, strict=True)):
        field = np.moveaxis(np.tensordot(_overlap(a, b), field, axes=(1, axis)), 0, axis)
    amplitudes = field.ravel() / new.core[:-2]
    stack_factor = old.sides[0].length_m / new.sides[0].length_m
    rest = [
        (before - float(weights[:-2] @ amplitudes)) / weight if abs(weight) > SMALL_REST else 0.0
        for before, weights, weight in (
            (float(old.core @ state), new.core, float(new.core[-2])),
            (float(old.central_mean(stack_factor) @ state), new.mean, float(new.mean[-1])),
        )
    ]
    return np.append(amplitudes, rest)


@lru_cache(maxsize=1)
def _gauss() -> tuple[Floats, Floats]:
    """Nodes and weights of Gauss-Legendre quadrature on 0 to 1 [-]."""
    nodes, weights = np.polynomial.legendre.leggauss(96)
    return (nodes + 1) / 2, weights / 2


def _overlap(old: Side, new: Side) -> Floats:
    """Expansion of each old mode shape in the new ones, along one direction [new, old]."""
    x, weight = _gauss()
    inner = x * new.length_m / old.length_m
    if old.round_:
        from scipy.special import j0

        shape_old, shape_new, weight = j0(np.outer(old.roots, inner)), j0(np.outer(new.roots, x)), weight * x
    else:
        shape_old, shape_new = np.cos(np.outer(old.roots, inner)), np.cos(np.outer(new.roots, x))
    norms = (shape_new**2) @ weight
    return np.asarray(((shape_new * weight) @ shape_old.T) / norms[:, None])
