"""How the answer of ``bagweek check`` looks: findings, then one block for each stage."""

from __future__ import annotations

import textwrap
from collections.abc import Sequence
from itertools import groupby
from typing import Any

from rich.console import Console
from rich.text import Text

from scheduler.capacity import Capacity, month_in_words
from scheduler.errors import Finding

STAGES = {
    "mix": "Mixing",
    "sterilise": "Sterilising",
    "cool": "Cooling",
    "inoculate": "Inoculating",
    "colonise": "Colonising",
    "open": "Opening",
    "fruit": "Fruiting",
    "pick": "Picking",
}
WIDTH = 80
_NUMBER = 11


def show_check(console: Console, farm_name: str, findings: Sequence[Finding], capacities: Sequence[Capacity]) -> None:
    """Print the findings of a sound farm and what each of its stages can do in a week.

    Parameters
    ----------
    console : Console
        Where to print.
    farm_name : str
        Name of the farm.
    findings : sequence of Finding
        Warnings; may be none.
    capacities : sequence of Capacity
        In the order to show.
    """
    width = min(console.width, WIDTH)
    dash = "-" if console.options.ascii_only else "─"
    count = {0: "no findings", 1: "1 finding"}.get(len(findings), f"{len(findings)} findings")
    console.print(Text.assemble((farm_name, "bold"), f": {count}"), soft_wrap=True)
    for finding in findings:
        _wrapped(console, finding.sentence(), "  ", width, style="yellow")
    console.print()
    head = f"{'Each stage alone, in a week':<{width - 2 * _NUMBER}}{'bags':>{_NUMBER}}{'kg':>{_NUMBER}}"
    console.print(Text(head, style="dim"), soft_wrap=True)
    console.print(Text(dash * width, style="dim"), soft_wrap=True)
    for stage, title in STAGES.items():
        groups = groupby((one for one in capacities if one.stage == stage), key=lambda one: (one.what, one.how))
        for index, (_, rows) in enumerate(groups):
            _row(console, title if index == 0 else "", list(rows), width)


def _row(console: Console, title: str, rows: Sequence[Capacity], width: int) -> None:
    """Print one row for months in which a stage can do the same."""
    row = rows[0]
    months = " and ".join(month_in_words(one.month) for one in rows if one.month)
    about = ", ".join(word for word in (row.what, months) if word)
    name = f"{title:<13}{about}"
    numbers = f"{_amount(row.bags_week, none='no limit'):>{_NUMBER}}{_amount(row.kg_week):>{_NUMBER}}"
    room = width - len(numbers)
    if len(name) > room:
        console.print(Text(name), soft_wrap=True)
        name = ""
    line = Text(f"{name:<{room}}{numbers}".rstrip())
    line.stylize("bold", 0, len(title))
    console.print(line, soft_wrap=True)
    _wrapped(console, row.how, " " * 15, width, style="dim")


def _amount(value: float | None, none: str = "") -> str:
    if value is None:
        return none
    return f"{value:,.0f}" if value >= 99.5 else f"{value:.3g}"


def _wrapped(console: Console, text: str, indent: str, width: int, style: str) -> None:
    lines = textwrap.wrap(
        text, width, initial_indent=indent, subsequent_indent=indent, break_long_words=False, break_on_hyphens=False
    )
    for line in lines:
        console.print(Text(line, style=style), soft_wrap=True)


def check_document(
    farm_name: str | None, findings: Sequence[Finding], capacities: Sequence[Capacity]
) -> dict[str, Any]:
    """Return the answer as a JSON document; without capacities when the farm is not sound."""
    return {
        "schema": "bagweek/check/1",
        "farm": farm_name,
        "sound": not any(finding.severity == "error" for finding in findings),
        "findings": [finding.as_json() for finding in findings],
        "capacity": [
            {
                "stage": one.stage,
                "what": one.what,
                "month": one.month,
                "steriliser": one.steriliser or None,
                "programme": one.programme or None,
                "strain": one.strain or None,
                "bags_week": None if one.bags_week is None else round(one.bags_week, 2),
                "kg_week": None if one.kg_week is None else round(one.kg_week, 2),
                "how": one.how,
            }
            for one in capacities
        ],
    }
