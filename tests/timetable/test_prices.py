"""Lateness, tariff, modes, even days, named units, lags: small problems priced by hand."""

from itertools import pairwise

import pytest

from scheduler.timetable.core import Demand, Evenness, Hold, Job, Lag, Mode, Problem, Resource, check, solve


def solved(problem):
    schedule = solve(problem)
    assert schedule.status == "optimal"
    assert check(problem, schedule) == []
    return schedule


def test_the_dearer_lateness_goes_first():
    one = Resource("one", 1)
    cheap = Job.single("cheap", 3, (Demand("one"),), due=3, late_price=1)
    dear = Job.single("dear", 4, (Demand("one"),), due=3, late_price=5)
    schedule = solved(Problem(20, (cheap, dear), resources=(one,)))
    assert schedule.terms["late"] == schedule.objective == 5 * 1 + 1 * 4
    assert schedule["dear"].start == 0


def test_deadline_is_kept_whatever_it_costs():
    one = Resource("one", 1)
    cheap = Job.single("cheap", 3, (Demand("one"),), latest_end=3)
    dear = Job.single("dear", 4, (Demand("one"),), due=3, late_price=5)
    assert solved(Problem(20, (cheap, dear), resources=(one,))).objective == 20
    assert solve(Problem(6, (cheap, dear), resources=(one,))).status == "infeasible"


def test_start_waits_for_cheap_power_only_if_that_pays():
    table = ((0, 9), (5, 2), (8, 9))
    waits = Job.single("waits", 2, start_price=1, start_costs=table)
    hurries = Job.single("hurries", 2, start_price=2, start_costs=table)
    schedule = solved(Problem(20, (waits, hurries)))
    assert (schedule["waits"].start, schedule["hurries"].start) == (5, 0)
    assert schedule.terms["start_costs"] == 2 + 9


def test_either_crew_can_do_it():
    ways = (Mode(4, (Demand("quick"),), price=3, name="quick"), Mode(6, (Demand("slow"),), name="slow"))
    jobs = tuple(Job(name, ways, due=0, late_price=1) for name in "ab")
    schedule = solved(Problem(30, jobs, resources=(Resource("quick", 1), Resource("slow", 1))))
    assert sorted(part.mode for part in schedule.placed) == [0, 1]
    assert schedule.objective == 4 + 3 + 6


def test_busiest_day_is_made_less_busy():
    days = ((0, 10), (10, 20))
    jobs = tuple(Job.single(f"j{k}", 2, (Demand("crew"),)) for k in range(4))
    problem = Problem(20, jobs, resources=(Resource("crew", 4),), evenness=(Evenness("crew", days, 7),))
    assert solved(problem).terms["evenness"] == 7 * 4


def test_alike_units_are_named_without_overlap():
    jobs = tuple(Job.single(f"j{k}", 2 + k % 3, (Demand("drum"),), start_price=1) for k in range(7))
    pair = Job.single("pair", 3, (Demand("drum", 2),), start_price=5)
    drums = Resource("drum", 3, named=True)
    schedule = solved(Problem(30, (*jobs, pair), resources=(drums,)))
    assert len(dict(schedule["pair"].units)["drum"]) == 2
    held = {}
    for part in schedule.placed:
        for unit in dict(part.units)["drum"]:
            held.setdefault(unit, []).append((part.start, part.end))
    for spans in held.values():
        spans.sort()
        assert all(end <= begin for (_, end), (begin, _) in pairwise(spans))


@pytest.mark.parametrize(
    ("kind", "least", "most", "start"),
    [
        ("end-start", 2, None, 5), ("start-start", 2, None, 2), ("end-end", 1, None, 2), ("start-end", 4, None, 2),
        ("end-start", None, -1, 0), ("start-start", 0, 0, 0),
    ],
)  # fmt: skip
def test_each_kind_of_lag(kind, least, most, start):
    first, second = Job.single("first", 3, start_price=10), Job.single("second", 2, start_price=1)
    schedule = solved(Problem(20, (first, second), (Lag("first", "second", kind, least, most),)))
    assert (schedule["first"].start, schedule["second"].start) == (0, start)


def test_longest_lag_pulls_the_first_job_to_the_second():
    mix = Job.single("mix", 2, start_price=1)
    steam = Job.single("steam", 5, (Demand("drum"),), start_price=1)
    other = Job.single("other", 6, (Demand("drum"),), latest_end=6)
    problem = Problem(20, (mix, steam, other), (Lag("mix", "steam", most=3),), (Resource("drum", 1),))
    assert solved(problem)["mix"].start == 1


def test_job_of_no_length_needs_nothing():
    done = Job.single("done", 0, (Demand("one"),), start_price=1)
    other = Job.single("other", 4, (Demand("one"),), start_price=1)
    schedule = solved(Problem(9, (other, done), resources=(Resource("one", 1),)))
    assert schedule.objective == 0


def test_full_vessel_is_held_until_it_is_emptied():
    """Emptying waits for the shift at 20, so the second filling waits too, unless there is a second vessel."""
    jobs, lags, holds = [], [], []
    for k in range(2):
        jobs += [Job.single(f"fill {k}", 2, start_price=5), Job.single(f"empty {k}", 1, (), ((20, 24), (40, 44)))]
        lags.append(Lag(f"fill {k}", f"empty {k}", least=6))
        holds.append(Hold(f"batch {k}", "vessel", f"fill {k}", f"empty {k}"))
    for vessels, second in ((1, 21), (2, 0)):
        resources = (Resource("vessel", vessels, named=True),)
        schedule = solved(Problem(48, tuple(jobs), tuple(lags), resources, tuple(holds)))
        assert sorted(schedule[f"fill {k}"].start for k in range(2)) == [0, second]
        assert {held.units for held in schedule.held} == {(unit,) for unit in range(1, vessels + 1)}
