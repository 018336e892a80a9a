"""Determinism, limits, stops and a schedule to begin with."""

import threading
from dataclasses import replace

import pytest

from scheduler.timetable.core import Demand, Job, Options, Problem, Resource, check, solve, solve_or_name
from tests.timetable.instances import FT06, job_shop


def crowd(count=40):
    """More jobs than can be proven best at once."""
    jobs = tuple(
        Job.single(
            f"j{k}", 3 + k * 7 % 11, (Demand("a", 1 + k % 3), Demand("b", 1 + k * 5 % 4)),
            start_price=1 + k % 4, due=10 + k * 3 % 50, late_price=1 + k * 13 % 7,
        )
        for k in range(count)
    )  # fmt: skip
    return Problem(400, jobs, resources=(Resource("a", 4), Resource("b", 5)))


def test_same_problem_same_schedule():
    problem, options = crowd(), Options(max_deterministic_time=0.05, seed=5)
    first, second = solve(problem, options), solve(problem, options)
    assert first.placed == second.placed
    assert (first.objective, first.bound, first.stop) == (second.objective, second.bound, second.stop)
    assert first.stop == "deterministic limit"
    assert check(problem, first) == []
    assert first.bound < first.objective
    assert first.gap > 0


def test_safety_net_of_seconds_is_named():
    schedule = solve(crowd(), Options(seconds=0.5, max_deterministic_time=1e6))
    assert schedule.stop == "time limit"


def test_gap_ends_the_search_and_is_not_called_optimal():
    schedule = solve(crowd(8), Options(gap=0.9))
    assert schedule.stop in {"gap reached", "optimal"}
    assert (schedule.status == "optimal") == (schedule.bound == schedule.objective)


def test_stop_ends_the_search_with_the_best_so_far():
    stop = threading.Event()
    seen = []

    def tell(seconds, price, bound):
        seen.append((seconds, price, bound))
        stop.set()

    problem = crowd()
    schedule = solve(problem, Options(max_deterministic_time=1e6, seconds=60, progress=tell, stop=stop))
    assert (schedule.stop, schedule.status) == ("stopped", "feasible")
    assert schedule.seconds < 30
    assert check(problem, schedule) == []
    assert schedule.objective <= seen[0][1]


def test_stop_set_before_the_search_gives_no_schedule():
    stop = threading.Event()
    stop.set()
    schedule = solve_or_name(crowd(), Options(stop=stop))
    assert (schedule.placed, schedule.status, schedule.stop) == ((), "unknown", "stopped")


def test_ctrl_c_ends_the_search_with_the_best_so_far(monkeypatch):
    class Interrupted(threading.Event):
        """An event whose third wait is a Ctrl-C."""

        waits = 0

        def wait(self, timeout=None):
            Interrupted.waits += 1
            if Interrupted.waits == 40:
                raise KeyboardInterrupt
            return super().wait(timeout)

    monkeypatch.setattr("scheduler.timetable.core.search.threading.Event", Interrupted)
    problem = crowd()
    schedule = solve(problem, Options(max_deterministic_time=1e6, seconds=60))
    assert (schedule.stop, schedule.status) == ("interrupted", "feasible")
    assert check(problem, schedule) == []


def test_search_that_finds_nothing_better_keeps_what_it_began_with():
    problem = job_shop(FT06)
    best = solve(problem)
    again = solve(problem, Options(start_from=best))
    assert again.objective == 55
    stop = threading.Event()
    stop.set()
    kept = solve(problem, Options(start_from=best, stop=stop))
    assert kept.placed == best.placed
    assert (kept.status, kept.stop, kept.objective) == ("feasible", "stopped", 55)


def test_broken_start_is_not_kept():
    problem = job_shop(FT06)
    broken = replace(solve(problem), placed=solve(problem).placed[::-1])
    assert solve(problem, Options(start_from=broken)).objective == 55


@pytest.mark.parametrize("limits", [{"workers": 0}, {"gap": -1}, {"seconds": 0}, {"max_deterministic_time": 0}])
def test_options_without_sense_are_refused(limits):
    with pytest.raises(ValueError, match="expected"):
        Options(**limits)
