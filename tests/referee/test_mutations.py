"""A good plan is broken in one place at a time; the referee names the rule that broke.

The plan is the paper farm's: ten bags loaded every Monday, inoculated on Wednesday, opened a week later, picked a week
after that, sold on Friday.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace
from datetime import timedelta
from functools import lru_cache
from typing import Any

import pytest

from models.calendar import Week
from models.farm import Farm, Order
from models.plan import Account, Plan, Shortfall, Surplus
from scheduler.planning import SolveLimits, plan_weeks
from scheduler.referee import referee
from tests.planning.tiny import every_day, friday, strain, tiny

DAY = timedelta(days=1)
Mutation = Callable[[Plan], Plan]


def farm() -> Farm:
    crews = [
        {"code": "mixers", "people": 1, "skills": ["mix"], "shift": {"mon": "08:00-16:00"}, "cost_per_h": 10},
        {"code": "lab", "people": 1, "skills": ["inoculate"], "shift": {"wed": "08:00-10:00"}, "cost_per_h": 10},
        {"code": "rest", "people": 1, "skills": ["steam", "open"], "shift": every_day(), "cost_per_h": 10},
        {"code": "hands", "people": 1, "skills": ["pick"], "shift": {"wed": "08:00-16:00"}, "cost_per_h": 10},
    ]
    rooms = [
        {"code": "cool", "kind": "cooling", "places": 10, "temp_c": 15},
        {"code": "shelf", "kind": "colonisation", "places": 10, "temp_c": 22},
        {"code": "cold", "kind": "cold-hold", "places": 5, "temp_c": 3},
        {"code": "wet", "kind": "fruiting", "places": 10, "temp_c": 15},
        {"code": "warm", "kind": "fruiting", "places": 10, "temp_c": 25},
    ]
    site = {"name": "Paper Farm", "timezone": "Europe/Dublin", "ambient_c": 15, "supply_kw": 4.5}
    cards = [strain(loss_pct=10, spawn_cost_per_kg=5), strain("BBB", programme="long")]
    programmes = [
        {"code": "hot", "target_core_c": 90, "hold_h": 10},
        {"code": "long", "target_core_c": 90, "hold_h": 12},
    ]
    return tiny(
        crew=crews, room=rooms, site=site, strain=cards, programme=programmes, tariff={"default": 0.2},
        market={"shortage_per_kg": 3, "spot_kg_week": 1},
    )  # fmt: skip


def orders() -> list[Order]:
    return [friday(12.0)]


@lru_cache(maxsize=1)
def good_plan() -> Plan:
    return plan_weeks(farm(), orders(), [], Week.parse("2027-W03"), 4, limits=SolveLimits(gap=1e-6, seconds=20))


def first(kind: str, **changes: Any) -> Mutation:
    """Change the first thing of a kind."""

    def change(plan: Plan) -> Plan:
        things = getattr(plan, kind)
        return replace(plan, **{kind: (replace(things[0], **changes), *things[1:])})

    return change


def moved(kind: str, field: str, by: Any) -> Mutation:
    """Move a number or day of the first thing of a kind."""

    def change(plan: Plan) -> Plan:
        thing = getattr(plan, kind)[0]
        return first(kind, **{field: getattr(thing, field) + by})(plan)

    return change


def without(kind: str) -> Mutation:
    """Leave the first thing of a kind out."""
    return lambda plan: replace(plan, **{kind: getattr(plan, kind)[1:]})


def twice(kind: str) -> Mutation:
    """Have the first thing of a kind twice."""
    return lambda plan: replace(plan, **{kind: (getattr(plan, kind)[0], *getattr(plan, kind))})


def picks(**changes: Any) -> Mutation:
    """Change the first pick of the first opening."""

    def change(plan: Plan) -> Plan:
        opening = plan.openings[0]
        pick = replace(opening.picks[0], **changes)
        return replace(plan, openings=(replace(opening, picks=(pick, *opening.picks[1:])), *plan.openings[1:]))

    return change


def money(line: str) -> Mutation:
    """Add one to a line of the account."""
    return lambda plan: replace(plan, money=replace(plan.money, **{line: getattr(plan.money, line) + 1.0}))


def report(**changes: Any) -> Mutation:
    """Change the report."""
    return lambda plan: replace(plan, report=replace(plan.report, **changes))


MUTATIONS: list[tuple[str, Mutation, str]] = [
    ("one bag too many for the load", first("runs", bags={"AAA": 11}), "run-load"),
    ("no bags in a run", first("runs", bags={}), "run-load"),
    ("half a bag", first("runs", bags={"AAA": 9.5}), "run-load"),
    ("a load step the steriliser does not have", first("runs", load_step=0.5), "run-load"),
    ("a strain of another programme", first("runs", bags={"BBB": 10}), "run-load"),
    ("mixing before the shift", moved("runs", "mix_start", -480), "run-mix"),
    ("mixing too short", moved("runs", "mix_start", 5), "run-mix"),
    ("mix that sours", moved("runs", "mix_start", -420), "run-souring"),
    ("loading at night", moved("runs", "load_start", -1440), "run-loading"),
    ("steam on before loading has ended", moved("runs", "steam_on", -1), "run-loading"),
    ("steam half an hour short", moved("runs", "ready", -30), "run-cycle"),
    ("unloading before ready", moved("runs", "unload", -600), "run-unload"),
    ("unloading too fast", moved("runs", "unloaded", -1), "run-unload"),
    ("a unit that is not there", first("runs", unit=2), "run-overlap"),
    ("the same run twice", twice("runs"), "run-overlap"),
    ("cool too soon", moved("runs", "cooled", -1), "run-cooled"),
    ("energy made cheaper", moved("runs", "energy_cost", -0.5), "run-energy"),
    ("a wrong run code", first("runs", code="27W03-R9"), "codes"),
    ("a run left out", without("runs"), "codes"),
    ("a lot with a bag more", moved("lots", "bags", 1), "codes"),
    ("inoculation a day late", moved("inoculations", "day", DAY), "inoculate-day"),
    ("inoculation before the bags are cool", moved("inoculations", "day", -7 * DAY), "inoculate-day"),
    ("a bag inoculated twice", moved("inoculations", "bags", 1), "bags"),
    ("an inoculation left out", without("inoculations"), "bags"),
    ("ready a day early", moved("inoculations", "ready_day", -DAY), "colonise"),
    ("colonising in the fruiting room", first("inoculations", room="wet"), "colonise"),
    ("no loss counted", first("inoculations", lost=-1), "lost"),
    ("too much loss counted", moved("inoculations", "lost", 2), "lost"),
    ("opened before ready", moved("openings", "day", -DAY), "ready-wait"),
    ("opened a day late", moved("openings", "day", DAY), "ready-wait"),
    ("a bag opened that was lost", moved("openings", "bags", 1), "bags"),
    ("an opening left out", without("openings"), "bags"),
    ("fruiting too warm", first("openings", room="warm"), "fruiting-climate"),
    ("a flush too many", moved("openings", "flushes", 1), "flush-days"),
    ("leaving a day early", moved("openings", "leave_day", -DAY), "flush-days"),
    ("ripe kilograms made up", picks(ripe_kg=99.0), "kg"),
    ("more picked than ripe", picks(kg=99.0), "kg"),
    ("no hours for a crew", first("labour", hours=0.0), "labour"),
    ("hours by a crew without the skill", first("labour", crew="hands"), "labour"),
    ("hours twice", twice("labour"), "labour"),
    ("an order day left out", without("deliveries"), "deliver"),
    ("an order day twice", twice("deliveries"), "deliver"),
    ("a shortage hidden", first("deliveries", short_kg=0.0), "deliver"),
    ("a strain given that is not accepted", lambda plan: replace(
        plan, deliveries=(*plan.deliveries[:-1], replace(plan.deliveries[-1], instead={"BBB": 1.0}))), "substitute"),
    ("more at the low price than it takes", lambda plan: replace(
        plan, surplus=(*plan.surplus, Surplus("AAA", plan.first_day + 18 * DAY, 1.0, 0.0, 1.0))), "spot"),
    ("all called unavoidable", lambda plan: replace(
        plan, deliveries=tuple(replace(d, unavoidable_kg=d.short_kg) for d in plan.deliveries)), "unavoidable"),
    ("kilograms from nowhere", lambda plan: replace(
        plan, surplus=(*plan.surplus, Surplus("AAA", plan.first_day + 2 * DAY, 1.0, 0.0))), "freshness"),
    ("more on the spot than it takes", lambda plan: replace(
        plan, surplus=(*plan.surplus, Surplus("AAA", plan.first_day + 18 * DAY, 5.0, 0.0))), "spot"),
    ("a shortfall that is none", lambda plan: replace(
        plan, shortfalls=(Shortfall("places wet", plan.first_day, 3.0, "places"),)), "places"),
    ("an objective made up", report(objective=1e6), "gap"),
    ("a gap made up", report(gap=0.5), "gap"),
    *[(f"one more in {line}", money(line), "money") for line in Account.__dataclass_fields__],
    ("a lot that does not exist", first("openings", lot="27W01-AAA-9"), "malformed"),
    ("a room that does not exist", first("openings", room="attic"), "malformed"),
]  # fmt: skip


def test_good_plan_passes() -> None:
    verdict = referee(farm(), orders(), [], good_plan())
    assert [violation.sentence() for violation in verdict.violations] == []
    assert verdict.checked > 300


@pytest.mark.parametrize(("what", "mutation", "rule"), MUTATIONS, ids=[row[0] for row in MUTATIONS])
def test_broken_plan_is_caught(what: str, mutation: Mutation, rule: str) -> None:
    del what
    verdict = referee(farm(), orders(), [], mutation(good_plan()))
    assert rule in {violation.rule for violation in verdict.violations}
    assert all(rule_text.startswith("[") for rule_text in (v.sentence() for v in verdict.violations))


def test_places_are_counted_to_the_bag() -> None:
    """Taking one place away from each room in turn breaks the full plan in that room."""
    plan = good_plan()
    for code, kind in (("shelf", "places"), ("wet", "places"), ("cool", "cooling-places")):
        card = farm().model_dump(by_alias=True)
        for room in card["room"]:
            if room["code"] == code:
                room["places"] = 8
        verdict = referee(Farm.model_validate(card), orders(), [], plan)
        assert kind in {violation.rule for violation in verdict.violations}, code


def test_part_of_an_order_that_takes_none_is_caught() -> None:
    """The plan fills 9 of 12 kg; a customer who takes all or nothing gets none."""
    picky = [order.model_copy(update={"part": False}) for order in orders()]
    verdict = referee(farm(), picky, [], good_plan())
    assert "part" in {violation.rule for violation in verdict.violations}


def test_heat_of_a_room_is_held_by_the_day() -> None:
    """Ten bags a week give off 4.8 W at their peak, more than 4 W, less than 5 W."""
    for cooling_w, broken in ((4.0, True), (5.0, False)):
        card = farm().model_dump(by_alias=True)
        for room in card["room"]:
            if room["code"] == "shelf":
                room["cooling_w"] = cooling_w
        verdict = referee(Farm.model_validate(card), orders(), [], good_plan())
        assert ("room-heat" in {violation.rule for violation in verdict.violations}) == broken


def test_supply_is_held_by_the_quarter_hour() -> None:
    """A 4 kW element beside a base load of 1 kW passes a supply of 4.5 kW."""
    card = farm().model_dump(by_alias=True)
    card["site"]["base_load_kw"] = 1.0
    verdict = referee(Farm.model_validate(card), orders(), [], good_plan())
    assert "supply" in {violation.rule for violation in verdict.violations}
