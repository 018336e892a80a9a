"""How changes to a load look side by side."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any

from rich.console import Console

from scheduler.heating.answer import HeatAnswer
from scheduler.heating.compare import KEYS, Value, Variation
from scheduler.heating.moment import Moment
from scheduler.heating.question import Question
from scheduler.views.heat import heat_document, show_cautions, show_question
from scheduler.views.screen import Screen

HEADS = {"element_kw": "kW", "bags": "bags", "hold_h": "hold h", "loss_w_per_k": "W/K", "bag": "bag"}
RESULTS = (("hot", 8), ("out", 8), ("cool", 8), ("kWh", 8), ("a bag", 7), ("cost", 8), ("on", 5))


def comparison_document(answer: HeatAnswer, rows: Sequence[Variation]) -> dict[str, Any]:
    """The load as it is, ``bagweek/heat/1``, and ``what_if``: one entry a row, the load as it is first."""
    return {**heat_document(answer), "what_if": [_row_document(row) for row in rows]}


def _row_document(row: Variation) -> dict[str, Any]:
    cycle = row.cycle
    if cycle is None:
        return {**row.values, "problem": row.problem}
    return {
        **row.values,
        "heat_up_h": round(cycle.heat_up_h, 4),
        "ready_to_unload_h": round(cycle.ready_to_unload_h, 4),
        "ready_to_inoculate_h": round(cycle.ready_to_inoculate_h, 4),
        "energy_kwh": round(cycle.energy_kwh, 3),
        "cost": round(row.cost, 2),
        "hold_duty": round(cycle.hold_duty, 4),
        "water_kg": round(cycle.water_kg, 2),
        "cautions": list(cycle.cautions),
        "problem": "",
    }


def show_comparison(
    console: Console, question: Question, rows: Sequence[Variation], steam_on: Moment,
    lists: Mapping[str, Sequence[Value]],
) -> None:  # fmt: skip
    """Print the rows: hours from steam on, energy, price, and the share of the hold in which the element is on."""
    screen = Screen(console)
    boiling = next((row.cycle.boiling_c for row in rows if row.cycle is not None), None)
    if boiling is None:
        screen.wrapped(f"{question.farm.site.name}: {question.load_words} in {question.steriliser.code}", style="bold")
    else:
        show_question(screen, question, boiling)
    shown = [key for key in KEYS if key in lists]
    screen.heading(f"Side by side, steam on {steam_on.words}; hours from steam on")
    heads = "".join(f"{HEADS[key]:>8}" for key in shown)
    results = _fitting(screen, len(shown))
    screen.line(f"{'':5}{heads}{''.join(f'{name:>{width}}' for name, width in results)}", "dim")
    for place, row in enumerate(rows):
        _row(screen, row, shown, results, ("now" if place == 0 else "") + _flags(row).rjust(2 if place == 0 else 5))
    currency, limit = question.farm.site.currency, question.farm.limits.mix_to_steam_h
    screen.line()
    words = {
        "hot": "hot: coldest core at target", "out": "out: of the steriliser", "cool": "cool: ready to inoculate",
        "kWh": "kWh and a bag: electricity of the load and of a bag", "cost": f"cost: {currency} by tariff",
        "on": "on: share of the hold in which the element is on",
    }  # fmt: skip
    told = [words[name] for name, _ in results if name in words]
    if any(row.sours for row in rows):
        told.append(f"s: hot later than the {limit:g} h in which wet mix sours")
    if any(row.over_supply for row in rows):
        told.append(f"p: draws more than the supply of {question.farm.site.supply_kw:g} kW")
    screen.wrapped("; ".join(told) + ".", style="dim")
    show_cautions(screen, ())


def _flags(row: Variation) -> str:
    return ("s" if row.sours else "") + ("p" if row.over_supply else "")


def _fitting(screen: Screen, keys: int) -> list[tuple[str, int]]:
    """The results that fit beside so many keys; energy a bag and duty go first."""
    results = list(RESULTS)
    for name in ("a bag", "on", "cool"):
        if 5 + 8 * keys + sum(width for _, width in results) > screen.width:
            results = [one for one in results if one[0] != name]
    return results


def _row(screen: Screen, row: Variation, shown: Sequence[str], results: Sequence[tuple[str, int]], mark: str) -> None:
    values = "".join(f"{_value(row.values[key]):>8}" for key in shown)
    if row.cycle is None:
        screen.line(f"{mark:<5}{values}  none")
        screen.wrapped(row.problem, " " * 7)
        return
    cycle = row.cycle
    told = {
        "hot": f"{cycle.heat_up_h:.2f}",
        "out": f"{cycle.ready_to_unload_h:.2f}",
        "cool": f"{cycle.ready_to_inoculate_h:.2f}",
        "kWh": f"{cycle.energy_kwh:,.1f}",
        "a bag": f"{cycle.energy_kwh / float(row.values['bags']):.2f}",
        "cost": f"{row.cost:,.2f}",
        "on": f"{cycle.hold_duty:.0%}",
    }
    screen.line(f"{mark:<5}{values}{''.join(f'{told[name]:>{width}}' for name, width in results)}")


def _value(value: Value) -> str:
    return value if isinstance(value, str) else f"{value:g}"
