"""``bagweek heat``: how long a load takes in the steriliser, what it costs, and what its core sees."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING, Annotated, Any

import typer

from scheduler.cli.output import console, print_document

if TYPE_CHECKING:
    from collections.abc import Callable

    from rich.console import Console

    from scheduler.heating.compare import Value
    from scheduler.heating.moment import Moment
    from scheduler.heating.question import Question


def heat(
    farm: Annotated[Path, typer.Option("--farm", metavar="DIR", help="Farm folder.")] = Path(),
    steriliser: Annotated[str | None, typer.Option("--steriliser", metavar="CODE", help="[default: the first]")] = None,
    strain: Annotated[str | None, typer.Option("--strain", metavar="CODE", help="[default: the first]")] = None,
    bags: Annotated[
        str | None, typer.Option("--bags", metavar="N[,N...]", help="Bags in the load [default: full].")
    ] = None,
    mixed: Annotated[
        str | None, typer.Option("--mixed", metavar="CODE=N,...", help="A load of several strains.")
    ] = None,
    element_kw: Annotated[
        str | None, typer.Option("--element-kw", metavar="KW[,KW...]", help="Power in place of the file's.")
    ] = None,
    hold: Annotated[
        str | None, typer.Option("--hold", metavar="H[,H...]", help="Hold in place of the programme's.")
    ] = None,
    loss: Annotated[
        str | None, typer.Option("--loss", metavar="W/K[,W/K...]", help="Vessel loss in place of the file's.")
    ] = None,
    bag: Annotated[str | None, typer.Option("--bag", metavar="CODE[,CODE...]", help="Another bag.")] = None,
    water_pct: Annotated[float | None, typer.Option("--water-pct", help="Moisture in place of the recipe's.")] = None,
    start_c: Annotated[float | None, typer.Option("--start-c", help="Load at steam on [default: ambient].")] = None,
    month: Annotated[int | None, typer.Option("--month", min=1, max=12, help="[default: this month]")] = None,
    steam_on: Annotated[
        str | None, typer.Option("--steam-on", metavar="TIME", help='16:40 or "2027-01-12 16:40" [default: 16:00].')
    ] = None,
    unload_by: Annotated[
        str | None, typer.Option("--unload-by", metavar="TIME", help="Find the latest steam on for it.")
    ] = None,
    interrupted: Annotated[
        int | None, typer.Option("--interrupted", metavar="MIN", help="Power fails so long after steam on.")
    ] = None,
    resume_after: Annotated[
        int | None, typer.Option("--resume-after", metavar="MIN", help="and is back so long after that.")
    ] = None,
    fit: Annotated[
        Path | None, typer.Option("--fit", metavar="FILE", help="Fit a logged run: minutes,steam_c,core_c[,kw].")
    ] = None,
    write: Annotated[bool, typer.Option("--write", help="With --fit: put what it found into farm.toml.")] = False,
    as_json: Annotated[bool, typer.Option("--json", help="Print one JSON document.")] = False,
) -> None:
    """Work out one steam cycle: boil-up, heat-up, hold, vent, cooling, energy and what the core sees.

    Several values for --bags, --element-kw, --hold, --loss or --bag are set side by side. An estimate for planning: no
    safety control and no validated sterilisation record.
    """
    from scheduler.errors import UsageError
    from scheduler.folder import read_farm_folder
    from scheduler.heating.question import ask

    if steam_on is not None and unload_by is not None:
        raise UsageError("--unload-by: it finds the time of steam on; leave --steam-on out.")
    if (interrupted is None) != (resume_after is None):
        raise UsageError("--interrupted and --resume-after: both were expected, or neither.")
    if write and fit is None:
        raise UsageError("--write: it goes with --fit.")
    file = read_farm_folder(farm).farm
    start, end = _moments(file.site.timezone, steam_on, unload_by)
    when = month or (end or start).month or _this_month()
    question = ask(file, steriliser=steriliser, strain=strain, mixed=mixed, month=when, start_c=start_c)
    if water_pct is not None:
        question = question.with_water(water_pct)
    lists = _lists(bags=bags, element_kw=element_kw, hold=hold, loss=loss, bag=bag)
    several = any(len(values) > 1 for values in lists.values())
    if several and (fit is not None or interrupted is not None or end is not None):
        raise UsageError("several values side by side: leave --fit, --interrupted and --unload-by out.")
    if several:
        document, show = _side_by_side(question, lists, start)
    else:
        from scheduler.heating.compare import changed

        question = changed(question, {key: values[0] for key, values in lists.items()})
        if fit is not None:
            document, show = _fitted(question, fit, farm, write=write)
        elif interrupted is not None and resume_after is not None:
            document, show = _broken(question, start, interrupted, resume_after)
        else:
            document, show = _one(question, start, end)
    if as_json:
        print_document(document())
        return
    show(console())


if TYPE_CHECKING:
    Shown = tuple[Callable[[], dict[str, Any]], Callable[[Console], None]]


def _one(question: Question, start: Moment, end: Moment | None) -> Shown:
    from scheduler.heating.answer import answer
    from scheduler.views.heat import heat_document, show_heat

    found = answer(question, start, end)
    return lambda: heat_document(found), lambda screen: show_heat(screen, found)


def _side_by_side(question: Question, lists: dict[str, list[Value]], start: Moment) -> Shown:
    from scheduler.heating.answer import answer
    from scheduler.heating.compare import compare
    from scheduler.views.heat_table import comparison_document, show_comparison

    rows = compare(question, lists, start)
    return (
        lambda: comparison_document(answer(question, start), rows),
        lambda screen: show_comparison(screen, question, rows, start, lists),
    )


def _broken(question: Question, start: Moment, off_min: int, break_min: int) -> Shown:
    from scheduler.heating.power_cut import power_cut
    from scheduler.views.heat_power_cut import power_cut_document, show_power_cut

    found = power_cut(question, start, off_min, break_min)
    return lambda: power_cut_document(found), lambda screen: show_power_cut(screen, found)


def _fitted(question: Question, file: Path, folder: Path, *, write: bool) -> Shown:
    from scheduler.heating.fitted import fit_answer
    from scheduler.heating.fitted import write as write_lines
    from scheduler.heating.run_log import read_run_log
    from scheduler.views.heat_fit import fit_document, show_fit

    found = fit_answer(question, read_run_log(file))
    if write and found.lines():
        write_lines(found, folder)
    return lambda: fit_document(found, written=write), lambda screen: show_fit(screen, found, written=write)


def _moments(timezone: str, steam_on: str | None, unload_by: str | None) -> tuple[Moment, Moment | None]:
    from zoneinfo import ZoneInfo

    from scheduler.heating.moment import Moment

    zone = ZoneInfo(timezone)
    start = Moment.parse(steam_on or "16:00", zone, "--steam-on")
    return start, None if unload_by is None else Moment.parse(unload_by, zone, "--unload-by")


def _lists(
    *, bags: str | None, element_kw: str | None, hold: str | None, loss: str | None, bag: str | None
) -> dict[str, list[Value]]:
    from scheduler.heating.compare import numbers, whole_numbers

    lists: dict[str, list[Value]] = {}
    if element_kw is not None:
        lists["element_kw"] = [*numbers("--element-kw", element_kw, 0, 1000)]
    if bags is not None:
        lists["bags"] = [*whole_numbers("--bags", bags, 1_000_000)]
    if hold is not None:
        lists["hold_h"] = [*numbers("--hold", hold, 0, 96, with_least=True)]
    if loss is not None:
        lists["loss_w_per_k"] = [*numbers("--loss", loss, 0, 10_000, with_least=True)]
    if bag is not None:
        lists["bag"] = [*dict.fromkeys(code.strip() for code in bag.split(","))]
    return lists


def _this_month() -> int:
    from datetime import UTC, datetime

    return datetime.now(UTC).astimezone().month
