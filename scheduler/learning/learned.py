"""What a farm's pickings say about its strain cards: each key before and after, with its range, and what drifts."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from models.farm import Farm, Strain
from scheduler.folder.edit import Place, set_values
from scheduler.learning.drift import drift_of
from scheduler.learning.lots import PickedLot
from scheduler.learning.observations import Observations, observe
from scheduler.learning.picks import Picks
from scheduler.learning.update import KeyLearned, learn_days, learn_loss, learn_shares, learn_yield

KEYS = ("be_pct", "flush_share", "colonise_days", "pin_days", "rest_days", "loss_pct", "flush_loss_pct")
"""Keys of a strain that are learned, in the order they are shown."""


@dataclass(frozen=True, slots=True)
class StrainLearned:
    """What the lots of one strain say.

    Attributes
    ----------
    strain : Strain
        The card as it was.
    lots : tuple of PickedLot
        Its lots, in the order of their first picks.
    keys : tuple of KeyLearned
        What some lot speaks to, in the order of `KEYS`.
    seen : Observations
        What they rest on.
    drift : tuple of str
        What the last lots do that those before them did not, in sentences.
    """

    strain: Strain
    lots: tuple[PickedLot, ...]
    keys: tuple[KeyLearned, ...]
    seen: Observations
    drift: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class LearnAnswer:
    """What a file of pickings says about the cards of a farm."""

    farm: Farm
    picks: Picks
    strains: tuple[StrainLearned, ...]

    def lines(self) -> dict[Place, Any]:
        """The places of the farm file that are proposed to change, with their new values."""
        return {
            ("strain", one.strain.code, key.key): key.as_written
            for one in self.strains
            for key in one.keys
            if key.proposed
        }

    @property
    def drifts(self) -> bool:
        """Whether any strain drifts."""
        return any(one.drift for one in self.strains)


def learn(farm: Farm, picks: Picks) -> LearnAnswer:
    """Update the cards of a farm by its pickings.

    Parameters
    ----------
    farm : Farm
        The farm; its cards, with what their presets add, are what was believed before.
    picks : Picks
        The lots.

    Returns
    -------
    LearnAnswer
        One entry for each strain that has lots, in the order of the farm file.
    """
    by_strain: dict[str, list[PickedLot]] = {}
    for lot in picks.lots:
        by_strain.setdefault(lot.strain, []).append(lot)
    return LearnAnswer(
        farm, picks, tuple(_strain(farm, one, by_strain[one.code]) for one in farm.strain if one.code in by_strain)
    )


def write(answer: LearnAnswer, folder: Path) -> None:
    """Put the proposed values into the farm file; its comments stay.

    Raises
    ------
    InputError
        The file cannot be changed, or would not be sound any more.
    """
    set_values(folder / "farm.toml", answer.lines())


def _strain(farm: Farm, strain: Strain, lots: Sequence[PickedLot]) -> StrainLearned:
    seen = observe(farm, strain, lots)
    found = {one.key: one for one in _keys(strain, seen)}
    keys = tuple(found[key] for key in KEYS if key in found)
    return StrainLearned(strain, tuple(lots), keys, seen, tuple(drift_of(strain, seen)))


def _keys(strain: Strain, seen: Observations) -> Iterator[KeyLearned]:
    values = {key: [value for _, value in pairs] for key, pairs in seen.values.items()}
    if values["be_pct"]:
        yield learn_yield(strain, values["be_pct"])
    if "flush_share" not in seen.unlearned:
        yield learn_shares(strain, values["be_pct"], seen.flush_yields)
    for key in ("colonise_days", "pin_days", "rest_days"):
        if values[key]:
            yield learn_days(strain, key, values[key])
    for key, pairs in seen.losses.items():
        if pairs:
            yield learn_loss(strain, key, [bags for _, bags in pairs])
