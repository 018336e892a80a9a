"""Steam, generator and still air against published values."""

from __future__ import annotations

import pytest
from iapws import IAPWS97

from models.thermal.cooling import still_air_coefficient
from models.thermal.generator import boil_up_seconds, steam_share
from models.thermal.steam import atmospheric_pressure, boiling_point, latent_heat, saturation_temperature


# ISA pressure (ICAO Doc 7488; formula from memory) with IAPWS-IF97: altitude, Pa, °C, kJ/kg.
@pytest.mark.parametrize(
    ("altitude", "pressure", "temperature", "latent"),
    [
        (0, 101325.0, 99.974, 2256.54),
        (500, 95460.8, 98.312, 2260.92),
        (1000, 89874.6, 96.649, 2265.29),
        (2000, 79495.2, 93.315, 2273.98),
    ],
)
def test_boiling_point_by_altitude(altitude: float, pressure: float, temperature: float, latent: float) -> None:
    assert atmospheric_pressure(altitude) == pytest.approx(pressure, abs=0.1)
    assert boiling_point(altitude) == pytest.approx(temperature, abs=0.001)
    assert latent_heat(boiling_point(altitude)) == pytest.approx(latent, rel=1e-4)


@pytest.mark.parametrize("altitude", range(0, 2501, 250))
def test_saturation_against_a_reference_library(altitude: float) -> None:
    """The library iapws (IAPWS-IF97): within 0.05 K and 0.1 %."""
    pressure = atmospheric_pressure(altitude)
    liquid, vapour = (IAPWS97(P=pressure / 1e6, x=x) for x in (0, 1))
    assert saturation_temperature(pressure) == pytest.approx(liquid.T - 273.15, abs=0.05)
    assert latent_heat(saturation_temperature(pressure)) == pytest.approx(vapour.h - liquid.h, rel=1e-3)


def test_saturation_of_the_release() -> None:
    """IAPWS R7-97 (2012), table 36: 372.755919 K at 0.1 MPa, 453.035632 K at 1 MPa."""
    assert saturation_temperature(0.1e6) + 273.15 == pytest.approx(372.755919, abs=1e-6)
    assert saturation_temperature(1e6) + 273.15 == pytest.approx(453.035632, abs=1e-6)


@pytest.mark.parametrize(
    ("air", "temperature"), [(0.01, 99.69), (0.02, 99.41), (0.05, 98.54), (0.1, 97.05), (0.2, 93.84)]
)
def test_air_lowers_saturation(air: float, temperature: float) -> None:
    """Air left in steam at 1 atm, by partial pressure and IAPWS-IF97."""
    assert boiling_point(0, 0, air) == pytest.approx(temperature, abs=0.01)


def test_gauge_pressure() -> None:
    """15 psi (103.42 kPa) at sea level: 120.95 °C by IAPWS-IF97."""
    assert boiling_point(0, 103.42) == pytest.approx(120.95, abs=0.01)


def test_generator_against_its_closed_form() -> None:
    """60 kg water, 80 kg steel, 8 W/K, 9 kW, 20 to 100 °C: 2679.6 s; without loss C dT / P = 2583.1 s."""
    capacity = 60 * 4.19 + 80 * 0.49
    assert boil_up_seconds(capacity, 9, 8, 20, 100, 20) == pytest.approx(2679.6, abs=0.1)
    assert boil_up_seconds(capacity, 9, 0, 20, 100, 20) == pytest.approx(2583.1, abs=0.1)


def test_make_up_water_costs_its_sensible_heat() -> None:
    """Water at 20 °C to dry steam takes 2591.5 kJ/kg, of which 2256.5 is latent (IAPWS-IF97)."""
    assert steam_share(99.974, 20, condensate_return=False) == pytest.approx(2256.5 / 2591.5, rel=1e-3)
    assert steam_share(99.974, 20, condensate_return=True) == 1.0


def test_lumped_plate_of_pychemengg() -> None:
    """pychemengg (github.com/profhsgill/pychemengg), printed in its docstrings: a lumped plate after 60 s.

    Density 2800, heat capacity 880, h 53, area 2, volume 0.02, from 700 °C in air of 15 °C: 617.0619799301729 °C.
    A generator at 15 °C whose power just keeps 700 °C follows the same law upside down.
    """
    loss = 53 * 2.0
    passed = boil_up_seconds(2800 * 0.02 * 0.88, loss * 685 / 1000, loss, 15, 15 + 700 - 617.0619799301729, 15)
    assert passed == pytest.approx(60, abs=1e-9)


@pytest.mark.parametrize(("surface", "coefficient"), [(40, 10.2), (60, 11.8), (90, 13.7)])
def test_still_air(surface: float, coefficient: float) -> None:
    """Churchill and Chu by the library ht, with radiation at 0.9: a surface 0.2 m high in air of 22 °C [W/m² K]."""
    assert still_air_coefficient(surface, 22, 0.2) == pytest.approx(coefficient, abs=0.2)
