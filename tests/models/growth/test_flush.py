"""Yield, flush days and places, by hand."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from models.growth import flush_days, flush_kg, keeping_days, kg_per_bag, place_days
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
