"""How a steam cycle looks: phases, course, energy and money, mix, kill, cautions."""

from __future__ import annotations

from bisect import bisect_right
from calendar import month_name
from collections.abc import Sequence
from typing import Any

from rich.console import Console

from models.thermal.curve import CurveRow, by_minute
from models.thermal.cycle import Cycle
from models.thermal.lethality import ORGANISMS
from scheduler.heating.answer import HeatAnswer
from scheduler.heating.question import Question
from scheduler.views.chart import Series, draw, spark
from scheduler.views.screen import Screen

MOST_SHOWN = 12
SAFETY = (
    "Steam scalds and cannot be seen: gloves, face shield, wait before opening; bags stay hot for hours.",
    "Keep the vent open and the relief valve free; never plug, cap or valve either. Vessels fall under pressure law.",
    "Low water must cut the heat by itself; never feed cold water into a hot dry generator.",
    "Earth all metal, protect the circuit by a residual-current device, have mains work done by a licensed person.",
    "Local codes, the maker's instructions and a competent person come first.",
    "These are estimates: no safety control and no validated sterilisation record.",
)
HOURS = ("boil_up_h", "heat_up_h", "hold_h", "vent_h", "cool_in_place_h", "cool_down_h", "ready_to_unload_h",
         "ready_to_inoculate_h")  # fmt: skip


def question_document(question: Question) -> dict[str, Any]:
    """What was asked, as every document of ``bagweek heat`` opens."""
    return {
        "schema": "bagweek/heat/1",
        "farm": question.farm.site.name,
        "currency": question.farm.site.currency,
        "steriliser": question.steriliser.code,
        "strain": question.strains[0].code,
        "bags": question.bags,
        "load": [
            {"strain": strain.code, "bag": part.bag.code, "recipe": part.recipe.code, "bags": part.bags,
             "wet_kg": round(part.wet_kg, 3), "water_pct": part.recipe.water_pct}
            for strain, part in zip(question.strains, question.load, strict=True)
        ],
        "element_kw": question.steriliser.element_kw,
        "month": question.month,
    }  # fmt: skip


def heat_document(answer: HeatAnswer) -> dict[str, Any]:
    """The cycle as one JSON document, ``bagweek/heat/1``: hours, kWh, °C, MJ, kg, kW."""
    cycle = answer.cycle
    return {
        **question_document(answer.question),
        "steam_on": answer.steam_on.iso,
        "unload_by": None if answer.unload_by is None else answer.unload_by.iso,
        "ready_to_unload": answer.steam_on.plus(60 * cycle.ready_to_unload_h + 1).iso,
        "ready_to_inoculate": answer.steam_on.plus(60 * cycle.ready_to_inoculate_h + 1).iso,
        "boiling_c": round(cycle.boiling_c, 3),
        **{name: round(getattr(cycle, name), 4) for name in HOURS},
        "energy_kwh": round(cycle.energy_kwh, 3),
        "cost": round(answer.cost, 2),
        "energy_by_period": [
            {"period": one.period, "price": one.price, "kwh": round(one.kwh, 3), "cost": round(one.cost, 2)}
            for one in answer.energy
        ],
        "heat_into_load_mj": round(cycle.heat_into_load_mj, 3),
        "condensate_kg": round(cycle.condensate_kg, 2),
        "water_kg": round(cycle.water_kg, 2),
        "mean_hold_kw": round(cycle.mean_hold_kw, 4),
        "hold_duty": round(cycle.hold_duty, 4),
        "log_reduction": {name: round(value, 3) for name, value in cycle.log_reduction.items()},
        "equivalent_min": {name: round(value, 3) for name, value in cycle.equivalent_min.items()},
        "mix": [
            {"recipe": part.recipe.code, "wet_kg": round(mix.wet_kg, 2), "dry_kg": round(mix.dry_kg, 2),
             "add_water_kg": round(mix.add_water_kg, 2), "cost": round(mix.cost, 2),
             "ingredients": [{"name": name, "kg": round(kg, 2)} for name, kg in mix.ingredients]}
            for part, mix in zip(answer.question.load, answer.mixes, strict=True)
        ],
        "curve": [
            {
                "minutes": row.minutes,
                "steam_c": round(row.steam_c, 2),
                "surface_c": round(row.surface_c, 2),
                "core_c": round(row.core_c, 2),
                "mean_c": round(row.mean_c, 2),
                "element_kw": round(row.element_kw, 3),
            }
            for row in by_minute(cycle.curve)
        ],
        "balance_error_pct": round(cycle.balance_error_pct, 6),
        "hints": list(answer.hints),
        "cautions": [*cycle.cautions, *SAFETY],
    }  # fmt: skip


def show_question(screen: Screen, question: Question, boiling_c: float) -> None:
    """Say what was asked: the load, the programme, where water boils."""
    farm, programme = question.farm, question.programme
    screen.wrapped(f"{farm.site.name}: {question.load_words} in {question.steriliser.code}", style="bold")
    screen.wrapped(
        f"{question.wet_kg:,.0f} kg, {question.steriliser.element_kw:g} kW, {month_name[question.month]}."
        f" Programme {programme.code}: {programme.target_core_c:g} °C in the coldest core for"
        f" {programme.hold_h:g} h. Water boils at {boiling_c:.1f} °C here"
        + (f" under {question.steriliser.gauge_kpa:g} kPa." if question.steriliser.gauge_kpa else ".")
    )


def show_heat(console: Console, answer: HeatAnswer) -> None:
    """Print a cycle."""
    screen, cycle = Screen(console), answer.cycle
    show_question(screen, answer.question, cycle.boiling_c)
    _times(screen, answer)
    _phases(screen, answer)
    show_course(screen, cycle.curve)
    _energy(screen, answer)
    _mix(screen, answer)
    screen.heading("Kill at the slowest core, in powers of ten: indicative only")
    for organism in ORGANISMS:
        kill = cycle.log_reduction[organism.name]
        screen.line(f"{organism.name:<34}{f'{kill:.1f}' if kill <= MOST_SHOWN else f'over {MOST_SHOWN}':>8}")
        screen.wrapped(organism.source, "    ", "dim")
    for name, minutes in cycle.equivalent_min.items():
        screen.line(f"{f'weighs as much as, at {name}':<34}{minutes:>8.1f} minutes, z 10 °C")
    show_cautions(screen, (*cycle.cautions, *answer.hints))


def show_cautions(screen: Screen, notes: tuple[str, ...]) -> None:
    """Print what to take care of; always with the cautions on steam."""
    screen.heading("Take care")
    for note in (*notes, *SAFETY):
        screen.wrapped(note, "- ")


def _times(screen: Screen, answer: HeatAnswer) -> None:
    cycle, start = answer.cycle, answer.steam_on
    screen.heading("When")
    if answer.unload_by is not None:
        screen.line(f"{'to be unloaded by':<34}{answer.unload_by.words}")
        screen.line(f"{'steam on at the latest':<34}{start.words}", "bold")
    else:
        screen.line(f"{'steam on':<34}{start.words}")
    for name, hours in (
        ("out of the steriliser from", cycle.ready_to_unload_h),
        ("cool enough to inoculate from", cycle.ready_to_inoculate_h),
    ):
        # The first whole minute that is not too early.
        screen.line(f"{name:<34}{start.plus(60 * hours + 1 - 1e-6).words:<20}{hours:>8.2f} h after steam on", "bold")


def _phases(screen: Screen, answer: HeatAnswer) -> None:
    cycle = answer.cycle
    screen.heading("The cycle")
    screen.line(
        f"{'phase, and how it ends':<27}{'hours':>8}{'steam on +':>12}{'clock':>17}{'around':>8}{'core':>8}", "dim"
    )
    passed = 0.0
    for name, hours in (
        ("boil-up of the generator", cycle.boil_up_h),
        ("heat-up to a hot core", cycle.heat_up_h - cycle.boil_up_h),
        ("hold", cycle.hold_h),
        ("vent", cycle.vent_h),
        ("cooling in the steriliser", cycle.cool_in_place_h),
        ("cooling in the room", cycle.cool_down_h),
    ):
        passed += hours
        around, core = _at(cycle, passed)
        clock = answer.steam_on.plus(60 * passed + 0.5).words
        screen.line(f"{name:<27}{hours:>8.2f}{f'{passed:.2f} h':>12}{clock:>17}{around:>5.1f} °C{core:>5.1f} °C")


def show_course(screen: Screen, curve: Sequence[CurveRow]) -> None:
    """Draw what surrounds the bags and the slowest core over the hours, and the element's power below."""
    screen.heading("Its course")
    times = [row.minutes / 60 for row in curve]
    draw(
        screen,
        (
            Series("around the bags", times, [row.steam_c for row in curve], ("·", ".")),
            Series("slowest core", times, [row.core_c for row in curve], ("●", "o")),
        ),
        unit="°C",
    )
    bars = _binned([row.element_kw for row in curve], times, screen.width - 8)
    screen.line(f"{'kW':>5}  {spark(bars, ascii_only=screen.ascii_only)}")


def _binned(values: list[float], times: list[float], width: int) -> list[float]:
    """Mean of what falls into each column."""
    sums, counts = [0.0] * width, [0] * width
    last = max(times[-1], 1e-9)
    for time, value in zip(times, values, strict=True):
        column = min(width - 1, int(time / last * width))
        sums[column] += value
        counts[column] += 1
    found: list[float] = []
    for total, count in zip(sums, counts, strict=True):
        found.append(total / count if count else (found[-1] if found else 0.0))
    return found


def _energy(screen: Screen, answer: HeatAnswer) -> None:
    cycle, currency = answer.cycle, answer.question.farm.site.currency
    screen.heading("Energy and water")
    per_bag = cycle.energy_kwh / answer.question.bags
    for name, value in (
        ("electricity", f"{cycle.energy_kwh:,.1f} kWh, {per_bag:.2f} kWh a bag"),
        *((f"  {one.period}, at {one.price:g} {currency}/kWh",
           f"{one.kwh:,.1f} kWh, {one.cost:,.2f} {currency}") for one in answer.energy),
        ("its price by tariff", f"{answer.cost:,.2f} {currency}"),
        ("heat into the bags", f"{cycle.heat_into_load_mj:,.1f} MJ"),
        ("power while holding", f"{cycle.mean_hold_kw:.2f} kW, element on {cycle.hold_duty:.0%} of the time"),
        ("steam condensed", f"{cycle.condensate_kg:,.0f} kg"),
        ("water fed to the generator", f"{cycle.water_kg:,.0f} kg beside its first filling"),
        ("heat balance closes within", f"{cycle.balance_error_pct:.4f} %"),
    ):  # fmt: skip
        screen.line(f"{name:<34}{value}")


def _mix(screen: Screen, answer: HeatAnswer) -> None:
    screen.heading("The mix")
    for part, mix in zip(answer.question.load, answer.mixes, strict=True):
        screen.line(
            f"{part.recipe.code}: {mix.wet_kg:,.1f} kg at {part.recipe.water_pct:g} % of water,"
            f" {mix.dry_kg:,.1f} kg of it dry"
        )
        for name, kg in mix.ingredients:
            screen.line(f"  {name:<32}{kg:>9,.1f} kg")
        screen.line(f"  {'water to add':<32}{mix.add_water_kg:>9,.1f} kg")


def _at(cycle: Cycle, hours: float) -> tuple[float, float]:
    """What surrounds the bags at the end of a phase, and the core between two rows [°C]."""
    minutes = 60 * hours
    index = max(1, bisect_right(cycle.curve, minutes + 1e-6, key=lambda row: row.minutes))
    before, after = cycle.curve[index - 1], cycle.curve[min(index, len(cycle.curve) - 1)]
    share = (minutes - before.minutes) / (after.minutes - before.minutes) if after is not before else 0.0
    return before.steam_c, before.core_c + share * (after.core_c - before.core_c)
