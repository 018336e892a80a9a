"""Yield, flush days and places, by hand."""

from __future__ import annotations

from itertools import pairwise

import pytest
from hypothesis import given
from hypothesis import strategies as st
from pydantic import ValidationError

from models.farm import Strain
from models.growth import (
    expected_flush_kg,
    first_pick_days,
    flush_days,
    flush_kg,
    flush_survival,
    fruiting_factor,
    keeping_days,
    kg_per_bag,
    place_days,
    selling_days,
)
from models.growth.examples import BAG, GREY_OYSTER, OAK


def test_yield_by_hand():
    assert kg_per_bag(GREY_OYSTER, OAK, BAG) == pytest.approx(2.3 * 0.38 * 0.85)
    assert flush_kg(GREY_OYSTER, OAK, BAG) == pytest.approx([0.40860, 0.22287, 0.11144], abs=1e-5)


def test_flush_days_by_hand():
    assert flush_days(GREY_OYSTER) == (7, 19, 31)


@pytest.mark.parametrize(("flushes", "clean", "days"), [(1, 0, 7), (2, 0, 19), (3, 0, 31), (3, 2, 33)])
def test_place_days_by_hand(flushes, clean, days):
    assert place_days(GREY_OYSTER, flushes, clean) == days


@pytest.mark.parametrize("flushes", [0, 4])
def test_flushes_the_strain_does_not_have_are_refused(flushes):
    with pytest.raises(ValueError, match="1 to 3 flushes"):
        place_days(GREY_OYSTER, flushes)


@given(efficiency=st.floats(1, 400), first=st.floats(0.01, 0.99))
def test_flushes_add_up(efficiency, first):
    strain = GREY_OYSTER.model_copy(update={"be_pct": efficiency, "flush_share": (first, 1 - first)})
    assert sum(flush_kg(strain, OAK, BAG)) == pytest.approx(kg_per_bag(strain, OAK, BAG))


def test_keeping_at_the_same_temperature_changes_nothing():
    assert keeping_days(6.0, 3.0, 3.0) == 6.0


@pytest.mark.parametrize(("days", "q10"), [(-1.0, 2.0), (6.0, 0.0)])
def test_keeping_refuses_nonsense(days, q10):
    with pytest.raises(ValueError, match="were expected"):
        keeping_days(days, 3.0, 10.0, q10)


def cool_fruiter(q10=2.0):
    return GREY_OYSTER.model_copy(update={"fruit_at_c": 16.0, "fruit_q10": q10})


def test_days_hold_at_the_stated_temperature_and_without_one():
    assert flush_days(cool_fruiter(), 16.0) == flush_days(cool_fruiter()) == (7, 19, 31)
    assert flush_days(GREY_OYSTER, 11.0) == (7, 19, 31)


def test_a_cooler_room_takes_longer_by_hand():
    """At 11 °C 2^0.5 = 1.414 times: 7 becomes 9.9, so 10; 12 becomes 16.97, so 17."""
    assert flush_days(cool_fruiter(), 11.0) == (10, 27, 44)
    assert place_days(cool_fruiter(), 2, clean_days=1, temp_c=11.0) == 28
    assert first_pick_days(cool_fruiter(), 22.0, 11.0) == 18 + 10


def test_nothing_is_ripe_on_the_day_it_is_opened():
    assert flush_days(cool_fruiter(6.0).model_copy(update={"pin_days": 1, "rest_days": 1}), 20.0) == (1, 2, 3)


@given(temp=st.floats(5, 25), warmer=st.floats(0, 10), q10=st.floats(1, 6))
def test_a_warmer_fruiting_room_is_never_slower(temp, warmer, q10):
    card = cool_fruiter(q10)
    slow, fast = flush_days(card, temp), flush_days(card, temp + warmer)
    assert all(later >= sooner for later, sooner in zip(slow, fast, strict=True))
    assert fruiting_factor(card, temp + warmer) <= fruiting_factor(card, temp) * (1 + 1e-12)


@given(loss=st.floats(0, 99), flushes=st.integers(1, 8))
def test_survivors_never_rise_and_start_whole(loss, flushes):
    card = GREY_OYSTER.model_copy(update={"flush_loss_pct": loss, "flush_share": (1 / flushes,) * flushes})
    shares = flush_survival(card)
    assert shares[0] == 1.0
    assert all(after <= before for before, after in pairwise(shares))
    assert sum(expected_flush_kg(card, OAK, BAG)) <= kg_per_bag(card, OAK, BAG) * (1 + 1e-12)


def test_without_losses_the_expected_is_the_whole():
    assert expected_flush_kg(GREY_OYSTER, OAK, BAG) == flush_kg(GREY_OYSTER, OAK, BAG)
    assert expected_flush_kg(GREY_OYSTER, OAK, BAG, picked=3) == ()


@pytest.mark.parametrize("picked", [-1, 4])
def test_flushes_that_cannot_have_been_picked_are_refused(picked):
    with pytest.raises(ValueError, match="0 to 3 picked flushes"):
        expected_flush_kg(GREY_OYSTER, OAK, BAG, picked)


def test_bags_that_stand_now_lose_none_before_the_next_flush():
    card = GREY_OYSTER.model_copy(update={"flush_loss_pct": 20.0})
    kg = flush_kg(card, OAK, BAG)
    assert expected_flush_kg(card, OAK, BAG) == pytest.approx([kg[0], 0.8 * kg[1], 0.64 * kg[2]])
    assert expected_flush_kg(card, OAK, BAG, picked=1) == pytest.approx([kg[1], 0.8 * kg[2]])


def test_selling_days_follow_the_store_only_where_both_are_known():
    card = GREY_OYSTER.model_copy(update={"shelf_life_at_c": 6.0, "shelf_life_days": 10})
    assert selling_days(GREY_OYSTER, 20.0) == 6
    assert selling_days(card, None) == selling_days(card, 6.0) == 10
    assert (selling_days(card, 1.0), selling_days(card, 20.0)) == (16, 2)


@pytest.mark.parametrize(
    ("changes", "words"),
    [
        ({"fruit_q10": 2.0}, "fruit_at_c, the temperature at which"),
        ({"fruit_at_c": 25.0}, "within fruiting_temp_c"),
        ({"fruit_q10": 0.5, "fruit_at_c": 16.0}, "greater than or equal to 1"),
    ],
)
def test_fruiting_answers_that_make_no_sense_are_refused(changes, words):
    with pytest.raises(ValidationError, match=words):
        Strain.model_validate({**GREY_OYSTER.model_dump(), **changes})
