"""The command ``bagweek``: registers the commands and turns every refusal into a sentence and an exit code.

Exit codes: 0 done; 1 an answer with shortfalls or findings; 2 bad input or usage; 3 no plan within the limits of time;
4 the record is damaged or locked; 130 stopped from the keyboard.
"""

from __future__ import annotations

import os
import sys
from typing import Annotated

import typer

from scheduler.cli.check import check
from scheduler.cli.forecast import forecast
from scheduler.cli.heat import heat
from scheduler.cli.learn import learn
from scheduler.cli.new import new
from scheduler.cli.plan import plan
from scheduler.cli.strains import strains

INTERRUPTED = 130
LONGEST_SENTENCE = 300
UsageProblem = typer.BadParameter.__mro__[2]
"""What the command-line library raises for a wrong option; releases keep the class in different places."""

app = typer.Typer(
    name="bagweek",
    help="Plans a bag mushroom farm week by week: bags, steam runs, rooms, hands and harvests, in money.",
    no_args_is_help=True,
    add_completion=False,
    rich_markup_mode=None,
    pretty_exceptions_enable=False,
)


def _show_version(value: bool) -> None:
    if value:
        from importlib.metadata import version

        typer.echo(f"bagweek {version('bagweek')}")
        raise typer.Exit


@app.callback()
def main(
    version: Annotated[
        bool, typer.Option("--version", callback=_show_version, is_eager=True, help="Show the version and stop.")
    ] = False,
) -> None:
    """Plan a bag mushroom farm week by week: bags, steam runs, rooms, hands and harvests, in money."""


app.command("new")(new)
app.command("check")(check)
app.command("strains")(strains)
app.command("heat")(heat)
app.command("plan")(plan)
app.command("forecast")(forecast)
app.command("learn")(learn)


def run() -> None:
    """Run the command line and end the process.

    A search that was stopped may leave a solver thread behind, so the process ends without waiting for threads.
    """
    for stream in (sys.stdout, sys.stderr):
        if hasattr(stream, "reconfigure"):
            stream.reconfigure(errors="replace")
    code = _run()
    for stream in (sys.stdout, sys.stderr):
        try:
            stream.flush()
        except (BrokenPipeError, ValueError):
            code = code or 0
    os._exit(code)


def _run() -> int:
    try:
        result = app(standalone_mode=False)
    except KeyboardInterrupt:
        return INTERRUPTED
    except BrokenPipeError:
        return 0
    except Exception as error:  # noqa: BLE001  (the one place that turns refusals into words; others are raised again)
        return _refused(error)
    return result if isinstance(result, int) else 0


def _refused(error: Exception) -> int:
    """Say what was refused in plain words; anything unforeseen is raised again."""
    from scheduler.errors import BagweekError

    if isinstance(error, typer.Exit):
        return error.exit_code
    if isinstance(error, typer.Abort):
        return INTERRUPTED
    if isinstance(error, UsageProblem):
        words = error.format_message() if hasattr(error, "format_message") else str(error)
        typer.echo(f"bagweek: {' '.join(words.split())}" if len(words) < LONGEST_SENTENCE else words, err=True)
        return 2
    if isinstance(error, BagweekError):
        typer.echo(str(error), err=True)
        return error.exit_code
    raise error


if __name__ == "__main__":
    run()
