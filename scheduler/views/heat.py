"""How a steam cycle looks: phases, temperatures, energy and money, kill, cautions."""

from __future__ import annotations

from bisect import bisect_right
from calendar import month_name
from dataclasses import dataclass
from typing import Any

from rich.console import Console

from models.farm import Farm, Steriliser, Strain
from models.thermal.curve import by_minute
from models.thermal.cycle import Cycle
from models.thermal.lethality import ORGANISMS
from models.thermal.table import power_by_quarter
from scheduler.tariff import energy_cost
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


@dataclass(frozen=True, slots=True)
class HeatAnswer:
    """A cycle with what was asked: bags, element power [kW], month, and steam on [minutes after midnight]."""

    farm: Farm
    steriliser: Steriliser
    strain: Strain
    bags: int
    element_kw: float
    month: int
    steam_on: int
    cycle: Cycle

    @property
    def cost(self) -> float:
        """Electricity from steam on to the end of the hold, by tariff [currency]."""
        return energy_cost(self.farm.tariff, self.steam_on, power_by_quarter(self.cycle)[0])


def heat_document(answer: HeatAnswer) -> dict[str, Any]:
    """The cycle as one JSON document, ``bagweek/heat/1``: hours, kWh, °C, MJ, kg, kW."""
    cycle = answer.cycle
    hours = ("boil_up_h", "heat_up_h", "hold_h", "vent_h", "cool_in_place_h", "cool_down_h", "ready_to_unload_h",
             "ready_to_inoculate_h")  # fmt: skip
    return {
        "schema": "bagweek/heat/1",
        "farm": answer.farm.site.name,
        "currency": answer.farm.site.currency,
        "steriliser": answer.steriliser.code,
        "strain": answer.strain.code,
        "bags": answer.bags,
        "element_kw": answer.element_kw,
        "month": answer.month,
        "steam_on": _clock(answer.steam_on),
        "boiling_c": round(cycle.boiling_c, 3),
        **{name: round(getattr(cycle, name), 4) for name in hours},
        "energy_kwh": round(cycle.energy_kwh, 3),
        "cost": round(answer.cost, 2),
        "heat_into_load_mj": round(cycle.heat_into_load_mj, 3),
        "condensate_kg": round(cycle.condensate_kg, 2),
        "mean_hold_kw": round(cycle.mean_hold_kw, 4),
        "hold_duty": round(cycle.hold_duty, 4),
        "log_reduction": {name: round(value, 3) for name, value in cycle.log_reduction.items()},
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
        "cautions": [*cycle.cautions, *SAFETY],
    }


def _clock(minutes: int) -> str:
    return f"{minutes % 1440 // 60:02d}:{minutes % 60:02d}"


def show_heat(console: Console, answer: HeatAnswer) -> None:
    """Print a cycle."""
    screen, cycle = Screen(console), answer.cycle
    farm, currency = answer.farm, answer.farm.site.currency
    programme = farm.programme_of(answer.strain)
    bags = "1 bag" if answer.bags == 1 else f"{answer.bags} bags"
    screen.wrapped(f"{farm.site.name}: {bags} of {answer.strain.code} in {answer.steriliser.code}", style="bold")
    screen.wrapped(
        f"{answer.bags * farm.bag_of(answer.strain).wet_kg:,.0f} kg, {answer.element_kw:g} kW,"
        f" {month_name[answer.month]},"
        f" steam on at {_clock(answer.steam_on)}. Programme {programme.code}: {programme.target_core_c:g} °C in the"
        f" coldest core for {programme.hold_h:g} h. Water boils at {cycle.boiling_c:.1f} °C here."
    )
    screen.heading("The cycle")
    screen.line(
        f"{'phase, and how it ends':<30}{'hours':>8}{'steam on +':>12}{'clock':>12}{'around':>9}{'core':>9}", "dim"
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
        screen.line(
            f"{name:<30}{hours:>8.2f}{f'{passed:.2f} h':>12}{_clock_and_day(answer.steam_on + round(60 * passed)):>12}"
            f"{around:>6.1f} °C{core:>6.1f} °C"
        )
    screen.line(f"{'out of the steriliser after':<34}{cycle.ready_to_unload_h:>8.2f} h", "bold")
    screen.line(f"{'cool enough to inoculate after':<34}{cycle.ready_to_inoculate_h:>8.2f} h", "bold")
    screen.heading("Energy and water")
    for name, value in (
        ("electricity", f"{cycle.energy_kwh:,.1f} kWh"),
        ("its price by tariff", f"{answer.cost:,.2f} {currency}"),
        ("heat into the bags", f"{cycle.heat_into_load_mj:,.1f} MJ"),
        ("power while holding", f"{cycle.mean_hold_kw:.2f} kW, element on {cycle.hold_duty:.0%} of the time"),
        ("steam condensed", f"{cycle.condensate_kg:,.0f} kg"),
        ("heat balance closes within", f"{cycle.balance_error_pct:.4f} %"),
    ):
        screen.line(f"{name:<34}{value}")
    screen.heading("Kill at the slowest core, in powers of ten: indicative only")
    for organism in ORGANISMS:
        kill = cycle.log_reduction[organism.name]
        screen.line(f"{organism.name:<34}{f'{kill:.1f}' if kill <= MOST_SHOWN else f'over {MOST_SHOWN}':>8}")
        screen.wrapped(organism.source, "    ", "dim")
    screen.heading("Take care")
    for note in (*cycle.cautions, *SAFETY):
        screen.wrapped(note, "- ")


def _clock_and_day(minutes: int) -> str:
    """Clock time, with the days that have passed since steam on."""
    days = minutes // 1440
    return f"{_clock(minutes)} +{days} d" if days else _clock(minutes)


def _at(cycle: Cycle, hours: float) -> tuple[float, float]:
    """What surrounds the bags at the end of a phase, and the core between two rows [°C]."""
    minutes = 60 * hours
    index = max(1, bisect_right(cycle.curve, minutes + 1e-6, key=lambda row: row.minutes))
    before, after = cycle.curve[index - 1], cycle.curve[min(index, len(cycle.curve) - 1)]
    share = (minutes - before.minutes) / (after.minutes - before.minutes) if after is not before else 0.0
    return before.steam_c, before.core_c + share * (after.core_c - before.core_c)
