"""``bagweek new``: make a farm folder to start from."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated

import typer

from scheduler.cli.output import print_document


def new(
    folder: Annotated[Path, typer.Argument(metavar="DIR", help="Folder to make.", show_default=False)],
    like: Annotated[str, typer.Option("--like", metavar="SCENARIO", help="Invented farm to copy.")] = "one-drum",
    as_json: Annotated[bool, typer.Option("--json", help="Print one JSON document.")] = False,
) -> None:
    """Make a farm folder to start from, with an invented farm in it."""
    from scheduler.folder.create import create_farm_folder

    files = create_farm_folder(folder, like)
    if as_json:
        document = {"schema": "bagweek/new/1", "folder": str(folder), "like": like, "files": [f.name for f in files]}
        print_document(document, indent=2)
        return
    for path in files:
        typer.echo(str(folder / path.name))
    typer.echo(f"Now edit farm.toml and orders.csv, then: bagweek check --farm {folder}", err=True)
