"""The whole farm file as one value."""

from __future__ import annotations

from collections.abc import Iterable
from typing import Annotated, Protocol, TypeVar

from pydantic import Field

from models.farm.crew import Crew, Rates
from models.farm.room import Room, RoomKind
from models.farm.site import Site
from models.farm.spread import Spread
from models.farm.steriliser import Steriliser
from models.farm.strain import Strain
from models.farm.substrate import Bag, Programme, Recipe
from models.farm.trade import Limits, Market, Tariff
from models.farm.units import FarmModel


class _Coded(Protocol):
    @property
    def code(self) -> str: ...


T = TypeVar("T", bound=_Coded)


def _find(items: Iterable[T], code: str) -> T:
    for item in items:
        if item.code == code:
            return item
    raise KeyError(code)


class Farm(FarmModel):
    """Everything in ``farm.toml``. References between parts are checked by `models.farm.references`."""

    site: Site
    """Where the farm stands and what it may draw."""
    recipe: Annotated[tuple[Recipe, ...], Field(min_length=1)]
    """Substrate mixes."""
    bag: Annotated[tuple[Bag, ...], Field(min_length=1)]
    """Bags."""
    programme: Annotated[tuple[Programme, ...], Field(min_length=1)]
    """Steam programmes."""
    steriliser: Annotated[tuple[Steriliser, ...], Field(min_length=1)]
    """Sterilisers."""
    room: Annotated[tuple[Room, ...], Field(min_length=1)]
    """Rooms."""
    strain: Annotated[tuple[Strain, ...], Field(min_length=1)]
    """Strains."""
    crew: Annotated[tuple[Crew, ...], Field(min_length=1)]
    """Crews."""
    rates: Rates = Rates()
    """How fast one person works."""
    limits: Limits = Limits()
    """How long things may wait and how many fit at the bench."""
    tariff: Tariff = Tariff()
    """Price of electricity by local time of day."""
    market: Market = Market()
    """What is lost when an order is short, and where surplus can go."""
    spread: Spread = Spread()
    """What varies together in the harvest, for the forecast."""

    def recipe_of(self, strain: Strain) -> Recipe:
        """Return the recipe a strain grows on."""
        return _find(self.recipe, strain.recipe)

    def bag_of(self, strain: Strain) -> Bag:
        """Return the bag a strain grows in."""
        return _find(self.bag, strain.bag)

    def programme_of(self, strain: Strain) -> Programme:
        """Return the steam programme a strain's bags get."""
        return _find(self.programme, strain.programme)

    def strain_called(self, code: str) -> Strain:
        """Return the strain with this code; KeyError when there is none."""
        return _find(self.strain, code)

    def steriliser_called(self, code: str) -> Steriliser:
        """Return the steriliser with this code; KeyError when there is none."""
        return _find(self.steriliser, code)

    def room_called(self, code: str) -> Room:
        """Return the room with this code; KeyError when there is none."""
        return _find(self.room, code)

    def rooms_of(self, kind: RoomKind) -> tuple[Room, ...]:
        """Return all rooms of one kind, in file order."""
        return tuple(room for room in self.room if room.kind == kind)
