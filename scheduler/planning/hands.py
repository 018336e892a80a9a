"""Person-hours a day by skill, and which crew works them."""

from __future__ import annotations

from models.farm import SKILLS
from scheduler.planning.columns import SLACK_HOUR_PRICE
from scheduler.planning.stock_and_flow import Reserve, StockAndFlow

Terms = list[tuple[int, float]]


def labour_needs(flow: StockAndFlow) -> dict[tuple[str, int], Terms]:
    """Hours that each column takes, by skill and day [h per bag or kg]."""
    rates, columns = flow.problem.farm.rates, flow.columns
    needs: dict[tuple[str, int], Terms] = {}

    def need(skill: str, day: int, column: int, hours: float) -> None:
        if day < flow.problem.days:
            needs.setdefault((skill, day), []).append((column, hours))

    for (_, index), column in columns.fill.items():
        group = flow.groups[index]
        need("mix", group.load_day, column, 1 / rates.mix_bags_h)
        need("steam", group.load_day, column, 1 / rates.load_bags_h)
        need("steam", group.unload_day, column, 1 / rates.unload_bags_h)
    for (_, _, day), column in columns.inoculate.items():
        need("inoculate", day, column, 1 / rates.inoculate_bags_h)
    for (strain, pool, day, flushes), column in columns.open.items():
        need("open", day, column, 1 / rates.open_bags_h)
        last = day + flow.problem.flush_day(strain, flushes, pool)
        need("open", flow.leave_day(last), column, 1 / rates.discard_bags_h)
    for (index, kept), column in columns.keep.items():
        lot = flow.problem.stock.fruiting[index]
        last = lot.flush_days[kept - lot.picked - 1] if kept > lot.picked else 0
        need("open", flow.leave_day(last), column, 1 / rates.discard_bags_h)
    for (_, day), members in columns.picked.items():
        for column in members:
            need("pick", day, column, 1 / rates.pick_kg_h)
    return needs


def add_hands(flow: StockAndFlow) -> None:
    """Columns for hours by crew, skill and day; rows for need, shift length and benches."""
    problem, matrix, columns = flow.problem, flow.matrix, flow.columns
    forced = problem.stock.last_forced_day if problem.stock else -1
    rates = problem.farm.rates
    slowest = 1 / min(rates.mix_bags_h, rates.inoculate_bags_h, rates.open_bags_h, rates.discard_bags_h)
    worked: dict[tuple[str, int], Terms] = {}
    for (skill, day), terms in sorted(labour_needs(flow).items(), key=lambda item: (item[0][1], item[0][0])):
        hours: Terms = []
        for shift in problem.shifts.on(day, skill):
            crew = problem.farm.crew.index(shift.crew)
            column = matrix.column(gain=-shift.crew.cost_per_h)
            columns.hours[crew, skill, day] = column
            worked.setdefault((shift.crew.code, day), []).append((column, 1.0))
            hours.append((column, -1.0))
        if day <= forced:
            over = matrix.column(gain=-SLACK_HOUR_PRICE)
            columns.over[f"labour {skill}", day] = over
            hours.append((over, -1.0))
        matrix.row(f"labour {skill}", day, terms + hours, low=0.0, high=0.0)
        if skill == "inoculate":
            benches = problem.shifts.bench_hours(day)
            if benches is not None:
                row = matrix.row("benches", day, terms, high=benches)
                flow.reserves.append(Reserve(row, benches, slowest))
    for team in problem.farm.crew:
        for day in range(problem.days):
            terms = worked.get((team.code, day), [])
            if terms:
                shift = next(s for skill in SKILLS for s in problem.shifts.on(day, skill) if s.crew is team)
                row = matrix.row(f"shift {team.code}", day, terms, high=shift.hours)
                flow.reserves.append(Reserve(row, shift.hours, slowest))
