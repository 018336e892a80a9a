"""``bagweek check``: is the farm folder sound, and what can each stage do."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated

import typer

from scheduler.cli.output import console, print_document


def check(
    farm: Annotated[Path, typer.Option("--farm", metavar="DIR", help="Farm folder.")] = Path(),
    month: Annotated[
        int | None,
        typer.Option("--month", min=1, max=12, help="Month of the sterilisers' cycles [default: 1 and 7]."),
    ] = None,
    as_json: Annotated[bool, typer.Option("--json", help="Print one JSON document.")] = False,
    schema: Annotated[bool, typer.Option("--schema", help="Print the JSON Schema of farm.toml and stop.")] = False,
) -> None:
    """Check a farm folder, and show what each stage can do in a week.

    Exit code 0: no findings; 1: warnings only; 2: errors.
    """
    from scheduler.errors import InputError
    from scheduler.folder import read_farm_folder

    if schema:
        from scheduler.folder.schema import farm_schema_text

        typer.echo(farm_schema_text(), nl=False)
        return
    from scheduler.capacity import MONTHS, capacities, idle_findings
    from scheduler.views.check import check_document, show_check

    try:
        folder = read_farm_folder(farm)
    except InputError as error:
        if as_json:
            print_document(check_document(None, error.findings, ()), indent=2)
        else:
            for finding in error.findings:
                prefix = "" if finding.severity == "error" else "warning: "
                typer.echo(prefix + finding.sentence(), err=True)
        raise typer.Exit(error.exit_code) from error
    stages = capacities(folder.farm, (month,) if month else MONTHS)
    findings = folder.findings + idle_findings(folder.farm, stages)
    if as_json:
        document = check_document(folder.farm.site.name, findings, stages)
        print_document(document, indent=2)
    else:
        show_check(console(), folder.farm.site.name, findings, stages)
    raise typer.Exit(1 if findings else 0)
