"""Price, bound, gap and time of the timetable's core on published instances and on weeks of invented work.

``python -m tests.benchmarks.timetable_core [--alone] [NAME ...]`` prints a table; it judges nothing.
``--alone``: one worker in place of two that take turns.
"""

from __future__ import annotations

import sys

from scheduler.timetable.core import Demand, Hold, Job, Lag, Mode, Options, Problem, Resource, Schedule, check, solve
from tests.timetable.instances import FT06, PUBLISHED, folder, job_shop, read

DAY = 288
HEAD = ("problem", "jobs", "known", "price", "bound", "gap %", "s", "work", "stop", "faults")
WIDTHS = (26, 6, 7, 9, 9, 8, 7, 7, 21, 8)


def workshop(vessels: int, batches: int, people: int, days: int = 7) -> Problem:
    """Batches that are mixed, loaded, steamed over night, unloaded, cooled and seeded; and pieces of other work.

    Slots are 5 minutes. A batch has six days from when it may begin, as a plan would set it.
    Work with hands lies in two shifts a day; steaming is dearer by day.
    """
    horizon = days * DAY
    windows = tuple(
        (day * DAY + begin, day * DAY + end) for day in range(days) for begin, end in ((90, 144), (150, 198))
    )
    shifts = [(begin, end, people - (begin // DAY) % 2) for begin, end in windows]
    tariff = tuple((day * DAY + slot, cost) for day in range(days) for slot, cost in ((0, 20), (84, 60), (276, 20)))
    jobs, lags, holds = [], [], []

    def hands(name: str, length: int, amount: int, *also: str, split: bool = False, **rest: int) -> None:
        demands = (Demand("hands", amount), *(Demand(thing, held="span") for thing in also))
        mode = Mode(length, demands, windows, split="priced" if split else "never", least_piece=6)
        jobs.append(Job(name, (mode,), split_price=30, **rest))

    for k in range(batches):
        release = (k * (days - 2) // batches) * DAY
        within = {"release": release, "latest_end": min(horizon, release + 6 * DAY)}
        hands(f"mix {k}", 24 + k % 3 * 6, 2, "mixer", **within)
        hands(f"load {k}", 6 + k % 2 * 2, 1, **within)
        steam = 150 + k % 4 * 12
        jobs.append(Job.single(f"steam {k}", steam, (Demand("kw", 6 + k % 2),), **within, start_costs=tariff))
        hands(f"unload {k}", 6, 1, **within)
        jobs.append(Job.single(f"cool {k}", 96, **within))
        due = release + 2 * DAY
        hands(
            f"seed {k}", 30 + k % 3 * 6, 2, "bench", due=due, late_price=1, split=True, start_price=1, release=release
        )
        lags += [
            Lag(f"mix {k}", f"load {k}", "end-start"), Lag(f"mix {k}", f"steam {k}", "start-start", None, 72),
            Lag(f"load {k}", f"steam {k}", least=0, most=0), Lag(f"steam {k}", f"unload {k}"),
            Lag(f"unload {k}", f"cool {k}", least=0, most=0), Lag(f"cool {k}", f"seed {k}", most=576),
        ]  # fmt: skip
        holds += [
            Hold(f"batch {k}", "vessel", f"load {k}", f"unload {k}"),
            Hold(f"cooling {k}", "floor", f"cool {k}", f"seed {k}"),
        ]
    for day in range(days):
        hands(f"pick {day}", 36, 1, release=day * DAY, latest_end=(day + 1) * DAY, start_price=1)
        hands(f"open {day}", 18, 1, release=day * DAY, due=(day + 1) * DAY, late_price=2, split=True)
    resources = (
        Resource.on_shift("hands", shifts, horizon), Resource("mixer", 1), Resource("bench", 2),
        Resource("vessel", vessels, named=True), Resource("kw", 7 * vessels - vessels // 2),
        Resource("floor", 2 * vessels),
    )  # fmt: skip
    return Problem(horizon, tuple(jobs), tuple(lags), resources, tuple(holds))


def problems() -> dict[str, tuple[Problem, int | None]]:
    """Every problem by name, with its known best price where there is one."""
    found: dict[str, tuple[Problem, int | None]] = {"ft06": (job_shop(FT06), 55)}
    place = folder()
    if place is not None:
        found |= {name: (read(name, place), length) for name, length in PUBLISHED.items() if (place / name).is_file()}
    else:
        print("published instances are not here; name their folder in BAGWEEK_INSTANCES", file=sys.stderr)
    found["week, 1 vessel"] = (workshop(1, 4, 3), None)
    found["week, 3 vessels"] = (workshop(3, 12, 5), None)
    found["two weeks, 3 vessels"] = (workshop(3, 26, 5, 14), None)
    return found


def row(name: str, problem: Problem, known: int | None, schedule: Schedule) -> str:
    """One line of the table."""
    cells = (
        name, str(len(problem.jobs)), str(known or "-"), str(schedule.objective), str(schedule.bound),
        f"{100 * schedule.gap:.2f}", f"{schedule.seconds:.1f}", f"{schedule.deterministic:.2f}", schedule.stop,
        str(len(check(problem, schedule)) if schedule.placed else "-"),
    )  # fmt: skip
    return "".join(f"{cell:>{width}}" for cell, width in zip(cells, WIDTHS, strict=True))


def main() -> None:
    """Print the table."""
    print("".join(f"{name:>{width}}" for name, width in zip(HEAD, WIDTHS, strict=True)))
    alone = "--alone" in sys.argv
    words = [word for word in sys.argv[1:] if word != "--alone"]
    options = Options(gap=0.02, workers=1, interleave_search=False) if alone else Options(gap=0.02)
    for name, (problem, known) in problems().items():
        if not words or any(word in name for word in words):
            print(row(name, problem, known, solve(problem, options)), flush=True)


if __name__ == "__main__":
    main()
