"""Sales: orders, freshness, the spot market, and what could not be avoided."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Sequence
from datetime import date, timedelta

from models.calendar import Week
from models.farm import Strain
from models.growth.colonisation import days_to_ready
from models.growth.shelf_life import selling_days
from models.plan import Delivery
from scheduler.referee.bags import stock_flush_days
from scheduler.referee.case import Case
from scheduler.referee.earliest import first_ripe, quickest_flushes


def check_sales(case: Case) -> None:
    """Hold deliveries against orders and against what was picked in time."""
    _deliveries(case)
    _fresh(case)
    _spot(case)
    _unavoidable(case)


def _deliveries(case: Case) -> None:
    wanted: dict[tuple[int, date], float] = {}
    for index, order in enumerate(case.orders):
        for week in case.plan.all_weeks:
            day = order.day_in(week)
            if day is not None:
                wanted[index, day] = order.kg
    seen: set[tuple[int, date]] = set()
    for item in case.plan.deliveries:
        key = (item.order, item.day)
        where = f"order {item.order + 1} ({item.customer}) on {item.day}"
        case.expect("deliver", where, key in wanted and key not in seen, item.day, "a delivery day of the order, once")
        seen.add(key)
        case.equal("deliver", f"{where}, ordered", item.ordered_kg, wanted.get(key, 0.0), "kg", 1e-6)
        case.expect(
            "deliver", where, -1e-9 <= item.kg <= item.ordered_kg + 1e-6, item.kg, f"0 to {item.ordered_kg:g}", "kg"
        )
        case.equal("deliver", f"{where}, short", item.short_kg, item.ordered_kg - item.kg, "kg", 1e-6)
        if 0 <= item.order < len(case.orders):
            order = case.orders[item.order]
            same = (order.customer, order.strain) == (item.customer, item.strain)
            case.expect("deliver", where, same, (item.customer, item.strain), (order.customer, order.strain))
            if not order.part:
                whole = min(abs(item.kg), abs(item.kg - item.ordered_kg)) <= 1e-6
                case.expect("part", where, whole, f"{item.kg:g}", f"0 or {item.ordered_kg:g}", "kg")
            others = set(item.instead) <= set(order.accepts) and min(item.instead.values(), default=0.0) >= -1e-9
            case.expect("substitute", where, others, sorted(item.instead), order.accepts)
            case.at_most("substitute", where, sum(item.instead.values()), item.kg, "kg", 1e-6)
        ok = -1e-9 <= item.unavoidable_kg <= item.short_kg + 1e-6
        case.expect("unavoidable", where, ok, item.unavoidable_kg, f"0 to {item.short_kg:g}", "kg")
    case.expect("deliver", "deliveries", len(seen) == len(wanted), len(seen), f"all {len(wanted)} order days")


def _fresh(case: Case) -> None:
    """By strain, running totals: nothing sold before it is picked, nothing left when it is past its life."""
    picked: dict[str, dict[date, float]] = defaultdict(lambda: defaultdict(float))
    out: dict[str, dict[date, float]] = defaultdict(lambda: defaultdict(float))
    for opening in case.plan.openings:
        for pick in opening.picks:
            picked[case.lots[opening.lot].strain][pick.day] += pick.kg
    for item in case.plan.deliveries:
        out[item.strain][item.day] += item.kg - sum(item.instead.values())
        for code, kg in item.instead.items():
            out[code][item.day] += kg
    for sale in case.plan.surplus:
        ok = min(sale.spot_kg, sale.spoiled_kg) >= -1e-9 and case.inside(sale.day)
        case.expect(
            "freshness", f"{sale.strain} on {sale.day}", ok, (sale.spot_kg, sale.spoiled_kg), "kilograms, in the plan"
        )
        out[sale.strain][sale.day] += sale.spot_kg + sale.spoiled_kg
    for code in {*picked, *out}:
        life = selling_days(case.farm.strain_called(code), case.farm.site.cold_store_c)
        sold = grown = 0.0
        stale: list[float] = []
        for offset in range(case.days):
            day = case.first + timedelta(days=offset)
            grown += picked[code][day]
            sold += out[code][day]
            stale.append(grown)
            case.at_most("freshness", f"{code} sold by {day}", sold, grown, "kg")
            if offset >= life:
                old = stale[offset - life]
                ok = sold >= old - max(0.005, 1e-6 * old)
                case.expect("freshness", f"{code} gone by {day}", ok, f"{sold:g}", f"at least {old:g}", "kg")


def _spot(case: Case) -> None:
    dear: dict[Week, float] = defaultdict(float)
    cheap: dict[Week, float] = defaultdict(float)
    for sale in case.plan.surplus:
        ok = -1e-9 <= sale.cheap_kg <= sale.spot_kg + 1e-9
        case.expect("spot", f"{sale.strain} on {sale.day}", ok, sale.cheap_kg, f"0 to {sale.spot_kg:g}", "kg")
        dear[Week.of(sale.day)] += sale.spot_kg - sale.cheap_kg
        cheap[Week.of(sale.day)] += sale.cheap_kg
    for week, kg in dear.items():
        case.at_most("spot", str(week), kg, case.farm.market.spot_kg_week, "kg")
        case.at_most("spot", f"{week}, cheap", cheap[week], case.farm.market.spot_more_kg_week, "kg")


def _unavoidable(case: Case) -> None:
    """No more is called unavoidable than the orders pass all that could be ripe by then."""
    for strain in case.farm.strain:
        items = [item for item in case.plan.deliveries if item.strain == strain.code]
        if not any(item.unavoidable_kg > 1e-9 for item in items):
            continue
        first = first_ripe(case, strain)
        supply = _stock_supply(case, strain)
        lost = 0.0
        for item in sorted(items, key=lambda i: (i.day, i.order)):
            where = f"{strain.code} by {item.day}"
            others = [case.farm.strain_called(code) for code in case.orders[item.order].accepts]
            if item.day >= min([first, *(first_ripe(case, other) for other in others)]):
                case.at_most("unavoidable", where, item.unavoidable_kg, 0.0, "kg")
                continue
            ripe = sum(kg for other in others for day, kg in _stock_supply(case, other) if day <= item.day)
            case.at_most("unavoidable", where, item.unavoidable_kg, max(0.0, item.ordered_kg - ripe), "kg")
            lost += item.unavoidable_kg
            case.at_most("unavoidable", where, lost, _peak(case, items, supply, item.day), "kg")


def _peak(case: Case, items: Sequence[Delivery], supply: Sequence[tuple[date, float]], until: date) -> float:
    """Kilograms short by a day when every order takes what is ripe as it comes."""
    given = short = 0.0
    for item in sorted(items, key=lambda i: (i.day, i.order)):
        if item.day > until:
            break
        ripe = sum(kg for day, kg in supply if day <= item.day)
        served = min(item.ordered_kg, max(0.0, ripe - given))
        if served < item.ordered_kg and not case.orders[item.order].part:
            served = 0.0
        given += served
        short += item.ordered_kg - served
    return short


def _stock_supply(case: Case, strain: Strain) -> list[tuple[date, float]]:
    """Everything the opening stock could give, from the first day it could."""
    kg = case.flush_kg(strain)
    found: list[tuple[date, float]] = []
    for row in case.stock:
        if row.strain != strain.code:
            continue
        if row.stage == "fruiting":
            days = stock_flush_days(case, strain, row)
            picked = len(kg) - len(days)
            left = case.flush_kg(strain, picked)[picked:]
            found += [(day, row.bags * share) for day, share in zip(days, left, strict=True)]
            continue
        start = max(case.first, row.since)
        if row.stage in ("ready", "cold-held"):
            start = case.next_working(start, "open")
        else:
            rooms = [r for r in case.farm.rooms_of("colonisation") if strain.grows_in(r.temp_c)]
            span = min((days_to_ready(strain, room.temp_c) for room in rooms), default=0)
            ready = max(case.first, row.since + timedelta(days=span)) if row.stage == "colonising" else case.first
            if row.stage == "cooled":
                ready = case.first + timedelta(days=span)
            start = case.next_working(ready, "open")
        found += [
            (start + after, row.bags * share) for after, share in zip(quickest_flushes(case, strain), kg, strict=True)
        ]
    return found
