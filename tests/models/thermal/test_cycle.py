"""The steam cycle: limits in closed form, balance, monotony, refusals."""

from __future__ import annotations

from itertools import pairwise
from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from models.farm import Farm
from models.thermal.curve import CurveRow, by_minute
from models.thermal.cycle import Cycle, steam_cycle
from models.thermal.errors import ThermalError
from models.thermal.load import LoadPart
from models.thermal.substrate import heat_capacity
from models.thermal.table import cycle_row, power_by_quarter
from tests.planning.tiny import tiny

PLAIN = {"code": "drum", "places": 300, "element_kw": 6.0, "loads": [1.0], "unload_below_c": 70, "vent_min": 0}


def cycle(
    *, bags: int = 100, steriliser: dict[str, Any] | None = None, recipe: dict[str, Any] | None = None, **changes: Any
) -> Cycle:
    sections: dict[str, Any] = {
        "steriliser": [PLAIN | {"generator_water_kg": 20, "loss_w_per_k": 5} | (steriliser or {})]
    }
    sections["recipe"] = [{"code": "mix", "water_pct": 60, "density_kg_m3": 500} | (recipe or {})]
    farm = tiny(**(sections | changes))
    load = [LoadPart(farm.recipe[0], farm.bag[0], bags)]
    return steam_cycle(farm, farm.steriliser[0], farm.programme[0], load, month=1)


LOSSLESS = {
    "loss_w_per_k": 0, "generator_loss_w_per_k": 0, "metal_kg": 0, "condensate_return": True, "surface_w_m2_k": 1e6,
    "generator_water_kg": 1e-6,
}  # fmt: skip


@pytest.mark.parametrize("power", [3.0, 6.0, 9.0])
def test_without_losses_heat_up_is_heat_over_power(power: float) -> None:
    """No losses, no metal, no resistance inside the bag: Q / P, with Q = m c (T - T_0) to the target."""
    found = cycle(steriliser=LOSSLESS | {"element_kw": power}, recipe={"conductivity_w_m_k": 5.0})
    ideal = 100 * 2 * heat_capacity(60, 1.45) * (90 - 15) / power / 3600
    # The largest conductivity the file allows still leaves minutes of lag; they are the same at every power.
    assert ideal <= found.heat_up_h <= ideal + 0.35


@pytest.mark.parametrize(("power", "bags", "start"), [(2.5, 20, 15.0), (6.0, 100, 5.0), (12.0, 300, 30.0)])
def test_lumped_limit_is_exact(power: float, bags: int, start: float) -> None:
    """With no lag inside the bag, beyond what the file allows, heat-up after boil-up is Q / P."""
    farm = tiny(
        steriliser=[PLAIN | LOSSLESS | {"element_kw": power}],
        recipe=[{"code": "mix", "water_pct": 60, "density_kg_m3": 500}],
    )
    recipe = farm.recipe[0].model_copy(update={"conductivity_w_m_k": 1e4})
    found = steam_cycle(
        farm, farm.steriliser[0], farm.programme[0], [LoadPart(recipe, farm.bag[0], bags)], month=1, start_c=start
    )
    ideal = bags * 2 * heat_capacity(60, recipe.dry_cp_kj_kg_k) * (90 - start) / power / 3600
    assert found.heat_up_h - found.boil_up_h == pytest.approx(ideal, rel=0.002)


def test_heat_of_a_load_by_common_practice() -> None:
    """Common practice, no source: 285 kg water at 4.2 and 190 kg dry matter at 1.76 kJ/kg K from 18 to 95 °C.

    They take 92.2 + 25.7 MJ; a lossless 2.5 kW element needs 13.1 h for it, 4.5 kW 7.3 h.
    """
    water, dry = 285 * 4.2 * 77 / 1000, 190 * 1.76 * 77 / 1000
    assert (round(water, 1), round(dry, 1)) == (92.2, 25.7)
    heat = 475 * heat_capacity(100 * 285 / 475, 1.76, 4.2) * 77 / 1000
    assert heat == pytest.approx(92.2 + 25.7, abs=0.05)
    assert heat / 2.5 / 3.6 == pytest.approx(13.1, abs=0.05)
    assert heat / 4.5 / 3.6 == pytest.approx(7.3, abs=0.05)


@pytest.mark.parametrize(("power", "hours"), [(2.5, 13.1), (4.5, 7.3)])
def test_lumped_limit_of_the_model_gives_common_practice(power: float, hours: float) -> None:
    """Common practice, no source: 475 kg as above; the model without losses and with thin bags.

    Bags of 5 mm thickness have no lag. The model's water has 4.19 kJ/kg K, which makes 0.2 % of the heat.
    """
    thin = {"code": "b2", "wet_kg": 0.475, "shape": "brick", "length_mm": 400, "width_mm": 380, "height_mm": 5}
    found = cycle(
        bags=1000,
        steriliser=LOSSLESS | {"element_kw": power, "places": 1000},
        recipe={"water_pct": 60, "dry_cp_kj_kg_k": 1.76, "conductivity_w_m_k": 5.0, "density_kg_m3": 625},
        bag=[thin],
        programme=[{"code": "hot", "target_core_c": 95, "hold_h": 1}],
        site={"name": "Lumped", "timezone": "Europe/Dublin", "ambient_c": 18},
    )
    assert found.heat_up_h == pytest.approx(hours, rel=0.005)


@settings(max_examples=200, deadline=None)
@given(
    bags=st.integers(5, 300),
    power=st.floats(4, 40),
    metal=st.floats(0, 500),
    loss=st.floats(0, 12),
    water=st.floats(40, 75),
    altitude=st.floats(0, 1500),
)
def test_energy_balance_closes(
    bags: int, power: float, metal: float, loss: float, water: float, altitude: float
) -> None:
    found = cycle(
        bags=bags,
        steriliser={"element_kw": power, "metal_kg": metal, "loss_w_per_k": loss},
        recipe={"water_pct": water},
        site={"name": "Any", "timezone": "Europe/Dublin", "ambient_c": 15, "altitude_m": altitude},
    )
    assert found.balance_error_pct <= 0.1
    assert sum(power_by_quarter(found)[0]) == pytest.approx(found.energy_kwh)
    assert found.heat_up_h > found.boil_up_h > 0
    assert all(row.core_c <= found.boiling_c + 1e-6 for row in found.curve)


@settings(max_examples=30, deadline=None)
@given(bags=st.integers(10, 200), power=st.floats(4, 20), water=st.floats(45, 70))
def test_heat_up_is_monotone(bags: int, power: float, water: float) -> None:
    base = cycle(bags=bags, steriliser={"element_kw": power}, recipe={"water_pct": water}).heat_up_h
    assert cycle(bags=bags + 20, steriliser={"element_kw": power}, recipe={"water_pct": water}).heat_up_h >= base - 1e-6
    assert (
        cycle(bags=bags, steriliser={"element_kw": power * 1.2}, recipe={"water_pct": water}).heat_up_h <= base + 1e-6
    )
    assert cycle(bags=bags, steriliser={"element_kw": power}, recipe={"water_pct": water + 4}).heat_up_h >= base - 1e-6


def test_hold_takes_what_is_lost() -> None:
    """Long after everything is hot the element gives the loss: U (T - T_a)."""
    found = cycle(
        programme=[{"code": "hot", "target_core_c": 90, "hold_h": 40}],
        steriliser={"condensate_return": True, "generator_loss_w_per_k": 0},
    )
    last = next(row for row in reversed(found.curve) if row.element_kw > 0)
    assert last.element_kw == pytest.approx(0.005 * (found.boiling_c - 15), rel=1e-4)


@settings(max_examples=30, deadline=None)
@given(bags=st.integers(10, 200), power=st.floats(4, 20), vent=st.integers(0, 45), hold=st.floats(0.1, 12))
def test_curve_follows_the_phases(bags: int, power: float, vent: int, hold: float) -> None:
    found = cycle(
        bags=bags,
        steriliser={"element_kw": power, "vent_min": vent},
        programme=[{"code": "hot", "target_core_c": 90, "hold_h": hold}],
    )
    times = [row.minutes for row in found.curve]
    assert all(a < b <= a + 2.5 for a, b in pairwise(times))
    assert times[-1] == pytest.approx(60 * found.ready_to_inoculate_h)
    assert found.curve[-1].core_c == pytest.approx(28, abs=0.01)
    rows = by_minute(found.curve)
    assert [row.minutes for row in rows] == list(range(int(60 * found.ready_to_inoculate_h) + 1))
    hot = next(row.minutes for row in rows if row.core_c >= 90)
    assert 0 <= hot - 60 * found.heat_up_h < 1.01
    ended = 60 * (found.heat_up_h + hold)
    assert all(row.element_kw == 0 for row in rows if row.minutes > ended + 1)
    assert sum(row.element_kw for row in rows) / 60 == pytest.approx(found.energy_kwh, abs=power / 20)


def test_by_minute_is_linear_between_rows() -> None:
    rows = by_minute(
        [CurveRow(0, 10, 10, 10, 10, 5), CurveRow(2.5, 60, 35, 15, 20, 3), CurveRow(3.2, 60, 35, 15, 20, 0)]
    )
    assert [row.minutes for row in rows] == [0, 1, 2, 3]
    assert [row.steam_c for row in rows] == pytest.approx([10, 30, 50, 60])
    assert [row.core_c for row in rows] == pytest.approx([10, 12, 14, 15])
    assert [row.element_kw for row in rows] == [5, 3, 3, 0]


def test_lower_start_and_altitude_take_longer() -> None:
    farm = tiny()
    load = [LoadPart(farm.recipe[0], farm.bag[0], 10)]
    args = (farm, farm.steriliser[0], farm.programme[0], load)
    assert steam_cycle(*args, month=1, start_c=5).heat_up_h > steam_cycle(*args, month=1, start_c=25).heat_up_h
    high = {"name": "High", "timezone": "Europe/Dublin", "ambient_c": 15, "altitude_m": 1500}
    assert cycle(site=high).boiling_c < cycle().boiling_c - 4
    assert cycle(site=high).heat_up_h > cycle().heat_up_h


def two_kinds() -> Farm:
    bags = [
        {"code": "b2", "wet_kg": 2, "shape": "cylinder", "diameter_mm": 140, "height_mm": 260},
        {"code": "b4", "wet_kg": 4, "shape": "cylinder", "diameter_mm": 180, "height_mm": 320},
    ]
    return tiny(bag=bags)


def test_slowest_core_decides() -> None:
    farm = two_kinds()
    drum, programme = farm.steriliser[0], farm.programme[0]
    small, large = ((farm.recipe[0], bag) for bag in farm.bag)
    alone = [cycle_row(farm, drum, programme, [family], 1.0, 1) for family in (small, large)]
    both = cycle_row(farm, drum, programme, [small, large], 1.0, 1)
    assert both.ready_to_unload_min == max(row.ready_to_unload_min for row in alone)
    assert both.cool_down_min == max(row.cool_down_min for row in alone)
    mixed = steam_cycle(farm, drum, programme, [LoadPart(*small, 5), LoadPart(*large, 5)], month=1)
    assert mixed.ready_to_unload_h <= both.ready_to_unload_min / 60


@pytest.mark.parametrize(
    ("changes", "words"),
    [
        (
            {"programme": [{"code": "hot", "target_core_c": 105, "hold_h": 4}]},
            ["105", "cannot be reached", "same kill"],
        ),
        ({"steriliser": {"element_kw": 0.3, "loss_w_per_k": 10}}, ["never reaches", "bigger element"]),
        ({"steriliser": {"element_kw": 0.2, "generator_loss_w_per_k": 10}}, ["never boils"]),
        ({"steriliser": {"unload_below_c": 15}}, ["never fall below 15"]),
        ({"limits": {"inoculate_below_c": 14}}, ["never fall below 14"]),
        ({"bags": 0}, ["at least one bag"]),
    ],
)
def test_refusals_say_why(changes: dict[str, Any], words: list[str]) -> None:
    with pytest.raises(ThermalError) as caught:
        cycle(**changes)
    assert all(word in str(caught.value) for word in words), str(caught.value)
