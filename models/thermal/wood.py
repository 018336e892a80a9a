"""Heat capacity and thermal conductivity of wood, dry or moist, by the equations of the Wood Handbook."""

from __future__ import annotations

from models.thermal.errors import ThermalError
from models.thermal.steam import KELVIN

FIBRE_SATURATION_PCT = 30.0
"""Moisture above which the cell walls of wood take up no more water [% of dry mass]."""
WATER_CP_HANDBOOK = 4.18
"""Heat capacity of water in the handbook's equation [kJ/kg K]."""


def dry_wood_heat_capacity(temp_c: float) -> float:
    """Heat capacity of oven-dry wood of any kind [kJ/kg K].

    Parameters
    ----------
    temp_c : float
        Temperature, 7 to 147 °C [°C].

    Notes
    -----
    c = 0.1031 + 0.003867 T with T in kelvin (Wood Handbook FPL-GTR-190, 2010, equation 4-16a).

    Examples
    --------
    >>> round(dry_wood_heat_capacity(340 - 273.15), 4)
    1.4179
    """
    return 0.1031 + 0.003867 * (temp_c + KELVIN)


def wood_heat_capacity(moisture_pct: float, temp_c: float) -> float:
    """Heat capacity of moist wood.

    Parameters
    ----------
    moisture_pct : float
        Water over *dry* mass [%].
    temp_c : float
        Temperature [°C].

    Returns
    -------
    float
        Heat capacity of wood and water together [kJ/kg K].

    Raises
    ------
    ThermalError
        The moisture is below zero.

    Notes
    -----
    c = (c_dry + 4.18 x/100) / (1 + x/100) + A with A = x (-0.06191 + 2.36e-4 T - 1.33e-4 x), T in kelvin; A is the
    energy of binding (Wood Handbook FPL-GTR-190, 2010, equations 4-17 and 4-18). Above fibre saturation, about 30 %,
    water is free and moisture adds by the plain rule of mixtures, without A (Simpson and TenWolde, Wood Handbook
    FPL-GTR-113, 1999, chapter 3).

    Examples
    --------
    The handbook's equations give 1.9146 at 12 % and 340 K:

    >>> round(wood_heat_capacity(12, 340 - 273.15), 4)
    1.9146
    """
    if moisture_pct < 0:
        raise ThermalError(f"a moisture of 0 % or more of the dry mass was expected; found {moisture_pct:g} %")
    x = moisture_pct
    mixture = (dry_wood_heat_capacity(temp_c) + WATER_CP_HANDBOOK * x / 100) / (1 + x / 100)
    if x > FIBRE_SATURATION_PCT:
        return mixture
    return mixture + x * (-0.06191 + 2.36e-4 * (temp_c + KELVIN) - 1.33e-4 * x)


def wood_conductivity(density_ratio: float, moisture_pct: float) -> float:
    """Thermal conductivity of solid wood across the grain.

    Parameters
    ----------
    density_ratio : float
        Specific gravity G_x: oven-dry mass over volume at this moisture, over the density of water; above 0.3 [-].
    moisture_pct : float
        Water over dry mass, below 25 % [%].

    Returns
    -------
    float
        Conductivity at about 24 °C [W/m K]; single pieces scatter by 20 %.

    Raises
    ------
    ThermalError
        Specific gravity or moisture lie outside of what the equation was fitted to.

    Notes
    -----
    k = G (0.1941 + 0.004064 x) + 0.01864 (Wood Handbook FPL-GTR-190, 2010, equation 4-15). It rises by 2 to 3 % for
    each 10 °C. The handbook gives no values above 25 %: what is in a bag is wetter and loose, so `conductivity_w_m_k`
    of a recipe comes from measurements on such material, not from here.

    Examples
    --------
    >>> round(wood_conductivity(0.5, 12), 4)
    0.1401
    """
    if not 0.3 <= density_ratio <= 1.5:
        raise ThermalError(f"a specific gravity between 0.3 and 1.5 was expected; found {density_ratio:g}")
    if not 0 <= moisture_pct <= 25:
        raise ThermalError(f"a moisture between 0 and 25 % of the dry mass was expected; found {moisture_pct:g} %")
    return density_ratio * (0.1941 + 0.004064 * moisture_pct) + 0.01864


def specific_gravity(basic: float, shrinkage_pct: float, moisture_pct: float) -> float:
    """Specific gravity of wood at a moisture, from the basic one (dry mass over green volume).

    Parameters
    ----------
    basic : float
        Oven-dry mass over green volume, over the density of water [-].
    shrinkage_pct : float
        Shrinkage of the volume from green to oven-dry [%].
    moisture_pct : float
        Water over dry mass, below fibre saturation [%].

    Notes
    -----
    G_x = G_b / (1 - S_x / 100) with S_x = S_0 (1 - x / 30) (Wood Handbook FPL-GTR-190, 2010, chapter 4).

    Examples
    --------
    G_b 0.54 with 12.3 % shrinkage conducts 0.1567 W/m K at 10 %:

    >>> round(wood_conductivity(specific_gravity(0.54, 12.3, 10), 10), 4)
    0.1567
    """
    return basic / (1 - shrinkage_pct * (1 - moisture_pct / FIBRE_SATURATION_PCT) / 100)
