"""``bagweek plan``: plan the weekly bag production."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from scheduler.cli.output import console, print_document
from scheduler.cli.planned import first_week, read_farm, search

if TYPE_CHECKING:
    from models.calendar import Week
    from scheduler.folder import FarmFolder
    from scheduler.sure import SurePlan


def plan(
    farm: Annotated[Path, typer.Option("--farm", metavar="DIR", help="Farm folder.")] = Path(),
    weeks: Annotated[int, typer.Option("--weeks", min=1, max=104, help="Weeks to plan.")] = 8,
    first: Annotated[
        str | None, typer.Option("--from", metavar="WEEK", help="First ISO week, such as 2027-W03 [default: the next].")
    ] = None,
    sure: Annotated[
        float | None, typer.Option("--sure", metavar="CHANCE", help="Fill each order with this chance, such as 0.9.")
    ] = None,
    gap: Annotated[float, typer.Option("--gap", min=0.0, max=1.0, help="Stop at this proven gap.")] = 0.005,
    seconds: Annotated[float, typer.Option("--seconds", min=0.1, help="Stop searching after so many seconds.")] = 60.0,
    save_model: Annotated[
        Path | None, typer.Option("--save-model", metavar="FILE", help="Also write the model there, as MPS.")
    ] = None,
    as_json: Annotated[bool, typer.Option("--json", help="Print one JSON document.")] = False,
) -> None:
    """Plan bags, runs, rooms and hands week by week, in money and with a proven gap.

    With --sure several plans are made, with more and more kept ready, until the forecast fills each order with that
    chance or more bags no longer help. Exit code 0: done; 1: orders come short that could not all be filled, or a limit
    is broken; 2: bad input; 3: no plan in time. Ctrl-C shows the best plan so far.
    """
    from scheduler.errors import UsageError
    from scheduler.referee import referee

    if sure is not None and not 0 < sure < 1:
        raise UsageError(f"--sure: a chance above 0 and below 1, such as 0.9, was expected; found {sure:g}")
    folder = read_farm(farm)
    start = first_week(first)
    if save_model is not None:
        _save(folder, start, weeks, save_model)
    safety = None
    if sure is None:
        found = search(folder, start, weeks, gap=gap, seconds=seconds)
    else:
        safety = _surely(folder, start, weeks, sure, gap=gap, seconds=seconds)
        found = safety.plan
    verdict = referee(folder.farm, folder.orders, folder.stock, found)
    if as_json:
        from scheduler.views.plan_json import plan_document
        from scheduler.views.sure import sure_document

        document = plan_document(folder.farm, folder.orders, found, verdict)
        if safety is not None:
            document["sure"] = sure_document(safety)
        print_document(document, indent=1)
    else:
        from scheduler.views.plan_screen import show_plan
        from scheduler.views.sure import show_sure

        show_plan(console(), folder.farm, folder.orders, found, verdict)
        if safety is not None:
            show_sure(console(), folder.farm, safety)
    last = found.all_weeks[found.weeks].monday if found.look_ahead_weeks else None
    short = any(
        item.short_kg - item.unavoidable_kg > 0.005 and (last is None or item.day < last) for item in found.deliveries
    )
    broken = verdict.violations or found.shortfalls or short or (safety is not None and safety.unreachable)
    raise typer.Exit(1 if broken else 0)


def _save(folder: FarmFolder, start: Week, weeks: int, place: Path) -> None:
    """Write the model; a place that cannot be written to is refused."""
    from scheduler.errors import UsageError
    from scheduler.planning.save_model import model_text

    text = model_text(folder.farm, folder.orders, folder.stock, start, weeks)
    try:
        place.write_text(text, encoding="ascii")
    except OSError as error:
        raise UsageError(f"--save-model: {place} cannot be written ({error.strerror or 'unknown reason'}).") from error


def _surely(folder: FarmFolder, start: Week, weeks: int, sure: float, *, gap: float, seconds: float) -> SurePlan:
    from scheduler.forecast import forecast
    from scheduler.sure import plan_surely

    return plan_surely(
        sure,
        lambda margins: search(folder, start, weeks, gap=gap, seconds=seconds, margins=margins),
        lambda plan: forecast(folder.farm, folder.orders, folder.stock, plan),
    )
