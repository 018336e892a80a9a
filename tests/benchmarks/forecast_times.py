"""Print how long the forecast takes, against draws and against lots.

python -m tests.benchmarks.forecast_times [SCENARIO]
"""

from __future__ import annotations

import resource
import sys
import time
from dataclasses import replace
from typing import Any

from models.calendar import Week
from models.plan import Plan
from scheduler.folder import read_farm_folder, scenario_folder
from scheduler.forecast import forecast
from scheduler.planning import SolveLimits, plan_weeks


def doubled(plan: Plan, times: int) -> Plan:
    """The same plan with every lot so many times over."""

    made = {lot.code for lot in plan.lots if lot.run}

    def copies(things: tuple[Any, ...], field: str) -> tuple[Any, ...]:
        mine = [thing for thing in things if getattr(thing, field) in made and not getattr(thing, "before", False)]
        return tuple(replace(one, **{field: f"{getattr(one, field)}x{k}"}) for k in range(times) for one in mine)

    return replace(
        plan, lots=copies(plan.lots, "code"), inoculations=copies(plan.inoculations, "lot"),
        openings=copies(plan.openings, "lot"),
    )  # fmt: skip


def main() -> None:
    """Plan a scenario once, then time forecasts of it."""
    name = sys.argv[1] if len(sys.argv) > 1 else "family"
    folder = read_farm_folder(scenario_folder(name))
    plan = plan_weeks(
        folder.farm, folder.orders, (), Week.parse("2027-W02"), 26, limits=SolveLimits(gap=0.01, seconds=30)
    )
    print(f"{name}, 26 weeks, {len(folder.farm.strain)} strains")
    print(f"{'lots':>8}{'openings':>10}{'draws':>8}{'s':>8}{'us a draw':>11}{'MB':>8}")
    for times, draws in ((1, 2_500), (1, 5_000), (1, 10_000), (1, 20_000), (2, 10_000), (4, 10_000)):
        many = doubled(plan, times)
        began = time.perf_counter()
        forecast(folder.farm, folder.orders, (), many, draws=draws)
        took = time.perf_counter() - began
        memory = resource.getrusage(resource.RUSAGE_SELF).ru_maxrss / 1024
        print(
            f"{len(many.lots):>8}{len(many.openings):>10}{draws:>8}{took:>8.2f}"
            f"{1e6 * took / draws:>11.0f}{memory:>8.0f}"
        )


if __name__ == "__main__":
    main()
