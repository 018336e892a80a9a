"""``bagweek learn``: what the pickings say about the strain cards of the farm file."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated

import typer

from scheduler.cli.output import console, print_document


def learn(
    farm: Annotated[Path, typer.Option("--farm", metavar="DIR", help="Farm folder.")] = Path(),
    picks: Annotated[
        Path | None, typer.Option("--picks", metavar="FILE", help="Pickings [default: picks.csv of the farm folder].")
    ] = None,
    since: Annotated[
        str | None, typer.Option("--since", metavar="DAY", help="Only lots first picked on this day or later.")
    ] = None,
    write: Annotated[bool, typer.Option("--write", help="Put what is proposed into farm.toml.")] = False,
    as_json: Annotated[bool, typer.Option("--json", help="Print one JSON document.")] = False,
) -> None:
    """Learn yields, days and losses from picked lots, and propose lines for farm.toml.

    Exit code 0: done; 1: the last lots of a strain do what those before them did not; 2: bad input.
    """
    from scheduler.folder import read_farm_folder
    from scheduler.learning.learned import learn as learn_from
    from scheduler.learning.learned import write as write_lines
    from scheduler.learning.picks import picked_since, read_picks
    from scheduler.views.learn import learn_document, show_learned

    file = read_farm_folder(farm).farm
    read = read_picks(farm / "picks.csv" if picks is None else picks, file)
    found = learn_from(file, read if since is None else picked_since(read, since))
    written = write and bool(found.lines())
    if written:
        write_lines(found, farm)
    if as_json:
        print_document(learn_document(found, written=written), indent=2)
    else:
        show_learned(console(), found, written=written)
    raise typer.Exit(1 if found.drifts else 0)
