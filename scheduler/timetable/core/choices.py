"""Where a job can go: its starts, sorted by how long it then takes and which breaks it runs through.

For a job that goes on in the next shift, the time to its end depends on its start only, in steps. So the starts fall
into stretches in each of which everything about the job is known, and one choice stands for each.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from scheduler.timetable.core.job import Job, Mode, Window


@dataclass(frozen=True, slots=True)
class Choice:
    """Starts of a job in one mode that have everything else in common.

    Attributes
    ----------
    elapsed : int
        From start to end, breaks included [slots].
    starts : tuple of (first, last)
        Allowed starts, last included [slots].
    breaks : tuple of (from, to)
        When it rests between its pieces [slots].
    over : int
        Work outside its windows, whatever the start [slots].
    over_after : int or None
        Work after this slot is outside its windows too.
    """

    mode: int
    elapsed: int
    starts: tuple[tuple[int, int], ...]
    breaks: tuple[Window, ...] = ()
    over: int = 0
    over_after: int | None = None

    def pieces(self, start: int) -> tuple[Window, ...]:
        """Stretches worked in, for a start [slots]."""
        edges = [start]
        for begin, end in self.breaks:
            edges += [begin, end]
        edges.append(start + self.elapsed)
        return tuple(zip(edges[::2], edges[1::2], strict=True))


def choices(job: Job, horizon: int, *, relaxed: bool = False) -> tuple[Choice, ...]:
    """Everywhere that a job can go.

    Parameters
    ----------
    horizon : int
        No job ends later [slot].
    relaxed : bool
        Whether work outside windows is allowed where the mode has ``overtime``.
    """
    last_end = horizon if job.latest_end is None else min(horizon, job.latest_end)
    found = []
    for number, mode in enumerate(job.modes):
        windows = mode.windows or ((0, horizon),)
        found.append(Choice(number, mode.duration, tuple((begin, end - mode.duration) for begin, end in windows)))
        longest = max(end - begin for begin, end in windows)
        if mode.split == "priced" or (mode.split == "too_long" and mode.duration > longest):
            found += _split(number, mode, windows)
        if relaxed and mode.windows and mode.overtime:
            found += _overtime(number, mode, horizon)
    clipped = (_clip(choice, job.release, last_end) for choice in found)
    return tuple(choice for choice in clipped if choice.starts)


def _clip(choice: Choice, release: int, last_end: int) -> Choice:
    last = last_end - choice.elapsed
    starts = ((max(low, release), min(high, last)) for low, high in choice.starts)
    kept = tuple((low, high) for low, high in starts if low <= high)
    return Choice(choice.mode, choice.elapsed, kept, choice.breaks, choice.over, choice.over_after)


def _split(number: int, mode: Mode, windows: tuple[Window, ...]) -> Iterator[Choice]:
    """Starts in one window with the end in a later one; windows too short for a piece are passed over."""
    useful = [(begin, end) for begin, end in windows if end - begin >= mode.least_piece]
    for first, (begin, end) in enumerate(useful):
        between = 0
        breaks: list[Window] = []
        for (_, before), (after, close) in zip(useful[first:], useful[first + 1 :], strict=False):
            breaks.append((before, after))
            to_end = end - mode.duration + between
            low = max(begin, to_end + mode.least_piece)
            high = min(end - mode.least_piece, to_end + close - after)
            if low <= high:
                idle = sum(stop - start for start, stop in breaks)
                yield Choice(number, mode.duration + idle, ((low, high),), tuple(breaks))
            between += close - after
            if between >= mode.duration:
                break


def _overtime(number: int, mode: Mode, horizon: int) -> Iterator[Choice]:
    """Starts in one window with the work going on, without a break, beyond its end."""
    windows = mode.windows
    for first, (begin, end) in enumerate(windows):
        over = 0
        for last in range(first, len(windows)):
            opens, closes = windows[last]
            following = windows[last + 1][0] if last + 1 < len(windows) else horizon
            earliest_end = (closes if last == first else opens) + 1
            latest_end = min(following, closes + mode.overtime - over)
            low = max(begin, earliest_end - mode.duration)
            high = min(end - 1, latest_end - mode.duration)
            if low <= high:
                yield Choice(number, mode.duration, ((low, high),), over=over, over_after=closes)
            over += following - closes
            if over > mode.overtime or following == closes:
                break
