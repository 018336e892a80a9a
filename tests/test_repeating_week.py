"""The repeating week, with numbers a person can follow on a clock."""

from __future__ import annotations

from itertools import pairwise
from pathlib import Path

import pytest

from models.farm import Crew, Limits, Rates
from scheduler.folder import read_farm_folder
from scheduler.repeating_week import RepeatingWeek, clock

BASE = Path(__file__).parent / "broken_farms" / "base"
WEEKDAY_SHIFTS = dict.fromkeys(("mon", "tue", "wed", "thu", "fri"), "08:00-16:00")
WEEK_MIN = 7 * 1440


@pytest.fixture(scope="module")
def base():
    return read_farm_folder(BASE).farm


@pytest.fixture
def simple(base):
    """Two people, weekdays 8 to 16; a load of 60 bags is mixed in 60 min, loaded in 30, unloaded in 30."""
    crew = Crew(code="all", people=2, skills=("mix", "steam", "inoculate", "open", "pick"), shift=WEEKDAY_SHIFTS)
    rates = Rates(mix_bags_h=30, load_bags_h=60, unload_bags_h=60, inoculate_bags_h=30)
    drum = base.steriliser[0].model_copy(update={"places": 60, "loads": (0.5, 1.0)})
    limits = Limits(mix_to_steam_h=6, cooled_to_inoculate_h=72, inoculation_benches=1)
    return base.model_copy(update={"crew": (crew,), "rates": rates, "steriliser": (drum,), "limits": limits})


def runs(farm, ready_h: float, cool_h: float = 10, weeks: int = 4):
    return RepeatingWeek(farm).runs(farm.steriliser[0], int(60 * ready_h), int(60 * cool_h), weeks)


def moments(run) -> tuple[str, ...]:
    return tuple(clock(at) for at in (run.load, run.steam_on, run.ready, run.unload, run.unloaded))


def test_overnight_one_run_a_day(simple):
    found = runs(simple, 20)
    assert len(found) == 4 * 5
    assert moments(found[0]) == ("Mon 09:00", "Mon 09:30", "Tue 05:30", "Tue 08:00", "Tue 08:30")
    assert moments(found[1])[0] == "Tue 09:00"  # free at 08:30, but the mix takes from 08:00 to 09:00
    assert moments(found[4]) == ("Fri 09:00", "Fri 09:30", "Sat 05:30", "Mon 08:00", "Mon 08:30")


def test_two_runs_a_day_where_the_first_is_out_in_time(simple):
    found = runs(simple, 5)
    assert len(found) == 4 * 10
    assert moments(found[1]) == ("Mon 15:00", "Mon 15:30", "Mon 20:30", "Tue 08:00", "Tue 08:30")
    assert len(runs(simple, 6)) == 4 * 5  # out at 16:00, too late to load again


def test_cooling_days_run_from_unloading_to_inoculation_both_included(simple):
    days = [run.cooling_days for run in runs(simple, 20, weeks=1)]
    assert days == [2, 2, 2, 4, 2]  # out on Fri 08:30, cool at 18:30, inoculated on Mon


def test_bags_that_cannot_be_inoculated_in_time_are_not_steamed(simple):
    limits = simple.limits.model_copy(update={"cooled_to_inoculate_h": 48.0})
    found = runs(simple.model_copy(update={"limits": limits}), 20, weeks=1)
    assert [clock(run.load)[:3] for run in found] == ["Mon", "Tue", "Wed", "Fri"]


def test_cool_in_the_morning_is_inoculated_that_day_if_there_is_time(simple):
    assert [run.cooling_days for run in runs(simple, 20, cool_h=4, weeks=1)][:2] == [1, 1]  # 12:30 + 2 bench hours
    assert [run.cooling_days for run in runs(simple, 20, cool_h=6, weeks=1)][:2] == [2, 2]  # 14:30, only 1.5 h left


@pytest.mark.parametrize(
    "changes",
    [
        {"rates": Rates(mix_bags_h=3)},  # ten hours of mixing
        {"limits": Limits(mix_to_steam_h=1)},  # sour before steam
        {"limits": Limits(cooled_to_inoculate_h=1)},  # never inoculated in time
    ],
)
def test_what_cannot_be_done_gives_no_runs(simple, changes):
    assert runs(simple.model_copy(update=changes), 20) == []


def test_hours(base, simple):
    week = RepeatingWeek(simple)
    assert week.hours("mix") == 80
    assert week.days("mix") == 5
    assert sum(week.inoculation_hours(day) for day in range(7)) == 40  # one bench
    assert week.inoculation_hours(0, after=15 * 60) == 1
    assert RepeatingWeek(base).hours("pick") == 2 * (5 * 8.5 + 3 + 2)


def test_runs_do_not_overlap_and_keep_order(base):
    for ready_h in (4, 9.5, 17.3, 30, 70):
        found = runs(base, ready_h, weeks=8)
        assert found
        for before, after in pairwise(found):
            assert before.load < before.steam_on < before.ready <= before.unload < before.unloaded <= after.load
        assert found[-1].load < 8 * WEEK_MIN


def test_a_longer_cycle_never_gives_more_runs(simple):
    counts = [len(runs(simple, ready_h)) for ready_h in range(1, 100)]
    assert counts == sorted(counts, reverse=True)
