"""What a strain's card says of cores, fruiting rooms, flush losses and the store, seen in plans made on paper.

The farm is that of `tests.planning.tiny`: ten bags of 1 kg a week, loaded on Monday, inoculated on Wednesday, opened a
week later, picked a week after that, sold on Friday. Each plan must also pass the referee.
"""

from __future__ import annotations

from datetime import timedelta

import pytest

from models.calendar import Week
from models.farm import Farm, StockLot
from models.plan import Plan
from scheduler.planning import SolveLimits, plan_weeks
from scheduler.referee import referee
from tests.planning.tiny import friday, strain, tiny

START = Week.parse("2027-W03")
EXACT = SolveLimits(gap=1e-7, seconds=30)


def planned(farm: Farm, stock: tuple[StockLot, ...] = (), kg: float = 20.0, weeks: int = 4) -> Plan:
    plan = plan_weeks(farm, [friday(kg)], list(stock), START, weeks, limits=EXACT)
    assert [violation.sentence() for violation in referee(farm, [friday(kg)], list(stock), plan).violations] == []
    return plan


def rooms(*temperatures: float, shelf: float = 22) -> list[dict[str, object]]:
    return [
        {"code": "cool", "kind": "cooling", "places": 100, "temp_c": 15},
        {"code": "shelf", "kind": "colonisation", "places": 100, "temp_c": shelf},
        *({"code": f"wet{k}", "kind": "fruiting", "places": 100, "temp_c": t} for k, t in enumerate(temperatures)),
    ]


def test_a_second_flush_is_picked_from_the_bags_that_are_left() -> None:
    """0.6 kg from each of ten bags, then 0.4 kg from each of the eight that 20 % of losses leave."""
    plan = planned(tiny(strain=[strain(flush_share=[0.6, 0.4], flush_loss_pct=20)]), weeks=5)
    both = [opening for opening in plan.openings if opening.flushes == 2]
    assert both
    for opening in both:
        assert [pick.ripe_kg for pick in opening.picks] == pytest.approx(
            [0.6 * opening.bags, 0.8 * 0.4 * opening.bags][: len(opening.picks)]
        )


def test_bags_in_stock_are_those_that_stand() -> None:
    """Twenty bags are left after the first flush: the second comes from all of them, the third from 75 %."""
    card = strain(flush_share=[0.5, 0.3, 0.2], flush_loss_pct=25, shelf_life_days=9)
    lot = StockLot(
        lot="27W01-AAA-1", strain="AAA", stage="fruiting", bags=20, since=START.monday - timedelta(days=9),
        room="wet", flushes_picked=1,
    )  # fmt: skip
    plan = planned(tiny(strain=[card]), (lot,))
    picks = [pick for opening in plan.openings if opening.before for pick in opening.picks]
    assert [(pick.flush, pick.ripe_kg) for pick in picks] == [
        (2, pytest.approx(20 * 0.3)),
        (3, pytest.approx(20 * 0.75 * 0.2)),
    ]


def test_each_fruiting_room_has_its_own_days() -> None:
    """Stated for 15 °C at a Q10 of 4, seven days become four at 20 °C (3.5) and stay seven at 15 °C."""
    card = strain(fruit_at_c=15, fruit_q10=4, shelf_life_days=9)
    for temperature, days in ((15.0, 7), (20.0, 4)):
        plan = planned(tiny(strain=[card], room=rooms(temperature)))
        found = {(pick.day - opening.day).days for opening in plan.openings for pick in opening.picks}
        assert found == {days}


def test_two_fruiting_rooms_at_once() -> None:
    """Where both rooms are open to a strain, each bag is picked by the days of the room it stands in."""
    card = strain(fruit_at_c=15, fruit_q10=4, flush_share=[0.7, 0.3], shelf_life_days=6)
    plan = planned(tiny(strain=[card], room=rooms(15.0, 20.0)))
    days = {"wet0": [7, 14], "wet1": [4, 8]}
    for opening in plan.openings:
        assert [(pick.day - opening.day).days for pick in opening.picks] == days[opening.room][: len(opening.picks)]


def test_a_fruiting_lot_of_the_stock_follows_its_room() -> None:
    """Opened three days before the plan at 20 °C: four days after opening, on the second day of the plan."""
    card = strain(fruit_at_c=15, fruit_q10=4, flush_share=[0.7, 0.3])
    lot = StockLot(
        lot="27W01-AAA-1", strain="AAA", stage="fruiting", bags=10, since=START.monday - timedelta(days=3), room="wet0"
    )
    plan = planned(tiny(strain=[card], room=rooms(20.0)), (lot,))
    picks = [pick for opening in plan.openings if opening.before for pick in opening.picks]
    assert [(pick.day - START.monday).days for pick in picks] == [1, 5][: len(picks)]


def test_a_warm_store_shortens_the_sale() -> None:
    """Picked on Wednesday for Friday: two days in the store. Three days at 2 °C are one at 12 °C: nothing is sold."""
    card = strain(shelf_life_at_c=2)
    site = {"name": "Paper Farm", "timezone": "Europe/Dublin", "ambient_c": 15}
    cold = planned(tiny(strain=[card], site=site | {"cold_store_c": 2}))
    assert cold.money.sales == pytest.approx(planned(tiny()).money.sales)
    assert planned(tiny(strain=[card], site=site | {"cold_store_c": 12})).money.sales == pytest.approx(0.0)


def test_self_heating_lets_a_cool_shelf_run_faster() -> None:
    """At 18 °C the card's seven days become 9.2, and 7.4 with cores 4 °C above the room."""
    spans = []
    for excess in (0.0, 4.0):
        card = strain(self_heating_k=excess, shelf_life_days=9)
        plan = planned(tiny(strain=[card], room=rooms(15.0, shelf=18)), weeks=5)
        spans.append({(event.ready_day - event.day).days for event in plan.inoculations})
    assert spans == [{10}, {8}]


@pytest.mark.parametrize(
    ("planned_with", "true", "rules"),
    [
        ({}, {"flush_loss_pct": 20}, {"kg"}),
        ({"flush_loss_pct": 20}, {"flush_loss_pct": 10}, {"kg"}),
        ({}, {"fruit_at_c": 20, "fruit_q10": 3}, {"flush-days"}),
        ({}, {"self_heating_k": 9}, {"colonise"}),
        ({}, {"shelf_life_at_c": 1}, {"freshness"}),
    ],
)
def test_a_plan_made_for_another_card_does_not_pass(planned_with, true, rules) -> None:
    """The referee counts by the card it is given, and names the rule that broke."""
    card = {"flush_share": [0.6, 0.4], "shelf_life_days": 9}
    site = {"name": "Paper Farm", "timezone": "Europe/Dublin", "ambient_c": 15, "cold_store_c": 11}
    made = planned(tiny(site=site, strain=[strain(**card, **planned_with)], room=rooms(15.0, shelf=18)), weeks=5)
    assert made.openings
    farm = tiny(site=site, strain=[strain(**card, **true)], room=rooms(15.0, shelf=18))
    assert rules <= {violation.rule for violation in referee(farm, [friday(20.0)], [], made).violations}
