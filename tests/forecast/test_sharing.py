"""What is ripe goes to the orders by priority, oldest first; worked out on paper, and conserved at random."""

from __future__ import annotations

import numpy as np
from hypothesis import given
from hypothesis import strategies as st

from scheduler.forecast.sharing import Wanted, share


def ripe(*days: tuple[int, float], length: int = 10, strains: int = 1, strain: int = 0) -> np.ndarray:
    table = np.zeros((strains, length, 1), dtype=np.float32)
    for day, kg in days:
        table[strain, day, 0] += kg
    return table


def given_to(table: np.ndarray, wanted: list[Wanted], life: tuple[int, ...] = (2,)) -> list[float]:
    return [round(float(kg[0]), 4) for kg in share(table, life, wanted)]


def test_priority_comes_before_the_row() -> None:
    orders = [Wanted(0, 0, 3, 6, 2), Wanted(1, 0, 3, 6, 1), Wanted(2, 0, 3, 6, 1)]
    assert given_to(ripe((3, 8)), orders) == [0, 6, 2]


def test_what_is_too_old_is_gone() -> None:
    """Two days of life: picked on day 1 it serves days 1 to 3, not day 4."""
    assert given_to(ripe((1, 5)), [Wanted(0, 0, 3, 5, 1)]) == [5]
    assert given_to(ripe((1, 5)), [Wanted(0, 0, 4, 5, 1)]) == [0]


def test_the_oldest_goes_first() -> None:
    """5 kg of day 1 and 5 of day 3: on day 3 the older go, so that day 5 still has the younger."""
    assert given_to(ripe((1, 5), (3, 5)), [Wanted(0, 0, 3, 5, 1), Wanted(1, 0, 5, 5, 1)]) == [5, 5]


def test_all_or_nothing() -> None:
    orders = [Wanted(0, 0, 3, 6, 1, part=False), Wanted(1, 0, 3, 4, 2)]
    assert given_to(ripe((3, 5)), orders) == [0, 4]
    assert given_to(ripe((3, 9)), orders) == [6, 3]


def test_another_strain_stands_in_after_its_own_orders() -> None:
    table = ripe((3, 7), strains=2, strain=1)
    orders = [Wanted(0, 0, 3, 4, 1, accepts=(1,)), Wanted(1, 1, 3, 5, 9)]
    assert given_to(table, orders, (2, 2)) == [2, 5]


@given(
    kg=st.lists(st.floats(0, 20), min_size=8, max_size=8),
    orders=st.lists(st.tuples(st.integers(0, 7), st.floats(0.1, 15), st.integers(1, 3)), max_size=8),
    life=st.integers(0, 4),
)
def test_no_kilogram_is_given_twice(kg: list[float], orders: list[tuple[int, float, int]], life: int) -> None:
    table = ripe(*enumerate(kg), length=8)
    wanted = [Wanted(row, 0, day, want, priority) for row, (day, want, priority) in enumerate(orders)]
    found = given_to(table, wanted, (life,))
    assert all(0 <= got <= item.kg + 1e-3 for got, item in zip(found, wanted, strict=True))
    for day in range(8):
        by_then = sum(got for got, item in zip(found, wanted, strict=True) if item.day <= day)
        assert by_then <= sum(kg[: day + 1]) + 1e-2
    more = given_to(ripe(*enumerate([one + 1 for one in kg]), length=8), wanted, (life,))
    assert sum(more) >= sum(found) - 1e-2
