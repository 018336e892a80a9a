"""Heat capacity and conductivity of wood against the equations and printed numbers of the Wood Handbook."""

from __future__ import annotations

import pytest

from models.thermal.errors import ThermalError
from models.thermal.substrate import heat_capacity
from models.thermal.wood import dry_wood_heat_capacity, specific_gravity, wood_conductivity, wood_heat_capacity

KELVIN = 273.15

# Wood Handbook FPL-GTR-190 (2010), equations 4-16a, 4-17, 4-18, worked out apart from this code; rounded to one decimal
# they are the handbook's printed table (the table from memory). Rows: K, then 0, 5, 12 and 20 % of dry mass.
HEAT_CAPACITIES = [
    (280, 1.1859, 1.3460, 1.5375, 1.7151),
    (300, 1.2632, 1.4432, 1.6632, 1.8739),
    (320, 1.3405, 1.5405, 1.7889, 2.0328),
    (340, 1.4179, 1.6377, 1.9146, 2.1916),
    (360, 1.4952, 1.7350, 2.0403, 2.3505),
]
PRINTED = [
    (280, 1.2, 1.3, 1.5, 1.7),
    (300, 1.3, 1.4, 1.7, 1.9),
    (320, 1.3, 1.5, 1.8, 2.0),
    (340, 1.4, 1.6, 1.9, 2.2),
    (360, 1.5, 1.7, 2.0, 2.4),
]


@pytest.mark.parametrize("row", HEAT_CAPACITIES, ids=lambda row: f"{row[0]} K")
def test_heat_capacity_by_the_equations(row: tuple[float, ...]) -> None:
    found = [wood_heat_capacity(moisture, row[0] - KELVIN) for moisture in (0, 5, 12, 20)]
    assert found == pytest.approx(row[1:], abs=5.1e-5)
    assert found[0] == dry_wood_heat_capacity(row[0] - KELVIN)


@pytest.mark.parametrize("row", PRINTED, ids=lambda row: f"{row[0]} K")
def test_heat_capacity_of_the_printed_table(row: tuple[float, ...]) -> None:
    found = [round(wood_heat_capacity(moisture, row[0] - KELVIN), 1) for moisture in (0, 5, 12, 20)]
    assert found == pytest.approx(row[1:], abs=0.051)


def test_heat_capacity_of_an_independent_program() -> None:
    """chemics (github.com/wigging/chemics), doctest: 12 % at 340 K gives 1.9146 kJ/kg K."""
    assert round(wood_heat_capacity(12, 340 - KELVIN), 4) == 1.9146


@pytest.mark.parametrize(
    ("water", "temp", "expected"),
    [
        (50, 20, 2.71), (50, 60, 2.79), (50, 100, 2.86), (60, 20, 3.00), (60, 60, 3.06), (60, 100, 3.13),
        (65, 20, 3.15), (65, 60, 3.20), (65, 100, 3.26), (70, 20, 3.30), (70, 60, 3.34), (70, 100, 3.39),
    ],
)  # fmt: skip
def test_above_fibre_saturation_it_is_the_plain_mixture(water: float, temp: float, expected: float) -> None:
    """Simpson and TenWolde, Wood Handbook FPL-GTR-113 (1999) chapter 3: moisture adds by the rule of mixtures."""
    dry_basis = 100 * water / (100 - water)
    assert wood_heat_capacity(dry_basis, temp) == pytest.approx(expected, abs=0.0051)
    assert heat_capacity(water, dry_wood_heat_capacity(temp), 4.18) == pytest.approx(
        wood_heat_capacity(dry_basis, temp)
    )


@pytest.mark.parametrize(
    ("gravity", "moisture", "expected"), [(0.4, 0, 0.0963), (0.4, 12, 0.1158), (0.5, 12, 0.1401), (0.6, 20, 0.1839)]
)
def test_conductivity_by_the_equation(gravity: float, moisture: float, expected: float) -> None:
    """Wood Handbook FPL-GTR-190 (2010), equation 4-15, worked out apart from this code."""
    assert wood_conductivity(gravity, moisture) == pytest.approx(expected, abs=5.1e-5)


def test_conductivity_of_an_independent_program() -> None:
    """chemics, doctest: G_b 0.54, S_o 12.3 %, 10 % moisture give 0.1567 W/m K."""
    assert wood_conductivity(specific_gravity(0.54, 12.3, 10), 10) == pytest.approx(0.1567, abs=5e-5)


@pytest.mark.parametrize(("gravity", "moisture"), [(0.1, 10), (0.5, 40), (0.5, -1)])
def test_conductivity_refuses_what_the_equation_was_not_fitted_to(gravity: float, moisture: float) -> None:
    with pytest.raises(ThermalError, match="was expected; found"):
        wood_conductivity(gravity, moisture)
