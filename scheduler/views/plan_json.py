"""A plan as one JSON document, ``bagweek/plan/1``."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any
from zoneinfo import ZoneInfo

from models.calendar import FarmClock, Week
from models.farm import Farm, Order
from models.plan import MONEY_LINES, Plan
from scheduler.referee import Verdict
from scheduler.weekly import WeekRow, weekly

Document = dict[str, Any]


def plan_document(farm: Farm, orders: Sequence[Order], plan: Plan, verdict: Verdict) -> Document:
    """Everything about a plan, in a fixed order.

    Times are ISO 8601 with offset, weeks ``2027-W03``, money in currency units, masses in kg. ``money`` adds up to
    ``objective`` and covers the look-ahead weeks too; runs and lots of those weeks are marked.
    """
    clock = FarmClock(plan.first_day, ZoneInfo(farm.site.timezone))
    rows = weekly(farm, orders, plan, clock)
    report = plan.report
    return {
        "schema": "bagweek/plan/1",
        "farm": farm.site.name,
        "currency": farm.site.currency,
        "first_week": str(plan.first_week),
        "look_ahead_weeks": plan.look_ahead_weeks,
        "weeks": [_week(row) for row in rows[: plan.weeks]],
        "runs": [_run(plan, clock, run) for run in plan.runs],
        "lots": _lots(plan, clock),
        "money": {line: _money(getattr(plan.money, line)) for line in MONEY_LINES},
        "money_weeks": _money(sum(row.money for row in rows[: plan.weeks])),
        "objective": _money(report.objective),
        "bound": _money(report.bound),
        "gap": round(report.gap, 6),
        "status": report.status,
        "stop": report.stop,
        "seconds": round(report.seconds, 2),
        "relaxation_seconds": round(report.relaxation_seconds, 2),
        "seed": report.seed,
        "versions": report.versions,
        "limits": report.limits,
        "size": report.size,
        "shortfalls": _shortfalls(plan),
        "deliveries": [
            {
                "customer": item.customer,
                "strain": item.strain,
                "day": item.day.isoformat(),
                "ordered_kg": _kg(item.ordered_kg),
                "kg": _kg(item.kg),
                "short_kg": _kg(item.short_kg),
                "unavoidable_kg": _kg(item.unavoidable_kg),
                "instead": {code: _kg(kg) for code, kg in item.instead.items()},
            }
            for item in plan.deliveries
        ],
        "assumptions": list(plan.assumptions),
        "referee": {
            "checked": verdict.checked,
            "violations": [violation.sentence() for violation in verdict.violations],
        },
    }


def _money(value: float) -> float:
    return round(value, 2) + 0.0


def _kg(value: float) -> float:
    return round(value, 3) + 0.0


def _week(row: WeekRow) -> Document:
    return {
        "week": str(row.week),
        "bags": row.bags,
        "runs": row.runs,
        "kg": {code: _kg(kg) for code, kg in row.kg.items()},
        "orders_kg": _kg(row.orders_kg),
        "short_kg": _kg(row.short_kg),
        "unavoidable_kg": _kg(row.unavoidable_kg),
        "room_peak": row.room_peak,
        "labour_h": round(row.labour_h, 2) + 0.0,
        "money": _money(row.money),
    }


def _run(plan: Plan, clock: FarmClock, run: Any) -> Document:
    moments = ("mix_start", "load_start", "steam_on", "ready", "unload", "unloaded", "cooled")
    return {
        "code": run.code,
        "steriliser": run.steriliser,
        "unit": run.unit,
        "programme": run.programme,
        "load_step": run.load_step,
        **{name: clock.at(getattr(run, name)).isoformat() for name in moments},
        "bags": run.bags,
        "lots": [lot.code for lot in plan.lots if lot.run == run.code],
        "energy_kwh": round(run.energy_kwh, 2),
        "energy_cost": _money(run.energy_cost),
        "look_ahead": clock.day_index(run.load_start) >= 7 * plan.weeks,
    }


def _lots(plan: Plan, clock: FarmClock) -> list[Document]:
    inoculated: dict[str, list[Any]] = {}
    opened: dict[str, list[Any]] = {}
    for event in plan.inoculations:
        inoculated.setdefault(event.lot, []).append(event)
    for opening in plan.openings:
        opened.setdefault(opening.lot, []).append(opening)
    ahead = {run.code: clock.day_index(run.load_start) >= 7 * plan.weeks for run in plan.runs}
    documents = []
    for lot in plan.lots:
        starts, openings = inoculated.get(lot.code, []), opened.get(lot.code, [])
        picks: dict[str, float] = {}
        for opening in openings:
            for pick in opening.picks:
                picks[pick.day.isoformat()] = picks.get(pick.day.isoformat(), 0.0) + pick.kg
        documents.append(
            {
                "code": lot.code,
                "strain": lot.strain,
                "bags": lot.bags,
                "run": lot.run,
                "inoculated": min((event.day for event in starts), default=None),
                "ready": min((event.ready_day for event in starts), default=None),
                "opened": min((opening.day for opening in openings), default=None),
                "room": openings[0].room if openings else (starts[0].room if starts else ""),
                "flushes": max((opening.flushes for opening in openings), default=0),
                "lost": sum(event.lost for event in starts),
                "picks": [{"day": day, "kg": _kg(kg)} for day, kg in sorted(picks.items())],
                "parts": [
                    {
                        "opened": opening.day.isoformat(),
                        "room": opening.room,
                        "bags": opening.bags,
                        "flushes": opening.flushes,
                        "leave": opening.leave_day.isoformat(),
                    }
                    for opening in openings
                ],
                "look_ahead": ahead.get(lot.run, False),
            }
        )
        for key in ("inoculated", "ready", "opened"):
            day = documents[-1][key]
            documents[-1][key] = None if day is None else day.isoformat()
    return documents


def _shortfalls(plan: Plan) -> list[Document]:
    sums: dict[tuple[str, str, str], float] = {}
    for item in plan.shortfalls:
        key = (item.limit, str(Week.of(item.day)), item.unit)
        sums[key] = sums.get(key, 0.0) + item.amount
    return [
        {"limit": limit, "week": week, "amount": round(amount, 3), "unit": unit}
        for (limit, week, unit), amount in sums.items()
    ]
