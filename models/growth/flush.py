"""What a bag yields, in how many flushes, when, and how long the mushrooms keep."""

from __future__ import annotations

from math import ceil

from models.farm import Bag, Recipe, Strain


def kg_per_bag(strain: Strain, recipe: Recipe, bag: Bag) -> float:
    """Fresh mushrooms from one bag over all its flushes.

    Parameters
    ----------
    strain : Strain
        Gives the biological efficiency: fresh mushrooms over dry substrate.
    recipe : Recipe
        Gives the water in the mix.
    bag : Bag
        Gives the wet mass.

    Returns
    -------
    float
        Yield [kg/bag].

    Notes
    -----
    ``wet_kg × (1 - water) × BE``.

    Examples
    --------
    >>> from models.growth.examples import BAG, GREY_OYSTER, OAK
    >>> round(kg_per_bag(GREY_OYSTER, OAK, BAG), 4)  # 2.3 × 0.38 × 0.85
    0.7429
    """
    return bag.wet_kg * (1 - recipe.water_pct / 100) * strain.be_pct / 100


def flush_kg(strain: Strain, recipe: Recipe, bag: Bag) -> tuple[float, ...]:
    """Fresh mushrooms from one bag in each flush [kg/bag, by flush]; they add up to `kg_per_bag`.

    Examples
    --------
    >>> from models.growth.examples import BAG, GREY_OYSTER, OAK
    >>> [round(kg, 4) for kg in flush_kg(GREY_OYSTER, OAK, BAG)]
    [0.4086, 0.2229, 0.1114]
    """
    whole = kg_per_bag(strain, recipe, bag)
    return tuple(whole * share for share in strain.flush_share)


def flush_survival(strain: Strain) -> tuple[float, ...]:
    """Share of the opened bags that each flush is picked from [-, by flush].

    Notes
    -----
    ``flush_loss_pct`` of the bags are lost between one flush and the next, so flush k is picked from
    ``(1 - loss)^(k - 1)`` of them. Moulds reach bags in cropping as well as in colonisation (Ajis et al. 2024, Fungal
    Biology 128:2197-2206, on a farm of *Pleurotus pulmonarius*).

    Examples
    --------
    >>> from models.growth.examples import GREY_OYSTER
    >>> flush_survival(GREY_OYSTER)
    (1.0, 1.0, 1.0)
    >>> [round(share, 4) for share in flush_survival(GREY_OYSTER.model_copy(update={"flush_loss_pct": 10.0}))]
    [1.0, 0.9, 0.81]
    """
    kept = 1 - strain.flush_loss_pct / 100
    return tuple(kept**k for k in range(len(strain.flush_share)))


def expected_flush_kg(strain: Strain, recipe: Recipe, bag: Bag, picked: int = 0) -> tuple[float, ...]:
    """Fresh mushrooms to be expected in each flush, over the bags that stand when the next flush is due.

    Parameters
    ----------
    strain, recipe, bag
        As for `kg_per_bag`.
    picked : int
        Flushes already picked from the bags that are counted, from 0.

    Returns
    -------
    tuple[float, ...]
        Yield of each flush still to come, over the bags counted now [kg/bag].

    Raises
    ------
    ValueError
        More flushes are picked than the strain has.

    Examples
    --------
    >>> from models.growth.examples import BAG, GREY_OYSTER, OAK
    >>> frail = GREY_OYSTER.model_copy(update={"flush_loss_pct": 10.0})
    >>> [round(kg, 4) for kg in expected_flush_kg(frail, OAK, BAG)]
    [0.4086, 0.2006, 0.0903]
    >>> [round(kg, 4) for kg in expected_flush_kg(frail, OAK, BAG, picked=1)]
    [0.2229, 0.1003]
    """
    if not 0 <= picked <= len(strain.flush_share):
        raise ValueError(
            f"0 to {len(strain.flush_share)} picked flushes were expected for {strain.code}; found {picked}"
        )
    still = flush_kg(strain, recipe, bag)[picked:]
    return tuple(kg * share for kg, share in zip(still, flush_survival(strain), strict=False))


def fruiting_factor(strain: Strain, temp_c: float | None) -> float:
    """Time that pins and rests take at a temperature, over the time they are stated for.

    Parameters
    ----------
    strain : Strain
        Gives ``fruit_at_c`` and ``fruit_q10``.
    temp_c : float or None
        Temperature of the fruiting room [°C]; none: as stated.

    Returns
    -------
    float
        Factor on the days [-].

    Notes
    -----
    ``fruit_q10^((fruit_at_c - temp_c) / 10)``, for temperatures within ``fruiting_temp_c``; 1 without ``fruit_at_c``.

    Examples
    --------
    >>> from models.growth.examples import GREY_OYSTER
    >>> card = GREY_OYSTER.model_copy(update={"fruit_at_c": 16.0, "fruit_q10": 2.0})
    >>> [round(fruiting_factor(card, temp), 3) for temp in (11.0, 16.0, 20.0)]
    [1.414, 1.0, 0.758]
    """
    if temp_c is None or strain.fruit_at_c is None:
        return 1.0
    return float(strain.fruit_q10 ** ((strain.fruit_at_c - temp_c) / 10))


def _whole_days(days: float) -> int:
    return max(1, ceil(days - 1e-9))


def flush_days(strain: Strain, temp_c: float | None = None) -> tuple[int, ...]:
    """Days from opening until each flush is ripe.

    Parameters
    ----------
    strain : Strain
        The strain.
    temp_c : float, optional
        Temperature of the fruiting room [°C]; left out: the stated days.

    Returns
    -------
    tuple[int, ...]
        Days of each flush [d].

    Notes
    -----
    Flush k is ripe ``pins + (k - 1) × rest`` days after opening, where pins and rest are ``pin_days`` and ``rest_days``
    times `fruiting_factor`, each rounded up to whole days.

    Examples
    --------
    >>> from models.growth.examples import GREY_OYSTER
    >>> flush_days(GREY_OYSTER)
    (7, 19, 31)
    >>> flush_days(GREY_OYSTER.model_copy(update={"fruit_at_c": 16.0, "fruit_q10": 2.0}), 12.0)
    (10, 26, 42)
    """
    factor = fruiting_factor(strain, temp_c)
    pins, rest = _whole_days(strain.pin_days * factor), _whole_days(strain.rest_days * factor)
    return tuple(pins + k * rest for k in range(len(strain.flush_share)))


def place_days(strain: Strain, flushes: int, clean_days: int = 0, temp_c: float | None = None) -> int:
    """Days for which a bag takes up a fruiting place when so many flushes are kept.

    Parameters
    ----------
    strain : Strain
        The strain.
    flushes : int
        Flushes kept, from 1.
    clean_days : int
        Days the place is cleaned for afterwards [d].
    temp_c : float, optional
        Temperature of the fruiting room [°C]; left out: the stated days.

    Returns
    -------
    int
        From the opening day to the day before the last kept flush, and the cleaning [d].

    Examples
    --------
    >>> from models.growth.examples import GREY_OYSTER
    >>> place_days(GREY_OYSTER, flushes=2, clean_days=1)
    20
    """
    if not 1 <= flushes <= len(strain.flush_share):
        raise ValueError(f"1 to {len(strain.flush_share)} flushes were expected for {strain.code}; found {flushes}")
    return flush_days(strain, temp_c)[flushes - 1] + clean_days
