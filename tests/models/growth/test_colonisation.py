"""Days from inoculation to the ready day, in cases a person can compute by hand."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st
from pydantic import ValidationError

from models.farm import Strain
from models.growth import colonisation_days, days_to_ready, spawn_factor, suits, temperature_response
from models.growth.examples import GREY_OYSTER


def strain(**changes):
    return GREY_OYSTER.model_copy(update=changes)


def test_at_the_stated_temperature_and_spawn_rate_it_takes_the_stated_days():
    same = strain(spawn_rate_pct=5.0)
    assert colonisation_days(same, 22.0) == pytest.approx(16.0, rel=1e-12)
    assert days_to_ready(same, 22.0) == 16  # not 17: the last digit of a float does not make a day


def test_maturing_comes_on_top():
    assert days_to_ready(strain(spawn_rate_pct=5.0, mature_days=28), 22.0) == 44


def test_warmth_scales_with_the_response():
    ratio = colonisation_days(GREY_OYSTER, 18.0) / colonisation_days(GREY_OYSTER, 24.0)
    gamma = [temperature_response(temp, 4.0, 27.0, 36.0) for temp in (18.0, 24.0)]
    assert ratio == pytest.approx(gamma[1] / gamma[0])


def test_part_of_a_day_counts_as_a_day():
    assert colonisation_days(GREY_OYSTER, 22.0) == pytest.approx(17.2355, abs=1e-4)  # 16 × 1.25^(1/3)
    assert days_to_ready(GREY_OYSTER, 22.0) == 18


@pytest.mark.parametrize("temp", [4.0, 36.0, 2.0, 40.0])
def test_a_room_outside_of_the_range_is_refused(temp):
    assert not suits(GREY_OYSTER, temp)
    with pytest.raises(ValueError, match="between 4 and 36 °C"):
        colonisation_days(GREY_OYSTER, temp)


def test_no_spawn_is_refused():
    with pytest.raises(ValueError, match="above 0 %"):
        spawn_factor(0.0, 5.0)


def test_the_stated_days_hold_with_self_heating_included():
    warm = strain(self_heating_k=3.0, spawn_rate_pct=5.0)
    assert colonisation_days(warm, 22.0) == pytest.approx(16.0, rel=1e-12)


def test_self_heating_moves_both_cores_along_the_curve():
    warm = strain(self_heating_k=3.0, spawn_rate_pct=5.0)
    gamma = [temperature_response(temp, 4.0, 27.0, 36.0) for temp in (25.0, 21.0)]
    assert colonisation_days(warm, 18.0) == pytest.approx(16.0 * gamma[0] / gamma[1], rel=1e-12)


def test_a_core_that_grows_too_hot_is_refused():
    warm = strain(self_heating_k=3.0)
    assert suits(warm, 32.9)
    assert not suits(warm, 33.0)
    with pytest.raises(ValueError, match="between 4 and 33 °C"):
        colonisation_days(warm, 33.0)
    with pytest.raises(ValidationError, match="colonise_at_c and self_heating_k together below t_max_c"):
        Strain.model_validate({**GREY_OYSTER.model_dump(), "self_heating_k": 14.0})


@given(low=st.floats(4.1, 24), warmer=st.floats(0, 10), excess=st.floats(0, 6), spawn=st.floats(1, 10))
def test_warmer_below_the_optimum_is_never_slower(low, warmer, excess, spawn):
    card = strain(self_heating_k=excess, spawn_rate_pct=spawn)
    high = min(low + warmer, card.t_opt_c - excess)
    if suits(card, low) and high >= low:
        assert colonisation_days(card, high) <= colonisation_days(card, low) * (1 + 1e-9)
        more = card.model_copy(update={"spawn_rate_pct": spawn * 1.5})
        assert colonisation_days(more, low) < colonisation_days(card, low)
