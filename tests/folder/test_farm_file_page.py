"""The reference page of the farm file has every key, with its unit and default, and no other."""

from __future__ import annotations

import re
from pathlib import Path

import pytest

from models.farm import (
    Bag,
    Crew,
    Farm,
    Ingredient,
    Limits,
    Market,
    Order,
    Programme,
    Rates,
    Recipe,
    Room,
    Site,
    Spread,
    Steriliser,
    StockLot,
    Strain,
    Tariff,
    TariffPeriod,
)
from scheduler.folder import read_farm_folder, scenario_folder, scenario_names
from scheduler.folder.schema import farm_schema, farm_schema_text

PAGE = (Path(__file__).parents[2] / "docs" / "reference" / "farm-file.md").read_text(encoding="utf-8")

SECTIONS = {
    "[site]": Site, "[[recipe]]": Recipe, "[[recipe.ingredient]]": Ingredient, "[[bag]]": Bag,
    "[[programme]]": Programme, "[[steriliser]]": Steriliser,
    "[[room]]": Room, "[[strain]]": Strain, "[[crew]]": Crew, "[rates]": Rates, "[limits]": Limits,
    "[tariff]": Tariff, "[[tariff.periods]]": TariffPeriod, "[market]": Market, "[spread]": Spread, "orders.csv": Order,
    "stock.csv": StockLot,
}  # fmt: skip

UNITS = {
    "_kg": "kg", "_kw": "kW", "_m": "m", "_mm": "mm", "_h": "h", "_min": "min", "_days": "d", "_kpa": "kPa",
    "_per_h": "currency/h", "_per_kg": "currency/kg", "bags_h": "bags/h", "_kg_h": "kg/h", "_w": "W", "_c": "°C",
    "_pct": "%", "_w_per_k": "W/K", "_w_m2_k": "W/m² K", "_kg_m3": "kg/m³", "_w_m_k": "W/m K", "_kj_kg_k": "kJ/kg K",
    "_w_per_kg": "W/kg", "_l": "l",
}  # fmt: skip


def table(heading: str) -> dict[str, tuple[str, str, str]]:
    section = PAGE.split(f"## `{heading}`\n", 1)[1].split("\n## ", 1)[0]
    rows = re.findall(r"^\| `(\w+)` *\| (.*?) *\| (.*?) *\| (.*?) *\|$", section, re.MULTILINE)
    return {key: (unit, default, meaning) for key, unit, default, meaning in rows}


def as_shown(value) -> str:
    if value is None:
        return "none"
    if isinstance(value, bool):
        return str(value).lower()
    if isinstance(value, tuple):
        return f"[{', '.join(as_shown(item) for item in value)}]"
    return f'"{value}"' if isinstance(value, str) else f"{value:g}"


@pytest.mark.parametrize("heading", SECTIONS)
def test_every_key_is_documented_with_its_default(heading):
    fields = {field.alias or name: field for name, field in SECTIONS[heading].model_fields.items()}
    rows = table(heading)
    assert list(rows) == list(fields)
    for key, (_, default, meaning) in rows.items():
        field = fields[key]
        assert meaning
        if heading.startswith("["):
            assert default == ("required" if field.is_required() else as_shown(field.default)), key
        else:
            assert default.startswith("required" if field.is_required() else "blank"), key
            if field.default is not None and not field.is_required():
                assert default.endswith("none" if field.default == () else as_shown(field.default)), key


@pytest.mark.parametrize("heading", SECTIONS)
def test_units_are_those_of_the_keys(heading):
    for key, (unit, _, _) in table(heading).items():
        endings = [ending for ending in UNITS if f"_{key}".endswith(ending)]
        if endings and key != "spot_kg_week":
            assert unit.startswith(UNITS[max(endings, key=len)]), f"{key}: {unit}"


def test_every_section_is_documented():
    headings = {re.sub(r"[\[\]]", "", heading).split(".")[0] for heading in SECTIONS if heading.startswith("[")}
    assert headings == set(Farm.model_fields)


def test_the_schema_describes_every_key():
    schema = farm_schema()
    assert schema["title"] == "bagweek farm file"
    assert schema["$schema"].startswith("https://json-schema.org/")
    for name, part in {**schema["$defs"], "Farm": schema}.items():
        assert part["additionalProperties"] is False
        for key, value in part["properties"].items():
            described = value.get("description") or schema["$defs"][value["$ref"].rsplit("/", 1)[1]]["description"]
            assert described.endswith("."), f"{name}.{key}"


def test_the_published_schema_is_the_one_the_code_gives():
    published = Path(__file__).parents[2] / "docs" / "reference" / "farm.schema.json"
    assert published.read_text(encoding="utf-8") == farm_schema_text(), (
        "write it anew: bagweek check --schema > docs/reference/farm.schema.json"
    )


@pytest.mark.parametrize("name", scenario_names())
def test_scenarios_are_sound_and_name_the_schema(name):
    folder = scenario_folder(name)
    first = (folder / "farm.toml").read_text(encoding="utf-8").splitlines()[0]
    schema = folder / first.removeprefix("#:schema ")
    assert schema.resolve() == (Path(__file__).parents[2] / "docs" / "reference" / "farm.schema.json").resolve()
    assert read_farm_folder(folder).orders
