"""The course of a cycle: what surrounds the bags, and the slowest bag's surface, core and mean, moment by moment."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from itertools import pairwise
from math import ceil

import numpy as np

from models.thermal.steaming import Trace


@dataclass(frozen=True, slots=True)
class CurveRow:
    """A moment of a cycle, for the slowest bag: minutes from steam on [min], temperatures [°C], power [kW].

    The power is the mean of the minute that ends then.
    """

    minutes: float
    steam_c: float
    surface_c: float
    core_c: float
    mean_c: float
    element_kw: float


def steamed_rows(boil_up_min: float, power: float, start_c: float, trace: Trace) -> list[CurveRow]:
    """Rows from steam on to the last minute of the trace: boil-up at full power, then what the trace holds."""
    rows = [CurveRow(float(k), start_c, start_c, start_c, start_c, power) for k in range(round(boil_up_min))]
    columns = (trace.minutes, trace.vessel_c, trace.surface_c, trace.core_c, trace.mean_c, trace.element_kw)
    for minutes, vessel, surface, core, mean, kw in zip(*columns, strict=True):
        rows.append(CurveRow(boil_up_min + minutes, vessel, surface, core, mean, kw))
    return rows


def minutes_of(length_min: float) -> list[float]:
    """Every whole minute of a phase, and its end [min]."""
    whole = [float(k) for k in range(1, ceil(length_min - 1e-6))]
    return [*whole, length_min] if length_min > 0 else whole


def joined(rows: Sequence[CurveRow], after: Sequence[CurveRow]) -> tuple[CurveRow, ...]:
    """Rows of the steam, then those of vent and cooling that lie behind them."""
    last = rows[-1].minutes + 1e-6
    return (*rows, *(row for row in after if row.minutes > last))


def by_minute(curve: Sequence[CurveRow]) -> tuple[CurveRow, ...]:
    """A curve at whole minutes from steam on, from 0 to its last.

    Parameters
    ----------
    curve : sequence of CurveRow
        Rows in the order of time; steps may be uneven where one phase ends and the next begins.

    Returns
    -------
    tuple of CurveRow
        Temperatures are linear between rows; power is that of the minute which holds the moment.
    """
    known = np.array([row.minutes for row in curve])
    grid = np.arange(int(known[-1] + 1e-9) + 1, dtype=np.float64)
    columns = [
        np.interp(grid, known, [getattr(row, name) for row in curve]).tolist()
        for name in ("steam_c", "surface_c", "core_c", "mean_c")
    ]
    holding = np.minimum(np.searchsorted(known, grid - 1e-9), len(known) - 1)
    powers = [curve[index].element_kw for index in holding.tolist()]
    return tuple(CurveRow(*values) for values in zip(grid.tolist(), *columns, powers, strict=True))


def minutes_between(curve: Sequence[CurveRow], low_c: float, high_c: float) -> float:
    """Minutes for which the core lies between two temperatures [min], with cores linear between rows.

    Examples
    --------
    >>> rows = [CurveRow(0, 20, 20, 20, 20, 0), CurveRow(100, 99, 90, 70, 80, 0)]
    >>> minutes_between(rows, 30, 60)
    60.0
    """
    total = 0.0
    for before, after in pairwise(curve):
        bottom, top = sorted((before.core_c, after.core_c))
        length = after.minutes - before.minutes
        if top == bottom:
            total += length if low_c <= bottom <= high_c else 0.0
        else:
            total += length * max(0.0, min(top, high_c) - max(bottom, low_c)) / (top - bottom)
    return total
