"""The same load with other elements, loads, holds, insulation or bags, side by side."""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass
from itertools import product

from models.farm import Bag
from models.thermal.cycle import Cycle
from models.thermal.errors import ThermalError
from models.thermal.table import QUARTER_MIN, power_by_quarter
from scheduler.errors import UsageError
from scheduler.heating.moment import Moment
from scheduler.heating.question import Question, choose, too_many
from scheduler.tariff import energy_cost

MOST_ROWS = 200
Value = float | int | str
KEYS = ("element_kw", "bags", "hold_h", "loss_w_per_k", "bag")
"""What may be varied, in the order of columns."""


@dataclass(frozen=True, slots=True)
class Variation:
    """One row: values of all keys, its cycle, or why there is none, its cost [currency] and what is wrong with it.

    It ``sours`` when its core is hot later than wet mix keeps; it is ``over_supply`` when element and base load draw
    more than the site's supply.
    """

    values: Mapping[str, Value]
    cycle: Cycle | None
    cost: float
    problem: str = ""
    sours: bool = False
    over_supply: bool = False


def numbers(option: str, text: str, least: float, most: float, *, with_least: bool = False) -> list[float]:
    """Read a list such as ``4,6,9``; each number once, in the order given.

    Parameters
    ----------
    least, most : float
        Bounds; the lower one is allowed only ``with_least``.

    Raises
    ------
    UsageError
        A piece is no number, or it lies outside of the bounds.
    """
    bounds = f"{'from' if with_least else 'above'} {least:g} {'' if with_least else 'and up '}to {most:g}"
    found: list[float] = []
    for piece in text.split(","):
        try:
            value = float(piece)
        except ValueError:
            raise UsageError(f"{option}: numbers such as 4,6,9 were expected; found {text!r}") from None
        if not (least <= value <= most if with_least else least < value <= most):
            raise UsageError(f"{option}: numbers {bounds} were expected; found {piece.strip()!r}")
        if value not in found:
            found.append(value)
    return found


def whole_numbers(option: str, text: str, most: int) -> list[int]:
    """Read a list of whole numbers from 1 such as ``60,90``.

    Raises
    ------
    UsageError
        A piece is no whole number, or it lies outside of the bounds.
    """
    found = numbers(option, text, 0, most)
    if not all(value.is_integer() for value in found):
        raise UsageError(f"{option}: whole numbers such as 60,90 were expected; found {text!r}")
    return [int(value) for value in found]


def changed(question: Question, values: Mapping[str, Value]) -> Question:
    """The question with values changed.

    Raises
    ------
    UsageError
        A value does not fit the farm.
    """
    one_kind = len(question.load) == 1
    for key in values:
        if key in {"bags", "bag"} and not one_kind:
            raise UsageError(f"--{key}: a load of one kind was expected; with --mixed its numbers stand there.")
    bags = values.get("bags")
    if isinstance(bags, float | int) and bags > question.steriliser.places:
        raise too_many("--bags", question.steriliser, int(bags))
    ways: dict[str, Callable[[Question, Value], Question]] = {
        "element_kw": lambda q, value: q.with_element(float(value)),
        "bags": lambda q, value: q.with_bags(int(value)),
        "hold_h": lambda q, value: q.with_hold(float(value)),
        "loss_w_per_k": lambda q, value: q.with_loss(float(value)),
        "bag": lambda q, value: q.with_bag(_bag(q, str(value))),
    }
    for key, value in values.items():
        question = ways[key](question, value)
    return question


def _bag(question: Question, code: str) -> Bag:
    codes = [bag.code for bag in question.farm.bag]
    return next(bag for bag in question.farm.bag if bag.code == choose("--bag", code, codes))


def values_of(question: Question) -> dict[str, Value]:
    """The values of all keys that a question has."""
    return {
        "element_kw": question.steriliser.element_kw,
        "bags": question.bags,
        "hold_h": question.programme.hold_h,
        "loss_w_per_k": question.steriliser.loss_w_per_k,
        "bag": question.load[0].bag.code if len(question.load) == 1 else "mixed",
    }


def compare(question: Question, lists: Mapping[str, Sequence[Value]], steam_on: Moment) -> tuple[Variation, ...]:
    """The load as it is, then each combination of the lists.

    Parameters
    ----------
    lists : mapping
        Values by key; those of one value hold in every combination.
    steam_on : Moment
        For the price.

    Raises
    ------
    UsageError
        There are more than `MOST_ROWS` combinations, or a value does not fit the farm.
    """
    combinations = [dict(zip(lists, values, strict=True)) for values in product(*lists.values())]
    if len(combinations) > MOST_ROWS:
        raise UsageError(f"at most {MOST_ROWS} combinations were expected; found {len(combinations)}.")
    return tuple(_variation(changed(question, values), steam_on) for values in ({}, *combinations))


def _variation(question: Question, steam_on: Moment) -> Variation:
    try:
        cycle = question.cycle()
    except ThermalError as error:
        return Variation(values_of(question), None, 0.0, str(error))
    kwh = power_by_quarter(cycle)[0]
    cost = sum(
        energy_cost(question.farm.tariff, steam_on.plus(QUARTER_MIN * k).of_day, [amount])
        for k, amount in enumerate(kwh)
    )
    site, power = question.farm.site, question.steriliser.element_kw
    return Variation(
        values_of(question), cycle, cost,
        sours=cycle.heat_up_h > question.farm.limits.mix_to_steam_h,
        over_supply=site.supply_kw is not None and site.base_load_kw + power > site.supply_kw + 1e-9,
    )  # fmt: skip
