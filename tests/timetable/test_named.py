"""Where hard rules leave no schedule: which soft rule is broken, when, and by how many minutes."""

from dataclasses import replace

import pytest

from scheduler.timetable.core import (
    Breach,
    Demand,
    Job,
    Lag,
    Mode,
    Problem,
    Resource,
    breach_price,
    check,
    solve,
    solve_or_name,
)

SHIFT = ((8, 12),)


def named(problem):
    assert solve(problem).status == "infeasible"
    schedule = solve_or_name(problem)
    assert schedule.placed
    assert check(problem, schedule) == []
    assert schedule.breach_bound == breach_price(schedule)
    assert check(problem, replace(schedule, breaches=())) != []
    return schedule


def test_nothing_is_broken_where_nothing_must_be():
    problem = Problem(20, (Job.single("a", 3, start_price=1),), (), (Resource("crew", 1, extra=1),))
    schedule = solve_or_name(problem)
    assert (schedule.breaches, schedule.objective) == ((), 0)


def test_crew_that_is_one_short_for_two_slots():
    jobs = tuple(Job.single(name, 2, (Demand("crew"),), latest_end=3) for name in "ab")
    schedule = named(Problem(20, jobs, (), (Resource("crew", 1, extra=1),)))
    assert schedule.breaches == (Breach("capacity", "crew", 1, 2, 1, 5, 1),)
    assert schedule.breaches[0].sentence() == "crew: 5 unit-minutes more than there are, from slot 1 to 2"


def test_overtime_after_a_shift():
    job = Job("a", (Mode(6, (), SHIFT, overtime=4),), start_price=1)
    schedule = named(Problem(20, (job,), slot_minutes=15))
    assert schedule.breaches == (Breach("window", "a", 12, 14, 2, 30, 2),)
    assert schedule["a"].start == 8


def test_overtime_through_a_break_counts_the_break():
    job = Job("a", (Mode(6, (), ((8, 12), (13, 17)), overtime=4),), start_price=1)
    schedule = named(Problem(20, (job,)))
    assert schedule.breaches == (Breach("window", "a", 12, 13, 1, 5, 1),)


def test_no_more_overtime_than_is_allowed():
    job = Job("a", (Mode(9, (), SHIFT, overtime=4),))
    assert solve_or_name(Problem(20, (job,))).status == "infeasible"


def test_longest_lag_that_cannot_be_kept():
    mix, steam = Job.single("mix", 2, latest_end=2), Job.single("steam", 5, release=9)
    problem = Problem(20, (mix, steam), (Lag("mix", "steam", most=4, most_price=2),))
    schedule = named(problem)
    assert schedule.breaches == (Breach("lag", "mix -> steam", 6, 9, 3, 15, 6),)
    assert breach_price(schedule) == 6


def test_the_cheaper_rule_is_broken():
    long = Job("long", (Mode(5, (Demand("crew"),), ((0, 4),), overtime=9, overtime_price=3),))
    other = Job.single("other", 1, (Demand("crew"),), release=4, latest_end=5)
    crew = Resource("crew", 1, extra=1, extra_price=2)
    schedule = named(Problem(20, (long, other), (), (crew,)))
    assert {breach.rule: breach.amount for breach in schedule.breaches} == {"window": 1, "capacity": 1}


def test_of_schedules_that_break_as_little_the_cheapest_is_taken():
    forced = Job.single("forced", 2, (Demand("crew", 2),), latest_end=2)
    free = Job.single("free", 3, (Demand("crew"),), start_price=1)
    schedule = named(Problem(30, (free, forced), (), (Resource("crew", 1, extra=2),)))
    assert (schedule["free"].start, schedule.objective) == (2, 2)
    assert schedule.breaches == (Breach("capacity", "crew", 0, 2, 2, 10, 2),)


def test_hard_rules_stay_hard():
    jobs = tuple(Job.single(name, 2, (Demand("crew"),), latest_end=3) for name in "ab")
    schedule = solve_or_name(Problem(20, jobs, (), (Resource("crew", 1), Resource("other", 1, extra=1))))
    assert (schedule.status, schedule.placed) == ("infeasible", ())
    impossible = Job("late", (Mode(5, (), ((0, 4),)),))
    assert solve_or_name(Problem(20, (impossible,))).status == "infeasible"


@pytest.mark.parametrize(
    "change", [{"amount": 2}, {"minutes": 10}, {"price": 2}, {"begin": 0}, {"name": "other"}, {"rule": "lag"}]
)
def test_breach_named_wrongly_is_caught(change):
    jobs = tuple(Job.single(name, 2, (Demand("crew"),), latest_end=3) for name in "ab")
    problem = Problem(20, jobs, (), (Resource("crew", 1, extra=1),))
    schedule = solve_or_name(problem)
    wrong = replace(schedule, breaches=(replace(schedule.breaches[0], **change),))
    assert len(check(problem, wrong)) == 2
