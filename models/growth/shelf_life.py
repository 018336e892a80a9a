"""How long picked mushrooms keep at another temperature than the one stated."""

from __future__ import annotations

from math import floor

from models.farm import Strain

DECAY_Q10 = 2.74
"""How many times faster mushrooms spoil 10 °C warmer [-]: from 14-20 days at 1 °C, about 10 at 6 °C and 2-3 at 20 °C
for five species, among them oyster and shiitake (Minamide, Habu and Ogata 1980, Nippon Shokuhin Kogyo Gakkaishi
27:281-287)."""


def keeping_days(days: float, at_c: float, temp_c: float, q10: float = DECAY_Q10) -> float:
    """Shelf life at a temperature, from the shelf life at another.

    Parameters
    ----------
    days : float
        Shelf life at ``at_c`` [d].
    at_c, temp_c : float
        Store temperatures, known and asked [°C].
    q10 : float
        How many times faster spoilage goes 10 °C warmer [-].

    Returns
    -------
    float
        Shelf life at ``temp_c`` [d].

    Notes
    -----
    ``days × q10^(-(temp_c - at_c) / 10)``. Not for strains that chilling harms.

    Examples
    --------
    The middle of 14-20 days at 1 °C gives the printed 10 days at 6 °C and 2-3 days at 20 °C:

    >>> [round(keeping_days(17.0, 1.0, temp), 1) for temp in (6.0, 20.0)]
    [10.3, 2.5]
    """
    if days < 0 or q10 <= 0:
        raise ValueError(f"days of at least 0 and q10 above 0 were expected; found {days:g} and {q10:g}")
    return float(days * q10 ** (-(temp_c - at_c) / 10))


def selling_days(strain: Strain, store_c: float | None) -> int:
    """Whole days for which picked mushrooms of a strain can be sold from a store.

    Parameters
    ----------
    strain : Strain
        Gives ``shelf_life_days`` and the temperature they hold at, ``shelf_life_at_c``.
    store_c : float or None
        Temperature of the store [°C]; none: as stated.

    Returns
    -------
    int
        Days, rounded down [d]; the stated ones where either temperature is not given.

    Notes
    -----
    By `keeping_days`. A strain that chilling harms is given no ``shelf_life_at_c``: its days hold as they stand.

    Examples
    --------
    >>> from models.growth.examples import GREY_OYSTER
    >>> card = GREY_OYSTER.model_copy(update={"shelf_life_at_c": 2.0})
    >>> [selling_days(card, store) for store in (None, 2.0, 7.0, 20.0)]
    [6, 6, 3, 0]
    """
    if store_c is None or strain.shelf_life_at_c is None:
        return strain.shelf_life_days
    return floor(keeping_days(strain.shelf_life_days, strain.shelf_life_at_c, store_c) + 1e-9)
