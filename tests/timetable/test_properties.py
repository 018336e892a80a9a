"""Random small problems: the checker accepts every schedule, and trying everything finds none that is cheaper."""

from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from scheduler.timetable.core import (
    Demand,
    Evenness,
    Hold,
    Job,
    Lag,
    Mode,
    Options,
    Problem,
    Resource,
    Stretch,
    breach_price,
    check,
    solve,
    solve_or_name,
)
from tests.timetable.tiny import best_by_trying

HORIZON = 10
FEW = settings(max_examples=60, deadline=None, derandomize=True, suppress_health_check=[HealthCheck.too_slow])
OPTIONS = Options(max_deterministic_time=50, seconds=100)
small = st.integers(0, 3)


@st.composite
def modes(draw):
    windows = draw(st.sampled_from([(), ((1, 4), (5, 9)), ((0, 3), (3, 6)), ((2, 8),)]))
    demands = [Demand("crew", draw(st.integers(1, 2)), draw(st.sampled_from(["work", "span"])))]
    if draw(st.booleans()):
        demands.append(Demand("drum", 1, "span"))
    return Mode(
        draw(st.integers(0, 5)), tuple(demands[: draw(st.integers(0, 2))]), windows,
        split=draw(st.sampled_from(["never", "too_long", "priced"])) if windows else "never",
        least_piece=draw(st.integers(1, 2)), overtime=draw(st.integers(0, 2)),
        overtime_price=draw(st.integers(1, 3)), price=draw(small),
    )  # fmt: skip


@st.composite
def problems(draw):
    names = "abc"[: draw(st.integers(1, 3))]
    jobs = tuple(
        Job(
            name, tuple(draw(st.lists(modes(), min_size=1, max_size=2))), release=draw(small),
            latest_end=draw(st.sampled_from([None, None, 9])), due=draw(st.sampled_from([None, 2, 5])),
            late_price=draw(small), start_price=draw(small), split_price=draw(small),
            start_costs=draw(st.sampled_from([(), ((0, 4), (3, 1), (7, 4))])),
        )
        for name in names
    )  # fmt: skip
    lags = []
    if len(names) > 1 and draw(st.booleans()):
        least = draw(st.integers(-2, 3))
        most = draw(st.sampled_from([None, least, least + 2]))
        kind = draw(st.sampled_from(["start-start", "start-end", "end-start", "end-end"]))
        lags.append(Lag("a", "b", kind, least, most, most_price=draw(st.integers(0, 2))))
    calendar = draw(
        st.sampled_from([(), (Stretch(2, 4, 1),), (Stretch(3, 5, 0),), (Stretch(0, 2, 0), Stretch(6, 8, 1))])
    )
    crew = Resource("crew", 2, calendar, extra=draw(st.integers(0, 1)), extra_price=draw(st.integers(1, 3)))
    drum = Resource("drum", draw(st.integers(1, 2)), named=True)
    last = draw(st.sampled_from([*names, ""]))
    holds = (Hold("full", draw(st.sampled_from(["crew", "drum"])), "a", last),) if last else ()
    even = (Evenness("crew", ((0, 5), (5, 10)), 1),) if draw(st.booleans()) else ()
    return Problem(HORIZON, jobs, tuple(lags), (crew, drum), holds, even, makespan_price=draw(small))


@given(problems())
@FEW
def test_no_schedule_is_cheaper_than_the_one_found(problem):
    schedule = solve(problem, OPTIONS)
    best = best_by_trying(problem)
    if best is None:
        assert schedule.status == "infeasible"
    else:
        assert check(problem, schedule) == []
        assert (schedule.status, schedule.objective, schedule.bound) == ("optimal", best, best)


@given(problems())
@FEW
def test_named_schedule_passes_the_check_and_breaks_no_more_than_it_must(problem):
    schedule = solve_or_name(problem, OPTIONS)
    if schedule.placed:
        assert check(problem, schedule) == []
        assert breach_price(schedule) == schedule.breach_bound
        assert schedule.breaches == () or solve(problem, OPTIONS).status == "infeasible"
