"""What each stage of a farm can do in a week, and how that was worked out.

Each stage is taken alone, in a week without closed days, as if its people and places did nothing else: an upper limit
for the stage, not a plan.
"""

from __future__ import annotations

from calendar import month_name
from collections.abc import Iterator
from dataclasses import dataclass

from models.farm import Farm, Programme, Steriliser, Strain
from models.growth import days_to_ready, expected_flush_kg, place_days, suits
from models.thermal.errors import ThermalError
from models.thermal.table import CycleRow, cycle_row
from scheduler.errors import Finding
from scheduler.repeating_week import RepeatingWeek, Run, clock

WEEKS = 8
WARM_UP_WEEKS = 1
MONTHS = (1, 7)


@dataclass(frozen=True, slots=True)
class Capacity:
    """What one stage can do in a week.

    Attributes
    ----------
    stage : str
        ``mix``, ``sterilise``, ``cool``, ``inoculate``, ``colonise``, ``open``, ``fruit`` or ``pick``.
    what : str
        What it holds for: a steriliser and programme, a strain, a strain and the flushes kept; empty for all bags.
    bags_week : float or None
        Bags a week [bags]; None: not limited.
    kg_week : float or None
        Mushrooms a week [kg], where the stage has any.
    how : str
        How that was worked out, with the numbers.
    month : int or None
        The month it holds for, where that matters.
    steriliser, programme, strain : str
        Codes of what it holds for; empty where it holds for any.
    """

    stage: str
    what: str
    bags_week: float | None
    kg_week: float | None
    how: str
    month: int | None = None
    steriliser: str = ""
    programme: str = ""
    strain: str = ""


@dataclass(frozen=True, slots=True)
class SteamWeek:
    """The runs of one steriliser and programme in one month; no row when the programme cannot be reached."""

    steriliser: Steriliser
    programme: Programme
    month: int
    row: CycleRow | None
    runs: tuple[Run, ...]
    refusal: str = ""


def capacities(farm: Farm, months: tuple[int, ...] = MONTHS) -> tuple[Capacity, ...]:
    """Work out the capacity of every stage, in the order bags go through them.

    Parameters
    ----------
    farm : Farm
        The farm.
    months : tuple of int
        Months for which the sterilisers' cycles are worked out [1-12].
    """
    week = RepeatingWeek(farm)
    steam = tuple(_steam_weeks(farm, week, months))
    return (
        _mixing(farm, week),
        *(_sterilising(farm, one) for one in steam),
        *_cooling(farm, steam),
        _inoculating(farm, week),
        *_colonising(farm),
        _opening(farm, week),
        *_fruiting(farm),
        *_picking(farm, week),
    )


def _hours(week: RepeatingWeek, skill: str, hours: float) -> str:
    people = sum(crew.people for crew in week.farm.crew if skill in crew.skills)
    who = "1 person" if people == 1 else f"{people} people"
    return f"{hours:g} h a week of {who}"


def _mixing(farm: Farm, week: RepeatingWeek) -> Capacity:
    hours, rate = week.hours("mix"), farm.rates.mix_bags_h
    return Capacity("mix", "", hours * rate, None, f"{_hours(week, 'mix', hours)} x {rate:g} bags an hour")


def _steam_weeks(farm: Farm, week: RepeatingWeek, months: tuple[int, ...]) -> Iterator[SteamWeek]:
    for steriliser in farm.steriliser:
        for programme in farm.programme:
            strains = [strain for strain in farm.strain if strain.programme == programme.code]
            pairs = dict.fromkeys((strain.recipe, strain.bag) for strain in strains)
            by_pair = {(strain.recipe, strain.bag): strain for strain in strains}
            families = tuple((farm.recipe_of(by_pair[pair]), farm.bag_of(by_pair[pair])) for pair in pairs)
            for month in months if families else ():
                try:
                    row = cycle_row(farm, steriliser, programme, families, steriliser.loads[-1], month)
                except ThermalError as error:
                    yield SteamWeek(steriliser, programme, month, None, (), str(error))
                    continue
                runs = week.runs(steriliser, row.ready_to_unload_min, row.cool_down_min, WARM_UP_WEEKS + WEEKS)
                yield SteamWeek(steriliser, programme, month, row, tuple(runs))


def _counted(runs: tuple[Run, ...]) -> list[Run]:
    return [run for run in runs if run.load >= WARM_UP_WEEKS * 7 * 1440]


def _sterilising(farm: Farm, steam: SteamWeek) -> Capacity:
    steriliser, programme = steam.steriliser, steam.programme
    bags, how = _runs_in_words(farm, steam)
    what = f"{steriliser.code}, {programme.code}"
    return Capacity(
        "sterilise", what, bags, None, how, steam.month, steriliser=steriliser.code, programme=programme.code
    )


def _runs_in_words(farm: Farm, steam: SteamWeek) -> tuple[float, str]:
    """Bags a week of all sterilisers of a kind, and how that comes about."""
    steriliser, bags = steam.steriliser, steam.steriliser.bags_at(steam.steriliser.loads[-1])
    if steam.row is None:
        return 0.0, steam.refusal
    hours = f"ready {_h_min(steam.row.ready_to_unload_min)} after steam on"
    counted = _counted(steam.runs)
    if not counted:
        return 0.0, f"{hours}; no full load of {bags} bags can be mixed, loaded, unloaded and inoculated in time"
    a_week, first = len(counted) / WEEKS, counted[0]
    count = f"{steriliser.count} x " if steriliser.count > 1 else ""
    how = (
        f"{count}{a_week:.3g} runs a week x {bags} bags; a full load is {hours}"
        f" (loaded {clock(first.load)}, ready {clock(first.ready)}, out {clock(first.unload)})"
        f"{_supply_note(farm, steriliser)}"
    )
    return steriliser.count * a_week * bags, how


def idle_findings(farm: Farm, found: tuple[Capacity, ...]) -> tuple[Finding, ...]:
    """Warn of programmes whose full load no steriliser can run, in any month looked at."""
    findings = []
    for programme in farm.programme:
        rows = [one for one in found if one.stage == "sterilise" and one.programme == programme.code]
        if rows and not any(row.bags_week for row in rows):
            expected = "a steriliser that can run full loads of it"
            key = f"programme.{programme.code}"
            findings.append(Finding("farm.toml", key, f"none ({rows[0].how})", expected, severity="warning"))
    return tuple(findings)


def _supply_note(farm: Farm, steriliser: Steriliser) -> str:
    """Say how many the supply carries at once, where that is fewer than there are."""
    if farm.site.supply_kw is None:
        return ""
    at_once = int((farm.site.supply_kw - farm.site.base_load_kw) / steriliser.element_kw + 1e-9)
    return f"; the supply carries {at_once} at full power at once" if at_once < steriliser.count else ""


def _h_min(minutes: int) -> str:
    return f"{minutes // 60} h {minutes % 60:02d} min"


def _cooling(farm: Farm, steam: tuple[SteamWeek, ...]) -> Iterator[Capacity]:
    rooms = farm.rooms_of("cooling")
    if not rooms:
        yield Capacity("cool", "", None, None, "no cooling room: bags cool at the ambient temperature, without limit")
        return
    places = sum(room.places for room in rooms)
    for month in dict.fromkeys(one.month for one in steam):
        days = [run.cooling_days for one in steam if one.month == month for run in _counted(one.runs)]
        if days:
            mean = sum(days) / len(days)
            how = f"{places} places x 7 days / {mean:.3g} days from unloading to inoculation, both included"
            yield Capacity("cool", "", places * 7 / mean, None, how, month)


def _inoculating(farm: Farm, week: RepeatingWeek) -> Capacity:
    hours, rate = sum(week.inoculation_hours(day) for day in range(7)), farm.rates.inoculate_bags_h
    benches, of_people = farm.limits.inoculation_benches, week.hours("inoculate")
    if hours < of_people - 1e-9 and benches is not None:
        bench = "bench" if benches == 1 else "benches"
        how = f"{hours:g} h a week at {benches} {bench} (of {of_people:g} h that people have) x {rate:g} bags an hour"
    else:
        how = f"{_hours(week, 'inoculate', hours)} x {rate:g} bags an hour"
    return Capacity("inoculate", "", hours * rate, None, how)


def _colonising(farm: Farm) -> Iterator[Capacity]:
    for strain in farm.strain:
        rooms = [(room, days_to_ready(strain, room.temp_c)) for room in farm.rooms_of("colonisation")
                 if suits(strain, room.temp_c)]  # fmt: skip
        terms = [f"{room.places} places in {room.code} / {days} days" for room, days in rooms]
        bags = sum(room.places * 7 / days for room, days in rooms)
        kg = bags * (1 - strain.loss_pct / 100) * _kg(farm, strain)
        how = f"7 days x {' + '.join(terms)}; {strain.loss_pct:g} % are lost"
        yield Capacity("colonise", strain.code, bags, kg, how, strain=strain.code)


def _kg(farm: Farm, strain: Strain) -> float:
    return sum(expected_flush_kg(strain, farm.recipe_of(strain), farm.bag_of(strain)))


def _opening(farm: Farm, week: RepeatingWeek) -> Capacity:
    hours, rates = week.hours("open"), farm.rates
    bags = hours / (1 / rates.open_bags_h + 1 / rates.discard_bags_h)
    how = (
        f"{_hours(week, 'open', hours)}, opening {rates.open_bags_h:g}"
        f" and taking away {rates.discard_bags_h:g} spent bags an hour"
    )
    return Capacity("open", "", bags, None, how)


def _fruiting(farm: Farm) -> Iterator[Capacity]:
    for strain in farm.strain:
        low, high = strain.fruiting_temp_c
        rooms = [room for room in farm.rooms_of("fruiting") if low <= room.temp_c <= high]
        by_flush = expected_flush_kg(strain, farm.recipe_of(strain), farm.bag_of(strain))
        for flushes in range(1, len(by_flush) + 1):
            days = [(room, place_days(strain, flushes, room.clean_days, room.temp_c)) for room in rooms]
            bags = sum(room.places * 7 / held for room, held in days)
            kg = sum(by_flush[:flushes])
            terms = [f"{room.places} places in {room.code} / {held} days" for room, held in days]
            how = f"7 days x {' + '.join(terms)}; {kg:.3g} kg a bag"
            what = f"{strain.code}, {flushes} flush{'es' if flushes > 1 else ''} kept"
            yield Capacity("fruit", what, bags, bags * kg, how, strain=strain.code)


def _picking(farm: Farm, week: RepeatingWeek) -> Iterator[Capacity]:
    hours, rate = week.hours("pick"), farm.rates.pick_kg_h
    for strain in farm.strain:
        kg = _kg(farm, strain)
        how = f"{_hours(week, 'pick', hours)} x {rate:g} kg an hour / {kg:.3g} kg a bag"
        yield Capacity("pick", strain.code, hours * rate / kg, hours * rate, how, strain=strain.code)


def month_in_words(month: int | None) -> str:
    """Return the English name of a month; empty for none."""
    return "" if month is None else month_name[month]
