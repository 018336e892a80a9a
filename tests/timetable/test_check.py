"""The checker catches a sound schedule that is broken in one way, and problems without sense are refused."""

from dataclasses import replace

import pytest

from scheduler.timetable.core import Demand, Evenness, Hold, Job, Lag, Mode, Problem, Resource, Stretch, check, solve

WINDOWS = ((0, 4), (6, 10), (12, 18))
SPLIT = Mode(7, (Demand("crew"),), WINDOWS, split="too_long", least_piece=2)
PROBLEM = Problem(
    30,
    (
        Job("long", (SPLIT,), start_price=1, split_price=1),
        Job.single("short", 2, (Demand("drum"),), release=3, latest_end=25, start_price=1, due=4, late_price=2),
        Job.single("other", 3, (Demand("drum"),), WINDOWS, start_price=1),
    ),
    (Lag("short", "other", least=1, most=9),),
    (Resource("crew", 1), Resource("drum", 2, (Stretch(0, 2, 1),), named=True)),
    (Hold("kept", "drum", "short", "other"),),
    (Evenness("drum", ((0, 10), (10, 20)), 1),),
    makespan_price=1,
)
SOUND = solve(PROBLEM)


def changed(job, **change):
    return replace(SOUND, placed=tuple(replace(p, **change) if p.job == job else p for p in SOUND.placed))


def moved(job, start, end):
    return changed(job, start=start, end=end, pieces=((start, end),))


def test_sound_schedule_has_no_fault():
    assert SOUND.status == "optimal"
    assert check(PROBLEM, SOUND) == []


@pytest.mark.parametrize(
    ("broken", "says"),
    [
        (replace(SOUND, placed=SOUND.placed[1:]), "a place for each of 3 jobs"),
        (changed("short", mode=1), "there is no mode 1"),
        (moved("short", 2, 4), "released at 3"),
        (moved("short", 24, 26), "must end by 25"),
        (moved("short", 29, 31), "the horizon is 30"),
        (moved("short", 3, 6), "3 slots are worked, 2 are needed"),
        (changed("short", pieces=((3, 4),)), "do not reach"),
        (changed("short", pieces=((3, 4), (4, 5))), "must be whole"),
        (moved("other", 4, 7), "outside its windows"),
        (moved("other", 6, 10), "4 slots are worked"),
        (changed("long", start=3, end=15, pieces=((3, 4), (6, 10), (12, 14))), "a piece is shorter than 2"),
        (changed("long", start=0, end=11, pieces=((0, 4), (6, 7), (9, 11))), "not from window to window"),
        (moved("other", 5, 8), "at least 1 was expected"),
        (moved("other", 15, 18), "at most 9 was expected"),
        (changed("other", units=()), "by name were expected"),
        (changed("other", units=(("drum", (3,)),)), "by name were expected"),
        (replace(SOUND, held=()), "1 holds in their order"),
        (replace(SOUND, held=(replace(SOUND.held[0], end=1),)), "hold kept:"),
        (replace(SOUND, held=(replace(SOUND.held[0], units=()),)), "hold kept: 1 of drum by name"),
        (replace(SOUND, objective=SOUND.objective + 1), "the price is"),
        (replace(SOUND, terms={"early": 0}), "its terms add up to 0"),
        (replace(SOUND, bound=SOUND.objective + 1), "is above the price"),
    ],
    ids=lambda value: value if isinstance(value, str) else "",
)
def test_broken_schedule_is_caught(broken, says):
    assert any(says in fault for fault in check(PROBLEM, broken)), check(PROBLEM, broken)


def test_two_jobs_on_one_unit_are_caught():
    problem = Problem(9, tuple(Job.single(name, 2, (Demand("drum"),), latest_end=3) for name in "ab"),
                      resources=(Resource("drum", 2, named=True),))  # fmt: skip
    sound = solve(problem)
    same = replace(sound, placed=tuple(replace(part, units=(("drum", (1,)),)) for part in sound.placed))
    assert any("has both" in fault for fault in check(problem, same))


def test_too_much_of_a_resource_is_caught():
    problem = Problem(9, tuple(Job.single(name, 2, (Demand("crew"),)) for name in "ab"), (), (Resource("crew", 1),))
    sound = solve(problem)
    same = replace(sound, placed=tuple(replace(p, start=0, end=2, pieces=((0, 2),)) for p in sound.placed))
    assert check(problem, same) == ["crew: 2 unit-slots more in use than there are, from 0 to 2"]


@pytest.mark.parametrize(
    ("make", "says"),
    [
        (lambda: Mode(-1), "duration of at least 0"),
        (lambda: Mode(3, windows=((4, 4),)), "a window with 0 <= from < to"),
        (lambda: Mode(3, windows=((4, 8), (7, 9))), "windows in order"),
        (lambda: Mode(3, (Demand("a"), Demand("a"))), "one demand for each resource"),
        (lambda: Mode(3, split="often"), "found split 'often'"),
        (lambda: Demand("a", 0), "a demand of at least 1"),
        (lambda: Demand("a", held="always"), "'work' or 'span'"),
        (lambda: Job("a", ()), "at least one mode"),
        (lambda: Job.single("a", 1, late_price=-1), "prices of at least 0"),
        (lambda: Job("a", (Mode(1),), start_costs=((5, 1), (5, 2))), "in order of time"),
        (lambda: Lag("a", "a"), "two different jobs"),
        (lambda: Lag("a", "b", "before"), "one of start-start"),
        (lambda: Lag("a", "b", least=5, most=4), "least 5 is longer than most 4"),
        (lambda: Resource("a", -1), "capacity of at least 0"),
        (lambda: Resource("a", 2, (Stretch(0, 5, 3),)), "0 to 2 units were expected from slot 0; found 3"),
        (lambda: Resource("a", 2, named=True, extra=1), "named units cannot be lent"),
        (lambda: Problem(9, (Job.single("a", 1), Job.single("a", 2))), "found twice: a"),
        (lambda: Problem(9, (Job.single("a", 1, (Demand("b"),)),)), "there is no resource 'b'"),
        (lambda: Problem(9, (Job.single("a", 1, (Demand("b", 3),)),), (), (Resource("b", 2),)), "3 of 'b' asked"),
        (lambda: Problem(9, (Job.single("a", 1),), (Lag("a", "b"),)), "there is no job 'b'"),
        (lambda: Problem(9, (Job.single("a", 1, start_price=10**7),)), "prices up to 1000000"),
        (lambda: Hold("h", "b", "a", "a", 0), "an amount of at least 1"),
        (lambda: Problem(9, (Job.single("a", 1),), (), (), (Hold("h", "b", "a", "a"),)), "there is no resource 'b'"),
        (lambda: Problem(9, (Job.single("a", 1),), (), (), (Hold("h", "b", "a", "z"),)), "there is no job 'z'"),
        (lambda: Problem(0, ()), "a horizon of at least 1"),
        (
            lambda: Problem(9, (Job("a", (Mode(3, (Demand("b"),), ((0, 2),), split="priced"),)),), (),
                            (Resource("b", 2, named=True),)),
            "over the whole span",
        ),
    ],
    ids=lambda value: value if isinstance(value, str) else "",
)  # fmt: skip
def test_problem_without_sense_is_refused(make, says):
    with pytest.raises(ValueError, match=says):
        make()
