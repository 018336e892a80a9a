"""Strain presets: the cards that come with bagweek, and how a strain of ``farm.toml`` takes one up."""

from __future__ import annotations

import tomllib
from collections.abc import Mapping
from dataclasses import dataclass
from functools import cache
from importlib.resources import files
from types import MappingProxyType
from typing import Any, Literal

from models.farm import Strain
from models.farm.references import choices_in_words, nearest_choice
from scheduler.errors import Finding
from scheduler.folder.plain_words import shown

FILE = "farm.toml"
OWN_KEYS = ("code", "recipe", "bag", "programme")
"""Keys that every strain of a farm must say for itself: no preset has them."""

Sureness = Literal["trial", "trade", "derived", "assumed"]


@dataclass(frozen=True, slots=True)
class PresetValue:
    """One value of a preset.

    Attributes
    ----------
    value : object
        The value, as it would stand in ``farm.toml``.
    source : str
        Short citation, or ``assumed``.
    sure : {"trial", "trade", "derived", "assumed"}
        Measured in a paper; a grower's or supplier's page; worked out from published figures; no figure seen.
    """

    value: Any
    source: str
    sure: Sureness


@dataclass(frozen=True, slots=True)
class Preset:
    """A strain card that comes with bagweek.

    Attributes
    ----------
    key : str
        Name of the preset, as a farm file writes it.
    code : str
        Strain code to propose.
    name, latin : str
        Names of the species.
    values : Mapping[str, PresetValue]
        Values by key of the farm file, in file order.
    """

    key: str
    code: str
    name: str
    latin: str
    values: Mapping[str, PresetValue]

    @property
    def assumed(self) -> int:
        """How many of its values have no source."""
        return sum(one.sure == "assumed" for one in self.values.values())

    def strain(self, **own: Any) -> Strain:
        """Make a strain of it, with ``recipe``, ``bag`` and ``programme`` or without.

        Raises
        ------
        pydantic.ValidationError
            A value of ``own`` does not suit the card.
        """
        card = {"code": self.code, "name": self.name, "recipe": "none", "bag": "none", "programme": "none"}
        return Strain.model_validate(card | {key: one.value for key, one in self.values.items()} | own)


@cache
def presets() -> Mapping[str, Preset]:
    """Return all presets by name, in file order."""
    table = tomllib.loads((files("models.growth") / "presets.toml").read_text(encoding="utf-8"))
    return MappingProxyType({key: _preset(key, card) for key, card in table.items()})


def _preset(key: str, card: Mapping[str, Any]) -> Preset:
    values = {
        name: PresetValue(entry["value"], entry["source"], entry.get("sure", "assumed"))
        for name, entry in card.items()
        if isinstance(entry, dict)
    }
    return Preset(key, card["code"], card["name"], card["latin"], MappingProxyType(values))


def with_presets(table: Mapping[str, Any]) -> tuple[dict[str, Any], list[Finding]]:
    """Fill the strains of a farm table from their presets.

    Parameters
    ----------
    table : mapping
        ``farm.toml`` as TOML reads it.

    Returns
    -------
    dict
        The table with merged strains; what the file says goes first.
    list of Finding
        One for each preset that does not exist. Its strain is filled from another, so that this is the one fault seen.
    """
    strains = table.get("strain")
    if not isinstance(strains, list):
        return dict(table), []
    findings: list[Finding] = []
    merged = [
        _merged(one, findings) if isinstance(one, dict) and one.get("preset", "") != "" else one for one in strains
    ]
    return {**table, "strain": merged}, findings


def _merged(strain: Mapping[str, Any], findings: list[Finding]) -> dict[str, Any]:
    known, name = presets(), strain["preset"]
    near = nearest_choice(name, known) if isinstance(name, str) else ""
    if isinstance(name, str) and name not in known:
        code = strain.get("code")
        where = f"strain.{code}.preset" if isinstance(code, str) and code.strip() else "strain.preset"
        findings.append(Finding(FILE, where, shown(name), choices_in_words("the name of a preset", known), near))
    card = known.get(name) if isinstance(name, str) else None
    card = card or known[near or next(iter(known))]
    values = {key: one.value for key, one in card.values.items()}
    return {"name": card.name, **values, **strain}
