"""Shortest schedules that others have published."""

import pytest

from scheduler.timetable.core import Options, check, solve
from tests.timetable.instances import FT06, PUBLISHED, folder, job_shop, read


def test_fisher_and_thompson_six_by_six_takes_55():
    problem = job_shop(FT06)
    schedule = solve(problem)
    assert (schedule.objective, schedule.bound, schedule.status) == (55, 55, "optimal")
    assert check(problem, schedule) == []


@pytest.mark.slow
@pytest.mark.parametrize(("name", "length"), PUBLISHED.items(), ids=PUBLISHED)
def test_published_instance_takes_as_long_as_published(name, length):
    place = folder()
    if place is None or not (place / name).is_file():
        pytest.skip("published instances are not here; name their folder in BAGWEEK_INSTANCES")
    problem = read(name, place)
    schedule = solve(problem, Options(max_deterministic_time=200, seconds=300))
    if length is None:
        assert (schedule.status, schedule.placed) == ("infeasible", ())
    else:
        assert (schedule.objective, schedule.bound, schedule.gap) == (length, length, 0.0)
        assert check(problem, schedule) == []
