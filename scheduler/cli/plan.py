"""``bagweek plan``: plan the weekly bag production."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from scheduler.cli.output import console, print_document

if TYPE_CHECKING:
    from models.calendar import Week


def plan(
    farm: Annotated[Path, typer.Option("--farm", metavar="DIR", help="Farm folder.")] = Path(),
    weeks: Annotated[int, typer.Option("--weeks", min=1, max=104, help="Weeks to plan.")] = 8,
    first: Annotated[
        str | None, typer.Option("--from", metavar="WEEK", help="First ISO week, such as 2027-W03 [default: the next].")
    ] = None,
    gap: Annotated[float, typer.Option("--gap", min=0.0, max=1.0, help="Stop at this proven gap.")] = 0.005,
    seconds: Annotated[float, typer.Option("--seconds", min=0.1, help="Stop searching after so many seconds.")] = 60.0,
    as_json: Annotated[bool, typer.Option("--json", help="Print one JSON document.")] = False,
) -> None:
    """Plan bags, runs, rooms and hands week by week, in money and with a proven gap.

    Exit code 0: done; 1: orders come short that could not all be filled, or a limit is broken; 2: bad input; 3: no
    plan in time. Ctrl-C shows the best plan so far.
    """
    from scheduler.folder import read_farm_folder
    from scheduler.planning import SolveLimits, plan_weeks
    from scheduler.referee import referee
    from scheduler.views.progress import ProgressLine

    folder = read_farm_folder(farm)
    for finding in folder.findings:
        typer.echo(f"warning: {finding.sentence()}", err=True)
    start = _week(first)
    with ProgressLine() as line:
        found = plan_weeks(
            folder.farm, folder.orders, folder.stock, start, weeks,
            limits=SolveLimits(gap=gap, seconds=seconds), progress=line.tell,
        )  # fmt: skip
    verdict = referee(folder.farm, folder.orders, folder.stock, found)
    if as_json:
        from scheduler.views.plan_json import plan_document

        document = plan_document(folder.farm, folder.orders, found, verdict)
        print_document(document, indent=1)
    else:
        from scheduler.views.plan_screen import show_plan

        show_plan(console(), folder.farm, folder.orders, found, verdict)
    last = found.all_weeks[found.weeks].monday if found.look_ahead_weeks else None
    short = any(
        item.short_kg - item.unavoidable_kg > 0.005 and (last is None or item.day < last) for item in found.deliveries
    )
    raise typer.Exit(1 if verdict.violations or found.shortfalls or short else 0)


def _week(text: str | None) -> Week:
    """Read the first week, or take the one that comes next; the only place that reads the clock."""
    from datetime import UTC, datetime

    from models.calendar import Week
    from scheduler.errors import UsageError

    if text is None:
        return Week.of(datetime.now(UTC).astimezone().date()).plus(1)
    try:
        return Week.parse(text)
    except ValueError as error:
        raise UsageError(f"--from: {error}") from error
