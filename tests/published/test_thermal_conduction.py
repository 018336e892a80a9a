"""Conduction against series solutions and programs of others."""

from __future__ import annotations

from math import inf

import numpy as np
import pytest

from models.thermal.conduction import (
    Modes,
    cylinder_roots,
    cylinder_side,
    plate_roots,
    plate_side,
    product_modes,
    project,
    sphere_roots,
)

# One-term roots and coefficients; equal to Incropera table 5.1 and Cengel table 4-2 (from memory):
# Bi, plate root, plate coefficient, cylinder root, cylinder coefficient, sphere root, sphere coefficient.
ONE_TERM = [
    (0.01, 0.0998, 1.0017, 0.1412, 1.0025, 0.1730, 1.0030),
    (0.1, 0.3111, 1.0161, 0.4417, 1.0246, 0.5423, 1.0298),
    (0.3, 0.5218, 1.0450, 0.7465, 1.0712, 0.9208, 1.0880),
    (0.5, 0.6533, 1.0701, 0.9408, 1.1143, 1.1656, 1.1441),
    (1.0, 0.8603, 1.1191, 1.2558, 1.2071, 1.5708, 1.2732),
    (2.0, 1.0769, 1.1785, 1.5994, 1.3384, 2.0288, 1.4793),
    (5.0, 1.3138, 1.2402, 1.9898, 1.5029, 2.5704, 1.7870),
    (10.0, 1.4289, 1.2620, 2.1795, 1.5677, 2.8363, 1.9249),
    (20.0, 1.4961, 1.2699, 2.2880, 1.5919, 2.9857, 1.9781),
    (50.0, 1.5400, 1.2727, 2.3572, 1.6002, 3.0788, 1.9962),
    (100.0, 1.5552, 1.2731, 2.3809, 1.6015, 3.1102, 1.9990),
    (inf, 1.5708, 1.2732, 2.4048, 1.6020, 3.1416, 2.0000),
]


def sphere_weights(roots: np.ndarray) -> np.ndarray:
    return 4 * (np.sin(roots) - roots * np.cos(roots)) / (2 * roots - np.sin(2 * roots))


@pytest.mark.parametrize("row", ONE_TERM, ids=lambda row: f"Bi {row[0]}")
def test_one_term_table(row: tuple[float, ...]) -> None:
    biot, plate, plate_weight, cylinder, cylinder_weight, sphere, sphere_weight = row
    assert plate_roots(biot, 1)[0] == pytest.approx(plate, abs=1e-4)
    assert plate_side(1.0, biot).weights[0] == pytest.approx(plate_weight, abs=1e-4)
    assert cylinder_roots(biot, 1)[0] == pytest.approx(cylinder, abs=1e-4)
    assert cylinder_side(1.0, biot).weights[0] == pytest.approx(cylinder_weight, abs=1e-4)
    assert sphere_roots(biot, 1)[0] == pytest.approx(sphere, abs=1e-4)
    assert sphere_weights(sphere_roots(biot, 1))[0] == pytest.approx(sphere_weight, abs=1e-4)


# pychemengg (github.com/profhsgill/pychemengg), printed in its docstrings.


def test_roots_of_pychemengg() -> None:
    """The first roots of the slab, the cylinder and the sphere below, as far as they are printed."""
    slab = [0.14717481, 3.1485222, 6.28665585, 9.42709237, 12.56810661]
    cylinder = [0.97061535, 3.96852663, 7.0915602, 10.22605944, 13.36390715]
    sphere = [3.09267122, 6.1855719, 9.27892517]
    assert plate_roots(120 * 0.02 / 110, 5) == pytest.approx(slab, abs=2e-8)
    assert cylinder_roots(80 * 0.1 / 14.9, 5) == pytest.approx(cylinder, abs=2e-8)
    assert sphere_roots(1400 * 0.0275 / 0.6, 3) == pytest.approx(sphere, abs=2e-8)


def test_slab_surface_of_pychemengg() -> None:
    """2L 0.04 m, k 110, rho 8530, c 380, h 120, 20 °C into 500 °C, 420 s: surface 279.76430920417 °C."""
    roots = plate_roots(120 * 0.02 / 110, 60)
    weights = 4 * np.sin(roots) / (2 * roots + np.sin(2 * roots))
    fourier = 110 / (8530 * 380) * 420 / 0.02**2
    theta = float((weights * np.cos(roots)) @ np.exp(-(roots**2) * fourier))
    assert 500 + (20 - 500) * theta == pytest.approx(279.76430920417, abs=1e-6)


def test_cylinder_centre_of_pychemengg() -> None:
    """R 0.1 m, k 14.9, rho 7900, c 477, h 80, 600 °C into 200 °C, 420 s: centre 578.8399893522 °C."""
    side = cylinder_side(0.1, 80 * 0.1 / 14.9, count=40)
    theta = product_modes((side,), 14.9 / (7900 * 477)).centre_theta(420)
    assert 200 + 400 * theta == pytest.approx(578.8399893522, abs=1e-6)


def test_sphere_centre_of_pychemengg() -> None:
    """R 0.0275 m, k 0.6, rho 1100, c 3900, h 1400, 8 °C into 97 °C, 420 s: centre 21.274035537652 °C."""
    roots = sphere_roots(1400 * 0.0275 / 0.6, 60)
    fourier = 0.6 / (1100 * 3900) * 420 / 0.0275**2
    theta = float(sphere_weights(roots) @ np.exp(-(roots**2) * fourier))
    assert 97 + (8 - 97) * theta == pytest.approx(21.274035537652, abs=1e-6)


def cylinder(half_over_radius: float, biot: float) -> Modes:
    return product_modes((cylinder_side(1.0, biot), plate_side(half_over_radius, biot * half_over_radius)), 1.0)


def brick(b: float, c: float, biot: float) -> Modes:
    return product_modes(tuple(plate_side(half, biot * half, count=9) for half in (1.0, b, c)), 1.0)


# Finite cylinder and brick, 400-term series worked apart from this code; the cylinder rows were confirmed by a
# two-dimensional finite-volume run. Bi and Fo on the radius or on the half edge a.
FINITE = [
    ("cylinder 1.0", cylinder(1.0, 1), 0.5, 0.423797, 0.304715),
    ("cylinder 1.5", cylinder(1.5, 10), 0.3, 0.346191, 0.125297),
    ("cylinder 2.0", cylinder(2.0, inf), 0.4, 0.150454, 0.044013),
    ("cylinder 1.0 slow", cylinder(1.0, 0.5), 2.0, 0.086496, 0.071893),
    ("brick 1:1:1", brick(1, 1, 1), 0.5, 0.461041, 0.315967),
    ("brick 1:1.5:2", brick(1.5, 2, 10), 0.3, 0.618556, 0.226091),
    ("brick 1:1:1 fast", brick(1, 1, inf), 0.2, 0.460657, 0.121959),
    ("brick 1:1.5:3", brick(1.5, 3, 100), 0.8, 0.095045, 0.027064),
]


@pytest.mark.parametrize(
    ("modes", "fourier", "centre", "mean"), [row[1:] for row in FINITE], ids=[r[0] for r in FINITE]
)
def test_finite_bodies(modes: Modes, fourier: float, centre: float, mean: float) -> None:
    assert modes.centre_theta(fourier) == pytest.approx(centre, abs=1e-4)
    assert modes.mean_theta(fourier) == pytest.approx(mean, abs=1e-4)


def test_maclean_square_of_the_wood_handbook() -> None:
    """MacLean (Wood Handbook FPL-GTR-190, eq. 20-3): 0.1016 m square, 16 to 69 °C, 1.5e-7 m²/s, 6000 s: 53.64 °C."""
    half = 0.1016 / 2
    modes = product_modes((plate_side(half, inf), plate_side(half, inf)), 1.5e-7)
    assert 69 + (16 - 69) * modes.centre_theta(6000) == pytest.approx(53.6407, abs=1e-3)


# Wood Handbook (FPL-GTR-190, 2010), table 20-4: minutes until the core of wet hardwood has 133 °F, from 60 °F in
# saturated air of 157 °F, by actual size in inches: red maple, sugar maple, red oak, basswood, aspen.
STEAMED_WOOD = [
    (1.0, 6.0, (14, 13, 14, 12, 13)),
    (1.5, 6.0, (29, 28, 26, 26, 29)),
    (2.0, 6.0, (50, 48, 49, 46, 50)),
    (3.0, 3.0, (59, 58, 57, 51, 61)),
    (4.0, 4.0, (115, 107, 109, 100, 113)),
    (6.0, 6.0, (265, 255, 252, 226, 262)),
]
DIFFUSIVITY_OF_WET_WOOD = 1.473e-7
"""The one value that fits all thirty best [m²/s]."""


@pytest.mark.parametrize(("thick", "wide", "minutes"), STEAMED_WOOD)
def test_steamed_wood_of_the_wood_handbook(thick: float, wide: float, minutes: tuple[int, ...]) -> None:
    """One diffusivity gives the mean of every size within 10 %, and every species within 25 %."""
    sides = tuple(plate_side(inches * 0.0254 / 2, inf, count=40) for inches in (thick, wide))
    modes = product_modes(sides, DIFFUSIVITY_OF_WET_WOOD)
    wanted = (133 - 157) / (60 - 157)
    found = next(second for second in range(60, 36_000, 5) if modes.centre_theta(second) <= wanted) / 60
    assert found == pytest.approx(sum(minutes) / len(minutes), rel=0.10)
    assert all(found == pytest.approx(measured, rel=0.25) for measured in minutes)


def test_changing_the_surface_coefficient_keeps_the_field() -> None:
    """A field carried from steam to still air has the same mean and, away from the surface, the same centre."""
    steam, air = cylinder(1.3, 60), cylinder(1.3, 2)
    state = 80.0 * np.exp(-steam.rates * 0.15)
    moved = project(state, steam, air)
    assert float(air.mean @ moved) == pytest.approx(float(steam.mean @ state), abs=0.05)
    assert float(air.core @ moved) == pytest.approx(float(steam.core @ state), abs=0.5)
