"""Print how long a steam cycle takes to work out, beside the same equations by the method of lines.

python -m tests.benchmarks.heat_times
"""

from __future__ import annotations

import time

import numpy as np

from models.thermal.cycle import Surroundings, cycle_in, setting_of
from models.thermal.load import LoadPart, bag_states
from models.thermal.steaming import Trace, heat_up, hold
from models.thermal.substrate import bag_heat_capacity
from scheduler.folder import read_farm_folder, scenario_folder
from tests.benchmarks.peer import PeerCase, peer_course

REPEATS = 7


def main() -> None:
    """Time both on the first steriliser of a demo farm."""
    farm = read_farm_folder(scenario_folder("one-drum")).farm
    strain, drum = farm.strain[0], farm.steriliser[0]
    recipe, bag = farm.recipe_of(strain), farm.bag_of(strain)
    assert bag.diameter_mm is not None
    setting = setting_of(Surroundings.of(farm), drum, farm.programme[0], month=1)
    vessel, load = setting.vessel, (LoadPart(recipe, bag, drum.places),)
    own = []
    for _ in range(REPEATS):
        began = time.perf_counter()
        states, trace = bag_states(load, drum), Trace()
        heat_up(vessel, states, 95.0, setting.start_c, trace)
        hold(vessel, states, 720, trace.vessel_c[-1], trace)
        own.append(time.perf_counter() - began)
    began = time.perf_counter()
    cycle_in(Surroundings.of(farm), drum, farm.programme[0], load, month=1)
    whole = time.perf_counter() - began
    mine = sorted(own)[REPEATS // 2]
    case = PeerCase(
        radius=bag.diameter_mm / 2000, height=bag.height_mm / 1000, bags=drum.places,
        conductivity=recipe.conductivity_w_m_k,
        volumetric_heat=1000 * bag.wet_kg / bag.volume_m3 * bag_heat_capacity(recipe), surface=drum.surface_w_m2_k,
        metal=1000 * vessel.metal_kj_k, loss=1000 * vessel.loss_kw_k, steam=1000 * vessel.steam_kw,
        ambient=vessel.ambient_c, start=setting.start_c, boiling=vessel.boil_c,
    )  # fmt: skip
    print(f"heat-up and hold, {len(trace.core_c)} minutes, by modes: {1000 * mine:.1f} ms")
    print(f"whole cycle with vent, cooling and kill: {1000 * whole:.1f} ms")
    print(f"{'cells':>10}{'BDF':>10}{'ratio':>8}{'core':>10}{'mean':>10}{'steam':>10}   largest difference, K")
    for across, along in ((20, 30), (30, 45), (45, 70), (60, 95)):
        began = time.perf_counter()
        peer = peer_course(case, 60.0 * len(trace.core_c), across=across, along=along)
        took = time.perf_counter() - began
        pairs = ((trace.core_c, peer.core), (trace.mean_c, peer.mean), (trace.vessel_c, peer.vessel))
        differences = [float(np.abs(np.array(a) - b[1:]).max()) for a, b in pairs]
        told = "".join(f"{value:>10.4f}" for value in differences)
        print(f"{f'{across} x {along}':>10}{took:>8.2f} s{took / mine:>8.0f}{told}")


if __name__ == "__main__":
    main()
