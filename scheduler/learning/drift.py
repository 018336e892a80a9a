"""Whether the last lots do what the lots before them did."""

from __future__ import annotations

from collections.abc import Iterator
from math import exp, log

from models.farm import Strain
from models.growth.learning import days_belief, effective_bags, loss_belief, value_belief
from scheduler.learning.observations import Observations

LAST_LOTS = 3
"""Lots whose average is held against those before them [lots]."""
FEWEST_BEFORE = 3
"""Lots before them without which nothing is said [lots]; assumed."""
SHARE = 0.95
"""Probability of the range outside of which lots drift [-]."""


def drift_of(strain: Strain, seen: Observations) -> Iterator[str]:
    """Say in sentences which keys drift: the average of the last lots is outside of what those before let expect.

    Parameters
    ----------
    strain : Strain
        The card.
    seen : Observations
        What its lots say, in the order of their first picks.
    """
    for key, pairs in seen.values.items():
        if len(pairs) < LAST_LOTS + FEWEST_BEFORE:
            continue
        codes = [code for code, _ in pairs[-LAST_LOTS:]]
        before, last = [one for _, one in pairs[:-LAST_LOTS]], [one for _, one in pairs[-LAST_LOTS:]]
        if key == "be_pct":
            low, high = value_belief(strain.be_pct, strain.yield_cv).updated(before).predicted(LAST_LOTS, SHARE)
            mean, unit = sum(last) / LAST_LOTS, "%"
        else:
            card = getattr(strain, key)
            belief = days_belief(strain.days_cv).updated([log(days / card) for days in before])
            low, high = (card * exp(end) for end in belief.predicted(LAST_LOTS, SHARE))
            mean, unit = exp(sum(log(days) for days in last) / LAST_LOTS), "days"
        if not low <= mean <= high:
            yield _sentence(key, codes, f"{mean:.1f}", f"{max(0.0, low):.1f} to {high:.1f} {unit}", len(before))
    for key, bags in seen.losses.items():
        if len(bags) < LAST_LOTS + FEWEST_BEFORE:
            continue
        before_bags = [one for _, one in bags[:-LAST_LOTS]]
        weights = [(effective_bags(count) if count else 0.0, gone, count) for _, (count, gone) in bags[-LAST_LOTS:]]
        total = sum(weight for weight, _, _ in weights)
        mean = sum(weight * gone / count for weight, gone, count in weights if count) / total
        most = loss_belief(getattr(strain, key) / 100).updated(before_bags).most(total, SHARE)
        if mean > most:
            codes = [code for code, _ in bags[-LAST_LOTS:]]
            yield _sentence(key, codes, f"{100 * mean:.1f}", f"at most {100 * most:.1f} %", len(before_bags))


def _sentence(key: str, codes: list[str], mean: str, usual: str, lots: int) -> str:
    before = f"by the card and the {lots} lots before them, {usual} was likely"
    return f"{key}: {', '.join(codes)} gave {mean} on average; {before}."
