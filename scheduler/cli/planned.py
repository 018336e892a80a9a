"""What all commands that need a plan share: the farm folder with its warnings, the first week, the search."""

from __future__ import annotations

from collections.abc import Mapping
from pathlib import Path
from typing import TYPE_CHECKING

import typer

if TYPE_CHECKING:
    from models.calendar import Week
    from models.plan import Margin, Plan
    from scheduler.folder import FarmFolder


def read_farm(place: Path) -> FarmFolder:
    """Read a farm folder; its warnings go to standard error."""
    from scheduler.folder import read_farm_folder

    folder = read_farm_folder(place)
    for finding in folder.findings:
        typer.echo(f"warning: {finding.sentence()}", err=True)
    return folder


def first_week(text: str | None) -> Week:
    """Read the first week, or take the one that comes next; only here do the planning commands read the clock.

    Raises
    ------
    UsageError
        The text is not an ISO week.
    """
    from datetime import UTC, datetime

    from models.calendar import Week
    from scheduler.errors import UsageError

    if text is None:
        return Week.of(datetime.now(UTC).astimezone().date()).plus(1)
    try:
        return Week.parse(text)
    except ValueError as error:
        raise UsageError(f"--from: {error}") from error


def search(
    folder: FarmFolder, start: Week, weeks: int, *, gap: float, seconds: float,
    margins: Mapping[tuple[str, Week], Margin] | None = None,
) -> Plan:  # fmt: skip
    """Search a plan, with progress on standard error."""
    from scheduler.planning import SolveLimits, plan_weeks
    from scheduler.views.progress import ProgressLine

    with ProgressLine() as line:
        return plan_weeks(
            folder.farm, folder.orders, folder.stock, start, weeks,
            limits=SolveLimits(gap=gap, seconds=seconds), progress=line.tell, margins=margins,
        )  # fmt: skip
