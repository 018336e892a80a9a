"""Diving: round a few fractional columns at a time, far apart from each other, and let the relaxation answer.

Columns stand in lanes (a steriliser, a strain) along time. One dive step rounds, in every lane, one column in each
window of days; the relaxation then moves everything else. What cannot be rounded up is rounded down.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from math import ceil, floor

from scheduler.planning.engine import Answer, Dead, FloatArray, Relaxation

WHOLE_TOLERANCE = 1e-6


@dataclass(frozen=True, slots=True)
class Candidate:
    """A column that must become whole: its lane and its day."""

    column: int
    lane: int
    day: int


@dataclass(frozen=True, slots=True)
class Style:
    """How boldly to dive: days in a window, and whether a window is decided as a whole.

    A ``bold`` style decides all windows of a lane at once, and in each half of what it may round up; others decide
    every second window.

    ``sparse`` columns are few large decisions (runs): where the fractions of a window together make half a unit, the
    largest is rounded up, else all of them down. Others (bags) are rounded to the nearest whole number, earliest
    first.
    """

    window_days: int
    sparse: bool
    bold: bool = False


def fraction(value: float) -> float:
    """Distance from a value to the whole number below it, 0 when it is whole."""
    part = value - floor(value)
    return 0.0 if part < WHOLE_TOLERANCE or part > 1 - WHOLE_TOLERANCE else part


def dive(
    relaxation: Relaxation,
    answer: Answer,
    candidates: Sequence[Candidate],
    style: Style,
    low: FloatArray,
    high: FloatArray,
) -> Answer:
    """Make all candidate columns whole and fix them; ``low`` and ``high`` are updated in place.

    Raises
    ------
    Dead
        No rounding of some step leaves the relaxation feasible.
    """
    while True:
        assert answer.values is not None  # noqa: S101  (Dead is raised where it would be)
        batch = _batch(answer.values, candidates, style)
        if not batch:
            break
        answer = _step(relaxation, answer.values, batch, low, high)
    for item in candidates:
        value = float(round(answer.values[item.column]))
        low[item.column] = high[item.column] = value
        relaxation.bound(item.column, value, value)
    return answer


def _batch(values: FloatArray, candidates: Sequence[Candidate], style: Style) -> dict[int, float]:
    """New values for columns in the windows of each lane that have fractions."""
    windows: dict[int, dict[int, list[Candidate]]] = {}
    for item in candidates:
        windows.setdefault(item.lane, {}).setdefault(item.day // style.window_days, []).append(item)
    batch: dict[int, float] = {}
    for lane in windows.values():
        previous = -2
        for window in sorted(lane):
            members = lane[window]
            if (style.bold or window > previous + 1) and any(fraction(values[item.column]) for item in members):
                previous = window
                batch.update(_decide(values, members, style))
    return batch


def _decide(values: FloatArray, members: Sequence[Candidate], style: Style) -> dict[int, float]:
    broken = [item for item in members if fraction(values[item.column])]
    if not style.sparse:
        first = min(broken, key=lambda c: (c.day, c.column)).column
        return {first: float(floor(values[first] + 0.5))}
    together = sum(fraction(values[item.column]) for item in broken)
    if together < 0.5:
        return {item.column: float(floor(values[item.column] + WHOLE_TOLERANCE)) for item in members}
    count = max(1, floor(together / 2)) if style.bold else 1
    largest = sorted(broken, key=lambda c: (-fraction(values[c.column]), c.column))[:count]
    return {item.column: float(ceil(values[item.column])) for item in largest}


def _step(
    relaxation: Relaxation, values: FloatArray, batch: dict[int, float], low: FloatArray, high: FloatArray
) -> Answer:
    """Fix a batch; where that leaves nothing feasible, round it down instead, and halve it where that fails too."""
    for rounding in (batch, {column: float(floor(values[column] + WHOLE_TOLERANCE)) for column in batch}):
        for column, value in rounding.items():
            relaxation.bound(column, value, value)
        answer = relaxation.solve()
        if answer.values is not None:
            for column, value in rounding.items():
                low[column] = high[column] = value
            return answer
    for column in batch:
        relaxation.bound(column, low[column], high[column])
    if len(batch) == 1:
        raise Dead
    items = list(batch.items())
    first = _step(relaxation, values, dict(items[: len(items) // 2]), low, high)
    assert first.values is not None  # noqa: S101
    rest = {c: v for c, v in items[len(items) // 2 :] if fraction(first.values[c])}
    return _step(relaxation, first.values, rest, low, high) if rest else first
