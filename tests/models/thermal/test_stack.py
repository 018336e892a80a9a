"""Bags that touch: a longer body of the same stuff, whose innermost bag is the last to warm and to cool."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from models.farm import Bag
from models.thermal.conduction import bag_modes, project
from models.thermal.cycle import steam_cycle
from models.thermal.load import LoadPart
from tests.planning.tiny import tiny

BRICK = Bag(code="b", wet_kg=2, shape="brick", length_mm=150, width_mm=130, height_mm=170)
ROUND = Bag(code="r", wet_kg=2, shape="cylinder", diameter_mm=130, height_mm=300)
ALPHA, K = 1.5e-7, 0.42


@pytest.mark.parametrize("bag", [BRICK, ROUND], ids=["brick", "cylinder"])
def test_time_goes_with_the_square_of_the_factor(bag: Bag) -> None:
    """Where the surface does not limit, a body twice as long takes four times as long."""
    single, double = bag_modes(bag, ALPHA, K, float("inf")), bag_modes(bag, ALPHA, K, float("inf"), 2.0)
    for seconds in (3000.0, 9000.0, 15000.0):
        assert double.centre_theta(4 * seconds) == pytest.approx(single.centre_theta(seconds), abs=1e-9)


@pytest.mark.parametrize("bag", [BRICK, ROUND], ids=["brick", "cylinder"])
def test_innermost_bag_is_a_whole_bag_without_a_stack(bag: Bag) -> None:
    modes = bag_modes(bag, ALPHA, K, 200.0)
    assert modes.central_mean(1.0) == pytest.approx(modes.mean, abs=1e-12)


@pytest.mark.parametrize("bag", [BRICK, ROUND], ids=["brick", "cylinder"])
def test_taking_a_stack_apart_keeps_the_heat_of_its_innermost_bag(bag: Bag) -> None:
    """Mean and centre of the innermost bag are the same before and after; by the field itself, not by its modes."""
    stack, single = bag_modes(bag, ALPHA, K, 12.0, 3.0), bag_modes(bag, ALPHA, K, 12.0)
    state = -70 * np.exp(-stack.rates * 30_000)
    after = project(state, stack, single)
    assert float(single.mean @ after) == pytest.approx(float(stack.central_mean(3.0) @ state), abs=0.02)
    assert float(single.core @ after) == pytest.approx(float(stack.core @ state), abs=0.02)


@settings(max_examples=20, deadline=None)
@given(low=st.floats(1, 3), more=st.floats(0.05, 2))
def test_a_larger_stack_never_heats_or_cools_faster(low: float, more: float) -> None:
    farm = tiny()
    load = [LoadPart(farm.recipe[0], farm.bag[0], 10)]
    cycles = [
        steam_cycle(
            farm, farm.steriliser[0].model_copy(update={"stack_factor": factor}), farm.programme[0], load, month=1
        )
        for factor in (low, low + more)
    ]
    assert cycles[1].heat_up_h > cycles[0].heat_up_h
    assert cycles[1].cool_in_place_h >= cycles[0].cool_in_place_h
    assert cycles[1].balance_error_pct <= 0.1
