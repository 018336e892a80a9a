"""What the lots of a strain say about each key of its card, each lot once, brought to what the card states."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field

from models.farm import Farm, Room, Strain
from models.growth import colonisation_days, fruiting_factor, suits
from scheduler.learning.lots import PickedLot

HALF_DAY = 0.5
"""A bag that is found ready on a day became so within the day before [d]."""


@dataclass(slots=True)
class Observations:
    """What lots say, in the order of their first picks.

    Attributes
    ----------
    values : dict of str to list of (str, float)
        By key, lot code and value: ``be_pct`` [%], ``colonise_days``, ``pin_days``, ``rest_days`` at what the card
        states [d].
    losses : dict of str to list of (str, (int, int))
        By key, lot code, bags and how many of them were lost: ``loss_pct``, ``flush_loss_pct`` [bags].
    flush_yields : list of list of float
        By flush, fresh mushrooms over the dry substrate of the bags that stood, one value a lot [%].
    room, fruiting_room : Room or None
        Rooms that days were brought back from.
    unlearned : dict of str to str
        Keys that no lot speaks to, and why.
    notes : list of str
        What was left out of the count.
    """

    values: dict[str, list[tuple[str, float]]] = field(default_factory=dict)
    losses: dict[str, list[tuple[str, tuple[int, int]]]] = field(default_factory=dict)
    flush_yields: list[list[float]] = field(default_factory=list)
    room: Room | None = None
    fruiting_room: Room | None = None
    unlearned: dict[str, str] = field(default_factory=dict)
    notes: list[str] = field(default_factory=list)


def observe(farm: Farm, strain: Strain, lots: Sequence[PickedLot]) -> Observations:
    """Gather what lots of one strain say.

    Parameters
    ----------
    farm : Farm
        Gives recipe, bag and rooms.
    strain : Strain
        The card.
    lots : sequence of PickedLot
        Its lots, in the order of their first picks.
    """
    found = Observations()
    _yields(farm, strain, lots, found)
    _colonisation(farm, strain, lots, found)
    _fruiting(farm, strain, lots, found)
    _losses(lots, found)
    return found


def _yields(farm: Farm, strain: Strain, lots: Sequence[PickedLot], found: Observations) -> None:
    flushes = len(strain.flush_share)
    dry_kg = farm.bag_of(strain).wet_kg * (1 - farm.recipe_of(strain).water_pct / 100)
    found.flush_yields = [[] for _ in range(flushes)]
    whole: list[tuple[str, float]] = []
    more = 0
    for lot in lots:
        yields = {one.number: 100 * one.kg / (one.bags * dry_kg) for one in lot.flushes}
        for number, pct in yields.items():
            if number <= flushes:
                found.flush_yields[number - 1].append(pct)
        if all(number in yields for number in range(1, flushes + 1)):
            whole.append((lot.code, sum(pct for number, pct in yields.items() if number <= flushes)))
        more += any(number > flushes for number in yields)
    found.values["be_pct"] = whole
    of = f"all {flushes} flushes" if flushes > 1 else "a flush"
    if not whole:
        found.unlearned["be_pct"] = f"no lot has {of} of the card picked"
    elif len(whole) < len(lots):
        rest = len(lots) - len(whole)
        found.notes.append(f"{rest} of {len(lots)} lots without {of} picked: not counted for be_pct.")
    if more:
        found.notes.append(f"{more} of {len(lots)} lots have more flushes than the card's {flushes}: not counted.")
    if flushes == 1:
        found.unlearned["flush_share"] = "the card has one flush"
    elif not all(found.flush_yields):
        missing = next(place for place, seen in enumerate(found.flush_yields, start=1) if not seen)
        found.unlearned["flush_share"] = f"no lot has flush {missing} picked"


def _colonisation(farm: Farm, strain: Strain, lots: Sequence[PickedLot], found: Observations) -> None:
    found.room = next((room for room in farm.rooms_of("colonisation") if suits(strain, room.temp_c)), None)
    seen: list[tuple[str, float]] = []
    found.values["colonise_days"] = seen
    if found.room is None:
        found.unlearned["colonise_days"] = "no colonisation room of the farm suits the strain"
        return
    factor = colonisation_days(strain, found.room.temp_c) / strain.colonise_days
    early = []
    for lot in lots:
        if lot.inoculated is None or lot.ready is None:
            continue
        days = (lot.ready - lot.inoculated).days - strain.mature_days - HALF_DAY
        if days > 0:
            seen.append((lot.code, days / factor))
        else:
            early.append(lot.code)
    if early:
        found.notes.append(
            f"{_codes(early)} ready within the {strain.mature_days} mature_days of the card: not counted for"
            " colonise_days."
        )
    if not seen:
        found.unlearned["colonise_days"] = "no lot has both inoculated and ready"


def _fruiting(farm: Farm, strain: Strain, lots: Sequence[PickedLot], found: Observations) -> None:
    low, high = strain.fruiting_temp_c
    found.fruiting_room = next((room for room in farm.rooms_of("fruiting") if low <= room.temp_c <= high), None)
    factor = fruiting_factor(strain, None if found.fruiting_room is None else found.fruiting_room.temp_c)
    pins: list[tuple[str, float]] = []
    rests: list[tuple[str, float]] = []
    for lot in lots:
        bore = {one.number: one.first for one in lot.flushes if one.kg > 0}
        if lot.opened is not None and 1 in bore:
            pins.append((lot.code, (bore[1] - lot.opened).days / factor))
        between = [(bore[number + 1] - day).days for number, day in bore.items() if number + 1 in bore]
        if between:
            rests.append((lot.code, sum(between) / len(between) / factor))
    found.values |= {"pin_days": pins, "rest_days": rests}
    if not pins:
        found.unlearned["pin_days"] = "no lot has both opened and a first flush"
    if len(strain.flush_share) == 1:
        found.values["rest_days"] = []
        found.unlearned["rest_days"] = "the card has one flush"
    elif not rests:
        found.unlearned["rest_days"] = "no lot has two flushes, one after the other"


def _losses(lots: Sequence[PickedLot], found: Observations) -> None:
    early: list[tuple[str, tuple[int, int]]] = []
    late: list[tuple[str, tuple[int, int]]] = []
    for lot in lots:
        standing = [one.bags for one in lot.kept_flushes]
        if lot.gone is not None and len(standing) == len(lot.flushes):
            standing.append(0)
        if lot.bags_inoculated is not None and standing:
            early.append((lot.code, (lot.bags_inoculated, lot.bags_inoculated - standing[0])))
        if len(standing) > 1 and standing[0]:
            late.append((lot.code, (sum(standing[:-1]), standing[0] - standing[-1])))
    found.losses = {"loss_pct": early, "flush_loss_pct": late}
    if not early:
        found.unlearned["loss_pct"] = "no lot has bags_inoculated"
    if not late:
        found.unlearned["flush_loss_pct"] = "no lot has two flushes, one after the other"


def _codes(codes: Sequence[str]) -> str:
    shown = ", ".join(codes[:3])
    return f"{shown} and {len(codes) - 3} more" if len(codes) > 3 else shown
