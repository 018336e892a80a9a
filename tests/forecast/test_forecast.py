"""The forecast of whole plans: its mean is the plan's, its spread that of seasons played out one by one."""

from __future__ import annotations

from datetime import timedelta
from functools import lru_cache
from math import ceil

import numpy as np
import pytest
from scipy import stats

from models.calendar import Week
from models.farm import Farm, Order, StockLot
from models.growth.colonisation import colonisation_days
from models.plan import Plan
from scheduler.folder import read_farm_folder, scenario_folder
from scheduler.forecast import forecast
from scheduler.forecast.harvest import draw_harvest
from scheduler.forecast.lots import lots_of
from scheduler.planning import SolveLimits, plan_weeks
from tests.planning.tiny import every_day, friday, strain, tiny

START = Week.parse("2027-W03")


@lru_cache(maxsize=4)
def planned(scenario: str, weeks: int) -> tuple[Farm, tuple[Order, ...], tuple[StockLot, ...], Plan]:
    folder = read_farm_folder(scenario_folder(scenario))
    plan = plan_weeks(folder.farm, folder.orders, folder.stock, START, weeks, limits=SolveLimits(gap=0.02, seconds=20))
    return folder.farm, folder.orders, folder.stock, plan


def test_the_mean_is_the_plan_where_nothing_is_late() -> None:
    """Yields and losses alone: the mean of all draws is what the plan picks, within 1 %."""
    farm, orders, stock, plan = planned("one-drum", 10)
    still = farm.model_copy(update={"strain": tuple(card.model_copy(update={"days_cv": 0.0}) for card in farm.strain)})
    found = forecast(still, orders, stock, plan, draws=4000)
    assert sum(one.mean for one in found.weeks) == pytest.approx(sum(one.planned for one in found.weeks), rel=0.01)
    for one in found.weeks:
        assert one.mean == pytest.approx(one.planned, rel=0.06, abs=0.3), (one.week, one.strain)
        assert one.p10 <= one.p50 <= one.p90


def test_times_move_kilograms_between_weeks_and_lose_none() -> None:
    farm, orders, stock, plan = planned("one-drum", 10)
    found = forecast(farm, orders, stock, plan, draws=4000)
    late = max(one.week for one in found.weeks)
    inner = [one for one in found.weeks if one.week < late]
    assert sum(one.mean for one in inner) == pytest.approx(sum(one.planned for one in inner), rel=0.08)


def test_same_seed_same_forecast() -> None:
    farm, orders, stock, plan = planned("one-drum", 10)
    first, again, other = (forecast(farm, orders, stock, plan, draws=600, seed=seed) for seed in (3, 3, 4))
    assert first == again
    assert first != other
    with pytest.raises(ValueError, match="at least 100 draws"):
        forecast(farm, orders, stock, plan, draws=99)


def paper(**changes: object) -> tuple[Farm, list[Order], Plan]:
    """Ten bags a week, each giving one kilogram on the second Wednesday after."""
    card = strain(**({"days_cv": 0.0, "yield_cv": 0.0} | changes))
    farm = tiny(strain=[card])
    orders = [friday(8.0)]
    return farm, orders, plan_weeks(farm, orders, [], START, 4, limits=SolveLimits(gap=1e-6, seconds=20))


def test_without_spread_every_order_is_sure() -> None:
    farm, orders, plan = paper()
    found = forecast(farm, orders, [], plan, draws=200)
    assert [one.chance for one in found.orders] == [0.0, 0.0, 1.0, 1.0]
    assert [(one.p10, one.p90) for one in found.weeks[2:]] == [(pytest.approx(8), pytest.approx(8))] * 2
    assert found.helps_from == {"AAA": START.plus(2)}


def test_chance_of_an_order_in_closed_form() -> None:
    """Eight bags of one lot with gamma yields of their own: the chance that their mean is 99.5 % or more."""
    farm, orders, plan = paper(yield_cv=0.3)
    alone = farm.model_copy(update={"spread": farm.spread.model_copy(update={"farm_share": 0.0, "lot_share": 0.0})})
    found = forecast(alone, orders, [], plan, draws=20_000)
    k = 8 / 0.3**2
    right = stats.gamma(k, scale=1 / k).sf(0.995)
    assert found.orders[2].chance == pytest.approx(right, abs=4 * np.sqrt(right * (1 - right) / 20_000))
    week = found.weeks[2]
    for level, value in ((0.1, week.p10), (0.5, week.p50), (0.9, week.p90)):
        assert value == pytest.approx(8 * stats.gamma(k, scale=1 / k).ppf(level), rel=0.01)


def play(farm: Farm, plan: Plan, stages: dict[str, str], rng: np.random.Generator) -> dict[tuple[str, Week], float]:
    """One season, lot by lot and bag by bag, in plain loops: written apart from the forecast."""
    kilograms: dict[tuple[str, Week], float] = {}
    common = rng.standard_normal()
    spread = farm.spread
    for lot in plan.lots:
        card = farm.strain_called(lot.strain)
        whole = np.log1p(card.yield_cv**2)
        farm_part = np.exp(np.sqrt(spread.farm_share * whole) * common - spread.farm_share * whole / 2)
        lot_cv2, bag_cv2 = (
            np.expm1(share * whole) for share in (spread.lot_share, 1 - spread.farm_share - spread.lot_share)
        )
        lot_part = rng.gamma(1 / lot_cv2, lot_cv2)
        s = np.sqrt(np.log1p(card.days_cv**2))
        run, pins, rests = (np.exp(s * rng.standard_normal() - s * s / 2) for _ in range(3))
        events = [event for event in plan.inoculations if event.lot == lot.code]
        at_risk = [
            e for e in events if not e.before or (stages[lot.code] == "colonising" and e.ready_day >= plan.first_day)
        ]
        bags = sum(event.bags for event in at_risk)
        survived = 1.0
        if bags:
            weight = 1 / spread.loss_correlation - 1
            p = card.loss_pct / 100
            rate = rng.beta(p * weight, (1 - p) * weight) if p > 0 else 0.0
            survived = (bags - rng.binomial(bags, rate)) / (bags - sum(event.lost for event in at_risk))
        ready = min((event.ready_day for event in at_risk), default=None)
        for opening in plan.openings:
            if opening.lot != lot.code:
                continue
            own = np.mean(rng.gamma(1 / bag_cv2, bag_cv2, opening.bags))
            delay = 0
            if ready is not None:
                days = colonisation_days(card, farm.room_called(at_risk[0].room).temp_c)
                late = ceil(days * run - 1e-9) - ceil(days - 1e-9) if card.mature_days >= 0 else 0
                delay = max(0, late - (opening.day - ready).days)
            for pick in opening.picks:
                if opening.before:
                    moved = (pick.day - plan.first_day).days * (rests - 1)
                else:
                    moved = card.pin_days * (pins - 1) + (pick.flush - 1) * card.rest_days * (rests - 1)
                day = max(plan.first_day, pick.day + timedelta(days=delay + round(moved)))
                while not any("pick" in crew.skills and crew.shift_on(day) for crew in farm.crew):
                    day += timedelta(days=1)
                key = (lot.strain, Week.of(day))
                kilograms[key] = kilograms.get(key, 0.0) + pick.kg * survived * farm_part * lot_part * own
    return kilograms


def test_eight_seasons_of_ten_lie_in_the_range() -> None:
    """Seasons played out apart from the forecast: 80 % +- 3 % of all weeks lie between P10 and P90."""
    farm, orders, stock, plan = planned("one-drum", 10)
    found = forecast(farm, orders, stock, plan, draws=6000)
    sure = [one for one in found.weeks if one.p10 > 1.0]
    assert len(sure) >= 8
    rng = np.random.default_rng(11)
    stages = {lot.lot: lot.stage for lot in stock}
    inside = total = 0
    for _ in range(260):
        season = play(farm, plan, stages, rng)
        for one in sure:
            kilograms = season.get((one.strain, one.week), 0.0)
            inside += one.p10 <= kilograms <= one.p90
            total += 1
    assert 0.77 <= inside / total <= 0.83


def test_a_week_without_hands_is_picked_after_it() -> None:
    """Nobody picks from Thursday to Sunday, so that what ripens then is picked on Monday, and on no day between."""
    picking = {day: span for day, span in every_day().items() if day in {"mon", "tue", "wed"}}
    crews = [
        {"code": "all", "people": 2, "skills": ["mix", "steam", "inoculate", "open"], "shift": every_day()},
        {"code": "pickers", "people": 1, "skills": ["pick"], "shift": picking},
    ]
    farm = tiny(crew=crews, strain=[strain(days_cv=0.3, yield_cv=0.0)])
    orders = [friday(8.0)]
    plan = plan_weeks(farm, orders, [], START, 4, limits=SolveLimits(gap=0.01, seconds=20))
    found = forecast(farm, orders, [], plan, draws=1000)
    lots, last = lots_of(farm, (), plan), 7 * len(plan.all_weeks)
    days = np.arange(last)
    allowed = {day for day in range(last) if day % 7 < 3}
    following = np.array([min((d for d in allowed if d >= day), default=last) for day in days])
    ripe = draw_harvest(farm, lots, following, 1000, 1).ripe.sum(axis=(0, 2))
    assert {day for day in range(last) if ripe[day] > 0} <= allowed
    assert ripe[:last].sum() > 0
    assert [one.chance for one in found.orders][:2] == [0.0, 0.0]
