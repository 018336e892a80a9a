"""Checks between the parts of a farm file: codes that stand once, and references that lead somewhere.

Whether the parts fit each other physically is asked in `models.farm.plausible`.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from difflib import get_close_matches
from typing import Literal

from models.farm.farm import Farm

Severity = Literal["error", "warning"]

CODED_SECTIONS = ("recipe", "bag", "programme", "steriliser", "room", "strain", "crew")
"""Sections of the farm file whose tables carry a code."""

STRAIN_REFERENCES = ("recipe", "bag", "programme")
"""Keys of a strain that hold the code of another table; each is named like the section it leads to."""


@dataclass(frozen=True, slots=True)
class Mismatch:
    """Parts of a farm file that do not fit each other.

    Attributes
    ----------
    key : str
        Dotted key, list items by code: ``strain.OYS.recipe``.
    found, expected : str
        What stands there and what was expected, in words.
    nearest : str
        The nearest valid choice; empty when there is none.
    severity : {"error", "warning"}
        Whether the farm can be planned all the same.
    """

    key: str
    found: str
    expected: str
    nearest: str = ""
    severity: Severity = "error"


def nearest_choice(word: str, choices: Iterable[str]) -> str:
    """Return the choice most like a word, upper and lower case alike; empty when none is like it.

    Examples
    --------
    >>> nearest_choice("oys", ["OYS", "LIO"])
    'OYS'
    """
    by_lower = {choice.lower(): choice for choice in reversed(list(choices))}
    matches = get_close_matches(word.lower(), by_lower, n=1, cutoff=0.5)
    return by_lower[matches[0]] if matches else ""


def choices_in_words(what: str, choices: Iterable[str]) -> str:
    """Say what was expected, with the choices when they are few: ``a recipe of this file (oak62, beech)``."""
    names = list(dict.fromkeys(choices))
    return f"{what} ({', '.join(names)})" if 0 < len(names) <= 12 else what


def duplicate_codes(codes: Mapping[str, Iterable[str]]) -> list[Mismatch]:
    """Codes that stand twice in a section.

    Parameters
    ----------
    codes : mapping of str to iterable of str
        The codes of each section, in file order.
    """
    found = []
    for section, names in codes.items():
        seen: set[str] = set()
        twice: dict[str, int] = {}
        for name in names:
            if name in seen:
                twice[name] = twice.get(name, 1) + 1
            seen.add(name)
        found += [
            Mismatch(f"{section}.{name}.code", f"{count} tables with code '{name}'", f"each {section} code once")
            for name, count in twice.items()
        ]
    return found


def unknown_references(strains: Iterable[Mapping[str, object]], codes: Mapping[str, Iterable[str]]) -> list[Mismatch]:
    """Recipes, bags and programmes that strains name and that the file does not have.

    Parameters
    ----------
    strains : iterable of mapping
        The strain tables as they stand in the file, with ``code`` and the keys of `STRAIN_REFERENCES`.
    codes : mapping of str to iterable of str
        The codes of each section.
    """
    found = []
    for strain in strains:
        for section in STRAIN_REFERENCES:
            name, known = strain.get(section), list(codes.get(section, ()))
            if isinstance(name, str) and known and name not in known:
                expected = choices_in_words(f"the code of a {section} of this file", known)
                key = f"strain.{strain.get('code', '?')}.{section}"
                found.append(Mismatch(key, f"'{name}'", expected, nearest_choice(name, known)))
    return found


def farm_codes(farm: Farm) -> dict[str, list[str]]:
    """Return the codes of each coded section of a farm, in file order."""
    return {section: [item.code for item in getattr(farm, section)] for section in CODED_SECTIONS}


def reference_mismatches(farm: Farm) -> list[Mismatch]:
    """Duplicate codes and unknown references of a farm made in memory, such as a what-if; empty when sound."""
    codes = farm_codes(farm)
    strains = [strain.model_dump(include={"code", *STRAIN_REFERENCES}) for strain in farm.strain]
    return duplicate_codes(codes) + unknown_references(strains, codes)
