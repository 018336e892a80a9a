"""The heat of colonising bags: how it rises and falls over the run, how warm it keeps a core, what a room takes up."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from math import ceil, exp, log

from models.farm import Bag, Recipe, Strain

DONE_SHARE = 0.99
"""Share of the growth that is over at the end of the run, and still to come at its start [-]; assumed."""
STEEPNESS = 2 * log(DONE_SHARE / (1 - DONE_SHARE))
"""Steepness of the logistic growth curve over one run, 2 ln 99 [-]."""
MEAN_OVER_PEAK = 4 * (2 * DONE_SHARE - 1) / STEEPNESS
"""Mean heat of a run over its peak: the integral of the curve, 0.4265 [-]."""
STILL_AIR_W_M2_K = 7.0
"""Heat transfer of a bag in still air, radiation included [W/m² K]; `models.thermal.cooling.still_air_coefficient`
gives 6.9 for a bag 0.5 °C above a room at 22 °C and 7.2 for one 1 °C above it."""


def _grown(share_of_run: float) -> float:
    """Growth done after a share of the run [-], by the logistic curve."""
    return 1 / (1 + exp(-STEEPNESS * (share_of_run - 0.5)))


def heat_curve(strain: Strain, days: float) -> tuple[float, ...]:
    """Heat that a bag gives off on each day after inoculation.

    Parameters
    ----------
    strain : Strain
        Gives the peak, ``heat_w_per_kg``.
    days : float
        Length of the run, inoculation to colonised, as `models.growth.colonisation_days` gives it [d].

    Returns
    -------
    tuple[float, ...]
        Mean heat of each day; the first is the 24 hours after inoculation [W/kg wet].

    Raises
    ------
    ValueError
        The run has no length.

    Notes
    -----
    Growth follows a logistic curve, ``g(x) = 1 / (1 + exp(-a (x - 1/2)))`` with x the share of the run that is over and
    a = 2 ln 99, which takes it from 1 % at inoculation to 99 % at the end. Heat goes with the rate of growth and peaks
    at mid-run: ``heat = peak × 4 g (1 - g)``. The mean of a day is exact, ``peak × 4 (D/a) (g(end) - g(start))`` for a
    run of D days; the mean of a run is 4 × 0.98 / a = 0.4265 of the peak. The ends of 1 % are assumed. What a colonised
    bag gives off while it waits is not in it.

    Examples
    --------
    >>> from models.growth.examples import GREY_OYSTER
    >>> [round(heat, 3) for heat in heat_curve(GREY_OYSTER, 7.0)]
    [0.02, 0.066, 0.167, 0.241, 0.167, 0.066, 0.02]
    """
    if not days > 0:
        raise ValueError(f"a run of more than 0 days was expected; found {days:g}")
    scale = strain.heat_w_per_kg * 4 * days / STEEPNESS
    return tuple(scale * (_grown(min(1.0, (day + 1) / days)) - _grown(day / days)) for day in range(ceil(days - 1e-9)))


def core_excess(heat_w_per_kg: float, recipe: Recipe, bag: Bag, air_w_m2_k: float = STILL_AIR_W_M2_K) -> float:
    """Warmth of the core of a bag above its room in steady state.

    Parameters
    ----------
    heat_w_per_kg : float
        Heat it gives off [W/kg wet].
    recipe : Recipe
        Gives density and conductivity.
    bag : Bag
        Gives mass and sides.
    air_w_m2_k : float
        Heat transfer from the bag to the air round it [W/m² K].

    Returns
    -------
    float
        Core less room [K].

    Raises
    ------
    ValueError
        The heat transfer is not above 0.

    Notes
    -----
    Two steps in a row, with q the heat in a volume [W/m³]. From surface to air, all heat leaves through the surface:
    ``q V / (A h)``. From core to surface, by conduction in the ellipsoid with the bag's half sides a, b, c:
    ``q / (2 k (1/a² + 1/b² + 1/c²))``. That is exact for a slab, a long cylinder and a sphere; a long square bar is
    18 % warmer inside (0.2947 against 0.25 q a²/k: the Poisson problem of the square, by its series). It holds for a
    bag that stands free; bags among others, which take each other's air, are warmer, and are better measured.

    Examples
    --------
    >>> from models.growth.examples import BAG, OAK
    >>> round(core_excess(0.25, OAK, BAG), 2)  # at the peak: 0.30 by conduction, 0.54 at the surface
    0.84
    """
    if not air_w_m2_k > 0:
        raise ValueError(f"a heat transfer above 0 W/m² K was expected; found {air_w_m2_k:g}")
    depth, width, height = (side / 2000 for side in _sides_mm(bag))
    q = heat_w_per_kg * bag.wet_kg / bag.volume_m3
    inside = q / (2 * recipe.conductivity_w_m_k * (depth**-2 + width**-2 + height**-2))
    # Both shapes: a cylinder has surface over volume 2/r + 2/h, a brick 2/l + 2/w + 2/h.
    over = 1 / height + (2 / depth if bag.shape == "cylinder" else 1 / depth + 1 / width)
    return inside + q / (over * air_w_m2_k)


def _sides_mm(bag: Bag) -> tuple[float, float, float]:
    if bag.shape == "cylinder":
        return bag.diameter_mm or 0.0, bag.diameter_mm or 0.0, bag.height_mm
    return bag.length_mm or 0.0, bag.width_mm or 0.0, bag.height_mm


def expected_self_heating(strain: Strain, recipe: Recipe, bag: Bag, air_w_m2_k: float = STILL_AIR_W_M2_K) -> float:
    """Mean warmth of the core above its room over a run, for a bag that stands free.

    Parameters
    ----------
    strain, recipe, bag
        The bag and what grows in it.
    air_w_m2_k : float
        Heat transfer from the bag to the air round it [W/m² K].

    Returns
    -------
    float
        Core less room, mean over the growth curve [K]: a lower bound for ``self_heating_k`` of stacked bags.

    Notes
    -----
    ``0.4265 × core_excess(heat_w_per_kg)``: bags follow their heat within hours, and a run takes days, so each moment
    is taken as steady.

    Examples
    --------
    >>> from models.growth.examples import BAG, GREY_OYSTER, OAK
    >>> round(expected_self_heating(GREY_OYSTER, OAK, BAG), 2)
    0.36
    """
    return MEAN_OVER_PEAK * core_excess(strain.heat_w_per_kg, recipe, bag, air_w_m2_k)


@dataclass(frozen=True, slots=True)
class HeatingLot:
    """Bags of one strain that colonise together.

    Attributes
    ----------
    strain : Strain
        The strain.
    bags : float
        How many [bags].
    wet_kg : float
        Wet mass of one bag [kg].
    inoculated : int
        Day of inoculation, counted from the first day asked for; may lie before it [d].
    run_days : float
        Days from inoculation to colonised in this room [d].
    """

    strain: Strain
    bags: float
    wet_kg: float
    inoculated: int
    run_days: float


def room_heat(lots: Sequence[HeatingLot], days: int) -> tuple[float, ...]:
    """Heat that all lots of a room give off together, day by day.

    Parameters
    ----------
    lots : sequence of HeatingLot
        The lots in the room.
    days : int
        Days asked for, from day 0 [d].

    Returns
    -------
    tuple[float, ...]
        Mean heat of each day [W].

    Raises
    ------
    ValueError
        Fewer than 0 days are asked for, or a lot's run has no length.

    Examples
    --------
    A hundred bags of 2.3 kg, and a hundred more three days later:

    >>> from models.growth.examples import GREY_OYSTER
    >>> lots = [HeatingLot(GREY_OYSTER, 100, 2.3, day, 7.0) for day in (0, 3)]
    >>> [round(heat) for heat in room_heat(lots, 10)]
    [5, 15, 38, 60, 53, 53, 60, 38, 15, 5]
    """
    if days < 0:
        raise ValueError(f"0 days or more were expected; found {days}")
    total = [0.0] * days
    for lot in lots:
        for after, heat in enumerate(heat_curve(lot.strain, lot.run_days)):
            if 0 <= lot.inoculated + after < days:
                total[lot.inoculated + after] += heat * lot.bags * lot.wet_kg
    return tuple(total)
