"""The temperature response: its fixed points, its refusals, and what must hold for any strain."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from models.growth import temperature_response

CARDINAL = (4.0, 27.0, 36.0)


def test_fixed_points():
    assert temperature_response(27.0, *CARDINAL) == pytest.approx(1.0, abs=1e-15)
    for outside in (4.0, 36.0, -20.0, 60.0):
        assert temperature_response(outside, *CARDINAL) == 0.0


def test_flat_at_the_optimum():
    slope = (temperature_response(27.001, *CARDINAL) - temperature_response(26.999, *CARDINAL)) / 0.002
    assert abs(slope) < 1e-4


@pytest.mark.parametrize(
    ("cardinal", "words"),
    [
        ((5.0, 17.5, 30.0), r"above the middle .*\(17.5\)"),  # the pole lies at t_min itself
        ((5.0, 15.0, 30.0), "pole"),  # the pole lies inside the range
        ((5.0, 30.0, 30.0), "t_min_c < t_opt_c < t_max_c"),
        ((20.0, 5.0, 30.0), "t_min_c < t_opt_c < t_max_c"),
        ((5.0, float("nan"), 30.0), "t_min_c < t_opt_c < t_max_c"),
    ],
)
def test_refusals(cardinal, words):
    with pytest.raises(ValueError, match=words):
        temperature_response(20.0, *cardinal)


@given(
    low=st.floats(-5, 15),
    width=st.floats(10, 40),
    place=st.floats(0.51, 0.95),
    at=st.floats(-0.2, 1.2),
)
def test_between_nothing_and_one_with_one_peak(low, width, place, at):
    best, high = low + place * width, low + width
    value = temperature_response(low + at * width, low, best, high)
    assert -1e-12 <= value <= 1 + 1e-9
    further = temperature_response(low + at * width + (0.01 if at > place else -0.01) * width, low, best, high)
    assert further <= value + 1e-9  # away from the optimum it never rises
