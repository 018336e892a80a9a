"""``bagweek forecast``: how many kilos, which week, how sure."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated

import typer

from scheduler.cli.output import console, print_document

LITTLE_CHANCE = 0.5


def forecast(
    farm: Annotated[Path, typer.Option("--farm", metavar="DIR", help="Farm folder.")] = Path(),
    weeks: Annotated[int, typer.Option("--weeks", min=1, max=104, help="Weeks to plan and forecast.")] = 8,
    first: Annotated[
        str | None, typer.Option("--from", metavar="WEEK", help="First ISO week, such as 2027-W03 [default: the next].")
    ] = None,
    draws: Annotated[int, typer.Option("--draws", min=100, max=1_000_000, help="Seasons to draw.")] = 10_000,
    seed: Annotated[int, typer.Option("--seed", min=0, help="Seed of the draws.")] = 1,
    gap: Annotated[float, typer.Option("--gap", min=0.0, max=1.0, help="Stop planning at this proven gap.")] = 0.005,
    seconds: Annotated[float, typer.Option("--seconds", min=0.1, help="Stop planning after so many seconds.")] = 60.0,
    as_json: Annotated[bool, typer.Option("--json", help="Print one JSON document.")] = False,
) -> None:
    """Plan, then draw the harvest many times: kilograms by week with their spread, and the chance of each order.

    Exit code 0: done; 1: some order that the plan fills has less than an even chance; 2: bad input; 3: no plan in time.
    """
    from scheduler.cli.planned import first_week, read_farm, search
    from scheduler.forecast import forecast as draw
    from scheduler.views.forecast import forecast_document, show_forecast

    folder = read_farm(farm)
    plan = search(folder, first_week(first), weeks, gap=gap, seconds=seconds)
    found = draw(folder.farm, folder.orders, folder.stock, plan, draws=draws, seed=seed)
    if as_json:
        print_document(forecast_document(folder.farm, found))
    else:
        show_forecast(console(), folder.farm, found)
    doubtful = any(one.chance < LITTLE_CHANCE and one.planned_kg >= one.kg - 0.005 for one in found.orders)
    raise typer.Exit(1 if doubtful else 0)
