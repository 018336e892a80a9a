"""How long a bag takes from inoculation until it can be opened."""

from __future__ import annotations

from math import ceil

from models.farm import Strain
from models.growth.response import temperature_response


def spawn_factor(spawn_rate_pct: float, reference_pct: float) -> float:
    """Colonisation time at a spawn rate over the time at a reference rate.

    Parameters
    ----------
    spawn_rate_pct, reference_pct : float
        Spawn over wet substrate [%].

    Returns
    -------
    float
        Factor on the days [-].

    Notes
    -----
    Grains of spawn stand about ``n^(-1/3)`` apart when there are ``n`` in a volume, and mycelium has to cross half
    of that distance at a steady rate, so the time goes with (reference / rate)^(1/3).

    Examples
    --------
    A third of the spawn takes 1.442 times as long. Royse's trial with 3.75 % against 1.25 % found 9.2 days saved;
    20.8 against 30.0 days would be such a pair.

    >>> round(spawn_factor(1.25, 3.75), 3)
    1.442
    """
    if spawn_rate_pct <= 0 or reference_pct <= 0:
        raise ValueError(f"spawn rates above 0 % were expected; found {spawn_rate_pct:g} and {reference_pct:g}")
    return float((reference_pct / spawn_rate_pct) ** (1 / 3))


def suits(strain: Strain, room_temp_c: float) -> bool:
    """Whether a strain grows in a room at all.

    Parameters
    ----------
    strain : Strain
        The strain.
    room_temp_c : float
        Temperature of the room [°C].

    Returns
    -------
    bool
        True where the room is above ``t_min_c`` and the core, ``self_heating_k`` warmer, is below ``t_max_c``.

    Examples
    --------
    >>> from models.growth.examples import GREY_OYSTER
    >>> suits(GREY_OYSTER, 22.0), suits(GREY_OYSTER, 36.0)
    (True, False)
    """
    return strain.grows_in(room_temp_c)


def colonisation_days(strain: Strain, room_temp_c: float) -> float:
    """Days from inoculation until the mycelium has run through the bag.

    Parameters
    ----------
    strain : Strain
        The strain, with the days it takes at a stated temperature and spawn rate.
    room_temp_c : float
        Temperature of the colonisation room [°C].

    Returns
    -------
    float
        Time [d].

    Raises
    ------
    ValueError
        The strain does not grow at that temperature.

    Notes
    -----
    ``days = colonise_days × γ(colonise_at_c + ΔT) / γ(room + ΔT) × (colonise_at_spawn_pct / spawn_rate_pct)^(1/3)``
    with γ of `temperature_response` and ΔT = ``self_heating_k``, the mean warmth of the core above its room. The stated
    days were measured in a room at ``colonise_at_c``, so the heat that bags give off themselves is already in them: ΔT
    moves both cores along the curve, and says only where on it the two rooms are compared.

    Examples
    --------
    >>> from models.growth.examples import GREY_OYSTER
    >>> round(colonisation_days(GREY_OYSTER, 22.0), 2)  # 16 days at 22 °C and 5 % spawn; here 4 % spawn
    17.24

    With cores 3 °C above the room, a cooler room costs less time:

    >>> warm = GREY_OYSTER.model_copy(update={"self_heating_k": 3.0})
    >>> [round(colonisation_days(card, 18.0), 1) for card in (GREY_OYSTER, warm)]
    [24.1, 21.1]
    """
    if not suits(strain, room_temp_c):
        warmest = strain.t_max_c - strain.self_heating_k
        raise ValueError(
            f"a room between {strain.t_min_c:g} and {warmest:g} °C was expected for strain {strain.code};"
            f" found {room_temp_c:g} °C"
        )
    cardinal = (strain.t_min_c, strain.t_opt_c, strain.t_max_c)
    stated, here = strain.colonise_at_c + strain.self_heating_k, room_temp_c + strain.self_heating_k
    warmth = temperature_response(stated, *cardinal) / temperature_response(here, *cardinal)
    return strain.colonise_days * warmth * spawn_factor(strain.spawn_rate_pct, strain.colonise_at_spawn_pct)


def days_to_ready(strain: Strain, room_temp_c: float) -> int:
    """Whole days from inoculation to the ready day: colonisation, rounded up, and ``mature_days``.

    Parameters
    ----------
    strain : Strain
        The strain.
    room_temp_c : float
        Temperature of the colonisation room [°C].

    Returns
    -------
    int
        Days [d].

    Raises
    ------
    ValueError
        The strain does not grow at that temperature.

    Examples
    --------
    >>> from models.growth.examples import GREY_OYSTER
    >>> days_to_ready(GREY_OYSTER, 22.0)
    18
    """
    return ceil(colonisation_days(strain, room_temp_c) - 1e-9) + strain.mature_days
