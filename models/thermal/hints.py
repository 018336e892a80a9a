"""What would bring a load within the time in which wet mix sours: a smaller load, or a bigger element."""

from __future__ import annotations

from collections.abc import Callable
from math import ceil, floor

from models.farm import Programme, Steriliser
from models.thermal.cycle import Cycle, Surroundings, cycle_in
from models.thermal.errors import ThermalError
from models.thermal.load import LoadPart

MOST_TIMES = 8.0
"""Largest element that is proposed, over the one there is [-]."""


def souring_hint(
    around: Surroundings, steriliser: Steriliser, programme: Programme, load: tuple[LoadPart, ...], found: Cycle, *,
    month: int, element_kw: float | None = None, start_c: float | None = None,
) -> str:  # fmt: skip
    """Say what would heat a load within ``mix_to_steam_h``; empty when it is, or when nothing would.

    Parameters
    ----------
    found : Cycle
        The cycle of the load as asked.
    around, steriliser, programme, load, month, element_kw, start_c
        As for `models.thermal.cycle.steam_cycle`.
    """
    limit = around.mix_to_steam_h
    if found.heat_up_h <= limit:
        return ""
    power = steriliser.element_kw if element_kw is None else element_kw

    def fast(bags: int, kw: float) -> bool:
        parts = tuple(LoadPart(p.recipe, p.bag, max(1, floor(p.bags * bags / total))) for p in load)
        try:
            cycle = cycle_in(around, steriliser, programme, parts, month=month, element_kw=kw, start_c=start_c)
        except ThermalError:
            return False
        return cycle.heat_up_h <= limit

    total = sum(part.bags for part in load)
    ways = []
    fewer = _last(lambda bags: fast(bags, power), 1, total)
    if fewer:
        ways.append(f"at most {fewer} {'bag' if fewer == 1 else 'bags'}")
    halves = _first(lambda step: fast(total, step / 2), ceil(2 * power), ceil(2 * power * MOST_TIMES))
    if halves:
        ways.append(f"an element of {halves / 2:g} kW")
    return f"Hot within {limit:g} h would be {' or '.join(ways)}." if ways else ""


def _last(holds: Callable[[int], bool], low: int, high: int) -> int | None:
    """Largest number for which something holds that stops holding once and for all; None where it never does."""
    if not holds(low):
        return None
    while low < high:
        middle = (low + high + 1) // 2
        low, high = (middle, high) if holds(middle) else (low, middle - 1)
    return low


def _first(holds: Callable[[int], bool], low: int, high: int) -> int | None:
    """Smallest number for which something holds from there on; None where it never does."""
    if not holds(high):
        return None
    while low < high:
        middle = (low + high) // 2
        low, high = (low, middle) if holds(middle) else (middle + 1, high)
    return low
