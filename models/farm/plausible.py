"""Checks whether the parts of a farm fit each other: temperatures, sizes, power, people.

Each check reads only the sections it is listed with in `CHECKS`, so that a file with a fault in one section still has
the others checked.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from datetime import timedelta
from math import floor

from models.farm.crew import SKILLS
from models.farm.farm import Farm
from models.farm.references import Mismatch, Severity
from models.farm.room import Room
from models.farm.units import span_minutes
from models.thermal.steam import boiling_point, same_kill_factor

BELOW_BOILING_K = 0.05
"""A core cannot be brought nearer than this to the temperature of the steam round it in finite time [K]."""
MOST_HOLD_H = 48.0
"""Longest hold worth proposing in place of a hotter one [h]."""
MASS_ERROR = (0.4, 2.0)
"""Bag mass over volume × density outside of this is taken for a wrong unit [-]."""
MASS_WARNING = (0.7, 1.4)
"""Bag mass over volume × density outside of this is worth a second look [-]."""


def _nearest_room(rooms: tuple[Room, ...], low: float, high: float) -> str:
    """Return the room whose temperature is nearest to a range, with that temperature; empty without rooms."""
    if not rooms:
        return "none"
    room = min(rooms, key=lambda one: max(low - one.temp_c, one.temp_c - high))
    return f"none (nearest: {room.code} at {room.temp_c:g} °C)"


def strain_rooms(farm: Farm) -> Iterator[Mismatch]:
    """Each strain has a colonisation room it grows in and a fruiting room it fruits in."""
    for strain in farm.strain:
        low, high = strain.t_min_c, strain.t_max_c - strain.self_heating_k
        rooms = farm.rooms_of("colonisation")
        if not any(strain.grows_in(room.temp_c) for room in rooms):
            less = f" less self_heating_k ({strain.self_heating_k:g})" if strain.self_heating_k else ""
            expected = f"a colonisation room between its t_min_c and t_max_c{less}, {low:g} to {high:g} °C"
            yield Mismatch(f"strain.{strain.code}", _nearest_room(rooms, low, high), expected)
        low, high = strain.fruiting_temp_c
        rooms = farm.rooms_of("fruiting")
        if not any(low <= room.temp_c <= high for room in rooms):
            expected = f"a fruiting room within {low:g} to {high:g} °C"
            yield Mismatch(f"strain.{strain.code}.fruiting_temp_c", _nearest_room(rooms, low, high), expected)


def skills_held(farm: Farm) -> Iterator[Mismatch]:
    """Each skill is held by some crew."""
    for skill in SKILLS:
        if not any(skill in crew.skills for crew in farm.crew):
            yield Mismatch("crew", "none", f"a crew with the skill '{skill}'")


def bag_masses(farm: Farm) -> Iterator[Mismatch]:
    """Check that a bag's mass agrees with its size and with the density of what is in it."""
    for recipe_code, bag_code in dict.fromkeys((strain.recipe, strain.bag) for strain in farm.strain):
        recipe = next(one for one in farm.recipe if one.code == recipe_code)
        bag = next(one for one in farm.bag if one.code == bag_code)
        by_size = bag.volume_m3 * recipe.density_kg_m3
        ratio = bag.wet_kg / by_size
        if MASS_WARNING[0] <= ratio <= MASS_WARNING[1]:
            continue
        wrong = not MASS_ERROR[0] <= ratio <= MASS_ERROR[1]
        expected = (
            f"about the mass of its volume, {bag.volume_m3 * 1000:.3g} l at {recipe.density_kg_m3:g} kg/m³ of recipe"
            f" {recipe.code} ({by_size:.3g} kg)"
        )
        hint = ", which looks like a wrong unit (sides are in mm, mass in kg)" if wrong else ""
        severity: Severity = "error" if wrong else "warning"
        yield Mismatch(f"bag.{bag.code}.wet_kg", f"{bag.wet_kg:g} kg{hint}", expected, severity=severity)


def bags_fit_sterilisers(farm: Farm) -> Iterator[Mismatch]:
    """Check that the bags have room in each steriliser whose volume is told."""
    for steriliser in farm.steriliser:
        if steriliser.volume_l is None:
            continue
        for bag in farm.bag:
            litres = 1000 * bag.volume_m3
            fit = floor(steriliser.volume_l / litres)
            if fit < 1:
                expected = f"a bag smaller than steriliser {steriliser.code} (volume_l {steriliser.volume_l:g})"
                yield Mismatch(f"bag.{bag.code}", f"a bag of {litres:.3g} l", expected)
            elif fit < steriliser.places:
                yield Mismatch(
                    f"steriliser.{steriliser.code}.places",
                    f"{steriliser.places} bags",
                    f"at most {fit} bags {bag.code} of {litres:.3g} l in volume_l {steriliser.volume_l:g}",
                )


def supply_carries_elements(farm: Farm) -> Iterator[Mismatch]:
    """Each steriliser alone can be run on the site's supply."""
    supply, base = farm.site.supply_kw, farm.site.base_load_kw
    if supply is None:
        return
    for steriliser in farm.steriliser:
        if base + steriliser.element_kw > supply + 1e-9:
            yield Mismatch(
                f"steriliser.{steriliser.code}.element_kw",
                f"{steriliser.element_kw:g} kW",
                f"at most {max(0.0, supply - base):g} kW (supply_kw {supply:g} less base_load_kw {base:g})",
            )


def programmes_reached(farm: Farm) -> Iterator[Mismatch]:
    """Each programme that a strain names stays below the boiling point of some steriliser."""
    hottest = max(farm.steriliser, key=lambda one: boiling_point(farm.site.altitude_m, one.gauge_kpa, one.air_fraction))
    boiling = boiling_point(farm.site.altitude_m, hottest.gauge_kpa, hottest.air_fraction)
    used = {strain.programme for strain in farm.strain}
    for programme in farm.programme:
        if programme.code not in used or programme.target_core_c < boiling - BELOW_BOILING_K:
            continue
        expected = (
            f"below the boiling point, {boiling:.1f} °C at {farm.site.altitude_m:g} m"
            f" and {hottest.gauge_kpa:g} kPa gauge in steriliser {hottest.code}"
        )
        lower = floor(2 * (boiling - BELOW_BOILING_K)) / 2
        hold_h = programme.hold_h * same_kill_factor(programme.target_core_c, lower)
        if 0 < hold_h <= MOST_HOLD_H:
            expected += f" ({hold_h:.1f} h at {lower:g} °C kill as much, at a z of 10 °C)"
        yield Mismatch(f"programme.{programme.code}.target_core_c", f"{programme.target_core_c:g} °C", expected)


def sterilisers_open(farm: Farm) -> Iterator[Mismatch]:
    """No steriliser is closed for a whole year on end."""
    for steriliser in farm.steriliser:
        days = sorted(set(steriliser.closed))
        if any(later - first == timedelta(days=364) for first, later in zip(days, days[364:], strict=False)):
            found = f"{len(days)} closed days from {days[0]} to {days[-1]}"
            yield Mismatch(f"steriliser.{steriliser.code}.closed", found, "a steriliser that is open on some days")


def bags_cool_down(farm: Farm) -> Iterator[Mismatch]:
    """Check that loads cool below ``unload_below_c``, and bags after that below ``inoculate_below_c``."""
    warmest = max(farm.site.ambient_in(month) for month in range(1, 13))
    coldest = min(farm.site.ambient_in(month) for month in range(1, 13))
    limit = farm.limits.inoculate_below_c
    for room in farm.rooms_of("cooling"):
        if room.temp_c >= limit:
            yield Mismatch(f"room.{room.code}.temp_c", f"{room.temp_c:g} °C", f"below inoculate_below_c ({limit:g} °C)")
    if not farm.rooms_of("cooling") and warmest >= limit:
        yield Mismatch(
            "limits.inoculate_below_c",
            f"{limit:g} °C",
            f"above the ambient temperature, up to {warmest:g} °C, as bags cool there without a cooling room",
            severity="error" if coldest >= limit else "warning",
        )
    for steriliser in farm.steriliser:
        if steriliser.unload_below_c <= warmest:
            yield Mismatch(
                f"steriliser.{steriliser.code}.unload_below_c",
                f"{steriliser.unload_below_c:g} °C",
                f"above the ambient temperature, up to {warmest:g} °C",
                severity="error" if steriliser.unload_below_c <= coldest else "warning",
            )


def rooms_carry_heat_off(farm: Farm) -> Iterator[Mismatch]:
    """Check that a colonisation room full of the warmest strain stays within its ``cooling_w``."""
    for room in farm.rooms_of("colonisation"):
        heats = {
            strain.code: room.places * farm.bag_of(strain).wet_kg * strain.heat_w_per_kg
            for strain in farm.strain
            if strain.grows_in(room.temp_c)
        }
        if room.cooling_w is None or not heats:
            continue
        strain, heat = max(heats.items(), key=lambda item: item[1])
        if heat > room.cooling_w:
            yield Mismatch(
                f"room.{room.code}.cooling_w",
                f"{room.cooling_w:g} W",
                f"at least {heat:.0f} W, what {room.places} bags of {strain} give off at their peak,"
                " else the room cannot be full of them",
                severity="warning",
            )


def smallest_load_fits_a_shift(farm: Farm) -> Iterator[Mismatch]:
    """Check that the smallest load can be mixed within a shift, and be steamed before the mix sours."""
    mixing = [crew for crew in farm.crew if "mix" in crew.skills]
    loading = [crew.people for crew in farm.crew if "steam" in crew.skills]
    if not mixing or not loading:
        return
    hours = max(end - start for crew in mixing for start, end in map(span_minutes, crew.shift.values())) / 60
    for steriliser in farm.steriliser:
        bags = steriliser.bags_at(steriliser.loads[0])
        mix_h = bags / (farm.rates.mix_bags_h * max(crew.people for crew in mixing))
        load_h = bags / (farm.rates.load_bags_h * max(loading))
        key = f"steriliser.{steriliser.code}.loads"
        found = f"a smallest load of {bags} bags, which takes {mix_h:.1f} h to mix"
        if mix_h > hours + 1e-9:
            yield Mismatch(key, found, f"a load that is mixed within one shift ({hours:.1f} h)")
        elif mix_h + load_h > farm.limits.mix_to_steam_h + 1e-9:
            expected = f"a load that is under steam within mix_to_steam_h ({farm.limits.mix_to_steam_h:g} h)"
            yield Mismatch(key, f"{found} and {load_h:.1f} h to load", expected)


CHECKS: tuple[tuple[Callable[[Farm], Iterator[Mismatch]], frozenset[str]], ...] = (
    (strain_rooms, frozenset({"strain", "room"})),
    (skills_held, frozenset({"crew"})),
    (bag_masses, frozenset({"strain", "recipe", "bag"})),
    (bags_fit_sterilisers, frozenset({"bag", "steriliser"})),
    (supply_carries_elements, frozenset({"site", "steriliser"})),
    (programmes_reached, frozenset({"site", "programme", "steriliser", "strain"})),
    (sterilisers_open, frozenset({"steriliser"})),
    (bags_cool_down, frozenset({"site", "limits", "steriliser", "room"})),
    (rooms_carry_heat_off, frozenset({"strain", "bag", "room"})),
    (smallest_load_fits_a_shift, frozenset({"crew", "rates", "limits", "steriliser"})),
)
"""Each check with the sections it reads."""


def plausibility(farm: Farm, sound: frozenset[str] | None = None) -> list[Mismatch]:
    """Return all parts of a farm that do not fit each other.

    Parameters
    ----------
    farm : Farm
        A farm whose references all lead somewhere.
    sound : frozenset of str, optional
        Sections that hold no other fault; checks that read any other section are left out. Default: all.
    """
    return [mismatch for check, sections in CHECKS if sound is None or sections <= sound for mismatch in check(farm)]
