"""How a run with a power cut looks."""

from __future__ import annotations

from typing import Any

from rich.console import Console

from models.thermal.curve import by_minute
from models.thermal.interruption import WARM_C
from scheduler.heating.power_cut import PowerCut
from scheduler.views.heat import SAFETY, question_document, show_cautions, show_course, show_question
from scheduler.views.screen import Screen


def power_cut_document(cut: PowerCut) -> dict[str, Any]:
    """The run as one JSON document, ``bagweek/heat/1`` with ``interrupted``: times from steam on [min, h], °C, kWh."""
    found = cut.found
    return {
        **question_document(cut.question),
        "steam_on": cut.steam_on.iso,
        "ready_to_unload_h": round(found.ready_to_unload_h, 4),
        "ready_to_inoculate_h": round(found.ready_to_inoculate_h, 4),
        "energy_kwh": round(found.energy_kwh, 3),
        "interrupted": {
            "off_min": found.off_min,
            "back_min": found.back_min,
            "steam_again_min": round(found.steam_again_min, 2),
            "core_at_break_c": round(found.core_at_break_c, 2),
            "core_after_c": round(found.core_after_c, 2),
            "lowest_vessel_c": round(found.lowest_vessel_c, 2),
            "warm_min": round(found.warm_min, 1),
            "warm_planned_min": round(found.warm_planned_min, 1),
            "hold_restarts": found.hold_restarts,
            "hold_started_min": round(found.hold_started_min, 2),
            "planned_ready_to_unload_h": round(found.planned.ready_to_unload_h, 4),
            "planned_ready_to_inoculate_h": round(found.planned.ready_to_inoculate_h, 4),
            "advice": list(cut.advice),
        },
        "curve": [
            {"minutes": row.minutes, "steam_c": round(row.steam_c, 2), "surface_c": round(row.surface_c, 2),
             "core_c": round(row.core_c, 2), "mean_c": round(row.mean_c, 2), "element_kw": round(row.element_kw, 3)}
            for row in by_minute(found.curve)
        ],
        "cautions": [*found.planned.cautions, *SAFETY],
    }  # fmt: skip


def show_power_cut(console: Console, cut: PowerCut) -> None:
    """Print a run with a power cut beside the run as it was meant."""
    screen, found, start = Screen(console), cut.found, cut.steam_on
    planned = found.planned
    show_question(screen, cut.question, planned.boiling_c)
    screen.heading(f"Power off from {start.plus(found.off_min).words} to {start.plus(found.back_min).words}")
    again = start.plus(found.steam_again_min + 1 - 1e-6).words
    warm = f"{found.warm_min:.0f} minutes, {found.warm_planned_min:.0f} without the break"
    for name, value in (
        ("slowest core when it failed", f"{found.core_at_break_c:.1f} °C"),
        ("steam again", f"{again}, with the core at {found.core_after_c:.1f} °C"),
        ("coldest the vessel was meanwhile", f"{found.lowest_vessel_c:.1f} °C"),
        (f"core between {WARM_C[0]:g} and {WARM_C[1]:g} °C", warm),
    ):
        screen.line(f"{name:<36}{value}")
    screen.line()
    screen.line(f"{'':<36}{'without':>18}{'with the break':>20}", "dim")
    for name, without, with_break in (
        ("hold counts from", 60 * planned.heat_up_h, found.hold_started_min),
        ("out of the steriliser from", 60 * planned.ready_to_unload_h, 60 * found.ready_to_unload_h),
        ("cool enough to inoculate from", 60 * planned.ready_to_inoculate_h, 60 * found.ready_to_inoculate_h),
    ):
        clock = [start.plus(minutes + 1 - 1e-6).words for minutes in (without, with_break)]
        screen.line(f"{name:<36}{clock[0]:>18}{clock[1]:>20}", "bold")
    screen.line(f"{'electricity':<36}{f'{planned.energy_kwh:,.1f} kWh':>18}{f'{found.energy_kwh:,.1f} kWh':>20}")
    screen.heading("What to do")
    for words in cut.advice:
        screen.wrapped(words, "- ")
    show_course(screen, found.curve)
    show_cautions(screen, planned.cautions)
