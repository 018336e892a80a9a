"""Share what is ripe among the orders, day by day, in all drawn seasons at once."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from scheduler.forecast.harvest import Singles

ENOUGH = 0.995
"""A delivery of this share of what was ordered counts as filled [-]."""


@dataclass(frozen=True, slots=True)
class Wanted:
    """One delivery that is asked for: its order row, strain and day, kilograms, and what may stand in for it."""

    order: int
    strain: int
    day: int
    kg: float
    priority: int
    accepts: tuple[int, ...] = ()
    part: bool = True


def share(ripe: Singles, life: Sequence[int], wanted: Sequence[Wanted]) -> list[NDArray[np.float32]]:
    """Kilograms that each delivery gets in each draw.

    Parameters
    ----------
    ripe : ndarray
        By strain, day and draw [kg].
    life : sequence of int
        Days for which a strain's mushrooms can be sold, the day of the pick included as 0 [d].
    wanted : sequence of Wanted
        Deliveries of all days.

    Returns
    -------
    list of ndarray
        By delivery, in the order of ``wanted`` [kg, by draw].

    Notes
    -----
    On each day the better priority comes first, then the row of the order book. Each takes the oldest first, of its own
    strain; when all own orders of the day are served, those still short take a strain they accept. What passes its
    shelf life is gone.
    """
    strains, days, draws = ripe.shape
    ages = [np.zeros((life[strain] + 1, draws), dtype=np.float32) for strain in range(strains)]
    by_day: Mapping[int, list[int]] = _by_day(wanted)
    given = [np.zeros(draws, dtype=np.float32) for _ in wanted]
    for day in range(days):
        for strain in range(strains):
            ages[strain][1:] = ages[strain][:-1]
            ages[strain][0] = ripe[strain, day]
        today = by_day.get(day, ())
        for index in today:
            item = wanted[index]
            _serve(ages[item.strain], item.kg, given[index], whole=not item.part)
        for index in today:
            for strain in wanted[index].accepts:
                _serve(ages[strain], wanted[index].kg, given[index], whole=not wanted[index].part)
    return given


def _by_day(wanted: Sequence[Wanted]) -> dict[int, list[int]]:
    found: dict[int, list[int]] = {}
    for index, item in sorted(enumerate(wanted), key=lambda pair: (pair[1].priority, pair[1].order)):
        found.setdefault(item.day, []).append(index)
    return found


def _serve(ages: NDArray[np.float32], kg: float, given: NDArray[np.float32], *, whole: bool) -> None:
    """Take up to what is missing from the oldest on; where all or nothing is taken, only if it suffices."""
    missing = np.maximum(np.float32(kg) - given, 0)
    if whole:
        missing = np.where(ages.sum(axis=0) >= missing * ENOUGH, missing, 0)
    for age in range(len(ages) - 1, -1, -1):
        taken = np.minimum(ages[age], missing)
        ages[age] -= taken
        given += taken
        missing -= taken
