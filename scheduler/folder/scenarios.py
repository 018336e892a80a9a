"""The invented farms that come with bagweek."""

from __future__ import annotations

from pathlib import Path

from models.farm.references import choices_in_words, nearest_choice
from scheduler.errors import Finding, UsageError

DEFAULT = "one-drum"
FARM_FILES = ("farm.toml", "orders.csv", "stock.csv")
"""The files of a farm folder that a person writes."""

_PACKAGE = Path(__file__).resolve().parents[1]


def _home() -> Path | None:
    """Find the folder of scenarios: inside the installed package, or at the top of a checkout."""
    places = (_PACKAGE / "scenarios", _PACKAGE.parent / "scenarios")
    return next((place for place in places if place.is_dir()), None)


def scenario_names() -> tuple[str, ...]:
    """Return the names of all scenarios, sorted."""
    home = _home()
    return () if home is None else tuple(sorted(one.parent.name for one in home.glob("*/farm.toml")))


def scenario_folder(name: str) -> Path:
    """Return the folder of a scenario.

    Raises
    ------
    UsageError
        There is no scenario of that name; the message has the nearest.
    """
    names, home = scenario_names(), _home()
    if home is None or name not in names:
        expected = choices_in_words("the name of a scenario", names)
        raise UsageError(Finding("--like", "", f"'{name}'", expected, nearest_choice(name, names)).sentence())
    return home / name
