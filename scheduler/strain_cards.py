"""What is known of a strain or preset: each value, where it comes from, how sure it is, and the days it leads to."""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import Any, Literal

from models.farm import Farm, Room, Strain
from models.farm.references import nearest_choice
from models.growth import days_to_ready, expected_flush_kg, expected_self_heating, first_pick_days, place_days, suits
from scheduler.errors import Finding, UsageError
from scheduler.folder import FarmFolder
from scheduler.folder.presets import OWN_KEYS, Preset, presets

Origin = Literal["farm.toml", "preset", "default"]

SURE_IN_WORDS = {
    "trial": "measured in a trial",
    "derived": "from published figures",
    "trade": "grower or supplier page",
    "assumed": "assumed",
    "farm": "as the farm says",
    "default": "assumed",
    "none": "not given",
}
"""How sure a value is, in words."""
USUAL_ROOMS_C = (18.0, 21.0, 24.0)
"""Colonisation rooms that a preset is shown for where there is no farm [°C]."""

_UNIT = re.compile(r"\[([^\]]+)\]")


@dataclass(frozen=True, slots=True)
class CardField:
    """One key of a strain.

    Attributes
    ----------
    key, unit : str
        Key of the farm file and its unit; empty where it has none.
    value : object
        The value; none where there is none.
    origin : {"farm.toml", "preset", "default"}
        Where the value comes from.
    source : str
        Citation of a preset's value, or ``assumed``; empty for what the farm says.
    sure : str
        A key of `SURE_IN_WORDS`.
    """

    key: str
    value: Any
    unit: str
    origin: Origin
    source: str
    sure: str


@dataclass(frozen=True, slots=True)
class RoomDays:
    """Days from inoculation in a colonisation room and a fruiting room.

    Attributes
    ----------
    colonisation, fruiting : str
        Codes of the rooms; empty without a farm.
    colonise_c, fruit_c : float
        Their temperatures [°C].
    ready_days, first_days, last_days : int
        Until the bag is ready, until its first flush and until its last, opened at once [d].
    """

    colonisation: str
    colonise_c: float
    fruiting: str
    fruit_c: float
    ready_days: int
    first_days: int
    last_days: int


@dataclass(frozen=True, slots=True)
class StrainCard:
    """A strain of a farm, or a preset.

    Attributes
    ----------
    code, name, latin : str
        Strain code or name of the preset; names in words.
    preset : str
        Name of the preset; empty without one.
    fields : tuple of CardField
        In the order of the farm file.
    rooms : tuple of RoomDays
        Each pair of rooms that suits.
    unsuited : tuple of Room
        Colonisation and fruiting rooms of the farm that do not suit.
    first_kg : float or None
        Yield of the first flush, where recipe and bag are known [kg/bag].
    core_k : float or None
        Estimated warmth of the core above its room, mean over colonisation, for a bag that stands free [K].
    """

    code: str
    name: str
    latin: str
    preset: str
    fields: tuple[CardField, ...]
    rooms: tuple[RoomDays, ...]
    unsuited: tuple[Room, ...]
    first_kg: float | None = None
    core_k: float | None = None


def find_card(folder: FarmFolder | None, code: str) -> StrainCard:
    """Return the card of a strain of the farm, or of a preset.

    Raises
    ------
    UsageError
        There is neither; the message has the nearest.
    """
    codes = [] if folder is None else [strain.code for strain in folder.farm.strain]
    if folder is not None and code in codes:
        return strain_card(folder, code)
    if code in presets():
        return preset_card(presets()[code], None if folder is None else folder.farm)
    known = [*codes, *presets()]
    expected = "a strain of the farm or a preset" if codes else "the name of a preset"
    expected += " (bagweek strains lists them)"
    raise UsageError(Finding("CODE", "", f"'{code}'", expected, nearest_choice(code, known)).sentence())


def strain_card(folder: FarmFolder, code: str) -> StrainCard:
    """Return the card of a strain of a farm; KeyError when there is none."""
    farm, strain = folder.farm, folder.farm.strain_called(code)
    preset = presets().get(strain.preset)
    rooms, unsuited = _farm_rooms(farm, strain)
    recipe, bag = farm.recipe_of(strain), farm.bag_of(strain)
    return StrainCard(
        code=code,
        name=strain.name,
        latin="" if preset is None else preset.latin,
        preset=strain.preset,
        fields=_fields(strain, preset, folder.written.get(code, frozenset())),
        rooms=rooms,
        unsuited=unsuited,
        first_kg=expected_flush_kg(strain, recipe, bag)[0],
        core_k=expected_self_heating(strain, recipe, bag),
    )


def preset_card(preset: Preset, farm: Farm | None) -> StrainCard:
    """Return the card of a preset, with days for the farm's rooms or for usual ones."""
    strain = preset.strain()
    rooms, unsuited = _usual_rooms(strain) if farm is None else _farm_rooms(farm, strain)
    fields = tuple(one for one in _fields(strain, preset, frozenset()) if one.key not in {*OWN_KEYS, "name", "preset"})
    return StrainCard(preset.key, preset.name, preset.latin, preset.key, fields, rooms, unsuited)


def _fields(strain: Strain, preset: Preset | None, written: frozenset[str]) -> tuple[CardField, ...]:
    found = []
    for key, field in Strain.model_fields.items():
        unit = _UNIT.search(field.description or "")
        value = getattr(strain, key)
        origin, source, sure = _origin(key, preset, written)
        if origin == "default" and value in {None, ""}:
            source, sure = "", "none"
        found.append(CardField(key, value, unit[1] if unit else "", origin, source, sure))
    return tuple(found)


def _origin(key: str, preset: Preset | None, written: frozenset[str]) -> tuple[Origin, str, str]:
    if key in written:
        return "farm.toml", "", "farm"
    if preset is not None and key in preset.values:
        one = preset.values[key]
        return "preset", one.source, one.sure
    if preset is not None and key == "name":
        return "preset", "", "farm"
    return "default", "assumed", "default"


def _farm_rooms(farm: Farm, strain: Strain) -> tuple[tuple[RoomDays, ...], tuple[Room, ...]]:
    low, high = strain.fruiting_temp_c
    colony = [room for room in farm.rooms_of("colonisation") if suits(strain, room.temp_c)]
    fruit = [room for room in farm.rooms_of("fruiting") if low <= room.temp_c <= high]
    kinds = (*farm.rooms_of("colonisation"), *farm.rooms_of("fruiting"))
    pairs = [_days(strain, c.code, c.temp_c, f.code, f.temp_c) for c in colony for f in fruit]
    return tuple(pairs), tuple(room for room in kinds if room not in colony and room not in fruit)


def _usual_rooms(strain: Strain) -> tuple[tuple[RoomDays, ...], tuple[Room, ...]]:
    fruit_c = sum(strain.fruiting_temp_c) / 2 if strain.fruit_at_c is None else strain.fruit_at_c
    temperatures = sorted({*USUAL_ROOMS_C, strain.colonise_at_c})
    return tuple(_days(strain, "", temp, "", fruit_c) for temp in temperatures if suits(strain, temp)), ()


def _days(strain: Strain, colony: str, colonise_c: float, fruiting: str, fruit_c: float) -> RoomDays:
    ready = days_to_ready(strain, colonise_c)
    last = ready + place_days(strain, len(strain.flush_share), temp_c=fruit_c)
    return RoomDays(colony, colonise_c, fruiting, fruit_c, ready, first_pick_days(strain, colonise_c, fruit_c), last)
