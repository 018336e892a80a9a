"""Money, line by line, and what the plan says of its own quality."""

from __future__ import annotations

from scheduler.referee.case import Case


def check_money(case: Case) -> None:
    """Add every line of the account up again, and hold the objective, bound and gap to it."""
    right = {**_income(case), **_costs(case)}
    for line, amount in right.items():
        case.equal("money", line, getattr(case.plan.money, line), amount, case.farm.site.currency, slack=0.01)
    report, total = case.plan.report, sum(right.values())
    case.equal("money", "objective", report.objective, total, case.farm.site.currency, slack=0.02)
    case.at_most("gap", "objective against bound", report.objective, report.bound, case.farm.site.currency, slack=0.01)
    scale = max(abs(report.bound), right["sales"])
    gap = max(0.0, report.bound - report.objective) / scale if scale > 0 else 0.0
    case.equal("gap", "gap", report.gap, gap, slack=1e-6)


def _income(case: Case) -> dict[str, float]:
    plan, market = case.plan, case.farm.market
    prices: dict[str, float] = {}
    for strain in case.farm.strain:
        rows = [order for order in case.orders if order.strain == strain.code]
        kg = sum(order.kg for order in rows)
        prices[strain.code] = sum(o.kg * o.price_per_kg for o in rows) / kg if kg else 0.0
    sales = spot = 0.0
    for item in plan.deliveries:
        price, other = case.orders[item.order].price_per_kg, sum(item.instead.values())
        sales += price * (item.kg - other) + price * market.substitute_price_share * other
    for sale in plan.surplus:
        spot += prices[sale.strain] * market.spot_price_share * (sale.spot_kg - sale.cheap_kg)
        spot += prices[sale.strain] * market.spot_more_price_share * sale.cheap_kg
    return {
        "sales": sales,
        "spot": spot,
        "shortage": -sum(
            (item.short_kg - item.unavoidable_kg) * market.shortage_per_kg / case.orders[item.order].priority
            for item in plan.deliveries
        ),
    }


def _costs(case: Case) -> dict[str, float]:
    plan, farm = case.plan, case.farm
    materials = spawn = 0.0
    for run in plan.runs:
        for code, bags in run.bags.items():
            strain = farm.strain_called(code)
            bag = farm.bag_of(strain)
            materials += bags * (bag.wet_kg * farm.recipe_of(strain).price_per_kg + bag.cost)
    for event in plan.inoculations:
        if not event.before:
            strain = case.strain_of(event.lot)
            kilograms = event.bags * farm.bag_of(strain).wet_kg
            spawn += kilograms * strain.spawn_rate_pct / 100 * strain.spawn_cost_per_kg
    wages = {crew.code: crew.cost_per_h for crew in farm.crew}
    unpicked = sum(pick.ripe_kg - pick.kg for opening in plan.openings for pick in opening.picks)
    spoiled = unpicked + sum(sale.spoiled_kg for sale in plan.surplus)
    return {
        "materials": -materials,
        "spawn": -spawn,
        "energy": -sum(run.energy_cost for run in plan.runs),
        "labour": -sum(item.hours * wages[item.crew] for item in plan.labour),
        "spoilage": -spoiled * farm.market.spoilage_per_kg,
        "over_limits": -sum(item.amount * {"h": 1000.0, "W": 0.0}.get(item.unit, 100.0) for item in plan.shortfalls),
    }
