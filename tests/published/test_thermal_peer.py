"""The steam cycle against the same equations solved another way: finite volumes and SciPy's BDF."""

from __future__ import annotations

import numpy as np
import pytest

from models.thermal.cycle import Surroundings, setting_of
from models.thermal.load import LoadPart, bag_states
from models.thermal.steaming import Trace, heat_up, hold
from models.thermal.substrate import bag_heat_capacity
from scheduler.folder import read_farm_folder, scenario_folder
from tests.benchmarks.peer import PeerCase, peer_course


@pytest.mark.parametrize(("bags", "element", "month"), [(104, 9.0, 1), (60, 4.0, 7), (104, 20.0, 4)])
def test_core_mean_and_steam_agree_everywhere(bags: int, element: float, month: int) -> None:
    """Within 0.05 K at every minute of heat-up and hold, on a grid that is itself within 0.03 K of a finer one."""
    farm = read_farm_folder(scenario_folder("one-drum")).farm
    strain, drum = farm.strain[0], farm.steriliser[0].model_copy(update={"element_kw": element})
    recipe, bag = farm.recipe_of(strain), farm.bag_of(strain)
    setting = setting_of(Surroundings.of(farm), drum, farm.programme[0], month=month)
    vessel, trace = setting.vessel, Trace()
    states = bag_states([LoadPart(recipe, bag, bags)], drum)
    heat_up(vessel, states, 95.0, setting.start_c, trace)
    hold(vessel, states, 180, trace.vessel_c[-1], trace)
    assert bag.diameter_mm is not None
    case = PeerCase(
        radius=bag.diameter_mm / 2000, height=bag.height_mm / 1000, bags=bags, conductivity=recipe.conductivity_w_m_k,
        volumetric_heat=1000 * bag.wet_kg / bag.volume_m3 * bag_heat_capacity(recipe), surface=drum.surface_w_m2_k,
        metal=1000 * vessel.metal_kj_k, loss=1000 * vessel.loss_kw_k, steam=1000 * vessel.steam_kw,
        ambient=vessel.ambient_c, start=setting.start_c, boiling=vessel.boil_c,
    )  # fmt: skip
    peer = peer_course(case, 60.0 * len(trace.core_c), across=75, along=115)
    for own, other in ((trace.core_c, peer.core), (trace.mean_c, peer.mean), (trace.vessel_c, peer.vessel)):
        assert np.abs(np.array(own) - other[1:]).max() <= 0.05
