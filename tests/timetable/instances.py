"""Small readers for published scheduling instances, which are not part of the project.

The folder is given by ``BAGWEEK_INSTANCES``, or lies as ``shared/instances`` beside the project or one level up.
"""

from __future__ import annotations

import os
from pathlib import Path

from scheduler.timetable.core import Demand, Job, Lag, Problem, Resource

FT06 = """
6 6
2  1  0  3  1  6  3  7  5  3  4  6
1  8  2  5  4 10  5 10  0 10  3  4
2  5  3  4  5  8  0  9  1  1  4  7
1  5  0  5  2  5  3  3  4  8  5  9
2  9  1  3  4  5  5  4  0  3  3  1
1  3  3  3  5  9  0 10  4  4  2  1
"""
"""Fisher, H. and Thompson, G. L. (1963), Probabilistic learning combinations of local job-shop scheduling rules, in
Muth and Thompson, Industrial Scheduling, Prentice-Hall, 225-251: the problem with 6 jobs and 6 machines; 55."""

PUBLISHED = {
    "rcpsp_psplib/j301_1.sm": 43,
    "rcpsp_psplib/j3013_1.sm": 58,
    "rcpsp_psplib/j3048_10.sm": 54,
    "rcpsp_psplib/j601_1.sm": 77,
    "rcpsp_max/j10_PSP1.SCH": 26,
    "rcpsp_max/j10_PSP2.SCH": None,
    "rcpsp_max/ubo10_psp2.sch": 45,
    "rcpsp_max/ubo10_psp1.sch": None,
    "jobshop/la01.txt": 666,
}
"""Shortest length by file; None: no schedule. PSPLIB: Kolisch and Sprecher (1996); ProGen/max: Schwindt (1998);
la01: Lawrence (1984)."""


def folder() -> Path | None:
    """Where the instances lie; None where they do not."""
    given = os.environ.get("BAGWEEK_INSTANCES")
    if given:
        return Path(given)
    home = Path(__file__).resolve().parents[2]
    places = [place / "shared" / "instances" for place in (home, home.parent, home.parent.parent)]
    return next((place for place in places if place.is_dir()), None)


def read(name: str, place: Path) -> Problem:
    """The problem in a published file, by its ending."""
    text = (place / name).read_text("utf-8")
    if name.endswith(".sm"):
        return resource_constrained(text)
    return job_shop(text) if name.endswith(".txt") else generalised_lags(text)


def job_shop(text: str) -> Problem:
    """Jobs of operations in a fixed order, each a machine number and a length."""
    rows = [[int(word) for word in line.split()] for line in text.strip().splitlines()]
    (_, machines), orders = rows[0], rows[1:]
    jobs, lags = [], []
    for number, row in enumerate(orders):
        steps = list(zip(row[::2], row[1::2], strict=True))
        for step, (machine, length) in enumerate(steps):
            jobs.append(Job.single(f"{number}.{step}", length, (Demand(f"m{machine}"),)))
            if step:
                lags.append(Lag(f"{number}.{step - 1}", f"{number}.{step}"))
    resources = tuple(Resource(f"m{machine}", 1) for machine in range(machines))
    horizon = sum(job.modes[0].duration for job in jobs)
    return Problem(horizon, tuple(jobs), tuple(lags), resources, makespan_price=1)


def resource_constrained(text: str) -> Problem:
    """PSPLIB single-mode files: sections with a line of stars between."""
    lines = text.splitlines()

    def section(title: str) -> list[list[int]]:
        first = next(number for number, line in enumerate(lines) if line.startswith(title)) + 1
        rows = []
        for line in lines[first:]:
            if line.startswith("*"):
                break
            words = line.split()
            if words and all(word.isdigit() for word in words):
                rows.append([int(word) for word in words])
        return rows

    capacities = section("RESOURCEAVAILABILITIES")[0]
    jobs = tuple(_job(row[0], row[2], row[3:]) for row in section("REQUESTS/DURATIONS"))
    lags = tuple(Lag(str(row[0]), str(after)) for row in section("PRECEDENCE RELATIONS") for after in row[3:])
    return _problem(jobs, lags, capacities)


def generalised_lags(text: str) -> Problem:
    """ProGen/max files: start-to-start lags in brackets, negative ones bound from above."""
    rows = [line.split() for line in text.strip().splitlines()]
    count = int(rows[0][0]) + 2
    lags = []
    for row in rows[1 : count + 1]:
        followers = int(row[2])
        for after, length in zip(row[3 : 3 + followers], row[3 + followers :], strict=True):
            lags.append(Lag(row[0], after, "start-start", int(length.strip("[]"))))
    jobs = tuple(_job(int(row[0]), int(row[2]), [int(word) for word in row[3:]]) for row in rows[count + 1 : -1])
    longest = sum(max(0, lag.least or 0) for lag in lags)
    return _problem(jobs, tuple(lags), [int(word) for word in rows[-1]], longest)


def _job(number: int, length: int, amounts: list[int]) -> Job:
    demands = tuple(Demand(f"r{k}", amount) for k, amount in enumerate(amounts) if amount)
    return Job.single(str(number), length, demands)


def _problem(jobs: tuple[Job, ...], lags: tuple[Lag, ...], capacities: list[int], longer: int = 0) -> Problem:
    resources = tuple(Resource(f"r{k}", capacity) for k, capacity in enumerate(capacities))
    horizon = sum(job.modes[0].duration for job in jobs) + longer
    return Problem(horizon, jobs, lags, resources, makespan_price=1)
