"""What each lot says of its strain: yield by flush, days, losses."""

from __future__ import annotations

from dataclasses import dataclass, field
from itertools import pairwise

from models.farm import Farm, Strain
from models.growth.colonisation import colonisation_days
from scheduler.learning.picks import Pick, PickedLot


@dataclass(frozen=True, slots=True)
class LotFacts:
    """One lot in numbers.

    Attributes
    ----------
    flush_kg : tuple of float
        Kilograms by flush, as far as it was picked [kg].
    efficiency : tuple of float
        The same over dry substrate of the bags that stood at the first flush [-].
    complete : bool
        Whether it was picked to the last flush of its card.
    colonised, pins, rests : float or tuple
        Days from inoculation to ready over those the card gives in the farm's room; days from opening to the first
        pick; days between flushes; None and empty where not noted [-, d, d].
    lost, lost_between : tuple of (bags, lost)
        In colonisation, and between flushes [bags].
    """

    code: str
    flush_kg: tuple[float, ...]
    efficiency: tuple[float, ...]
    complete: bool
    colonised: float | None = None
    pins: float | None = None
    rests: tuple[float, ...] = ()
    lost: tuple[float, float] | None = None
    lost_between: tuple[tuple[float, float], ...] = field(default=())


def facts_of(farm: Farm, lot: PickedLot) -> LotFacts:
    """Work a lot out."""
    card = farm.strain_called(lot.strain)
    flushes = _flushes(card, lot)
    dry = farm.bag_of(card).wet_kg * (1 - farm.recipe_of(card).water_pct / 100)
    bags = [max(pick.bags for pick in flush) for flush in flushes]
    kilograms = tuple(sum(pick.kg for pick in flush) for flush in flushes)
    first_days = [flush[0].day for flush in flushes]
    opened, inoculated, ready = (lot.noted.get(key) for key in ("opened", "inoculated", "ready"))
    colonised = None
    if inoculated is not None and ready is not None:
        room = next((one for one in farm.rooms_of("colonisation") if card.grows_in(one.temp_c)), None)
        days = (ready - inoculated).days - card.mature_days
        if room is not None and days > 0:
            colonised = days / colonisation_days(card, room.temp_c)
    made = lot.noted.get("bags_inoculated")
    return LotFacts(
        code=lot.code,
        flush_kg=kilograms,
        efficiency=tuple(kg / (bags[0] * dry) for kg in kilograms),
        complete=len(flushes) >= len(card.flush_share),
        colonised=colonised,
        pins=None if opened is None else float(max(1, (first_days[0] - opened).days)),
        rests=tuple(float((b - a).days) for a, b in pairwise(first_days)),
        lost=None if made is None else (float(made), float(made - bags[0])),
        lost_between=tuple((float(a), float(a - b)) for a, b in pairwise(bags)),
    )


def _flushes(card: Strain, lot: PickedLot) -> list[list[Pick]]:
    """Picks by flush: as noted, else a new one after a gap of more than half a rest."""
    found: list[list[Pick]] = []
    last_flush: int | None = None
    for pick in lot.picks:
        if found and pick.flush is not None and last_flush is not None:
            new = pick.flush != last_flush
        else:
            new = not found or (pick.day - found[-1][-1].day).days > card.rest_days / 2
        if new:
            found.append([])
        found[-1].append(pick)
        last_flush = pick.flush
    return found
