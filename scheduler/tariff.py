"""What a steam cycle's electricity costs by the tariff."""

from __future__ import annotations

from collections.abc import Sequence

from models.farm import Tariff, clock_minutes

QUARTER_MIN = 15


def price_at(tariff: Tariff, minutes_after_midnight: int) -> float:
    """Price of a kilowatt-hour at a local clock time [currency/kWh]; the first period that fits counts.

    Examples
    --------
    >>> night = Tariff.model_validate({"default": 0.3, "periods": [{"from": "23:00", "to": "08:00", "price": 0.1}]})
    >>> price_at(night, 23 * 60), price_at(night, 8 * 60)
    (0.1, 0.3)
    """
    now = minutes_after_midnight % 1440
    for period in tariff.periods:
        start, end = clock_minutes(period.start), clock_minutes(period.to)
        if (start <= now < end) if start < end else (now >= start or now < end):
            return period.price
    return tariff.default


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
