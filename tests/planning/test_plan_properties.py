"""What holds for every plan: Little's law in a steady week, the same plan twice, more of a thing never earns less."""

from __future__ import annotations

import json
from datetime import timedelta

import pytest

from models.calendar import Week
from models.farm import Farm, Order, StockLot
from models.plan import Plan
from scheduler.folder import read_farm_folder, scenario_folder
from scheduler.planning import SolveLimits, plan_weeks
from scheduler.referee import referee
from scheduler.tariff import price_at
from scheduler.views.plan_json import plan_document
from tests.planning.tiny import friday, strain, tiny

START = Week.parse("2027-W03")
EXACT = SolveLimits(gap=1e-6, seconds=30)


def test_littles_law() -> None:
    """Places used are bags a week times weeks in the stage: 10 bags a week for two and one weeks, 4 for three and two.

    A steady plan of two strains that sell every Friday: AAA stands 14 nights colonising and 7 fruiting, BBB 21 and 14.
    """
    cards = [strain("AAA", colonise_days=14), strain("BBB", colonise_days=21, pin_days=14)]
    drum = [{"code": "drum", "places": 14, "element_kw": 6, "loads": [1.0], "unload_below_c": 70, "vent_min": 0,
             "generator_water_kg": 10, "loss_w_per_k": 2}]  # fmt: skip
    book = [friday(10.0), friday(4.0, code="BBB")]
    farm = tiny(strain=cards, steriliser=drum)
    plan = plan_weeks(farm, book, [], START, 10, limits=EXACT)
    steady = [week.monday for week in plan.all_weeks[5:8]]
    for code, shelf, wet in (("AAA", 10 * 2, 10 * 1), ("BBB", 4 * 3, 4 * 2)):
        for monday in steady:
            nights = [monday.toordinal() + k for k in range(7)]
            lots = {lot.code for lot in plan.lots if lot.strain == code}
            standing = [
                sum(
                    e.bags
                    for e in plan.inoculations
                    if e.lot in lots and e.day.toordinal() <= n < e.ready_day.toordinal()
                )
                for n in nights
            ]
            fruiting = [
                sum(o.bags for o in plan.openings if o.lot in lots and o.day.toordinal() <= n < o.leave_day.toordinal())
                for n in nights
            ]
            assert standing == [shelf] * 7
            assert fruiting == [wet] * 7


def documents(weeks: int = 6) -> list[str]:
    folder = read_farm_folder(scenario_folder("one-drum"))
    texts = []
    for _ in range(2):
        plan = plan_weeks(folder.farm, folder.orders, folder.stock, Week.parse("2027-W02"), weeks)
        verdict = referee(folder.farm, folder.orders, folder.stock, plan)
        document = plan_document(folder.farm, folder.orders, plan, verdict)
        texts.append(json.dumps({k: v for k, v in document.items() if k not in ("seconds", "relaxation_seconds")}))
    return texts


def test_same_input_same_plan() -> None:
    first, second = documents()
    assert first == second


def earned(farm: Farm, kg: float = 20.0) -> float:
    return plan_weeks(farm, [friday(kg)], [], START, 3, limits=EXACT).report.objective


@pytest.mark.parametrize("bigger", [11, 14, 20])
def test_more_places_never_earn_less(bigger: int) -> None:
    def drum(places: int) -> list[dict[str, object]]:
        return [{"code": "drum", "places": places, "element_kw": 6, "loads": [1.0], "unload_below_c": 70,
                 "vent_min": 0, "generator_water_kg": 10, "loss_w_per_k": 2}]  # fmt: skip

    assert earned(tiny(steriliser=drum(bigger))) >= earned(tiny(steriliser=drum(10))) - 1e-4


def test_tariff_wraps_midnight() -> None:
    farm = tiny(tariff={"default": 0.3, "periods": [{"from": "23:00", "to": "08:00", "price": 0.1}]})
    assert [price_at(farm.tariff, 60 * hour) for hour in (22, 23, 0, 7, 8)] == [0.3, 0.1, 0.1, 0.1, 0.3]


def stocked(stage: str, bags: int, since: str, **more: object) -> StockLot:
    row = {"lot": "26W50-AAA-1", "strain": "AAA", "stage": stage, "bags": bags, "since": since}
    return StockLot.model_validate(row | more)


def planned(stock: StockLot, book: list[Order], farm: Farm | None = None) -> Plan:
    farm = farm or tiny()
    plan = plan_weeks(farm, book, [stock], START, 3, limits=EXACT)
    verdict = referee(farm, book, [stock], plan)
    assert [violation.sentence() for violation in verdict.violations] == []
    return plan


@pytest.mark.parametrize(
    ("stage", "since", "sold"),
    [
        # The plan starts on Monday 18 January 2027; orders are for Friday 22, 29 January and so on.
        ("fruiting", "2027-01-14", [5.0, 0.0]),  # ripe on Thursday 21 January
        ("fruiting", "2027-01-01", [0.0, 0.0]),  # picked before the plan starts
        ("ready", "2027-01-18", [0.0, 0.0]),  # open on the 18th, ripe on the 25th, past its life on the 28th
        ("ready", "2027-01-20", [0.0, 5.0]),  # open on the 20th, ripe on the 27th, sold on the 29th
        ("colonising", "2027-01-13", [0.0, 5.0]),  # ready on the 20th
    ],
)
def test_opening_stock_is_sold_when_it_can_be(stage: str, since: str, sold: list[float]) -> None:
    plan = planned(stocked(stage, 5, since), [friday(5.0)])
    assert [delivery.kg for delivery in plan.deliveries[:2]] == pytest.approx(sold, abs=1e-6)
    short = [delivery.short_kg - delivery.unavoidable_kg for delivery in plan.deliveries]
    assert min(short) >= -1e-9


def test_cold_held_stock_is_opened_in_time() -> None:
    """Five bags in the cold since 10 January, good for 30 days: opened for the Friday that pays most."""
    rooms = [
        {"code": "cool", "kind": "cooling", "places": 100, "temp_c": 15},
        {"code": "shelf", "kind": "colonisation", "places": 100, "temp_c": 22},
        {"code": "cold", "kind": "cold-hold", "places": 10, "temp_c": 3},
        {"code": "wet", "kind": "fruiting", "places": 100, "temp_c": 15},
    ]
    farm = tiny(room=rooms, strain=[strain(cold_hold_days=30)], steriliser=tiny().model_dump()["steriliser"])
    weeks = [(START.plus(1), 5.0), (START.plus(2), 40.0)]
    book = [friday(25.0, price=price, first_week=week, last_week=week) for week, price in weeks]
    plan = planned(stocked("cold-held", 5, "2027-01-10"), book, farm)
    opened = [
        (o.held_day is not None, o.bags, o.day >= START.plus(1).monday - timedelta(days=2)) for o in plan.openings
    ]
    assert (True, 5, True) in opened
    assert plan.deliveries[1].kg == pytest.approx(15.0)  # ten new bags and the five


def test_stock_that_fills_a_room_twice_over_is_a_shortfall_not_a_failure() -> None:
    rooms = [
        {"code": "cool", "kind": "cooling", "places": 100, "temp_c": 15},
        {"code": "shelf", "kind": "colonisation", "places": 4, "temp_c": 22},
        {"code": "wet", "kind": "fruiting", "places": 100, "temp_c": 15},
    ]
    plan = planned(stocked("colonising", 9, "2027-01-13"), [friday(5.0)], tiny(room=rooms))
    assert {(fall.limit, fall.amount) for fall in plan.shortfalls} == {("places shelf", 5.0)}
    assert plan.money.over_limits == pytest.approx(-100.0 * 5 * 2)  # the nights of the 18th and 19th


def test_two_sterilisers_that_may_not_heat_at_once_take_turns() -> None:
    """Two drums of 4 kW on a supply of 5 kW: each heats alone, and twenty kilograms still come every week.

    Both are loaded on Monday from one pot of mix; the second waits until the first has reached its hold.
    """
    drum = [{"code": "drum", "count": 2, "places": 10, "element_kw": 4, "loads": [1.0], "unload_below_c": 70,
             "vent_min": 0, "generator_water_kg": 10, "loss_w_per_k": 2}]  # fmt: skip
    crews = tiny().model_dump()["crew"]
    book = [friday(20.0)]
    starts = {}
    for supply_kw in (20.0, 5.0):
        site = {"name": "Paper Farm", "timezone": "Europe/Dublin", "ambient_c": 15, "supply_kw": supply_kw}
        farm = tiny(steriliser=drum, site=site, crew=crews)
        plan = plan_weeks(farm, book, [], START, 3, limits=EXACT)
        assert referee(farm, book, [], plan).violations == ()
        assert plan.money.sales == pytest.approx(10.0 * 20 * (len(plan.all_weeks) - 2))
        first = [run.steam_on for run in plan.runs if run.code.startswith(START.short)]
        starts[supply_kw] = max(first) - min(first)
    assert starts[20.0] == 0
    assert starts[5.0] >= 60
