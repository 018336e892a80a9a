"""The whole cycle of a run: boil-up, heat-up, hold, vent, cooling in place, cooling in the cooling room."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from math import ceil, isinf

import numpy as np

from models.farm import Farm, Limits, Programme, Room, Site, Steriliser
from models.thermal.curve import CurveRow, by_minute, joined, steamed_rows
from models.thermal.errors import ThermalError
from models.thermal.finish import CoolingPlace, Finish, finish
from models.thermal.generator import boil_up_seconds, steam_share
from models.thermal.lethality import ORGANISMS, equivalent_minutes, log_reduction
from models.thermal.load import LoadPart, bag_states
from models.thermal.steam import boiling_point, latent_heat, same_kill_factor
from models.thermal.steaming import BagState, Trace, Vessel, heat_up, hold
from models.thermal.substrate import WATER_CP_KJ_KG_K

REFERENCES_C = {"121.1 °C": 121.1, "100 °C": 100.0}
"""Temperatures at which the weight of a cycle is told in minutes, at a z of 10 °C."""
BELOW_BOILING_K = 0.05
"""A core cannot be brought nearer than this to the temperature of the steam round it in finite time [K]."""


@dataclass(frozen=True, slots=True)
class Cycle:
    """A cycle as worked out: hours [h], energy [kWh], temperatures [°C], heat [MJ], water [kg].

    ``heat_up_h`` counts from steam on and includes ``boil_up_h``; ``ready_to_unload_h`` and ``ready_to_inoculate_h``
    count from steam on; ``energy_kwh`` from steam on to the end of the hold; ``condensate_kg`` is the steam that
    condensed and ``water_kg`` what was fed to the generator for it; ``log_reduction`` and ``equivalent_min`` (z 10 °C)
    are at the slowest core.
    """

    boiling_c: float
    boil_up_h: float
    heat_up_h: float
    hold_h: float
    vent_h: float
    cool_in_place_h: float
    cool_down_h: float
    ready_to_unload_h: float
    ready_to_inoculate_h: float
    energy_kwh: float
    heat_into_load_mj: float
    condensate_kg: float
    water_kg: float
    mean_hold_kw: float
    hold_duty: float
    log_reduction: dict[str, float]
    equivalent_min: dict[str, float]
    curve: tuple[CurveRow, ...]
    balance_error_pct: float
    cautions: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class Surroundings:
    """What a cycle needs to know of the farm: the site, the cooling room (None: ambient air), the limits."""

    site: Site
    room: Room | None
    inoculate_below_c: float
    mix_to_steam_h: float

    @classmethod
    def of(cls, farm: Farm) -> Surroundings:
        """The surroundings a farm gives; bags cool in its first cooling room."""
        rooms = farm.rooms_of("cooling")
        limits: Limits = farm.limits
        return cls(farm.site, rooms[0] if rooms else None, limits.inoculate_below_c, limits.mix_to_steam_h)


def steam_cycle(
    farm: Farm,
    steriliser: Steriliser,
    programme: Programme,
    load: Sequence[LoadPart],
    *,
    month: int,
    element_kw: float | None = None,
    start_c: float | None = None,
) -> Cycle:
    """Work out the cycle of one load.

    Parameters
    ----------
    farm : Farm
        Gives site, cooling room and limits.
    steriliser, programme
        Where and how the load is steamed.
    load : sequence of LoadPart
        Kinds of bag with their numbers; the slowest core decides.
    month : int
        Calendar month, for the ambient temperature (1-12).
    element_kw : float, optional
        Element power in place of the steriliser's [kW].
    start_c : float, optional
        Temperature of load and metal at steam on in place of ambient [°C].

    Raises
    ------
    ThermalError
        The target lies above the boiling point, is never reached, or the bags can never cool.

    Notes
    -----
    Metal counts as steel unless said otherwise. Make-up water enters at the feed temperature and condensate is not
    returned unless ``condensate_return``. After the hold the bags stand in steam until the vent is over; in
    place they cool in still air at ambient temperature. A bag's density is its mass over its volume.
    """
    return cycle_in(
        Surroundings.of(farm), steriliser, programme, tuple(load), month=month, element_kw=element_kw, start_c=start_c
    )


def cycle_in(
    around: Surroundings,
    steriliser: Steriliser,
    programme: Programme,
    load: tuple[LoadPart, ...],
    *,
    month: int,
    element_kw: float | None = None,
    start_c: float | None = None,
) -> Cycle:
    """`steam_cycle` with the farm reduced to what matters."""
    setting = setting_of(around, steriliser, programme, month=month, element_kw=element_kw, start_c=start_c)
    steamed = steam_load(setting, steriliser, programme, load)
    vessel, trace, after = setting.vessel, steamed.trace, steamed.finish
    ready = steamed.heat_up_h + programme.hold_h + steriliser.vent_min / 60 + after.in_place_h
    curve = joined(steamed_rows(setting.boil_up_min, vessel.element_kw, setting.start_c, trace), after.rows)
    cores = [row.core_c for row in by_minute(curve)]
    condensate = trace.delivered_kj / latent_heat(vessel.boil_c)
    return Cycle(
        boiling_c=vessel.boil_c,
        boil_up_h=setting.boil_up_min / 60,
        heat_up_h=steamed.heat_up_h,
        hold_h=programme.hold_h,
        vent_h=steriliser.vent_min / 60,
        cool_in_place_h=after.in_place_h,
        cool_down_h=after.in_room_h,
        ready_to_unload_h=ready,
        ready_to_inoculate_h=ready + after.in_room_h,
        energy_kwh=steamed.energy_kwh,
        heat_into_load_mj=steamed.load_heat_kj / 1000,
        condensate_kg=condensate,
        water_kg=0.0 if steriliser.condensate_return else condensate,
        mean_hold_kw=steamed.mean_hold_kw,
        hold_duty=steamed.mean_hold_kw / vessel.element_kw,
        log_reduction={organism.name: log_reduction(cores, 1.0, organism) for organism in ORGANISMS},
        equivalent_min={name: equivalent_minutes(cores, 1.0, at) for name, at in REFERENCES_C.items()},
        curve=curve,
        balance_error_pct=steamed.balance_error_pct,
        cautions=_cautions(around, vessel.boil_c, steamed.heat_up_h, vessel.element_kw),
    )


@dataclass(frozen=True)
class Steamed:
    """A load from steam on to the end of its hold, and how it cools: hours, heat [kJ], energy [kWh], power [kW].

    ``end_min`` is the end of the hold, from steam on [min].
    """

    trace: Trace
    heat_up_h: float
    end_min: float
    load_heat_kj: float
    energy_kwh: float
    mean_hold_kw: float
    balance_error_pct: float
    finish: Finish


def steam_load(setting: Setting, steriliser: Steriliser, programme: Programme, load: Sequence[LoadPart]) -> Steamed:
    """Steam a load and let it cool; see `steam_cycle` for refusals."""
    states, trace, vessel = bag_states(load, steriliser), Trace(), setting.vessel
    steaming_min = heat_up(vessel, states, programme.target_core_c, setting.start_c, trace)
    hold_from = len(trace.minutes)
    # The hold starts within the last minute of the heat-up; whole minutes follow to its end.
    end_min = steaming_min + 60 * programme.hold_h
    vessel_c = hold(vessel, states, max(0, ceil(end_min - 1e-9) - hold_from), trace.vessel_c[-1], trace)
    powers = np.array(trace.element_kw)
    weights = np.ones(len(powers))
    weights[-1] = min(1.0, 1.0 - (len(powers) - end_min))
    hold_powers = powers[hold_from:] if len(powers) > hold_from else powers[-1:]
    balance = _balance_error(trace, states, vessel, setting.start_c, vessel_c)
    load_heat = sum(state.capacity_kj_k * (state.mean_c(vessel_c) - setting.start_c) for state in states)
    after = finish(
        steriliser, load, states, vessel_c, setting.open_c, vessel.ambient_c, setting.place,
        setting.boil_up_min + end_min,
    )  # fmt: skip
    return Steamed(
        trace=trace,
        heat_up_h=(setting.boil_up_min + steaming_min) / 60,
        end_min=setting.boil_up_min + end_min,
        load_heat_kj=load_heat,
        energy_kwh=(vessel.element_kw * setting.boil_up_min + float(powers @ weights)) / 60,
        mean_hold_kw=float(hold_powers.mean()),
        balance_error_pct=balance,
        finish=after,
    )


@dataclass(frozen=True, slots=True)
class Setting:
    """A steriliser set up for a load: the vessel, boil-up [min], start [°C], steam at the air's pressure [°C], cooling.

    ``generator_kj_k`` and ``generator_loss_w_k`` are the generator's heat capacity [kJ/K] and loss [W/K],
    ``feed_c`` what it starts at [°C].
    """

    vessel: Vessel
    boil_up_min: float
    start_c: float
    open_c: float
    place: CoolingPlace
    generator_kj_k: float
    generator_loss_w_k: float
    feed_c: float


def setting_of(
    around: Surroundings,
    steriliser: Steriliser,
    programme: Programme,
    *,
    month: int,
    element_kw: float | None = None,
    start_c: float | None = None,
) -> Setting:
    """What a cycle starts from; see `steam_cycle` for parameters and refusals."""
    site, ambient = around.site, around.site.ambient_in(month)
    power = steriliser.element_kw if element_kw is None else element_kw
    start = ambient if start_c is None else start_c
    boiling = boiling_point(site.altitude_m, steriliser.gauge_kpa, steriliser.air_fraction)
    target = programme.target_core_c
    if start >= target:
        raise ThermalError(f"a load below the target of {target:g} °C at steam on was expected; found {start:g} °C")
    if target >= boiling - BELOW_BOILING_K:
        raise ThermalError(_above_boiling(around, programme, boiling))
    vessel = Vessel(
        element_kw=power,
        generator_loss_kw=steriliser.generator_loss_w_per_k * (boiling - ambient) / 1000,
        steam_share=steam_share(boiling, site.feed_water_c, condensate_return=steriliser.condensate_return),
        metal_kj_k=steriliser.metal_kg * steriliser.metal_cp_kj_kg_k,
        loss_kw_k=steriliser.loss_w_per_k / 1000,
        ambient_c=ambient,
        boil_c=boiling,
    )
    capacity = (
        steriliser.generator_water_kg * WATER_CP_KJ_KG_K + steriliser.generator_metal_kg * steriliser.metal_cp_kj_kg_k
    )
    seconds = boil_up_seconds(capacity, power, steriliser.generator_loss_w_per_k, site.feed_water_c, boiling, ambient)
    if isinf(seconds):
        loss = vessel.generator_loss_kw
        raise ThermalError(f"the generator never boils: it loses {loss:.2f} kW of the element's {power:g} kW")
    room_c = ambient if around.room is None else around.room.temp_c
    place = CoolingPlace(room_c, None if around.room is None else around.room.air_w_m2_k, around.inoculate_below_c)
    open_c = boiling_point(site.altitude_m, 0.0, steriliser.air_fraction)
    return Setting(
        vessel, seconds / 60, start, open_c, place, capacity, steriliser.generator_loss_w_per_k, site.feed_water_c
    )


def _above_boiling(around: Surroundings, programme: Programme, boiling: float) -> str:
    reachable = boiling - 0.5
    factor = same_kill_factor(programme.target_core_c, reachable)
    return (
        f"programme {programme.code}: a core of {programme.target_core_c:g} °C cannot be reached at"
        f" {around.site.altitude_m:g} m, where steam has {boiling:.1f} °C; {reachable:.1f} °C held for"
        f" {programme.hold_h * factor:.1f} h instead of {programme.hold_h:g} h gives the same kill at z = 10 °C"
        " (indicative, not validated)"
    )


def _balance_error(trace: Trace, states: Sequence[BagState], vessel: Vessel, start: float, vessel_c: float) -> float:
    """Heat delivered against heat found in bags, metal and losses [%]."""
    found = sum(state.capacity_kj_k * (state.mean_c(vessel_c) - start) for state in states)
    found += vessel.metal_kj_k * (vessel_c - start) + trace.lost_kj
    return 100 * abs(trace.delivered_kj - found) / max(trace.delivered_kj, 1e-9)


def _cautions(around: Surroundings, boiling: float, heat_up_h: float, power: float) -> tuple[str, ...]:
    notes = []
    if boiling < 105:
        notes.append(
            "Log reductions below 105 °C are indicative only: a constant z over-credits low temperatures there."
        )
    if heat_up_h > around.mix_to_steam_h:
        notes.append(
            f"Heat-up takes {heat_up_h:.1f} h, longer than the {around.mix_to_steam_h:g} h in which wet mix sours."
        )
    site = around.site
    if site.supply_kw is not None and site.base_load_kw + power > site.supply_kw:
        notes.append(
            f"Element and base load draw {site.base_load_kw + power:g} kW,"
            f" more than the supply of {site.supply_kw:g} kW."
        )
    return tuple(notes)
