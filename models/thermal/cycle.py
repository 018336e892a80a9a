"""The whole cycle of a run: boil-up, heat-up, hold, vent, cooling in place, cooling in the cooling room."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from math import ceil, isinf

import numpy as np

from models.farm import Bag, Farm, Limits, Programme, Recipe, Room, Site, Steriliser
from models.thermal.conduction import Floats, Modes, bag_modes, project
from models.thermal.cooling import seconds_until, still_air_coefficient
from models.thermal.errors import ThermalError
from models.thermal.generator import boil_up_seconds, steam_share
from models.thermal.lethality import ORGANISMS, log_reduction
from models.thermal.steam import boiling_point, latent_heat, same_kill_factor
from models.thermal.steaming import STEP_S, BagState, Trace, Vessel, heat_up, hold
from models.thermal.substrate import WATER_CP_KJ_KG_K, bag_heat_capacity, diffusivity


@dataclass(frozen=True, slots=True)
class LoadPart:
    """So many bags of one kind in a load."""

    recipe: Recipe
    bag: Bag
    bags: int


@dataclass(frozen=True, slots=True)
class CurveRow:
    """A moment of a cycle, for the slowest bag: minutes from steam on [min], temperatures [°C], power [kW].

    The power is the mean of the minute that ends then.
    """

    minutes: float
    steam_c: float
    surface_c: float
    core_c: float
    mean_c: float
    element_kw: float


@dataclass(frozen=True, slots=True)
class Cycle:
    """A cycle as worked out: hours [h], energy [kWh], temperatures [°C], heat [MJ], water [kg].

    ``heat_up_h`` counts from steam on and includes ``boil_up_h``; ``ready_to_unload_h`` and ``ready_to_inoculate_h``
    count from steam on; ``energy_kwh`` from steam on to the end of the hold; ``log_reduction`` is at the slowest core.
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
    mean_hold_kw: float
    hold_duty: float
    log_reduction: dict[str, float]
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
    if not load or any(part.bags <= 0 for part in load):
        raise ThermalError("a load of at least one bag was expected")
    site, ambient = around.site, around.site.ambient_in(month)
    power = steriliser.element_kw if element_kw is None else element_kw
    start = ambient if start_c is None else start_c
    boiling = boiling_point(site.altitude_m, steriliser.gauge_kpa, steriliser.air_fraction)
    if programme.target_core_c >= boiling - 0.05:
        raise ThermalError(_above_boiling(around, programme, boiling))
    vessel = _vessel(site, steriliser, power, boiling, ambient)
    boil_up = _boil_up(site, steriliser, power, boiling, ambient)
    states = [_bag_state(part, steriliser.surface_w_m2_k) for part in load]
    trace = Trace()
    steaming_min = heat_up(vessel, states, programme.target_core_c, start, trace)
    heat_up_h = boil_up / 3600 + steaming_min / 60
    hold_from = len(trace.minutes)
    # The hold starts within the last minute of the heat-up; whole minutes follow to its end.
    end_min = steaming_min + 60 * programme.hold_h
    vessel_c = hold(vessel, states, max(0, ceil(end_min - 1e-9) - hold_from), trace.vessel_c[-1], trace)
    powers = np.array(trace.element_kw)
    last_share = 1.0 - (len(powers) - end_min) if len(powers) > end_min else 1.0
    weights = np.ones(len(powers))
    weights[-1] = last_share
    energy = power * boil_up / 3600 + float(powers @ weights) / 60
    hold_powers = powers[hold_from:] if len(powers) > hold_from else powers[-1:]
    load_heat = sum(state.capacity_kj_k * (state.mean_c(vessel_c) - start) for state in states)
    latent = latent_heat(boiling)
    cool_in_place, cool_down, tail = _cool(around, steriliser, load, states, vessel_c, ambient)
    vent_h = steriliser.vent_min / 60
    ready = heat_up_h + programme.hold_h + vent_h + cool_in_place
    curve = _curve(boil_up, power, start, trace, boil_up / 60 + end_min, vent_h, tail)
    cores = [row.core_c for row in by_minute(curve)]
    return Cycle(
        boiling_c=boiling,
        boil_up_h=boil_up / 3600,
        heat_up_h=heat_up_h,
        hold_h=programme.hold_h,
        vent_h=vent_h,
        cool_in_place_h=cool_in_place,
        cool_down_h=cool_down,
        ready_to_unload_h=ready,
        ready_to_inoculate_h=ready + cool_down,
        energy_kwh=energy,
        heat_into_load_mj=load_heat / 1000,
        condensate_kg=trace.delivered_kj / latent,
        mean_hold_kw=float(hold_powers.mean()),
        hold_duty=float(hold_powers.mean()) / power,
        log_reduction={organism.name: log_reduction(cores, 1.0, organism) for organism in ORGANISMS},
        curve=curve,
        balance_error_pct=_balance_error(trace, states, vessel, start, vessel_c),
        cautions=_cautions(around, boiling, heat_up_h, power),
    )


def _vessel(site: Site, steriliser: Steriliser, power: float, boiling: float, ambient: float) -> Vessel:
    return Vessel(
        element_kw=power,
        generator_loss_kw=steriliser.generator_loss_w_per_k * (boiling - ambient) / 1000,
        steam_share=steam_share(boiling, site.feed_water_c, condensate_return=steriliser.condensate_return),
        metal_kj_k=steriliser.metal_kg * steriliser.metal_cp_kj_kg_k,
        loss_kw_k=steriliser.loss_w_per_k / 1000,
        ambient_c=ambient,
        boil_c=boiling,
    )


def _boil_up(site: Site, steriliser: Steriliser, power: float, boiling: float, ambient: float) -> float:
    """Seconds until the generator boils; its water and metal start at the feed temperature [s]."""
    capacity = (
        steriliser.generator_water_kg * WATER_CP_KJ_KG_K + steriliser.generator_metal_kg * steriliser.metal_cp_kj_kg_k
    )
    seconds = boil_up_seconds(capacity, power, steriliser.generator_loss_w_per_k, site.feed_water_c, boiling, ambient)
    if isinf(seconds):
        loss = steriliser.generator_loss_w_per_k * (boiling - ambient) / 1000
        raise ThermalError(f"the generator never boils: it loses {loss:.2f} kW of the element's {power:g} kW")
    return seconds


def _above_boiling(around: Surroundings, programme: Programme, boiling: float) -> str:
    reachable = boiling - 0.5
    factor = same_kill_factor(programme.target_core_c, reachable)
    return (
        f"programme {programme.code}: a core of {programme.target_core_c:g} °C cannot be reached at"
        f" {around.site.altitude_m:g} m, where steam has {boiling:.1f} °C; {reachable:.1f} °C held for"
        f" {programme.hold_h * factor:.1f} h instead of {programme.hold_h:g} h gives the same kill at z = 10 °C"
        " (indicative, not validated)"
    )


def _bag_state(part: LoadPart, surface_w_m2_k: float) -> BagState:
    capacity = part.bags * part.bag.wet_kg * bag_heat_capacity(part.recipe)
    modes = bag_modes(part.bag, diffusivity(part.recipe, part.bag), part.recipe.conductivity_w_m_k, surface_w_m2_k)
    return BagState(modes, capacity, part.bags * _area(part.bag) * surface_w_m2_k, np.zeros(len(modes.rates)))


def _area(bag: Bag) -> float:
    """Surface of a bag [m²]."""
    if bag.diameter_mm is not None:
        radius, height = bag.diameter_mm / 2000, bag.height_mm / 1000
        return 2 * np.pi * radius * (radius + height)
    assert bag.length_mm is not None  # noqa: S101  (held by the farm file)
    assert bag.width_mm is not None  # noqa: S101
    a, b, c = bag.length_mm / 1000, bag.width_mm / 1000, bag.height_mm / 1000
    return 2 * (a * b + b * c + a * c)


@dataclass(frozen=True, slots=True)
class _Tail:
    """The slowest bag after the hold: in place, then in the room; (seconds, air, modes, amplitudes) of each part."""

    in_place: tuple[float, float, Modes, Floats]
    in_room: tuple[float, float, Modes, Floats]
    vessel_c: float


def _cool(
    around: Surroundings, steriliser: Steriliser, load: Sequence[LoadPart], states: Sequence[BagState], vessel_c: float,
    ambient: float,
) -> tuple[float, float, _Tail]:  # fmt: skip
    """Hours in place until the warmest mean is low enough, and hours in the room until the slowest core is."""
    steps = [_in_place(steriliser, part, state, vessel_c, ambient) for part, state in zip(load, states, strict=True)]
    seconds = max(step[0] for step in steps)
    room_c = around.site.ambient_c if around.room is None else around.room.temp_c
    air = ambient if around.room is None or isinstance(room_c, tuple) else room_c
    finished = []
    for part, (_, modes, amplitudes) in zip(load, steps, strict=True):
        after = amplitudes * np.exp(-modes.rates * seconds)
        surface = ambient - float(modes.mean @ after)
        given = None if around.room is None else around.room.air_w_m2_k
        height = part.bag.height_mm / 1000
        h = round(given or still_air_coefficient((surface + around.inoculate_below_c) / 2, air, height), 1)
        room_modes = bag_modes(part.bag, diffusivity(part.recipe, part.bag), part.recipe.conductivity_w_m_k, h)
        moved = project(after, modes, room_modes) + (air - ambient)
        wait = seconds_until(
            room_modes, moved, room_modes.core, air, around.inoculate_below_c, "the core in the cooling room"
        )
        finished.append((wait, modes, amplitudes, room_modes, moved))
    wait, modes, amplitudes, room_modes, moved = max(finished, key=lambda item: item[0])
    tail = _Tail((seconds, ambient, modes, amplitudes), (wait, air, room_modes, moved), vessel_c)
    return seconds / 3600, wait / 3600, tail


def _in_place(
    steriliser: Steriliser, part: LoadPart, state: BagState, vessel_c: float, ambient: float
) -> tuple[float, Modes, Floats]:
    middle = (vessel_c + steriliser.unload_below_c) / 2
    h = round(still_air_coefficient(middle, ambient, part.bag.height_mm / 1000), 1)
    modes = bag_modes(part.bag, diffusivity(part.recipe, part.bag), part.recipe.conductivity_w_m_k, h)
    amplitudes = project(state.amplitudes, state.modes, modes) + (ambient - vessel_c)
    what = "the load in the steriliser"
    seconds = seconds_until(modes, amplitudes, modes.mean, ambient, steriliser.unload_below_c, what)
    return seconds, modes, amplitudes


def _curve(
    boil_up: float, power: float, start: float, trace: Trace, end_min: float, vent_h: float, tail: _Tail
) -> tuple[CurveRow, ...]:
    """About one row a minute: boil-up at full power, steam, vent, cooling; the phases keep their exact lengths."""
    rows = [CurveRow(float(k), start, start, start, start, power) for k in range(round(boil_up / 60))]
    offset = boil_up / 60
    columns = (trace.minutes, trace.vessel_c, trace.surface_c, trace.core_c, trace.mean_c, trace.element_kw)
    for minutes, vessel, surface, core, mean, kw in zip(*columns, strict=True):
        rows.append(CurveRow(offset + minutes, vessel, surface, core, mean, kw))
    last = rows[-1]
    # The last row of the hold ends its whole minute; what follows counts from the hold's exact end.
    after = [
        CurveRow(end_min + passed, tail.vessel_c, last.surface_c, last.core_c, last.mean_c, 0.0)
        for passed in _minutes_of(60 * vent_h)
    ]
    offset = end_min + 60 * vent_h
    for seconds, air, modes, amplitudes in (tail.in_place, tail.in_room):
        minutes = np.array(_minutes_of(seconds / STEP_S))
        left = np.exp(-np.outer(minutes * STEP_S, modes.rates)) * amplitudes
        cores, means = air - left @ modes.core, air - left @ modes.mean
        for minute, core, mean in zip(minutes.tolist(), cores.tolist(), means.tolist(), strict=True):
            after.append(CurveRow(offset + minute, air, mean, core, mean, 0.0))
        offset += seconds / STEP_S
    return (*rows, *(row for row in after if row.minutes > last.minutes + 1e-6))


def _minutes_of(length_min: float) -> list[float]:
    """Every whole minute of a phase, and its end."""
    whole = [float(k) for k in range(1, ceil(length_min - 1e-6))]
    return [*whole, length_min] if length_min > 0 else whole


def by_minute(curve: Sequence[CurveRow]) -> tuple[CurveRow, ...]:
    """A curve at whole minutes from steam on, from 0 to its last.

    Parameters
    ----------
    curve : sequence of CurveRow
        Rows in the order of time; steps may be uneven where one phase ends and the next begins.

    Returns
    -------
    tuple of CurveRow
        Temperatures are linear between rows; power is that of the minute which holds the moment.
    """
    known = np.array([row.minutes for row in curve])
    grid = np.arange(int(known[-1] + 1e-9) + 1, dtype=np.float64)
    columns = [
        np.interp(grid, known, [getattr(row, name) for row in curve]).tolist()
        for name in ("steam_c", "surface_c", "core_c", "mean_c")
    ]
    holding = np.minimum(np.searchsorted(known, grid - 1e-9), len(known) - 1)
    powers = [curve[index].element_kw for index in holding.tolist()]
    return tuple(CurveRow(*values) for values in zip(grid.tolist(), *columns, powers, strict=True))


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
