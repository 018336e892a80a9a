"""What a steam cycle's electricity costs by the tariff."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from models.farm import Tariff, TariffPeriod, clock_minutes

QUARTER_MIN = 15


def price_at(tariff: Tariff, minutes_after_midnight: int) -> float:
    """Price of a kilowatt-hour at a local clock time [currency/kWh]; the first period that fits counts.

    Examples
    --------
    >>> night = Tariff.model_validate({"default": 0.3, "periods": [{"from": "23:00", "to": "08:00", "price": 0.1}]})
    >>> price_at(night, 23 * 60), price_at(night, 8 * 60)
    (0.1, 0.3)
    """
    period = _period_at(tariff, minutes_after_midnight)
    return tariff.default if period is None else period.price


def _period_at(tariff: Tariff, minutes_after_midnight: int) -> TariffPeriod | None:
    now = minutes_after_midnight % 1440
    for period in tariff.periods:
        start, end = clock_minutes(period.start), clock_minutes(period.to)
        if (start <= now < end) if start < end else (now >= start or now < end):
            return period
    return None


@dataclass(frozen=True, slots=True)
class PricedEnergy:
    """Energy that falls into a period of the tariff [kWh], its price [currency/kWh] and cost [currency]."""

    period: str
    price: float
    kwh: float
    cost: float


def energy_by_period(tariff: Tariff, clock: Sequence[int], kwh: Sequence[float]) -> tuple[PricedEnergy, ...]:
    """Sort energy into the periods of the tariff.

    Parameters
    ----------
    clock : sequence of int
        Minutes after local midnight at which each piece begins [min].
    kwh : sequence of float
        Energy of each piece [kWh].

    Returns
    -------
    tuple of PricedEnergy
        Periods with energy in them, in the order of the tariff, the default last.

    Examples
    --------
    >>> night = Tariff.model_validate({"default": 0.3, "periods": [{"from": "23:00", "to": "08:00", "price": 0.1}]})
    >>> [(one.period, one.kwh, round(one.cost, 2)) for one in energy_by_period(night, [1365, 1380], [2.0, 5.0])]
    [('23:00-08:00', 5.0, 0.5), ('other hours', 2.0, 0.6)]
    """
    sums: dict[int, float] = {}
    for minute, amount in zip(clock, kwh, strict=True):
        period = _period_at(tariff, minute)
        place = len(tariff.periods) if period is None else tariff.periods.index(period)
        sums[place] = sums.get(place, 0.0) + amount
    found = []
    for place, amount in sorted(sums.items()):
        if place == len(tariff.periods):
            name, price = ("other hours" if tariff.periods else "all hours"), tariff.default
        else:
            name, price = f"{tariff.periods[place].start}-{tariff.periods[place].to}", tariff.periods[place].price
        found.append(PricedEnergy(name, price, amount, amount * price))
    return tuple(found)


def energy_cost(tariff: Tariff, steam_on: int, kwh_by_quarter: Sequence[float]) -> float:
    """Cost of a cycle that starts at a clock time, on a night without a clock change [currency].

    Parameters
    ----------
    steam_on : int
        Minutes after local midnight [min].
    kwh_by_quarter : sequence of float
        Energy in each quarter of an hour from steam on [kWh].
    """
    return sum(kwh * price_at(tariff, steam_on + QUARTER_MIN * k) for k, kwh in enumerate(kwh_by_quarter))
