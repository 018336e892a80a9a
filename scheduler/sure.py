"""Plan for a chance: keep so much ready beyond each delivery that the forecast fills it often enough."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass

from models.calendar import Week
from models.plan import Margin, Plan
from scheduler.errors import NoPlanError
from scheduler.forecast import Forecast, OrderChance

ROUNDS = 10
INTERRUPTED = "interrupted"
"""What a plan gives as the reason of its stop when the search for it was ended from the keyboard."""
MOST_SHARE = 1.5
"""More than this is not kept ready beyond a kilogram delivered [-]."""
LEAST_STEP = 0.03
MOST_DAYS = 3
"""No more days than this lie between the last pick for a delivery and the delivery."""
LATE_BELOW = 0.75
"""Where nine draws of ten give less than this share of an order, flushes that come late are the cause [-]."""
SPREAD_OVER = 0.4
"""Part of its largest margin that a strain keeps in every other week [-]."""
Key = tuple[str, Week]
Margins = Mapping[Key, Margin]


@dataclass(frozen=True, slots=True)
class SurePlan:
    """A plan with margins, beside the plan without.

    Attributes
    ----------
    wanted : float
        Chance that was asked for [-].
    plan, forecast : Plan, Forecast
        The plan with margins and what it may give.
    plain, plain_forecast : Plan, Forecast
        The same without.
    margins : mapping
        By strain code and week of delivery.
    rounds : int
        Plans made on the way.
    unreachable : tuple of OrderChance
        Deliveries that stay below the chance, the soonest first.
    """

    wanted: float
    plan: Plan
    forecast: Forecast
    plain: Plan
    plain_forecast: Forecast
    margins: Margins
    rounds: int
    unreachable: tuple[OrderChance, ...]

    @property
    def cost(self) -> float:
        """What the safety costs: money of the plan without margins less money of the plan with them [currency]."""
        return self.plain.money.total - self.plan.money.total


def plan_surely(wanted: float, make: Callable[[Margins], Plan], draw: Callable[[Plan], Forecast]) -> SurePlan:
    """Raise margins until each delivery has its chance, or until raising them no longer helps.

    Parameters
    ----------
    wanted : float
        Chance for each delivery, above 0 and below 1 [-].
    make : callable
        Makes a plan with margins.
    draw : callable
        Forecasts a plan.

    Raises
    ------
    ValueError
        The chance is not between 0 and 1.

    Notes
    -----
    Two things make a delivery sure: more kilograms than are expected to be enough, and picks some days ahead of it. A
    week whose worst delivery gets little in nine draws of ten has its picks moved a day ahead; otherwise its share is
    raised by what is lacking. A strain's other weeks keep a part of the largest share, since a plan takes from the
    neighbours what a week needs. Of all plans on the way the one that lacks least of the chances is kept, and of equal
    ones the one that earns most. An interrupt from the keyboard ends it with the best so far.
    """
    if not 0 < wanted < 1:
        raise ValueError(f"a chance above 0 and below 1 was expected; found {wanted:g}")
    margins: Margins = {}
    plain = plan = make(margins)
    plain_forecast = found = draw(plan)
    best = (_rank(plan, found, wanted), plan, found, margins)
    rounds = 1
    while rounds < ROUNDS and best[0][0] < 0 and plan.report.stop != INTERRUPTED:
        raised = raise_margins(margins, found, wanted)
        if raised == margins:
            break
        margins = raised
        try:
            plan = make(margins)
            found = draw(plan)
        except (KeyboardInterrupt, NoPlanError):
            break
        rounds += 1
        best = max(best, (_rank(plan, found, wanted), plan, found, margins), key=lambda item: item[0])
    _, plan, found, kept = best
    short = tuple(one for one in found.orders if one.chance < wanted)
    return SurePlan(wanted, plan, found, plain, plain_forecast, kept, rounds, short)


def _rank(plan: Plan, found: Forecast, wanted: float) -> tuple[float, float]:
    """What is lacking of the chances in all, below zero; and money."""
    return -round(sum(max(0.0, wanted - one.chance) for one in found.orders), 6), plan.money.total


def raise_margins(margins: Margins, found: Forecast, wanted: float) -> Margins:
    """Margins for the next plan: more for the weeks of deliveries that new bags can still fill.

    Parameters
    ----------
    margins : mapping
        Those of the plan that was drawn.
    found : Forecast
        What it may give.
    wanted : float
        Chance for each delivery [-].
    """
    after = dict(margins)
    weeks: dict[str, list[Key]] = {}
    for one in found.orders:
        first = found.helps_from[one.strain]
        if first is None or one.week < first:
            continue
        key = (one.strain, one.week)
        weeks.setdefault(one.strain, []).append(key)
        if one.chance < wanted:
            now, held = margins.get(key, Margin()), after.get(key, Margin())
            if one.low_share < LATE_BELOW and now.days < MOST_DAYS:
                after[key] = Margin(held.share, max(held.days, now.days + 1))
            else:
                lacking = (1 + now.share) / max(one.low_share, 0.5) - 1
                goal = min(MOST_SHARE, max(now.share + LEAST_STEP, now.share + 0.75 * (lacking - now.share)))
                after[key] = Margin(max(held.share, goal), held.days)
    for keys in weeks.values():
        kept = [after.get(key, Margin()) for key in keys]
        share = SPREAD_OVER * max(margin.share for margin in kept)
        days = max(0, max(margin.days for margin in kept) - 1)
        for key, margin in zip(keys, kept, strict=True):
            raised = Margin(max(margin.share, share), max(margin.days, days))
            if raised != Margin():
                after[key] = raised
    return after
