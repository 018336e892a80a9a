"""How strains and presets look: the list of them, and one card with its sources and its days."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import asdict
from typing import Any

from rich.console import Console

from scheduler.folder.presets import Preset
from scheduler.strain_cards import SURE_IN_WORDS, CardField, RoomDays, StrainCard
from scheduler.views.screen import Screen


def strains_document(
    farm_name: str | None, strains: Sequence[StrainCard], presets: Sequence[Preset], shown: StrainCard | None
) -> dict[str, Any]:
    """Return the answer as one JSON document, ``bagweek/strains/1``: °C, days, kg."""
    return {
        "schema": "bagweek/strains/1",
        "farm": farm_name,
        "strains": [
            {
                "code": card.code,
                "name": card.name,
                "preset": card.preset or None,
                "first_days": min((pair.first_days for pair in card.rooms), default=None),
            }
            for card in strains
        ],
        "presets": [
            {
                "preset": one.key,
                "code": one.code,
                "name": one.name,
                "latin": one.latin,
                "values": len(one.values),
                "assumed": one.assumed,
            }
            for one in presets
        ],
        "shown": None if shown is None else _card_document(shown),
    }


def _card_document(card: StrainCard) -> dict[str, Any]:
    return {
        "code": card.code,
        "name": card.name,
        "latin": card.latin or None,
        "preset": card.preset or None,
        "fields": [
            {
                "key": one.key,
                "value": list(one.value) if isinstance(one.value, tuple) else one.value,
                "unit": one.unit or None,
                "from": one.origin,
                "source": one.source or None,
                "sure": one.sure,
            }
            for one in card.fields
        ],
        "rooms": [
            {**asdict(pair), "colonisation": pair.colonisation or None, "fruiting": pair.fruiting or None}
            for pair in card.rooms
        ],
        "unsuited": [room.code for room in card.unsuited],
        "first_flush_kg_per_bag": None if card.first_kg is None else round(card.first_kg, 4),
        "expected_self_heating_k": None if card.core_k is None else round(card.core_k, 2),
    }


def show_strains(
    console: Console, farm_name: str | None, strains: Sequence[StrainCard], presets: Sequence[Preset]
) -> None:
    """Print the strains of a farm, if there is one, and the presets."""
    screen = Screen(console)
    if farm_name is not None:
        screen.title(f"Strains of {farm_name}")
        screen.line(f"{'code':<9}{'name':<31}{'preset':<17}{'first flush after':>23}", "dim")
        for card in strains:
            days = min((pair.first_days for pair in card.rooms), default=None)
            soonest = "no room suits it" if days is None else f"{days} days"
            screen.line(f"{card.code:<9}{card.name[:30]:<31}{card.preset or '-':<17}{soonest:>23}")
        screen.line()
    screen.title("Presets that come with bagweek")
    screen.line(f"{'preset':<17}{'species':<31}{'values':>10}{'with a source':>22}", "dim")
    for one in presets:
        sourced = len(one.values) - one.assumed
        screen.line(f"{one.key:<17}{one.latin:<31}{len(one.values):>10}{sourced:>22}")
    screen.line()
    screen.wrapped('Show one with bagweek strains and its name; use it by preset = "its name" in a [[strain]].')


def show_card(console: Console, card: StrainCard) -> None:
    """Print one strain or preset: its values, their sources, and the days from bag to first kilo."""
    screen = Screen(console)
    about = ", ".join(word for word in (card.name, card.latin) if word and word != card.code)
    of = f"; preset {card.preset}" if card.preset and card.preset != card.code else ""
    screen.wrapped(f"{card.code}: {about}{of}" if about else f"{card.code}{of}", style="bold")
    screen.line()
    screen.line(f"{'key':<23}{'value':<24}{'from':<10}{'how sure':<23}", "dim")
    for one in card.fields:
        value = _shown(one)
        if len(value) > 23:
            screen.line(f"{one.key:<23}{value}")
            value = ""
            screen.line(f"{'':<47}{one.origin:<10}{SURE_IN_WORDS[one.sure]}")
        else:
            screen.line(f"{one.key:<23}{value:<24}{one.origin:<10}{SURE_IN_WORDS[one.sure]}")
    _sources(screen, card.fields)
    _rooms(screen, card)


def _shown(field: CardField) -> str:
    value = field.value
    if value is None or value == "":
        return "-"
    if isinstance(value, tuple):
        words = ", ".join(f"{item:g}" for item in value)
    else:
        words = value if isinstance(value, str) else f"{value:g}"
    unit = field.unit.split(" of ")[0] if field.unit not in {"", "-"} else ""
    return f"{words} {unit}".rstrip()


def _sources(screen: Screen, fields: Sequence[CardField]) -> None:
    by_source: dict[str, list[str]] = {}
    for one in fields:
        if one.source and one.source != "assumed":
            by_source.setdefault(one.source, []).append(one.key)
    if not by_source:
        return
    screen.heading("Sources")
    for source, keys in by_source.items():
        screen.wrapped(f"{', '.join(keys)}: {source}", "- ")


def _rooms(screen: Screen, card: StrainCard) -> None:
    screen.heading("From bag to first kilo: days after inoculation, opened as soon as ready")
    if not card.rooms:
        screen.wrapped("No pair of rooms suits it.")
    else:
        screen.line(f"{'colonisation room':<24}{'fruiting room':<24}{'ready':>8}{'first':>12}{'last':>12}", "dim")
    for pair in card.rooms:
        screen.line(_pair(pair))
    for room in card.unsuited:
        screen.wrapped(f"{room.code} ({room.kind}, {room.temp_c:g} °C) does not suit it.")
    if card.first_kg is not None:
        bags = 1 / card.first_kg
        screen.wrapped(f"A bag gives {card.first_kg:.3g} kg in its first flush: the first kilo takes {bags:.1f} bags.")
    if card.core_k is not None:
        screen.wrapped(
            f"By its heat and size, the core of a bag that stands free is {card.core_k:.1f} K above its room, mean over"
            " colonisation; among other bags it is warmer. What you measure goes into self_heating_k."
        )


def _pair(pair: RoomDays) -> str:
    rooms = [
        f"{code} at {temp:g} °C" if code else f"{temp:g} °C"
        for code, temp in ((pair.colonisation, pair.colonise_c), (pair.fruiting, pair.fruit_c))
    ]
    return f"{rooms[0]:<24}{rooms[1]:<24}{pair.ready_days:>8}{pair.first_days:>12}{pair.last_days:>12}"
