"""Farms whose best plan can be worked out on paper, each with another limit that binds.

In all of them the plan covers N weeks (asked and look-ahead). Bags loaded in week k are sold in week k + 2, so the
weeks 0 to N - 3 are loaded and the weeks 2 to N - 1 are sold. A bag costs 2 kg x 0.50 = 1.00 in materials and earns
1 kg x 10.00.
"""

from __future__ import annotations

from datetime import date

import pytest

from models.calendar import Week
from models.farm import Farm, Order, StockLot
from models.plan import Plan
from scheduler.planning import SolveLimits, plan_weeks
from scheduler.referee import referee
from tests.planning.tiny import every_day, friday, strain, tiny

START = Week.parse("2027-W03")
EXACT = SolveLimits(gap=1e-7, seconds=30)


def planned(farm: Farm, kg: float = 20.0, weeks: int = 4) -> Plan:
    plan = plan_weeks(farm, [friday(kg)], [], START, weeks, limits=EXACT)
    verdict = referee(farm, [friday(kg)], [], plan)
    assert [violation.sentence() for violation in verdict.violations] == []
    assert verdict.checked > 100
    return plan


def assert_bags_a_week(plan: Plan, bags: int) -> None:
    """So many bags in each run, loaded on Monday and sold on the Friday of the second week after."""
    weeks = len(plan.all_weeks)
    assert [run.bags for run in plan.runs] == [{"AAA": bags}] * (weeks - 2)
    assert [run.code for run in plan.runs] == [f"{week.short}-R1" for week in plan.all_weeks[:-2]]
    delivered = [delivery.kg for delivery in plan.deliveries]
    assert delivered == pytest.approx([0.0, 0.0] + [float(bags)] * (weeks - 2), abs=1e-6)
    assert plan.money.sales == pytest.approx(10.0 * bags * (weeks - 2), abs=1e-6)
    assert plan.money.materials == pytest.approx(-1.0 * bags * (weeks - 2), abs=1e-6)
    assert plan.report.objective == pytest.approx(9.0 * bags * (weeks - 2), abs=1e-4)
    assert plan.report.gap <= 1e-6


def test_steriliser_binds() -> None:
    """Ten places, one load a week: 10 bags, although 20 kg are ordered."""
    assert_bags_a_week(planned(tiny()), 10)


def test_orders_bind() -> None:
    """Six kilograms ordered: six bags in a drum of ten, and no more."""
    assert_bags_a_week(planned(tiny(), kg=6.0), 6)


def test_inoculation_hours_bind() -> None:
    """One person, two hours, four bags an hour: 8 bags a week."""
    assert_bags_a_week(planned(tiny(rates={"mix_bags_h": 100, "inoculate_bags_h": 4})), 8)


def test_benches_bind() -> None:
    """Three people but one bench: two bench-hours, four bags an hour, 8 bags a week."""
    crews = [
        {"code": "mixers", "people": 1, "skills": ["mix"], "shift": {"mon": "08:00-16:00"}},
        {"code": "lab", "people": 3, "skills": ["inoculate"], "shift": {"wed": "08:00-10:00"}},
        {"code": "rest", "people": 1, "skills": ["steam", "open", "pick"], "shift": every_day()},
    ]
    limits = {"cooled_to_inoculate_h": 72, "inoculation_benches": 1}
    assert_bags_a_week(planned(tiny(crew=crews, limits=limits, rates={"mix_bags_h": 100, "inoculate_bags_h": 4})), 8)


def rooms(shelf: int = 100, wet: int = 100, clean_days: int = 0, cool: int = 100) -> list[dict[str, object]]:
    return [
        {"code": "cool", "kind": "cooling", "places": cool, "temp_c": 15},
        {"code": "shelf", "kind": "colonisation", "places": shelf, "temp_c": 22},
        {"code": "wet", "kind": "fruiting", "places": wet, "temp_c": 15, "clean_days": clean_days},
    ]


def test_heat_of_the_room_binds() -> None:
    """A bag of 2 kg gives off 0.482 W on the fourth of its seven days (0.241 W/kg): 2.42 W carry five of them."""
    warm = rooms()
    warm[1]["cooling_w"] = 2.42
    assert_bags_a_week(planned(tiny(room=warm)), 5)


def test_heat_of_the_opening_stock_is_listed() -> None:
    """Eight bags of the Friday before pass 2.42 W on Monday (3.86 W) and Tuesday (2.67 W): no one can help it."""
    warm = rooms()
    warm[1]["cooling_w"] = 2.42
    farm = tiny(room=warm)
    stock = [StockLot(lot="27W02-AAA-1", strain="AAA", stage="colonising", bags=8, since=date(2027, 1, 15))]
    plan = plan_weeks(farm, [friday(20)], stock, START, 4, limits=EXACT)
    assert referee(farm, [friday(20)], stock, plan).violations == ()
    listed = {(fall.limit, fall.day.isoformat()): fall.amount for fall in plan.shortfalls}
    assert listed == pytest.approx(
        {("heat shelf", "2027-01-18"): 3.862 - 2.42, ("heat shelf", "2027-01-19"): 2.669 - 2.42}, abs=0.01
    )
    assert plan.money.over_limits == 0
    assert [run.bags["AAA"] for run in plan.runs] == [5] * (len(plan.all_weeks) - 2)


def test_colonisation_places_bind() -> None:
    """A bag holds its place for seven nights, Wednesday to Wednesday: 6 places are 6 bags a week."""
    assert_bags_a_week(planned(tiny(room=rooms(shelf=6))), 6)


def test_fruiting_places_bind() -> None:
    """Seven nights again: 5 places are 5 bags a week."""
    assert_bags_a_week(planned(tiny(room=rooms(wet=5))), 5)


def test_cooling_places_bind() -> None:
    """Unloaded on Tuesday, inoculated on Wednesday: 7 cooling places are 7 bags a run."""
    assert_bags_a_week(planned(tiny(room=rooms(cool=7))), 7)


def test_picking_hours_bind() -> None:
    """Picking at 0.5 kg an hour in eight hours: 4 kg each Wednesday, so 4 bags a week."""
    crews = [
        {"code": "mixers", "people": 1, "skills": ["mix"], "shift": {"mon": "08:00-16:00"}},
        {"code": "lab", "people": 1, "skills": ["inoculate"], "shift": {"wed": "08:00-10:00"}},
        {"code": "rest", "people": 1, "skills": ["steam", "open"], "shift": every_day()},
        {"code": "hands", "people": 1, "skills": ["pick"], "shift": every_day()},
    ]
    rates = {"mix_bags_h": 100, "inoculate_bags_h": 100, "pick_kg_h": 0.5}
    assert_bags_a_week(planned(tiny(crew=crews, rates=rates)), 4)


def test_clean_days_take_a_week_of_places() -> None:
    """With one day of cleaning a place is held eight nights: five places serve only every second week.

    Bags opened on Wednesday of week k free their places on Thursday of week k + 1, after that week's opening; the
    places of one week's bags therefore rest until the opening of week k + 2. Any split of five bags over two weeks
    that follow each other sells the same: 5 kg in two weeks. N - 2 loads in a row hold ceil((N - 2) / 2) x 5 bags.
    """
    plan = planned(tiny(room=rooms(wet=5, clean_days=1)))
    loads = len(plan.all_weeks) - 2
    assert sum(sum(run.bags.values()) for run in plan.runs) == 5 * -(-loads // 2)
    assert plan.report.objective == pytest.approx(9.0 * 5 * -(-loads // 2), abs=1e-4)


def test_losses_are_whole_bags_and_come_off_the_sales() -> None:
    """Ten bags a week, 20 % lost on the ready day: 8 kg a week from 10 bags."""
    plan = planned(tiny(strain=[strain(loss_pct=20)]))
    loads = len(plan.all_weeks) - 2
    assert [event.lost for event in plan.inoculations] == [2] * loads
    assert plan.money.sales == pytest.approx(10.0 * 8 * loads)
    assert plan.money.materials == pytest.approx(-1.0 * 10 * loads)


def test_wages_are_paid_for_hours_worked() -> None:
    """Hours a bag: mix 1/100, load 1/250, unload 1/230, inoculate 1/100, open 1/120, discard 1/150, pick 1/12."""
    crews = [
        {"code": "mixers", "people": 1, "skills": ["mix"], "shift": {"mon": "08:00-16:00"}, "cost_per_h": 10},
        {"code": "lab", "people": 1, "skills": ["inoculate"], "shift": {"wed": "08:00-10:00"}, "cost_per_h": 10},
        {"code": "rest", "people": 1, "skills": ["steam", "open", "pick"], "shift": every_day(), "cost_per_h": 10},
    ]
    plan = planned(tiny(crew=crews))
    hours = 1 / 100 + 1 / 250 + 1 / 230 + 1 / 100 + 1 / 120 + 1 / 150 + 1 / 12
    bags = 10 * (len(plan.all_weeks) - 2)
    assert plan.money.labour == pytest.approx(-10 * hours * bags)


def test_nothing_is_made_that_loses_money() -> None:
    """At 0.90 a kilogram a bag of 1.00 is not worth filling; without a shortage price the best plan is empty."""
    farm = tiny()
    plan = plan_weeks(farm, [friday(20.0, price=0.9)], [], START, 4, limits=EXACT)
    assert plan.runs == ()
    assert plan.report.objective == pytest.approx(0.0)


def test_second_flush_is_dumped_while_bags_queue_and_kept_when_they_do_not() -> None:
    """Two flushes of 0.6 and 0.4 kg, seven days apart, five fruiting places and orders without end.

    A place used for a week gives 0.6 kg from a first flush or 0.4 kg from a second. A fresh bag costs 1.00 and sells
    6.00, so it pays 5.00 a place and week; the second flush pays 4.00 and costs nothing. While fresh bags can be
    had, second flushes are dumped; when a fresh bag costs 3.00 (materials at 1.50 a kilogram), a first flush pays
    3.00 a week and is worth less than the second: bags are then kept for both (3.50 a week on the average).
    """
    two = [strain(flush_share=[0.6, 0.4])]
    cheap = planned(tiny(room=rooms(wet=5), strain=two), weeks=6)
    dear_mix = [{"code": "mix", "water_pct": 50, "density_kg_m3": 500, "cost_per_kg": 1.5}]
    dear = planned(tiny(room=rooms(wet=5), strain=two, recipe=dear_mix), weeks=6)

    def kept(plan: Plan) -> set[int]:
        return {opening.flushes for opening in plan.openings if opening.day < plan.all_weeks[-4].monday}

    assert kept(cheap) == {1}
    assert kept(dear) == {2}


def planned_for(farm: Farm, book: list[Order], stock: list[StockLot] | None = None, weeks: int = 4) -> Plan:
    plan = plan_weeks(farm, book, stock or [], START, weeks, limits=EXACT)
    assert [violation.sentence() for violation in referee(farm, book, stock or [], plan).violations] == []
    return plan


def test_a_customer_takes_another_strain_instead() -> None:
    """BBB is loaded on the same Mondays, but is not in its room: no colonisation room suits it.

    12 kg of BBB are ordered at 10.00; the drum of ten gives 10 kg of AAA at nine tenths of the price.
    """
    farm = tiny(strain=[strain(), strain("BBB", t_min_c=24, t_opt_c=28, t_max_c=31, colonise_at_c=25)])
    plain = planned_for(farm, [friday(12.0, code="BBB"), friday(0.5)])
    assert sum(item.kg for item in plain.deliveries if item.strain == "BBB") == 0
    plan = planned_for(farm, [friday(12.0, code="BBB", accepts=("AAA",)), friday(0.5)])
    served = [item for item in plan.deliveries if item.strain == "BBB" and item.kg > 0]
    assert [item.kg for item in served] == pytest.approx([9.5] * (len(plan.all_weeks) - 2))
    assert all(item.instead == pytest.approx({"AAA": item.kg}) for item in served)
    assert plan.money.sales == pytest.approx(len(served) * (9.5 * 9.0 + 0.5 * 10.0), abs=1e-4)


def test_all_or_nothing() -> None:
    """Ten bags a week. Of 12 kg at 10.00 no part is taken; 6 kg at 5.00 are filled, and 4 bags are not made."""
    whole = friday(12.0, part=False)
    plan = planned_for(tiny(), [whole, friday(6.0, price=5.0)])
    assert all(item.kg == 0 for item in plan.deliveries if item.ordered_kg == 12)
    assert [run.bags["AAA"] for run in plan.runs] == [6] * (len(plan.all_weeks) - 2)
    easier = planned_for(tiny(), [friday(9.0, part=False), friday(6.0, price=5.0)])
    weeks = len(easier.all_weeks) - 2
    assert sorted(item.kg for item in easier.deliveries if item.kg) == pytest.approx([1.0] * weeks + [9.0] * weeks)


def test_a_shortage_is_shared_fairly() -> None:
    """10 kg for 12 and 8 kg wanted at one price and priority: half of it each; the dearer order comes first."""
    alike = planned_for(tiny(), [friday(12.0), friday(8.0)])
    last = alike.deliveries[-1].day
    assert {item.ordered_kg: item.kg for item in alike.deliveries if item.day == last} == pytest.approx({12: 6, 8: 4})
    other = planned_for(tiny(), [friday(12.0), friday(8.0, price=11.0)])
    assert {item.ordered_kg: item.kg for item in other.deliveries if item.day == last} == pytest.approx({12: 2, 8: 8})


def test_the_spot_price_falls() -> None:
    """6 kg ordered at 10.00, 2 kg go at 5.00, 1 kg at 2.50; at 0.50 a bag costs 1.00: nine bags, not ten."""
    market = {
        "shortage_per_kg": 0, "spot_price_share": 0.5, "spot_kg_week": 2, "spot_more_price_share": 0.25,
        "spot_more_kg_week": 1,
    }  # fmt: skip
    plan = planned_for(tiny(market=market), [friday(6.0)])
    weeks = len(plan.all_weeks) - 2
    assert sum(run.bags["AAA"] for run in plan.runs) == 9 * weeks
    assert plan.money.spot == pytest.approx(weeks * (2 * 5.0 + 1 * 2.5), abs=1e-4)
    assert sum(sale.cheap_kg for sale in plan.surplus) == pytest.approx(weeks)
    cheaper = planned_for(tiny(market=market | {"spot_more_price_share": 0.05}), [friday(6.0)])
    assert sum(run.bags["AAA"] for run in cheaper.runs) == 8 * weeks
