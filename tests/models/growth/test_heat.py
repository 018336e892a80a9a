"""Heat of colonising bags: by hand, against the limits of the conduction formula, and sums that must close."""

from __future__ import annotations

from math import log

import pytest
from hypothesis import given
from hypothesis import strategies as st

from models.farm import Bag
from models.growth import HeatingLot, core_excess, expected_self_heating, heat_curve, room_heat
from models.growth.examples import BAG, GREY_OYSTER, OAK
from models.growth.heat import MEAN_OVER_PEAK, STEEPNESS

AIRLESS = 1e9
"""A surface coefficient so high that only conduction inside the bag is left [W/m² K]."""


def cylinder(diameter_mm: float, height_mm: float) -> Bag:
    bag = Bag(code="b", wet_kg=1, shape="cylinder", diameter_mm=diameter_mm, height_mm=height_mm)
    return bag.model_copy(update={"wet_kg": 560 * bag.volume_m3})


def brick(length_mm: float, width_mm: float, height_mm: float) -> Bag:
    bag = Bag(code="b", wet_kg=1, shape="brick", length_mm=length_mm, width_mm=width_mm, height_mm=height_mm)
    return bag.model_copy(update={"wet_kg": 560 * bag.volume_m3})


def test_mean_over_peak_is_the_integral_of_the_curve():
    assert pytest.approx(2 * log(99)) == STEEPNESS
    assert pytest.approx(4 * 0.98 / (2 * log(99))) == MEAN_OVER_PEAK
    fine = heat_curve(GREY_OYSTER, 2000.0)
    assert max(fine) == pytest.approx(GREY_OYSTER.heat_w_per_kg, rel=1e-4)
    assert sum(fine) / 2000 / max(fine) == pytest.approx(MEAN_OVER_PEAK, rel=1e-4)


def test_peak_is_at_mid_run_and_the_curve_is_even():
    curve = heat_curve(GREY_OYSTER, 15.0)
    assert curve.index(max(curve)) == 7
    assert curve == pytest.approx(curve[::-1])


def test_a_run_that_ends_within_a_day_gives_less_on_it():
    whole, part = heat_curve(GREY_OYSTER, 17.0), heat_curve(GREY_OYSTER, 16.1)
    assert len(whole) == len(part) == 17
    assert part[-1] < whole[-1]


@given(days=st.floats(0.2, 120), peak=st.floats(0, 2))
def test_heat_of_a_run_is_its_mean_times_its_length(days, peak):
    curve = heat_curve(GREY_OYSTER.model_copy(update={"heat_w_per_kg": peak}), days)
    assert sum(curve) == pytest.approx(peak * MEAN_OVER_PEAK * days, abs=1e-9)
    assert all(-1e-12 <= heat <= peak + 1e-9 for heat in curve)


@pytest.mark.parametrize(
    ("bag", "by_theory"),
    [
        (brick(100_000, 100_000, 100), 0.05**2 / 2),  # slab: q a² / 2k
        (cylinder(100, 100_000), 0.05**2 / 4),  # long cylinder: q r² / 4k
        (cylinder(100, 100), 0.05**2 / 6),  # a cylinder as high as wide counts as the sphere in it: q r² / 6k
    ],
)
def test_limits_of_conduction(bag, by_theory):
    q = 0.25 * 560
    assert core_excess(0.25, OAK, bag, AIRLESS) == pytest.approx(q * by_theory / 0.45, rel=1e-4)


def test_surface_step_by_hand():
    bag = brick(200, 140, 200)
    surface = 2 * (0.2 * 0.14 + 0.2 * 0.2 + 0.14 * 0.2)
    step = core_excess(0.25, OAK, bag, 7.0) - core_excess(0.25, OAK, bag, AIRLESS)
    assert step == pytest.approx(0.25 * bag.wet_kg / (surface * 7.0), rel=1e-6)


@given(first=st.floats(80, 300), more=st.floats(1.0, 2.0), heat=st.floats(0.01, 1))
def test_a_bigger_or_hotter_bag_is_never_cooler(first, more, heat):
    small, big = cylinder(first, 300), cylinder(first * more, 300)
    assert core_excess(heat, OAK, big) >= core_excess(heat, OAK, small) - 1e-12
    assert core_excess(heat * more, OAK, small) == pytest.approx(more * core_excess(heat, OAK, small))


def test_self_heating_is_the_mean_of_the_excess():
    peak = core_excess(GREY_OYSTER.heat_w_per_kg, OAK, BAG)
    assert expected_self_heating(GREY_OYSTER, OAK, BAG) == pytest.approx(MEAN_OVER_PEAK * peak)


def test_a_room_adds_its_lots_and_cuts_at_both_ends():
    early = HeatingLot(GREY_OYSTER, 50, 2.0, -4, 8.0)
    late = HeatingLot(GREY_OYSTER, 10, 2.0, 2, 8.0)
    curve = heat_curve(GREY_OYSTER, 8.0)
    assert room_heat([early], 6) == pytest.approx([100 * heat for heat in (*curve[4:], 0.0, 0.0)])
    assert room_heat([early, late], 6) == pytest.approx(
        [a + b for a, b in zip(room_heat([early], 6), room_heat([late], 6), strict=True)]
    )
    assert room_heat([], 3) == (0.0, 0.0, 0.0)


def test_a_room_filled_day_by_day_gives_the_mean():
    """As many bags every day as leave: once full, the room gives off bags standing times the mean heat."""
    lots = [HeatingLot(GREY_OYSTER, 20, 2.0, day, 12.0) for day in range(40)]
    steady = room_heat(lots, 40)[12:]
    assert steady == pytest.approx([12 * 20 * 2.0 * GREY_OYSTER.heat_w_per_kg * MEAN_OVER_PEAK] * 28)


@pytest.mark.parametrize("days", [0.0, -3.0, float("nan")])
def test_refusals(days):
    with pytest.raises(ValueError, match="more than 0 days"):
        heat_curve(GREY_OYSTER, days)
    with pytest.raises(ValueError, match="above 0 W/m² K"):
        core_excess(0.25, OAK, BAG, 0.0)
    with pytest.raises(ValueError, match="0 days or more"):
        room_heat([], -1)
