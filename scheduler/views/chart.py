"""Curves and small bars out of characters, for any terminal."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from scheduler.views.screen import Screen

LEVELS, PLAIN_LEVELS = "▁▂▃▄▅▆▇█", "_.:-=+*#"
MARGIN = 7


@dataclass(frozen=True, slots=True)
class Series:
    """A curve: its name, times and values, and its mark (the second where a terminal knows ASCII only)."""

    name: str
    times: Sequence[float]
    values: Sequence[float]
    marks: tuple[str, str]


def draw(screen: Screen, series: Sequence[Series], *, unit: str = "", step: float = 10.0) -> None:
    """Draw curves over one another, the last on top.

    Parameters
    ----------
    series : sequence of Series
        Times rise [h].
    unit : str
        Unit of the values.
    step : float
        What a row of the drawing stands for.
    """
    ascii_only = screen.ascii_only
    width = screen.width - MARGIN - 1
    first = min(one.times[0] for one in series)
    last = max(one.times[-1] for one in series)
    low = min(min(one.values) for one in series)
    high = max(max(one.values) for one in series)
    low, high = step * (low // step), step * max(low // step + 1, -(-high // step))
    height = round((high - low) / step) + 1
    grid = [[" "] * width for _ in range(height)]
    for one in series:
        mark = one.marks[1 if ascii_only else 0]
        for column, value in enumerate(_at_columns(one, first, last, width)):
            if value is not None:
                grid[round((high - value) / step)][column] = mark
    corner = "|" if ascii_only else "│"
    for row, cells in enumerate(grid):
        label = high - step * row
        shown = f"{label:>5.0f} " if round(label / step) % 2 == 0 else " " * 6
        screen.line(f"{shown}{corner}{''.join(cells)}")
    every = next(hours for hours in (0.5, 1, 2, 4, 6, 12, 24, 48, 96, 1e6) if (last - first) / hours <= 10)
    screen.line(" " * 6 + _axis(first, last, every, width, ascii_only=ascii_only), "dim")
    named = "   ".join(f"{one.marks[1 if ascii_only else 0]} {one.name}" for one in series)
    screen.line(f"{'':7}{named}{f'   [{unit}, hours below]' if unit else ''}", "dim")


def _at_columns(one: Series, first: float, last: float, width: int) -> list[float | None]:
    """The value of a curve in the middle of each column; None outside of it."""
    found: list[float | None] = []
    place = 0
    for column in range(width):
        time = first + (last - first) * (column + 0.5) / width
        while place + 1 < len(one.times) and one.times[place + 1] <= time:
            place += 1
        if not one.times[0] <= time <= one.times[-1]:
            found.append(None)
            continue
        after = min(place + 1, len(one.times) - 1)
        span = one.times[after] - one.times[place]
        share = (time - one.times[place]) / span if span > 0 else 0.0
        found.append(one.values[place] + share * (one.values[after] - one.values[place]))
    return found


def _axis(first: float, last: float, step: float, width: int, *, ascii_only: bool) -> str:
    line = ["-" if ascii_only else "─"] * (width + 1)
    time = step * -(-first // step)
    while time <= last + 1e-9:
        column = 1 + min(width - 1, round((time - first) / max(last - first, 1e-9) * (width - 1)))
        text = f"{time:g}"
        if column + len(text) <= width + 1:
            line[column : column + len(text)] = text
        time += step
    return "".join(line)


def spark(values: Sequence[float], *, top: float | None = None, ascii_only: bool = False) -> str:
    """A row of small bars, from nothing to the largest value or ``top``.

    Examples
    --------
    >>> spark([0, 1, 2, 4])
    ' ▂▄█'
    >>> spark([0, 1, 2, 4], ascii_only=True)
    ' .-#'
    """
    levels = PLAIN_LEVELS if ascii_only else LEVELS
    most = max(values, default=0.0) if top is None else top
    if most <= 0:
        return " " * len(values)
    return "".join(
        " " if value <= 0 else levels[min(7, max(0, -(-int(800 * value / most) // 100) - 1))] for value in values
    )
