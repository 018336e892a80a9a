"""Update the cards of a farm from its lots, and see whether the last of them drift away."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from math import exp, log, sqrt

from models.farm import Farm, Strain
from models.growth.learning import MeanBelief, ShareBelief
from scheduler.folder.edit import Place
from scheduler.learning.lots import LotFacts, facts_of
from scheduler.learning.picks import PickedLot

PRIOR_LOTS = 3.0
"""How many lots a card's mean is worth [-]; assumed."""
PRIOR_SPREAD_LOTS = 4.0
"""How many lots a card's spread is worth [-]; assumed."""
PRIOR_BAGS = 40.0
"""How many bags, each by itself, a card's share of losses is worth [-]; assumed."""
FEWEST = 3
"""Lots that must speak to a key before it is proposed, and lots whose mean is watched for drift."""


@dataclass(frozen=True, slots=True)
class Learned:
    """A key before and after, with its 90 % range and the lots that speak to it; shown in the key's unit.

    ``proposed`` says whether it goes into the farm file: enough lots, and a change in the digits that are written.
    """

    key: str
    before: float | tuple[float, ...]
    after: float | tuple[float, ...]
    low: float
    high: float
    lots: int
    proposed: bool


@dataclass(frozen=True, slots=True)
class StrainLearned:
    """What was learned of a strain, what was not and why, and what drifts."""

    strain: str
    lots: int
    keys: tuple[Learned, ...]
    missing: tuple[str, ...]
    drift: tuple[str, ...]


def learn(farm: Farm, lots: Sequence[PickedLot]) -> tuple[StrainLearned, ...]:
    """Update every strain that was picked, in the order of the farm file."""
    found = []
    for strain in farm.strain:
        mine = [facts_of(farm, lot) for lot in lots if lot.strain == strain.code and lot.picks]
        if mine:
            found.append(_strain(farm, strain, mine))
    return tuple(found)


def changes(learned: Sequence[StrainLearned]) -> dict[Place, float | list[float]]:
    """What goes into the farm file."""
    return {
        ("strain", one.strain, key.key): list(key.after) if isinstance(key.after, tuple) else key.after
        for one in learned
        for key in one.keys
        if key.proposed
    }


def _strain(farm: Farm, card: Strain, lots: Sequence[LotFacts]) -> StrainLearned:
    keys: list[Learned] = []
    missing: list[str] = []

    def take(key: Learned | None, why: str) -> None:
        if key is None:
            missing.append(why)
        else:
            keys.append(key)

    totals = [100 * sum(lot.efficiency[: len(card.flush_share)]) for lot in lots if lot.complete]
    take(_efficiency(card, totals), f"be_pct: no lot was picked over all {len(card.flush_share)} flushes yet")
    take(_shares(card, lots), "flush_share: no second flush was picked yet")
    take(
        _days(card, "colonise_days", card.colonise_days, [lot.colonised for lot in lots], lambda days: round(days, 1)),
        "colonise_days: needs the columns inoculated and ready",
    )
    pins = [None if lot.pins is None else lot.pins / card.pin_days for lot in lots]
    take(_days(card, "pin_days", card.pin_days, pins, _whole), "pin_days: needs the column opened")
    rests = [sum(lot.rests) / len(lot.rests) / card.rest_days if lot.rests else None for lot in lots]
    take(_days(card, "rest_days", card.rest_days, rests, _whole), "rest_days: no second flush was picked yet")
    losses = [lot.lost for lot in lots if lot.lost is not None]
    take(_loss(farm, "loss_pct", card.loss_pct, losses), "loss_pct: needs the column bags_inoculated")
    between = [pair for lot in lots for pair in lot.lost_between]
    take(_loss(farm, "flush_loss_pct", card.flush_loss_pct, between), "flush_loss_pct: no second flush was picked yet")
    return StrainLearned(card.code, len(lots), tuple(keys), tuple(missing), _drift(card, lots, totals))


def _belief(card: Strain) -> MeanBelief:
    return MeanBelief.prior(card.be_pct, max(card.yield_cv, 0.02) * card.be_pct, PRIOR_LOTS, PRIOR_SPREAD_LOTS)


def _efficiency(card: Strain, totals: Sequence[float]) -> Learned | None:
    if not totals:
        return None
    after = _belief(card).after(totals)
    low, high = after.interval()
    return _learned("be_pct", card.be_pct, round(after.mean, 1), max(0.0, low), high, len(totals))


def _shares(card: Strain, lots: Sequence[LotFacts]) -> Learned | None:
    """Shares from the expected yield of each flush: the card's worth `PRIOR_LOTS`, with the lots that reached it."""
    count = len(card.flush_share)
    seen = sum(len(lot.efficiency) > 1 for lot in lots)
    if count == 1 or not seen:
        return None
    means = []
    for flush in range(count):
        values = [100 * lot.efficiency[flush] for lot in lots if len(lot.efficiency) > flush]
        prior = card.be_pct * card.flush_share[flush]
        means.append((PRIOR_LOTS * prior + sum(values)) / (PRIOR_LOTS + len(values)))
    shares = [round(mean / sum(means), 3) for mean in means]
    shares[0] = round(1 - sum(shares[1:]), 3)
    moved = any(abs(new - old) >= 0.0005 for new, old in zip(shares, card.flush_share, strict=True))
    return Learned(
        "flush_share", card.flush_share, tuple(shares), min(shares), max(shares), seen, moved and seen >= FEWEST
    )


def _days(
    card: Strain, key: str, before: float, ratios: Sequence[float | None], rounded: Callable[[float], float]
) -> Learned | None:
    """Days as a factor on the card's: normal in its logarithm."""
    logs = [log(ratio) for ratio in ratios if ratio is not None and ratio > 0]
    if not logs:
        return None
    spread = sqrt(log(1 + max(card.days_cv, 0.02) ** 2))
    after = MeanBelief.prior(0.0, spread, PRIOR_LOTS, PRIOR_SPREAD_LOTS).after(logs)
    low, high = after.interval()
    return _learned(key, before, rounded(before * exp(after.mean)), before * exp(low), before * exp(high), len(logs))


def _loss(farm: Farm, key: str, before: float, lots: Sequence[tuple[float, float]]) -> Learned | None:
    if not lots:
        return None
    after = ShareBelief.prior(before / 100, PRIOR_BAGS).after(lots, farm.spread.loss_correlation)
    low, high = after.interval()
    return _learned(key, before, round(100 * after.mean, 1), 100 * low, 100 * high, len(lots))


def _learned(key: str, before: float, after: float, low: float, high: float, lots: int) -> Learned:
    return Learned(key, before, after, low, high, lots, lots >= FEWEST and abs(after - before) > 1e-9)


def _whole(days: float) -> float:
    return max(1, round(days))


def _drift(card: Strain, lots: Sequence[LotFacts], totals: Sequence[float]) -> tuple[str, ...]:
    """Whether the last lots lie where those before them let expect."""
    found = []
    watched: list[tuple[str, MeanBelief, Sequence[float], str]] = [("yield", _belief(card), totals, "% BE")]
    spread = sqrt(log(1 + max(card.days_cv, 0.02) ** 2))
    times = [log(lot.colonised) for lot in lots if lot.colonised]
    watched.append(("colonisation", MeanBelief.prior(0.0, spread, PRIOR_LOTS, PRIOR_SPREAD_LOTS), times, "days"))
    for name, belief, values, unit in watched:
        if len(values) <= FEWEST:
            continue
        low, high = belief.after(values[:-FEWEST]).of_next(0.95, FEWEST)
        mean = sum(values[-FEWEST:]) / FEWEST
        if low <= mean <= high:
            continue
        if unit == "days":
            low, mean, high = (card.colonise_days * exp(value) for value in (low, mean, high))
        found.append(
            f"{name} drifts: the last {FEWEST} lots gave {mean:.1f} {unit}, where {low:.1f} to {high:.1f} was to be"
            " expected from those before"
        )
    return tuple(found)
