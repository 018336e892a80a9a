"""Shifts, nights, absences and breaks: problems whose best schedule can be worked out on paper.

One slot is an hour here; a day has slots 0 to 24 and two shifts, 8 to 12 and 13 to 17.
"""

import pytest

from scheduler.timetable.core import Demand, Job, Lag, Mode, Problem, Resource, Stretch, check, solve
from scheduler.timetable.core.choices import choices

DAY = ((8, 12), (13, 17))
TWO_DAYS = (*DAY, (32, 36), (37, 41))


def crew(*units):
    return Resource.on_shift("crew", [(begin, end, n) for (begin, end), n in zip(TWO_DAYS, units, strict=False)], 48)


def attended(name, duration, split="never", **rest):
    least_piece = rest.pop("least_piece", 1)
    mode = Mode(duration, (Demand("crew"),), TWO_DAYS, split=split, least_piece=least_piece)
    return Job(name, (mode,), **{"start_price": 1, **rest})


def solved(problem):
    schedule = solve(problem)
    assert schedule.status == "optimal"
    assert check(problem, schedule) == []
    return schedule


def test_job_that_does_not_fit_before_the_break_starts_after_it():
    problem = Problem(48, (attended("a", 3, release=10),), resources=(crew(1, 1, 1, 1),))
    schedule = solved(problem)
    assert (schedule["a"].start, schedule["a"].end) == (13, 16)
    assert schedule.terms["early"] == 3


def test_unattended_job_runs_through_the_night_and_is_met_in_the_morning():
    load, unload = attended("load", 1, release=16), attended("unload", 1)
    steam = Job.single("steam", 14, (Demand("drum"),))
    lags = (Lag("load", "steam", least=0, most=0), Lag("steam", "unload"))
    problem = Problem(48, (load, steam, unload), lags, (crew(1, 1, 1, 1), Resource("drum", 1)))
    schedule = solved(problem)
    assert [schedule[name].start for name in ("load", "steam", "unload")] == [16, 17, 32]


def test_fewer_people_in_one_shift_means_jobs_one_after_the_other():
    jobs = tuple(attended(name, 2, latest_end=17) for name in "abc")
    schedule = solved(Problem(48, jobs, resources=(crew(1, 2, 0, 0),)))
    assert sorted(part.start for part in schedule.placed) == [8, 10, 13]
    schedule = solved(Problem(48, jobs, resources=(crew(2, 1, 0, 0),)))
    assert sorted(part.start for part in schedule.placed) == [8, 8, 10]


def test_absence_of_one_of_two_units():
    bench = Resource("bench", 2, (Stretch(0, 6, 1),))
    jobs = tuple(Job.single(name, 4, (Demand("bench"),), start_price=1) for name in "abc")
    schedule = solved(Problem(20, jobs, resources=(bench,)))
    assert sorted(part.start for part in schedule.placed) == [0, 4, 6]


def test_job_longer_than_a_shift_goes_on_in_the_next():
    schedule = solved(Problem(48, (attended("long", 6, split="too_long"),), resources=(crew(1, 1, 1, 1),)))
    assert schedule["long"].pieces == ((8, 12), (13, 15))


def test_crew_is_free_during_the_break_of_a_split_job_and_the_bench_is_not():
    mode = Mode(6, (Demand("crew"), Demand("bench", held="span")), TWO_DAYS, split="too_long")
    long = Job("long", (mode,), start_price=10)
    night = Job.single("night", 1, (Demand("crew"),), start_price=1, release=12)
    other = Job.single("other", 1, (Demand("bench"),), start_price=1, release=12)
    problem = Problem(48, (long, night, other), resources=(Resource("crew", 1), Resource("bench", 1)))
    schedule = solved(problem)
    assert schedule["long"].pieces == ((8, 12), (13, 15))
    assert (schedule["night"].start, schedule["other"].start) == (12, 15)


@pytest.mark.parametrize(("price", "start", "pieces"), [(1, 10, 2), (2, 10, 2), (4, 13, 1)])
def test_split_only_where_its_price_is_earned(price, start, pieces):
    job = attended("a", 3, split="priced", split_price=price, release=10)
    schedule = solved(Problem(48, (job,), resources=(crew(1, 1, 1, 1),)))
    assert (schedule["a"].start, len(schedule["a"].pieces)) == (start, pieces)


def test_no_piece_is_shorter_than_the_least_and_the_night_may_be_between():
    job = attended("a", 5, split="too_long", least_piece=2, release=15)
    schedule = solved(Problem(48, (job,), resources=(crew(1, 1, 1, 1),)))
    assert schedule["a"].pieces == ((15, 17), (32, 35))
    later = attended("a", 5, split="too_long", least_piece=2, release=16)
    schedule = solved(Problem(48, (later,), resources=(crew(1, 1, 1, 1),)))
    assert schedule["a"].pieces == ((32, 36), (37, 38)) or schedule["a"].start == 33
    assert min(end - begin for begin, end in schedule["a"].pieces) >= 2


@pytest.mark.parametrize("duration", range(1, 17))
@pytest.mark.parametrize("least", [1, 2, 3])
def test_choices_of_a_split_job_are_all_its_starts(duration, least):
    """Each start worked out hour by hour must be in one choice, with the same pieces, and no start besides."""
    job = Job("a", (Mode(duration, (), TWO_DAYS, split="priced", least_piece=least),))
    by_hour = {}
    for number, (begin, end) in enumerate(TWO_DAYS):
        for start in range(begin, end):
            pieces, left, clock, window = [], duration, start, number
            while left and window < len(TWO_DAYS):
                clock = max(clock, TWO_DAYS[window][0])
                piece = min(left, TWO_DAYS[window][1] - clock)
                pieces.append((clock, clock + piece))
                left, window = left - piece, window + 1
            if not left and (len(pieces) == 1 or min(stop - go for go, stop in pieces) >= least):
                by_hour[start] = tuple(pieces)
    found = {}
    for choice in choices(job, 48):
        for low, high in choice.starts:
            for start in range(low, high + 1):
                assert start not in found
                found[start] = choice.pieces(start)
    assert found == by_hour
