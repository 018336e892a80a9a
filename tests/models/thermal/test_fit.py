"""Fitting a logged run gives back what the run was made with, or says that it cannot."""

from __future__ import annotations

from itertools import pairwise

import numpy as np
import pytest

from models.farm import Farm
from models.thermal.curve import by_minute
from models.thermal.cycle import Surroundings, cycle_in, setting_of
from models.thermal.errors import ThermalError
from models.thermal.fit import Estimate, Fit, RunLog, fit_run
from models.thermal.load import LoadPart
from scheduler.folder import read_farm_folder, scenario_folder


def demo() -> Farm:
    return read_farm_folder(scenario_folder("one-drum")).farm


def made(
    *, conductivity: float, surface: float, loss: float, every: int = 5, until: int = 720, noise: float = 0.15,
    with_kw: bool = True, seed: int = 1,
) -> RunLog:  # fmt: skip
    """A log as the model gives it with other values, read now and then by probes that scatter."""
    farm = demo()
    strain = farm.strain[0]
    recipe = farm.recipe_of(strain).model_copy(update={"conductivity_w_m_k": conductivity})
    drum = farm.steriliser[0].model_copy(update={"surface_w_m2_k": surface, "loss_w_per_k": loss})
    load = (LoadPart(recipe, farm.bag_of(strain), drum.places),)
    rows = by_minute(cycle_in(Surroundings.of(farm), drum, farm.programme[0], load, month=1).curve)
    rng = np.random.default_rng(seed)
    kept = [row for row in rows if row.minutes % every == 0 and row.minutes <= until]
    powers = [0.0] + [
        float(np.mean([row.element_kw for row in rows if low.minutes < row.minutes <= high.minutes]))
        for low, high in pairwise(kept)
    ]
    return RunLog(
        tuple(row.minutes for row in kept),
        tuple(row.steam_c + rng.normal(0, noise) for row in kept),
        tuple(row.core_c + rng.normal(0, noise) for row in kept),
        tuple(powers) if with_kw else None,
    )


def fitted(log: RunLog) -> tuple[Fit, dict[str, Estimate]]:
    farm = demo()
    strain, drum = farm.strain[0], farm.steriliser[0]
    setting = setting_of(Surroundings.of(farm), drum, farm.programme[0], month=1)
    load = LoadPart(farm.recipe_of(strain), farm.bag_of(strain), drum.places)
    fit = fit_run(log, setting, load, drum.surface_w_m2_k)
    return fit, {one.name: one for one in fit.estimates}


def test_a_run_like_the_farm_file_gives_the_farm_file() -> None:
    fit, found = fitted(made(conductivity=0.42, surface=200, loss=8.0, noise=0.0))
    assert fit.rms_k < 0.1
    assert found["conductivity_w_m_k"].value == pytest.approx(0.42, rel=0.03)
    assert found["loss_w_per_k"].value == pytest.approx(8.0, rel=0.06)


@pytest.mark.parametrize(("conductivity", "loss"), [(0.34, 8.0), (0.42, 16.0), (0.55, 5.0)])
def test_conductivity_and_loss_are_found_within_their_ranges(conductivity: float, loss: float) -> None:
    fit, found = fitted(made(conductivity=conductivity, surface=200, loss=loss))
    k, u = found["conductivity_w_m_k"], found["loss_w_per_k"]
    assert k.determined
    assert u.determined
    assert k.low <= conductivity <= k.high
    assert u.low <= loss <= u.high
    assert k.high / k.low < 1.3
    assert fit.rms_k < min(0.4, fit.before_rms_k + 0.01)


def test_ranges_hold_the_truth_nineteen_times_in_twenty() -> None:
    """Twenty logs with other noise: the 95 % range of the conductivity holds the true value nearly always."""
    held = 0
    for seed in range(20):
        _, found = fitted(made(conductivity=0.36, surface=200, loss=11.0, every=15, until=420, noise=0.3, seed=seed))
        one = found["conductivity_w_m_k"]
        held += one.low <= 0.36 <= one.high
    assert held >= 17


def test_without_power_the_loss_is_less_sure() -> None:
    """The element is known to run all the time while steam is short, and only then."""
    fit, without = fitted(made(conductivity=0.42, surface=200, loss=14.0, with_kw=False))
    all_, with_kw = fitted(made(conductivity=0.42, surface=200, loss=14.0))
    assert 0 < fit.power_blocks < all_.power_blocks / 2
    wide, narrow = (one["loss_w_per_k"].high - one["loss_w_per_k"].low for one in (without, with_kw))
    assert wide > 1.5 * narrow
    assert without["loss_w_per_k"].low <= 14 <= without["loss_w_per_k"].high
    short, kept = fitted(made(conductivity=0.42, surface=200, loss=14.0, with_kw=False, noise=2.0, every=20))
    assert not kept["loss_w_per_k"].determined
    assert kept["loss_w_per_k"].value == pytest.approx(8.0)
    assert short.power_blocks > 0


def test_conductivity_and_a_good_surface_are_not_told_apart() -> None:
    """Above a Biot number of some thirty the surface hardly limits, so that a log says nothing of it."""
    fit, found = fitted(made(conductivity=0.40, surface=220, loss=8.0, every=15, noise=0.4))
    assert not found["surface_w_m2_k"].determined
    assert found["surface_w_m2_k"].value == pytest.approx(200)
    assert all(pair == ("diffusivity", "surface") for pair in fit.not_told_apart)


def test_a_poor_surface_is_seen() -> None:
    """At 12 W/m² K the surface limits, so that it is told apart from the conductivity."""
    _, found = fitted(made(conductivity=0.42, surface=12, loss=8.0, every=5, noise=0.05, until=900))
    assert found["surface_w_m2_k"].determined
    assert found["surface_w_m2_k"].low <= 12 <= found["surface_w_m2_k"].high


def test_a_log_that_tells_nothing_is_refused() -> None:
    log = made(conductivity=0.42, surface=200, loss=8.0)
    with pytest.raises(ThermalError, match="at least 8 rows"):
        fitted(RunLog(log.minutes[:5], log.steam_c[:5], log.core_c[:5]))
    with pytest.raises(ThermalError, match="a core that warms"):
        fitted(RunLog(log.minutes, log.steam_c, (20.0,) * len(log.core_c)))
