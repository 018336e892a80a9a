"""A run with a power cut: what the core did, and what to do with the load."""

from __future__ import annotations

from dataclasses import dataclass

from models.thermal.cycle import Surroundings
from models.thermal.errors import ThermalError
from models.thermal.interruption import Interruption, advice, interrupted_cycle
from scheduler.errors import UsageError
from scheduler.heating.moment import Moment
from scheduler.heating.question import Question


@dataclass(frozen=True, slots=True)
class PowerCut:
    """A run with a break, when its steam went on, and advice in words."""

    question: Question
    steam_on: Moment
    found: Interruption
    advice: tuple[str, ...]


def power_cut(question: Question, steam_on: Moment, off_min: int, break_min: int) -> PowerCut:
    """Work out a run whose power fails ``off_min`` after steam on and is back ``break_min`` later [min].

    Raises
    ------
    UsageError
        There is no such cycle, or the break does not lie in its steamed part.
    """
    if break_min < 0 or break_min > 10_080:
        raise UsageError(f"--resume-after: minutes from 0 to 10080 (a week) were expected; found {break_min}")
    limits = question.farm.limits
    try:
        found = interrupted_cycle(
            Surroundings.of(question.farm), question.steriliser, question.programme, question.load,
            month=question.month, off_min=off_min, break_min=break_min, start_c=question.start_c,
        )  # fmt: skip
    except ThermalError as error:
        raise UsageError(f"--interrupted: {error}") from error
    words = advice(found, sours_after_h=limits.mix_to_steam_h, again_within_h=limits.steam_again_within_h)
    return PowerCut(question, steam_on, found, words)
