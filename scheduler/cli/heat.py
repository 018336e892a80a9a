"""``bagweek heat``: how long a load takes in the steriliser, what it costs, and what its core sees."""

from __future__ import annotations

import json
from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

if TYPE_CHECKING:
    from models.farm import Farm
    from models.thermal.load import LoadPart


def heat(
    farm: Annotated[Path, typer.Option("--farm", metavar="DIR", help="Farm folder.")] = Path(),
    steriliser: Annotated[str | None, typer.Option("--steriliser", metavar="CODE", help="[default: the first]")] = None,
    bags: Annotated[int | None, typer.Option("--bags", min=1, help="Bags in the load [default: full].")] = None,
    strain: Annotated[str | None, typer.Option("--strain", metavar="CODE", help="[default: the first]")] = None,
    element_kw: Annotated[float | None, typer.Option("--element-kw", help="Power in place of the file's.")] = None,
    start_c: Annotated[float | None, typer.Option("--start-c", help="Load at steam on [default: ambient].")] = None,
    month: Annotated[int | None, typer.Option("--month", min=1, max=12, help="[default: this month]")] = None,
    steam_on: Annotated[str, typer.Option("--steam-on", metavar="HH:MM", help="Clock time, for the tariff.")] = "16:00",
    as_json: Annotated[bool, typer.Option("--json", help="Print one JSON document.")] = False,
) -> None:
    """Work out one steam cycle: boil-up, heat-up, hold, vent, cooling, energy and what the core sees.

    An estimate for planning: no safety control and no validated sterilisation record.
    """
    from models.farm import clock_minutes
    from models.thermal.cycle import steam_cycle
    from models.thermal.errors import ThermalError
    from scheduler.errors import UsageError
    from scheduler.folder import read_farm_folder
    from scheduler.views.heat import HeatAnswer, heat_document, show_heat

    folder = read_farm_folder(farm)
    file = folder.farm
    vessel = file.steriliser_called(_choose("--steriliser", steriliser, [s.code for s in file.steriliser]))
    card = file.strain_called(_choose("--strain", strain, [s.code for s in file.strain]))
    count = bags or vessel.places
    if count > vessel.places:
        raise UsageError(f"--bags: at most {vessel.places} bags fit steriliser {vessel.code}; found {count}")
    if element_kw is not None and not 0 < element_kw <= 1000:
        raise UsageError(f"--element-kw: a power above 0 and up to 1000 kW was expected; found {element_kw:g}")
    try:
        minutes = clock_minutes(steam_on)
    except ValueError as error:
        raise UsageError(f"--steam-on: {error}") from error
    when = month or _this_month()
    start = file.site.ambient_in(when) if start_c is None else start_c
    if not -20 <= start < file.programme_of(card).target_core_c:
        target = file.programme_of(card).target_core_c
        raise UsageError(
            f"--start-c: a temperature from -20 to below the target of {target:g} °C was expected; found {start:g}"
        )
    try:
        cycle = steam_cycle(
            file, vessel, file.programme_of(card), _load(file, card.code, count), month=when, element_kw=element_kw,
            start_c=start_c,
        )  # fmt: skip
    except ThermalError as error:
        raise UsageError(str(error)) from error
    answer = HeatAnswer(file, vessel, card, count, element_kw or vessel.element_kw, when, minutes, cycle)
    if as_json:
        typer.echo(json.dumps(heat_document(answer), ensure_ascii=False))
        return
    from rich.console import Console

    show_heat(Console(highlight=False, emoji=False, markup=False), answer)


def _choose(option: str, code: str | None, codes: list[str]) -> str:
    from difflib import get_close_matches

    from scheduler.errors import UsageError

    if code is None:
        return codes[0]
    if code in codes:
        return code
    near = get_close_matches(code, codes, n=1, cutoff=0.3) or get_close_matches(code.upper(), codes, n=1, cutoff=0.3)
    hint = f"; did you mean {near[0]!r}?" if near else "."
    raise UsageError(f"{option}: one of {', '.join(codes)} was expected, found {code!r}{hint}")


def _load(farm: Farm, strain: str, bags: int) -> list[LoadPart]:
    from models.thermal.load import LoadPart

    card = farm.strain_called(strain)
    return [LoadPart(farm.recipe_of(card), farm.bag_of(card), bags)]


def _this_month() -> int:
    from datetime import UTC, datetime

    return datetime.now(UTC).astimezone().month
