"""A run with a power cut: nothing happens without one, heat is conserved, and the hold counts only while all is hot."""

from __future__ import annotations

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from models.thermal.curve import CurveRow, minutes_between
from models.thermal.cycle import Surroundings
from models.thermal.errors import ThermalError
from models.thermal.interruption import Interruption, advice, interrupted_cycle
from models.thermal.load import LoadPart
from tests.planning.tiny import tiny


def cut(off_min: int, break_min: int, **changes: object) -> Interruption:
    drum = {
        "code": "drum", "places": 60, "element_kw": 9.0, "generator_water_kg": 30, "loss_w_per_k": 10,
        "generator_loss_w_per_k": 3, "metal_kg": 120, "loads": [1.0], "unload_below_c": 70,
    }  # fmt: skip
    farm = tiny(steriliser=[drum | changes], programme=[{"code": "hot", "target_core_c": 92, "hold_h": 6}])
    load = (LoadPart(farm.recipe[0], farm.bag[0], 60),)
    return interrupted_cycle(
        Surroundings.of(farm), farm.steriliser[0], farm.programme[0], load, month=1, off_min=off_min,
        break_min=break_min,
    )  # fmt: skip


@pytest.mark.parametrize("off_min", [0, 10, 120, 300])
def test_a_break_of_no_length_changes_nothing(off_min: int) -> None:
    found = cut(off_min, 0)
    assert found.ready_to_unload_h == pytest.approx(found.planned.ready_to_unload_h, abs=0.01)
    assert found.ready_to_inoculate_h == pytest.approx(found.planned.ready_to_inoculate_h, abs=0.01)
    assert found.energy_kwh == pytest.approx(found.planned.energy_kwh, rel=0.004)
    assert found.warm_min == pytest.approx(found.warm_planned_min, abs=1)
    assert found.hold_restarts == 0


def test_before_steam_the_whole_run_moves_by_the_break() -> None:
    """With nothing hot yet but the water, which keeps its heat, the run is later by the break."""
    found = cut(5, 45, generator_loss_w_per_k=0)
    assert 60 * (found.ready_to_unload_h - found.planned.ready_to_unload_h) == pytest.approx(45, abs=1.01)
    assert found.energy_kwh == pytest.approx(found.planned.energy_kwh, rel=0.004)


def test_without_losses_a_break_in_the_hold_costs_nothing() -> None:
    found = cut(300, 60, loss_w_per_k=0, generator_loss_w_per_k=0)
    assert found.lowest_vessel_c > 92
    assert found.hold_restarts == 0
    assert found.ready_to_unload_h == pytest.approx(found.planned.ready_to_unload_h, abs=0.02)


def test_heat_lost_in_a_break_is_the_losses() -> None:
    """What bags and metal give off while no steam comes is the vessel's loss: the sum of U (T - T_a) dt."""
    found = cut(400, 120, loss_w_per_k=8)
    before, after = (next(row for row in found.curve if row.minutes == minute) for minute in (400, 520))
    bags, metal = 60 * 2 * (0.5 * 4.19 + 0.5 * 1.45), 120 * 0.49
    stored = bags * (before.mean_c - after.mean_c) + metal * (before.steam_c - after.steam_c)
    lost = sum(0.008 * (row.steam_c - 15) * 60 for row in found.curve if 400 < row.minutes <= 520)
    assert stored == pytest.approx(lost, rel=0.005)


def test_a_cold_vessel_breaks_the_hold() -> None:
    found = cut(300, 240, loss_w_per_k=25)
    assert found.lowest_vessel_c < 92
    assert found.hold_restarts >= 1
    assert found.hold_started_min > 540
    cores = [row for row in found.curve if found.hold_started_min <= row.minutes <= found.hold_started_min + 360]
    assert min(row.core_c for row in cores) >= 92 - 0.2
    assert found.ready_to_unload_h > found.planned.ready_to_unload_h + 4


@settings(max_examples=25, deadline=None)
@given(off_min=st.integers(0, 400), short=st.integers(0, 200), more=st.integers(1, 200))
def test_a_longer_break_is_never_ready_sooner(off_min: int, short: int, more: int) -> None:
    first, second = cut(off_min, short), cut(off_min, short + more)
    assert second.ready_to_unload_h >= first.ready_to_unload_h - 0.02
    assert second.steam_again_min > first.steam_again_min
    assert first.ready_to_unload_h >= first.planned.ready_to_unload_h - 0.02


@pytest.mark.parametrize("off_min", [-1, 100_000])
def test_a_break_outside_of_the_steam_is_refused(off_min: int) -> None:
    with pytest.raises(ThermalError, match="from steam on to the end of the hold was expected"):
        cut(off_min, 10)


def test_advice_follows_the_rules() -> None:
    long = advice(cut(100, 600), sours_after_h=6, again_within_h=8)
    assert long[0].startswith("Discard the load: steam was away for 10.")
    cold = advice(cut(20, 420), sours_after_h=6, again_within_h=8)
    assert any("wet mix" in words for words in cold)
    broken = advice(cut(300, 240, loss_w_per_k=25), sours_after_h=6, again_within_h=8)
    assert any("count the whole hold again" in words for words in broken)
    short = advice(cut(300, 3), sours_after_h=6, again_within_h=8)
    assert any("the hold goes on" in words for words in short)
    assert all("probe" in words[-1] for words in (long, cold, broken, short))


def test_minutes_between_by_hand() -> None:
    """Up from 20 to 70 in 100 minutes, flat, and down to 45 in 50: 60 minutes up, 30 down between 30 and 60."""
    rows = [CurveRow(t, 0, 0, c, 0, 0) for t, c in ((0, 20), (100, 70), (110, 70), (160, 45))]
    assert minutes_between(rows, 30, 60) == pytest.approx(60 + 30)
