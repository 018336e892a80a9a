"""The steam generator: water and metal brought to the boil against a loss."""

from __future__ import annotations

from math import inf, log

from models.thermal.errors import ThermalError
from models.thermal.steam import latent_heat
from models.thermal.substrate import WATER_CP_KJ_KG_K


def boil_up_seconds(
    capacity_kj_k: float, power_kw: float, loss_w_per_k: float, start_c: float, boil_c: float, ambient_c: float
) -> float:
    """Time to bring a generator to the boil.

    Parameters
    ----------
    capacity_kj_k : float
        Heat capacity of water and metal [kJ/K].
    power_kw : float
        Element power [kW].
    loss_w_per_k : float
        Loss to ambient [W/K].
    start_c, boil_c, ambient_c : float
        Temperatures [°C].

    Returns
    -------
    float
        Seconds [s]; infinite where the loss eats the power first.

    Notes
    -----
    C dT/dt = P - U (T - T_a), solved in closed form.

    Examples
    --------
    60 kg water and 80 kg steel, 8 W/K, 9 kW, 20 to 100 °C (worked by hand from the closed form):

    >>> round(boil_up_seconds(60 * 4.19 + 80 * 0.49, 9.0, 8.0, 20.0, 100.0, 20.0), 1)
    2679.6
    """
    if power_kw <= 0:
        raise ThermalError(f"an element power above zero was expected; found {power_kw:g} kW")
    if start_c >= boil_c:
        return 0.0
    loss = loss_w_per_k / 1000
    if loss == 0:
        return capacity_kj_k * (boil_c - start_c) / power_kw
    left_start, left_end = power_kw - loss * (start_c - ambient_c), power_kw - loss * (boil_c - ambient_c)
    return inf if left_end <= 0 else capacity_kj_k / loss * log(left_start / left_end)


def steam_share(boil_c: float, feed_c: float, *, condensate_return: bool) -> float:
    """Share of the generator's net power that leaves as latent heat; the rest warms the make-up water [-]."""
    if condensate_return:
        return 1.0
    latent = latent_heat(boil_c)
    return latent / (latent + WATER_CP_KJ_KG_K * max(0.0, boil_c - feed_c))
