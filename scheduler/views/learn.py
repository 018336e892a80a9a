"""How what was learned from the pickings looks."""

from __future__ import annotations

from datetime import timedelta
from typing import Any

from rich.console import Console

from models.growth.learning import LEAST_CV, LOT_CORRELATION, PRIOR_LOTS, effective_bags
from scheduler.learning.drift import LAST_LOTS, SHARE
from scheduler.learning.learned import LearnAnswer, StrainLearned
from scheduler.learning.update import FEWEST_LOTS, KeyLearned, Value
from scheduler.views.screen import Screen

UNITS = {
    "be_pct": "%", "flush_share": "", "colonise_days": "d", "pin_days": "d", "rest_days": "d", "loss_pct": "%",
    "flush_loss_pct": "%",
}  # fmt: skip
DECIMALS = {"pin_days": 0, "rest_days": 0, "flush_share": 2}
"""Decimals of a key's values; one for the others."""


def learn_document(answer: LearnAnswer, *, written: bool) -> dict[str, Any]:
    """Return what was learned as one JSON document, ``bagweek/learn/1``."""
    return {
        "schema": "bagweek/learn/1",
        "farm": answer.farm.site.name,
        "picks": answer.picks.name,
        "strains": [
            {
                "strain": one.strain.code,
                "lots": len(one.lots),
                "keys": [
                    {
                        "key": key.key,
                        "before": _plain(key.before),
                        "after": _plain(key.after),
                        "low": _plain(key.low),
                        "high": _plain(key.high),
                        "lots": key.lots,
                        "proposed": key.proposed,
                    }
                    for key in one.keys
                ],
                "not_learned": [{"key": key, "why": why} for key, why in one.seen.unlearned.items()],
                "notes": one.seen.notes,
                "drift": list(one.drift),
            }
            for one in answer.strains
        ],
        "lines": [{"key": ".".join(place), "value": value} for place, value in answer.lines().items()],
        "written": written,
        "assumptions": assumptions(answer),
        "findings": [finding.as_json() for finding in answer.picks.warnings],
    }


def _plain(value: Value) -> float | list[float]:
    return list(value) if isinstance(value, tuple) else value


def assumptions(answer: LearnAnswer) -> list[str]:
    """Return what the answer rests on, in sentences."""
    said = [
        f"Before any lot, the card (with its preset) is believed as firmly as {PRIOR_LOTS:g} lots would be; assumed.",
        f"Lots differ as yield_cv and days_cv say, by {100 * LEAST_CV:g} % at least; how much, is learned too.",
        (
            f"Losses come by the lot (correlation {LOT_CORRELATION:g}, assumed): a hundred bags of one lot tell as much"
            f" as {effective_bags(100):.0f} that were lost one by one."
        ),
    ]
    rooms = {
        f"{one.seen.room.code} at {one.seen.room.temp_c:g} °C"
        for one in answer.strains
        if one.seen.room is not None and any(key.key == "colonise_days" for key in one.keys)
    }
    if rooms:
        said.append(
            f"Bags colonised in {' or '.join(sorted(rooms))}, at the card's spawn rate; colonise_days is brought"
            " back to colonise_at_c and colonise_at_spawn_pct."
        )
    return said


def show_learned(console: Console, answer: LearnAnswer, *, written: bool) -> None:
    """Print what was learned: by strain each key before and after, what drifts, and the lines for the farm file."""
    screen = Screen(console)
    count = _lots(len(answer.picks.lots))
    screen.wrapped(f"{answer.farm.site.name}: learned from {count} of {answer.picks.name}", style="bold")
    for warning in answer.picks.warnings:
        screen.wrapped(warning.sentence(), "- ")
    for one in answer.strains:
        _strain(screen, one)
    screen.heading("What this rests on")
    for sentence in assumptions(answer):
        screen.wrapped(sentence, "- ")
    _lines(screen, answer, written=written)


def _strain(screen: Screen, one: StrainLearned) -> None:
    name = f", {one.strain.name}" if one.strain.name else ""
    first, last = one.lots[0].first_day, one.lots[-1].first_day
    days = f"first picks {first} to {last}" if len(one.lots) > 1 else f"first pick {first}"
    screen.heading(f"{one.strain.code}{name}: {_lots(len(one.lots))}, {days}")
    screen.line(f"{'key':<24}{'before':>10}{'after':>10}{'90 % range':>22}{'lots':>8}", "dim")
    for key in one.keys:
        for row in _rows(key):
            screen.line(row)
    few = [key.key for key in one.keys if key.lots < FEWEST_LOTS]
    if few:
        screen.wrapped(f"Not proposed, as fewer than {FEWEST_LOTS} lots speak to it: {', '.join(few)}.", "- ")
    for why in dict.fromkeys(one.seen.unlearned.values()):
        keys = ", ".join(key for key, reason in one.seen.unlearned.items() if reason == why)
        screen.wrapped(f"Not learned: {keys}: {why}.", "- ")
    for note in one.seen.notes:
        screen.wrapped(note, "- ")
    for sentence in one.drift:
        screen.wrapped(f"Drift: {sentence}", "! ", "bold")
    if one.drift:
        screen.wrapped(
            f"The last {LAST_LOTS} lots are outside of a {100 * SHARE:.0f} % range, which happens by chance to one key"
            " in twenty. Look for what changed before you take over values that mix the two.",
            "  ",
        )


def _lots(count: int) -> str:
    return "1 lot" if count == 1 else f"{count} lots"


def _rows(key: KeyLearned) -> list[str]:
    parts = [one if isinstance(one, tuple) else (one,) for one in (key.before, key.after, key.low, key.high)]
    decimals, unit = DECIMALS.get(key.key, 1), UNITS[key.key]
    rows = []
    for flush, (before, after, low, high) in enumerate(zip(*parts, strict=True), start=1):
        name = f"{key.key}, flush {flush}" if isinstance(key.before, tuple) else f"{key.key}, {unit}"
        places = max(1, decimals)
        span = f"{low:.{places}f} to {high:.{places}f}"
        rows.append(f"{name:<24}{before:>10.{decimals}f}{after:>10.{decimals}f}{span:>22}{key.lots:>8}")
    return rows


def _lines(screen: Screen, answer: LearnAnswer, *, written: bool) -> None:
    lines = answer.lines()
    if not lines:
        screen.heading("Nothing for farm.toml: no key changes that enough lots speak to")
        return
    screen.heading("Written into farm.toml" if written else "Lines for farm.toml (--write puts them there)")
    last = ""
    for (section, code, key), value in lines.items():
        head = f'[[{section}]]  code = "{code}"'
        if head != last:
            screen.line(head)
            last = head
        screen.line(f"  {key} = {value}")
    screen.line()
    if written:
        after = max(lot.first_day for lot in answer.picks.lots) + timedelta(days=1)
        screen.wrapped(
            "Comments stay as they were, also those that name another source. These lots are in the card now; so that"
            f" they do not count twice, learn from later ones only: --since {after}."
        )
    else:
        screen.wrapped("Write them once: lots that are in the card already would count twice.")
