"""One cycle with all that follows from it: clock times, price by period, the mix, hints."""

from __future__ import annotations

from dataclasses import dataclass

from models.mix import Mix, mix_for
from models.thermal.cycle import Cycle, Surroundings
from models.thermal.hints import souring_hint
from models.thermal.table import QUARTER_MIN, power_by_quarter
from scheduler.heating.moment import Moment
from scheduler.heating.question import Question, answered
from scheduler.tariff import PricedEnergy, energy_by_period


@dataclass(frozen=True, slots=True)
class HeatAnswer:
    """A cycle with what was asked.

    Attributes
    ----------
    steam_on : Moment
        When steam goes on.
    unload_by : Moment, optional
        When the load was asked to be ready to unload; steam on is then the latest for it.
    energy : tuple of PricedEnergy
        Electricity by period of the tariff.
    mixes : tuple of Mix
        One for each part of the load.
    hints : tuple of str
        What would help, in words.
    """

    question: Question
    cycle: Cycle
    steam_on: Moment
    unload_by: Moment | None
    energy: tuple[PricedEnergy, ...]
    mixes: tuple[Mix, ...]
    hints: tuple[str, ...]

    @property
    def cost(self) -> float:
        """Electricity from steam on to the end of the hold, by tariff [currency]."""
        return sum(one.cost for one in self.energy)


def answer(question: Question, steam_on: Moment, unload_by: Moment | None = None) -> HeatAnswer:
    """Work out a cycle and what follows from it.

    Parameters
    ----------
    steam_on : Moment
        When steam goes on; not read where ``unload_by`` is given.
    unload_by : Moment, optional
        When the load has to be ready to unload.

    Raises
    ------
    UsageError
        There is no such cycle.
    """
    cycle = answered(question)
    start = steam_on if unload_by is None else unload_by.plus(-60 * cycle.ready_to_unload_h)
    kwh = power_by_quarter(cycle)[0]
    clock = [start.plus(QUARTER_MIN * k).of_day for k in range(len(kwh))]
    hint = souring_hint(
        Surroundings.of(question.farm), question.steriliser, question.programme, question.load, cycle,
        month=question.month, start_c=question.start_c,
    )  # fmt: skip
    return HeatAnswer(
        question=question,
        cycle=cycle,
        steam_on=start,
        unload_by=unload_by,
        energy=energy_by_period(question.farm.tariff, clock, kwh),
        mixes=tuple(mix_for(part.recipe, part.wet_kg) for part in question.load),
        hints=(hint,) if hint else (),
    )
