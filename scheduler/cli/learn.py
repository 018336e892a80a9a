"""``bagweek learn``: what the farm's own pickings say of its strains."""

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
    write: Annotated[bool, typer.Option("--write", help="Put what was learned into farm.toml.")] = False,
    as_json: Annotated[bool, typer.Option("--json", help="Print one JSON document.")] = False,
) -> None:
    """Learn yields, flush shares, days and losses of each strain from what was picked.

    Exit code 0: done; 1: the last lots drift away from those before; 2: bad input.
    """
    from scheduler.folder import read_farm_folder
    from scheduler.folder.edit import set_values
    from scheduler.learning.learn import changes
    from scheduler.learning.learn import learn as learn_from
    from scheduler.learning.picks import FILE, read_picks
    from scheduler.views.learn import learn_document, show_learn

    folder = read_farm_folder(farm)
    learned = learn_from(folder.farm, read_picks(picks or farm / FILE, folder.farm))
    values = changes(learned)
    if write and values:
        set_values(farm / "farm.toml", values)
    if as_json:
        print_document(learn_document(folder.farm, learned, written=write and bool(values)), indent=2)
    else:
        show_learn(console(), folder.farm, learned, written=write)
    raise typer.Exit(1 if any(one.drift for one in learned) else 0)
