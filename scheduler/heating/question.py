"""What is asked of the steriliser: which load, under which programme, with what changed."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from difflib import get_close_matches

from models.farm import Bag, Farm, Programme, Recipe, Steriliser, Strain
from models.thermal.cycle import Cycle, Surroundings, cycle_in
from models.thermal.errors import ThermalError
from models.thermal.load import LoadPart
from scheduler.errors import UsageError


@dataclass(frozen=True, slots=True)
class Question:
    """A load in a steriliser.

    Attributes
    ----------
    strains : tuple of Strain
        One for each part of the load.
    month : int
        Calendar month (1-12).
    start_c : float, optional
        Temperature of the load at steam on; None: ambient [°C].
    """

    farm: Farm
    steriliser: Steriliser
    programme: Programme
    strains: tuple[Strain, ...]
    load: tuple[LoadPart, ...]
    month: int
    start_c: float | None = None

    @property
    def bags(self) -> int:
        """Bags in the load."""
        return sum(part.bags for part in self.load)

    @property
    def wet_kg(self) -> float:
        """Mass of the load [kg]."""
        return sum(part.wet_kg for part in self.load)

    @property
    def load_words(self) -> str:
        """The load as people say it: ``60 bags of OYS and 44 of LIO``."""
        named = [f"{part.bags} of {strain.code}" for part, strain in zip(self.load, self.strains, strict=True)]
        first = named[0].replace(" of", " bag of" if self.load[0].bags == 1 else " bags of", 1)
        return " and ".join([", ".join([first, *named[1:-1]]), *named[1:][-1:]])

    def cycle(self) -> Cycle:
        """Work the cycle out.

        Raises
        ------
        ThermalError
            There is no such cycle, in words.
        """
        around = Surroundings.of(self.farm)
        return cycle_in(around, self.steriliser, self.programme, self.load, month=self.month, start_c=self.start_c)

    def with_element(self, kw: float) -> Question:
        """The same with another element [kW]."""
        return replace(self, steriliser=self.steriliser.model_copy(update={"element_kw": kw}))

    def with_loss(self, w_per_k: float) -> Question:
        """The same with another vessel loss [W/K]."""
        return replace(self, steriliser=self.steriliser.model_copy(update={"loss_w_per_k": w_per_k}))

    def with_hold(self, hours: float) -> Question:
        """The same with another hold [h]."""
        return replace(self, programme=self.programme.model_copy(update={"hold_h": hours}))

    def with_bags(self, bags: int) -> Question:
        """The same with another number of bags, in a load of one kind."""
        return replace(self, load=(replace(self.load[0], bags=bags),))

    def with_bag(self, bag: Bag) -> Question:
        """The same in another kind of bag, in a load of one kind."""
        return replace(self, load=(replace(self.load[0], bag=bag),))

    def with_water(self, water_pct: float) -> Question:
        """The same with another moisture of all its recipes [%]."""
        return replace(self, load=tuple(replace(part, recipe=_wetter(part.recipe, water_pct)) for part in self.load))


def ask(
    farm: Farm,
    *,
    steriliser: str | None,
    strain: str | None,
    mixed: str | None,
    month: int,
    start_c: float | None,
) -> Question:
    """Put a question together from codes; what is left out is the first of the farm file, and a full load.

    Raises
    ------
    UsageError
        A code is not known, the strains of a mixed load differ in programme, or it holds too many bags.
    """
    vessel = farm.steriliser_called(choose("--steriliser", steriliser, [one.code for one in farm.steriliser]))
    if mixed is None:
        cards = [farm.strain_called(choose("--strain", strain, [one.code for one in farm.strain]))]
        counts = [vessel.places]
    else:
        if strain is not None:
            raise UsageError("--mixed: it names the strains itself; leave --strain out.")
        cards, counts = _mixed(farm, mixed)
    programmes = {card.programme for card in cards}
    if len(programmes) > 1:
        told = ", ".join(f"{card.code} {card.programme}" for card in cards)
        raise UsageError(f"--mixed: strains of one programme were expected, as a run has one; found {told}.")
    if sum(counts) > vessel.places:
        raise too_many("--mixed", vessel, sum(counts))
    load = tuple(
        LoadPart(farm.recipe_of(card), farm.bag_of(card), count) for card, count in zip(cards, counts, strict=True)
    )
    target = farm.programme_of(cards[0]).target_core_c
    if start_c is not None and not -20 <= start_c < target:
        raise UsageError(
            f"--start-c: a temperature from -20 to below the target of {target:g} °C was expected; found {start_c:g}"
        )
    return Question(farm, vessel, farm.programme_of(cards[0]), tuple(cards), load, month, start_c)


def too_many(option: str, vessel: Steriliser, bags: int) -> UsageError:
    """Say that a load does not fit."""
    return UsageError(f"{option}: at most {vessel.places} bags fit steriliser {vessel.code}; found {bags}")


def _mixed(farm: Farm, text: str) -> tuple[list[Strain], list[int]]:
    codes = [one.code for one in farm.strain]
    cards, counts = [], []
    for piece in text.split(","):
        code, _, count = (word.strip() for word in piece.partition("="))
        if not count.isdecimal() or not 0 < int(count) < 1_000_000:
            raise UsageError(
                f"--mixed: strains with numbers of bags such as OYS=60,LIO=44 were expected; found {text!r}"
            )
        card = farm.strain_called(choose("--mixed", code, codes))
        if card in cards:
            raise UsageError(f"--mixed: each strain once was expected; found {card.code} twice")
        cards.append(card)
        counts.append(int(count))
    return cards, counts


def _wetter(recipe: Recipe, water_pct: float) -> Recipe:
    own = 100 * (1 - 1 / recipe.bought_kg_per_dry_kg)
    if not max(0.0, own) < water_pct < 100:
        least = f"above {own:.1f} %, the water in the ingredients of {recipe.code}," if own > 0 else "above 0 %"
        raise UsageError(f"--water-pct: a moisture {least} and below 100 % was expected; found {water_pct:g}")
    return recipe.model_copy(update={"water_pct": water_pct})


def choose(option: str, code: str | None, codes: Sequence[str]) -> str:
    """The code asked for, or the first.

    Raises
    ------
    UsageError
        There is no such code; the nearest is named.
    """
    if code is None:
        return codes[0]
    if code in codes:
        return code
    near = get_close_matches(code, codes, n=1, cutoff=0.3) or get_close_matches(code.upper(), codes, n=1, cutoff=0.3)
    hint = f"; did you mean {near[0]!r}?" if near else "."
    raise UsageError(f"{option}: one of {', '.join(codes)} was expected, found {code!r}{hint}")


def answered(question: Question) -> Cycle:
    """The cycle; what makes it impossible becomes a sentence.

    Raises
    ------
    UsageError
        There is no such cycle.
    """
    try:
        return question.cycle()
    except ThermalError as error:
        raise UsageError(str(error)) from error
