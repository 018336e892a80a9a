"""Rules of the runs: load, mixing, souring, loading, cycle, unloading, overlap, closed days, cooling, supply, codes."""

from __future__ import annotations

from collections import defaultdict
from datetime import timedelta
from itertools import pairwise
from math import ceil

from models.farm import clock_minutes
from models.plan import Run
from models.thermal.errors import ThermalError
from models.thermal.table import CycleRow, cycle_row
from scheduler.referee.case import Case


def check_runs(case: Case) -> None:
    """Check every run by itself, then runs against each other."""
    rows: dict[str, CycleRow] = {}
    for run in case.plan.runs:
        _load(case, run)
        _hands(case, run)
        row = _cycle(case, run)
        if row is not None:
            rows[run.code] = row
        _closed(case, run)
    _codes(case)
    _overlap(case)
    _supply(case, rows)


def _load(case: Case, run: Run) -> None:
    steriliser = case.farm.steriliser_called(run.steriliser)
    bags = sum(run.bags.values())
    case.expect(
        "run-load", run.code, all(isinstance(n, int) and n > 0 for n in run.bags.values()), run.bags, "whole bags"
    )
    case.expect("run-load", run.code, run.load_step in steriliser.loads, run.load_step, f"one of {steriliser.loads}")
    step = max(1, round(run.load_step * steriliser.places))
    case.expect("run-load", run.code, 1 <= bags <= step, bags, f"1 to {step}", "bags")
    for code in run.bags:
        programme = case.farm.strain_called(code).programme
        case.expect("run-load", f"{run.code}, {code}", programme == run.programme, programme, run.programme)
    case.expect("run-overlap", run.code, 1 <= run.unit <= steriliser.count, run.unit, f"unit 1 to {steriliser.count}")


def _hands(case: Case, run: Run) -> None:
    rates = case.farm.rates
    step = max(1, round(run.load_step * case.farm.steriliser_called(run.steriliser).places))
    day = case.local(run.load_start).date()

    def minutes(rate: float, people: int) -> int:
        return ceil(60 * step / (rate * people) - 1e-9)

    mixed = any(
        start <= run.mix_start and run.mix_start + minutes(rates.mix_bags_h, crew.people) <= run.load_start <= end
        for crew, start, end in case.shifts(day, "mix")
    )
    case.expect("run-mix", run.code, mixed, f"mixing {case.local(run.mix_start):%a %H:%M}", "a mix crew's shift")
    sour = (run.steam_on - run.mix_start) / 60
    case.at_most("run-souring", run.code, sour, case.farm.limits.mix_to_steam_h, "h", slack=1e-9)
    loaded = any(
        start <= run.load_start and run.load_start + minutes(rates.load_bags_h, crew.people) <= run.steam_on <= end
        for crew, start, end in case.shifts(day, "steam")
    )
    case.expect(
        "run-loading", run.code, loaded, f"loading {case.local(run.load_start):%a %H:%M}", "a steam crew's shift"
    )
    case.expect("run-unload", run.code, run.unload >= run.ready, run.unload, f"from {run.ready}", "min")
    gone = case.local(run.unload).date()
    emptied = any(
        start <= run.unload and run.unload + minutes(rates.unload_bags_h, crew.people) <= run.unloaded <= end
        for crew, start, end in case.shifts(gone, "steam")
    )
    case.expect("run-unload", run.code, emptied, f"unloading {case.local(run.unload):%a %H:%M}", "a steam crew's shift")


def _cycle(case: Case, run: Run) -> CycleRow | None:
    steriliser = case.farm.steriliser_called(run.steriliser)
    programme = {p.code: p for p in case.farm.programme}[run.programme]
    strains = [case.farm.strain_called(code) for code in run.bags]
    kinds = sorted({(s.recipe, s.bag) for s in strains})
    recipes = {r.code: r for r in case.farm.recipe}
    bags = {b.code: b for b in case.farm.bag}
    month = case.local(run.load_start).month
    try:
        row = cycle_row(
            case.farm, steriliser, programme, [(recipes[r], bags[b]) for r, b in kinds], run.load_step, month
        )
    except ThermalError as error:
        case.fail("run-cycle", run.code, str(error), "a cycle that can be")
        return None
    takes = run.ready - run.steam_on
    case.expect(
        "run-cycle", run.code, takes >= row.ready_to_unload_min, takes, f"at least {row.ready_to_unload_min}", "min"
    )
    cools = run.cooled - run.unloaded
    case.expect("run-cooled", run.code, cools >= row.cool_down_min, cools, f"at least {row.cool_down_min}", "min")
    # Alone, a kind of bag may need less than the mixed run it was planned in; never more.
    case.expect("run-energy", run.code, run.energy_kwh >= row.energy_kwh - 1e-6, run.energy_kwh, row.energy_kwh, "kWh")
    cost = _energy_cost(case, run, row)
    low = cost * (1 - 1e-6) - 0.005
    case.expect("run-energy", f"{run.code}, cost", run.energy_cost >= low, run.energy_cost, f"{cost:.4f}")
    mixed = len({(s.recipe, s.bag) for s in case.farm.strain if s.programme == run.programme}) > 1
    if not mixed:
        case.equal("run-energy", f"{run.code}, cost", run.energy_cost, cost)
    return row


def _energy_cost(case: Case, run: Run, row: CycleRow) -> float:
    cost = 0.0
    for quarter, kwh in enumerate(row.kwh_by_quarter):
        now = case.local(run.steam_on + 15 * quarter)
        cost += kwh * _price(case, now.hour * 60 + now.minute)
    return cost


def _price(case: Case, minutes: int) -> float:
    tariff = case.farm.tariff
    for period in tariff.periods:
        start, end = clock_minutes(period.start), clock_minutes(period.to)
        inside = start <= minutes < end if start < end else minutes >= start or minutes < end
        if inside:
            return period.price
    return tariff.default


def _closed(case: Case, run: Run) -> None:
    closed = set(case.farm.steriliser_called(run.steriliser).closed)
    day, last = case.local(run.load_start).date(), case.local(run.unloaded).date()
    case.expect("run-closed", run.code, case.inside(day) and case.inside(last), day, "a day of the plan")
    while day <= last:
        case.expect("run-closed", run.code, day not in closed, day, "a day its steriliser is open")
        day += timedelta(days=1)


def _codes(case: Case) -> None:
    numbers: dict[str, int] = defaultdict(int)
    for run in sorted(case.plan.runs, key=lambda r: (r.load_start, r.steriliser, r.unit)):
        week = case.week_of_moment(run.load_start).short
        numbers[week] += 1
        case.expect("codes", run.code, run.code == f"{week}-R{numbers[week]}", run.code, f"{week}-R{numbers[week]}")
        for strain, bags in run.bags.items():
            code = f"{week}-{strain}-{numbers[week]}"
            lot = case.lots.get(code)
            ok = lot is not None and lot.run == run.code and lot.bags == bags and lot.strain == strain
            case.expect("codes", code, ok and len(code) <= 20, lot, f"a lot of {bags} bags from {run.code}")
    case.expect("codes", "lots", len(case.lots) == len(case.plan.lots), len(case.plan.lots), "each code once")
    runs = {run.code: run for run in case.plan.runs}
    for lot in case.plan.lots:
        if lot.run:
            known = lot.run in runs and runs[lot.run].bags.get(lot.strain) == lot.bags
        else:
            row = case.stock_lots.get(lot.code)
            known = row is not None and row.bags == lot.bags and row.strain == lot.strain
        case.expect("codes", lot.code, known, lot.run or "stock", "a run or stock lot with as many bags")


def _overlap(case: Case) -> None:
    units: dict[tuple[str, int], list[Run]] = defaultdict(list)
    for run in case.plan.runs:
        units[run.steriliser, run.unit].append(run)
    for (code, unit), runs in units.items():
        runs.sort(key=lambda r: r.load_start)
        for before, after in pairwise(runs):
            ok = before.unloaded <= after.load_start
            case.expect("run-overlap", f"{code} {unit}", ok, f"{before.code} with {after.code}", "one run at a time")


def _supply(case: Case, rows: dict[str, CycleRow]) -> None:
    site = case.farm.site
    if site.supply_kw is None:
        return
    change: dict[int, float] = defaultdict(float)
    for run in case.plan.runs:
        row = rows.get(run.code)
        for quarter, kw in enumerate(row.kw_by_quarter if row else ()):
            change[run.steam_on + 15 * quarter] += kw
            change[run.steam_on + 15 * quarter + 15] -= kw
    draw = site.base_load_kw
    for minute in sorted(change):
        draw += change[minute]
        case.at_most("supply", f"{case.local(minute):%Y-%m-%d %H:%M}", draw, site.supply_kw, "kW", slack=1e-4)
