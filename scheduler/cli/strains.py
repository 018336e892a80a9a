"""``bagweek strains``: what is known of the farm's strains and of the presets, and how sure it is."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated

import typer

from scheduler.cli.output import console, print_document


def strains(
    code: Annotated[
        str | None, typer.Argument(metavar="CODE", help="Strain of the farm, or preset.", show_default=False)
    ] = None,
    farm: Annotated[
        Path | None, typer.Option("--farm", metavar="DIR", help="Farm folder [default: here, if there is one].")
    ] = None,
    as_json: Annotated[bool, typer.Option("--json", help="Print one JSON document.")] = False,
) -> None:
    """List the farm's strains and the presets, or show one: every value, its source, how sure it is, and its days."""
    from scheduler.folder import read_farm_folder
    from scheduler.folder.presets import presets
    from scheduler.strain_cards import find_card, strain_card
    from scheduler.views.strains import show_card, show_strains, strains_document

    place = farm or (Path() if Path("farm.toml").exists() else None)
    folder = None if place is None else read_farm_folder(place)
    name = None if folder is None else folder.farm.site.name
    cards = [] if folder is None else [strain_card(folder, one.code) for one in folder.farm.strain]
    shown = None if code is None else find_card(folder, code)
    if as_json:
        document = strains_document(name, cards, list(presets().values()), shown)
        print_document(document, indent=2)
        return
    if shown is None:
        show_strains(console(), name, cards, list(presets().values()))
    else:
        show_card(console(), shown)
