"""How learning from pickings looks: each key before and after, what is missing, what drifts."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from rich.console import Console

from models.farm import Farm
from scheduler.learning.learn import Learned, StrainLearned, changes
from scheduler.views.screen import Screen


def learn_document(farm: Farm, learned: Sequence[StrainLearned], *, written: bool) -> dict[str, Any]:
    """What was learned as one JSON document, ``bagweek/learn/1``."""
    return {
        "schema": "bagweek/learn/1",
        "farm": farm.site.name,
        "strains": [
            {
                "strain": one.strain,
                "lots": one.lots,
                "keys": [
                    {
                        "key": key.key,
                        "before": _plain(key.before),
                        "after": _plain(key.after),
                        "low": round(key.low, 4),
                        "high": round(key.high, 4),
                        "lots": key.lots,
                        "proposed": key.proposed,
                    }
                    for key in one.keys
                ],
                "missing": list(one.missing),
                "drift": list(one.drift),
            }
            for one in learned
        ],
        "written": written,
    }


def _plain(value: float | tuple[float, ...]) -> float | list[float]:
    return list(value) if isinstance(value, tuple) else value


def show_learn(console: Console, farm: Farm, learned: Sequence[StrainLearned], *, written: bool) -> None:
    """Print what was learned."""
    screen = Screen(console)
    lots = sum(one.lots for one in learned)
    screen.title(f"{farm.site.name}: what {lots} picked lots say of {len(learned)} strains")
    for one in learned:
        screen.heading(f"{one.strain}: {one.lots} lots")
        screen.line(f"{'key':<16}{'before':>19}{'after':>21}{'90 % range':>16}{'lots':>5}", "dim")
        for key in one.keys:
            _key(screen, key)
        for words in one.missing:
            screen.wrapped(words, "- ", "dim")
        for words in one.drift:
            screen.wrapped(words, "! ", "yellow")
    proposed = changes(learned)
    if not proposed:
        screen.heading("Nothing for farm.toml: too few lots, or no change in the digits written there")
    else:
        screen.heading("Written into farm.toml" if written else "Lines for farm.toml (--write puts them there)")
        last = ""
        for (section, code, name), value in proposed.items():
            head = f'[[{section}]]  code = "{code}"'
            if head != last:
                screen.line(head)
                last = head
            screen.line(f"  {name} = {value}")
    screen.line()
    screen.wrapped(
        "A card counts as three lots, or forty bags for losses; lots of one farm in one season are alike, so look again"
        " after the next.", style="dim",
    )  # fmt: skip


def _key(screen: Screen, key: Learned) -> None:
    span = "" if isinstance(key.after, tuple) else f"{key.low:.3g} to {key.high:.3g}"
    mark = " *" if key.proposed else ""
    screen.line(f"{key.key:<16}{_shown(key.before):>19}{_shown(key.after):>21}{span:>16}{key.lots:>5}{mark}")


def _shown(value: float | tuple[float, ...]) -> str:
    return ", ".join(f"{one:.3g}" for one in value) if isinstance(value, tuple) else f"{value:.3g}"
