"""Cooling of a bag in air: surface coefficients, and the time until core or mean is cool."""

from __future__ import annotations

import numpy as np

from models.thermal.conduction import Floats, Modes
from models.thermal.errors import ThermalError

EMISSIVITY = 0.9
STEFAN_BOLTZMANN = 5.670374419e-8
LONGEST_S = 40 * 86_400.0


def still_air_coefficient(surface_c: float, air_c: float, height_m: float) -> float:
    """Surface coefficient of a bag in still air: natural convection and radiation together.

    Parameters
    ----------
    surface_c, air_c : float
        Temperatures of the surface and of the air and walls [°C].
    height_m : float
        Height of the bag [m].

    Returns
    -------
    float
        Coefficient [W/m² K].

    Notes
    -----
    Churchill and Chu (1975) for a vertical plate, Nu = (0.825 + 0.387 Ra^(1/6) / (1 + (0.492/Pr)^(9/16))^(8/27))^2,
    with air properties at the film temperature; radiation at emissivity 0.9.

    Examples
    --------
    A 0.2 m surface at 60 °C in 22 °C air: 11.8 W/m² K (worked apart from this code).

    >>> abs(still_air_coefficient(60.0, 22.0, 0.2) - 11.8) < 0.3
    True
    """
    film = (surface_c + air_c) / 2 + 273.15
    viscosity = 1.458e-6 * film**1.5 / (film + 110.4) / (101_325 / (287.05 * film))
    conductivity = 2.6482e-3 * film**0.5 / (1 + 245.4 * 10 ** (-12 / film) / film)
    prandtl = 0.71
    difference = max(0.1, abs(surface_c - air_c))
    rayleigh = 9.81 / film * difference * height_m**3 / viscosity**2 * prandtl
    nusselt = (0.825 + 0.387 * rayleigh ** (1 / 6) / (1 + (0.492 / prandtl) ** (9 / 16)) ** (8 / 27)) ** 2
    a, b = surface_c + 273.15, air_c + 273.15
    radiation = EMISSIVITY * STEFAN_BOLTZMANN * (a + b) * (a * a + b * b)
    return float(nusselt * conductivity / height_m + radiation)


def seconds_until(modes: Modes, state: Floats, weights: Floats, air_c: float, below_c: float, what: str) -> float:
    """Time until a weighted temperature of a cooling bag falls below a limit.

    Parameters
    ----------
    modes : Modes
        Modes of the bag in the air.
    state : ndarray
        Amplitudes; a bag warmer than the air has negative ones [K, by mode].
    weights : ndarray
        ``modes.core`` or ``modes.mean`` [-, by mode].
    air_c, below_c : float
        Air and limit [°C].
    what : str
        Words for an error.

    Returns
    -------
    float
        Seconds [s].

    Raises
    ------
    ThermalError
        The limit is not above the air temperature.
    """

    def temperature(seconds: float) -> float:
        return air_c - float((weights * state) @ np.exp(-modes.rates * seconds))

    if below_c <= air_c + 0.05:
        raise ThermalError(f"{what} can never fall below {below_c:g} °C: the air around it has {air_c:g} °C")
    low, high = 0.0, 3600.0
    if temperature(0.0) <= below_c:
        return 0.0
    while temperature(high) > below_c:
        low, high = high, high * 2
        if high > LONGEST_S:
            raise ThermalError(f"{what} takes more than {LONGEST_S / 86_400:g} days to fall below {below_c:g} °C")
    for _ in range(60):
        middle = (low + high) / 2
        low, high = (middle, high) if temperature(middle) > below_c else (low, middle)
    return high
