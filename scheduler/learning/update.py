"""Update one key of a strain card: what was believed, what lots say, and whether the change is worth a line."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from math import exp, floor, log, sqrt

from models.farm import Strain
from models.growth.learning import days_belief, loss_belief, value_belief

FEWEST_LOTS = 3
"""Lots that must speak to a key before a new value is proposed [lots]; assumed."""
DECIMALS = {"be_pct": 1, "colonise_days": 1, "pin_days": 0, "rest_days": 0, "loss_pct": 1, "flush_loss_pct": 1}
"""Decimals that a key is shown and written with; flush_share has two."""
SHARE_STEPS = 100
"""Shares are shown and written in hundredths."""

Value = float | tuple[float, ...]


@dataclass(frozen=True, slots=True)
class KeyLearned:
    """One key of a strain card, before and after.

    Attributes
    ----------
    key : str
        Key of the farm file.
    before, after : float or tuple of float
        The card's value and the new one, in the key's unit; ``flush_share`` by flush.
    low, high : float or tuple of float
        Ends of its 90 % range.
    lots : int
        Lots that speak to it [lots].
    proposed : bool
        Whether enough lots do, and it changes in the digits it is shown with.
    """

    key: str
    before: Value
    after: Value
    low: Value
    high: Value
    lots: int
    proposed: bool

    @property
    def as_written(self) -> int | float | list[float]:
        """The new value as a farm file holds it."""
        if isinstance(self.after, tuple):
            return list(self.after)
        return int(self.after) if float(self.after).is_integer() else self.after


def learn_yield(strain: Strain, seen: Sequence[float]) -> KeyLearned:
    """Update ``be_pct`` by the yields of lots with all flushes [%].

    Examples
    --------
    >>> from models.growth.examples import GREY_OYSTER
    >>> learned = learn_yield(GREY_OYSTER, [90.0, 100.0, 95.0])
    >>> learned.after, learned.low, learned.high  # (2 × 85 + 3 × 95) / 5
    (91.0, 79.3, 102.7)
    """
    after = value_belief(strain.be_pct, strain.yield_cv).updated(seen)
    return _scalar("be_pct", strain.be_pct, after.mean, after.interval(), len(seen))


def learn_days(strain: Strain, key: str, seen: Sequence[float]) -> KeyLearned:
    """Update ``colonise_days``, ``pin_days`` or ``rest_days`` by days of lots, at what the card states [d].

    Examples
    --------
    >>> from models.growth.examples import GREY_OYSTER
    >>> learned = learn_days(GREY_OYSTER, "rest_days", [14.0, 15.0, 14.5])
    >>> learned.before, learned.after, learned.proposed
    (12, 13.0, True)
    """
    card = getattr(strain, key)
    after = days_belief(strain.days_cv).updated([log(days / card) for days in seen])
    low, high = after.interval()
    return _scalar(key, card, card * exp(after.mean), (card * exp(low), card * exp(high)), len(seen))


def learn_loss(strain: Strain, key: str, seen: Sequence[tuple[int, int]]) -> KeyLearned:
    """Update ``loss_pct`` or ``flush_loss_pct`` by bags of lots and how many of them were lost [bags].

    A card that says 0 is believed as half a percent, but the new value never leaves the range from card to lots.

    Examples
    --------
    >>> from models.growth.examples import GREY_OYSTER
    >>> learned = learn_loss(GREY_OYSTER, "loss_pct", [(100, 10), (100, 8), (100, 12)])
    >>> learned.before, learned.after
    (4.0, 7.3)
    """
    card = getattr(strain, key)
    before = loss_belief(card / 100)
    after = before.updated(seen)
    low, high = after.interval()
    counted = after.lost + after.kept - before.lost - before.kept
    rate = 100 * (after.lost - before.lost) / counted if counted else card
    mean = min(max(100 * after.mean, min(card, rate)), max(card, rate))
    return _scalar(key, card, mean, (100 * low, 100 * high), len(seen))


def learn_shares(strain: Strain, whole: Sequence[float], flushes: Sequence[Sequence[float]]) -> KeyLearned:
    """Update ``flush_share`` by the mean yield of each flush.

    Parameters
    ----------
    strain : Strain
        The card.
    whole : sequence of float
        Yields of lots with all flushes, which set the level of the card's flushes [%].
    flushes : sequence of sequence of float
        By flush, yields of all lots that have it [%].

    Notes
    -----
    Each flush is believed to give its share of the level, with the card's coefficient of variation. The range of a
    share follows from the ranges of the flushes to first order, taken as independent.

    Examples
    --------
    >>> from models.growth.examples import GREY_OYSTER
    >>> learned = learn_shares(GREY_OYSTER, [85.0] * 3, [[38.25] * 3, [29.75] * 3, [17.0] * 3])
    >>> learned.after, round(sum(learned.after), 9)
    ((0.49, 0.33, 0.18), 1.0)
    """
    level = value_belief(strain.be_pct, strain.yield_cv).updated(whole).mean
    beliefs = [
        value_belief(level * share, strain.yield_cv).updated(seen)
        for share, seen in zip(strain.flush_share, flushes, strict=True)
    ]
    total = sum(one.mean for one in beliefs)
    shares = [one.mean / total for one in beliefs]
    halves = [(high - low) / 2 / total for low, high in (one.interval() for one in beliefs)]
    spreads = [
        sqrt(
            ((1 - share) * half) ** 2 + share**2 * sum(other**2 for place, other in enumerate(halves) if place != mine)
        )
        for mine, (share, half) in enumerate(zip(shares, halves, strict=True))
    ]
    after, lots = _hundredths(shares), min(len(seen) for seen in flushes)
    return KeyLearned(
        "flush_share",
        strain.flush_share,
        after,
        tuple(round(max(0.0, share - spread), 2) for share, spread in zip(shares, spreads, strict=True)),
        tuple(round(min(1.0, share + spread), 2) for share, spread in zip(shares, spreads, strict=True)),
        lots,
        lots >= FEWEST_LOTS and after != _hundredths(strain.flush_share),
    )


def _hundredths(shares: Sequence[float]) -> tuple[float, ...]:
    """Shares in hundredths that add up to 1: each rounded down, then up where most was cut, and none of them 0.

    Examples
    --------
    >>> _hundredths([1 / 3, 1 / 3, 1 / 3])
    (0.34, 0.33, 0.33)
    """
    steps = [max(1, floor(SHARE_STEPS * share + 1e-9)) for share in shares]
    by_cut = sorted(range(len(shares)), key=lambda place: steps[place] - SHARE_STEPS * shares[place])
    for place in by_cut[: max(0, SHARE_STEPS - sum(steps))]:
        steps[place] += 1
    steps[steps.index(max(steps))] -= max(0, sum(steps) - SHARE_STEPS)
    return tuple(step / SHARE_STEPS for step in steps)


def _scalar(key: str, before: float, after: float, ends: tuple[float, float], lots: int) -> KeyLearned:
    decimals = DECIMALS[key]
    value = _rounded(after, decimals)
    if key in {"pin_days", "rest_days"}:
        value = max(1.0, value)
    low, high = (round(end, max(1, decimals)) for end in ends)
    return KeyLearned(key, before, value, low, high, lots, lots >= FEWEST_LOTS and value != _rounded(before, decimals))


def _rounded(value: float, decimals: int) -> float:
    """A value rounded half up, so that 12.5 days are 13."""
    scale = 10.0**decimals
    return float(floor(value * scale + 0.5 + 1e-9) / scale)
