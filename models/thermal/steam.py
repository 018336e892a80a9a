"""Steam at the site: pressure by altitude, saturation temperature, latent heat."""

from __future__ import annotations

from math import sqrt

from models.thermal.errors import ThermalError

STANDARD_PRESSURE_PA = 101_325.0
KELVIN = 273.15

# IAPWS R7-97(2012), region 4, table 34: coefficients of the saturation line.
_N = (
    0.116_705_214_527_67e4, -0.724_213_167_032_06e6, -0.170_738_469_400_92e2, 0.120_208_247_024_70e5,
    -0.323_255_503_223_33e7, 0.149_151_086_135_30e2, -0.482_326_573_615_91e4, 0.405_113_405_420_57e6,
    -0.238_555_575_678_49, 0.650_175_348_447_98e3,
)  # fmt: skip


def atmospheric_pressure(altitude_m: float) -> float:
    """Standard atmospheric pressure at an altitude [Pa].

    Parameters
    ----------
    altitude_m : float
        Geopotential altitude [m].

    Notes
    -----
    p = 101325 (1 - 0.0065 H / 288.15)^5.25588 (ICAO Doc 7488, ISO 2533; formula from memory).

    Examples
    --------
    >>> round(atmospheric_pressure(1000.0), 1)
    89874.6
    """
    return float(STANDARD_PRESSURE_PA * (1 - 0.0065 * altitude_m / 288.15) ** 5.25588)


def saturation_temperature(pressure_pa: float) -> float:
    """Saturation temperature of water [°C].

    Parameters
    ----------
    pressure_pa : float
        Absolute pressure of the vapour, 611 Pa to 22 MPa [Pa].

    Raises
    ------
    ThermalError
        The pressure lies outside that range.

    Notes
    -----
    IAPWS R7-97 (2012), equation 31. The release prints 372.755 919 K at 0.1 MPa, which the example gives.

    Examples
    --------
    >>> round(saturation_temperature(100_000.0) + 273.15, 6)
    372.755919
    """
    if not 611.0 <= pressure_pa <= 22.064e6:
        raise ThermalError(
            f"a vapour pressure between 0.611 kPa and 22 MPa was expected; found {pressure_pa / 1e3:g} kPa"
        )
    beta = (pressure_pa / 1e6) ** 0.25
    e = beta**2 + _N[2] * beta + _N[5]
    f = _N[0] * beta**2 + _N[3] * beta + _N[6]
    g = _N[1] * beta**2 + _N[4] * beta + _N[7]
    d = 2 * g / (-f - sqrt(f**2 - 4 * e * g))
    return float((_N[9] + d - sqrt((_N[9] + d) ** 2 - 4 * (_N[8] + _N[9] * d))) / 2 - KELVIN)


def latent_heat(temp_c: float) -> float:
    """Latent heat of vaporisation of water [kJ/kg].

    Parameters
    ----------
    temp_c : float
        Saturation temperature, 20 to 150 °C [°C].

    Notes
    -----
    Cubic fitted to IAPWS-IF97 over 20-150 °C; it stays within 0.09 kJ/kg (0.004 %).

    Examples
    --------
    >>> round(latent_heat(99.974), 1)
    2256.6
    """
    return 2501.4636 + temp_c * (-2.40677709 + temp_c * (1.08117323e-3 - 1.51091185e-5 * temp_c))


def boiling_point(altitude_m: float, gauge_kpa: float = 0.0, air_fraction: float = 0.0) -> float:
    """Temperature of saturated steam in a vessel [°C].

    Parameters
    ----------
    altitude_m : float
        Altitude of the site [m].
    gauge_kpa : float
        Pressure above the atmosphere [kPa].
    air_fraction : float
        Mole fraction of air left in the steam; it takes its share of the pressure [-].

    Examples
    --------
    At 1 atm with 10 % of air left the saturation temperature is 97.05 °C:

    >>> round(boiling_point(0.0, 0.0, 0.10), 2)
    97.05
    """
    return saturation_temperature((1 - air_fraction) * (atmospheric_pressure(altitude_m) + 1000 * gauge_kpa))


def same_kill_factor(target_c: float, reached_c: float, z_c: float = 10.0) -> float:
    """How many times longer a hold at a lower temperature must be for the same kill, at a constant z [-].

    Notes
    -----
    Bigelow: 10^((target - reached) / z). Indicative only below 105 °C.
    """
    return float(10 ** ((target_c - reached_c) / z_c))
