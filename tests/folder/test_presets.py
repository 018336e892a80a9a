"""The presets themselves: sound strains, each value with a source or called assumed, and in the wheel."""

from __future__ import annotations

import re
import tomllib
from pathlib import Path

import pytest

from models.farm import Strain
from models.growth import days_to_ready, first_pick_days, temperature_response
from scheduler.folder.farm_file import farm_from_table
from scheduler.folder.presets import OWN_KEYS, presets
from scheduler.folder.schema import farm_schema

TOP = Path(__file__).parents[2]
FILE = TOP / "models" / "growth" / "presets.toml"
NAMES = sorted(presets())


def test_there_are_at_least_ten_species():
    assert len(NAMES) >= 10
    assert len({preset.latin for preset in presets().values()}) == len(NAMES)
    assert len({preset.code for preset in presets().values()}) == len(NAMES)


@pytest.mark.parametrize("name", NAMES)
def test_each_is_a_sound_strain(name):
    preset = presets()[name]
    strain = preset.strain()
    assert strain.t_opt_c > (strain.t_min_c + strain.t_max_c) / 2
    assert temperature_response(strain.t_opt_c, strain.t_min_c, strain.t_opt_c, strain.t_max_c) == pytest.approx(1)
    assert strain.grows_in(strain.colonise_at_c)
    assert 10 <= first_pick_days(strain, strain.colonise_at_c) <= 130
    assert re.fullmatch(r"[a-z]+(-[a-z]+)*", name)
    assert re.fullmatch(r"[A-Z][a-z]+ [a-z]+", preset.latin)


@pytest.mark.parametrize("name", NAMES)
def test_each_value_has_a_source_or_is_called_assumed(name):
    card = tomllib.loads(FILE.read_text(encoding="utf-8"))[name]
    entries = {key: entry for key, entry in card.items() if key not in {"code", "name", "latin"}}
    for key, entry in entries.items():
        assert key in Strain.model_fields, key
        if entry["source"] == "assumed":
            assert entry.keys() == {"value", "source"}, key
        else:
            assert entry["sure"] in {"trial", "trade", "derived"}, key
            assert len(entry["source"]) >= 8, key


@pytest.mark.parametrize("name", NAMES)
def test_each_has_every_key_that_a_strain_needs(name):
    needed = {key for key, field in Strain.model_fields.items() if field.is_required()} - set(OWN_KEYS)
    assert needed <= presets()[name].values.keys()


def test_nothing_is_claimed_surer_than_the_evidence():
    """No sound loss rate and no heat in W/kg of a block was found anywhere: no preset may say otherwise."""
    for preset in presets().values():
        assert {preset.values[key].sure for key in ("loss_pct", "flush_loss_pct")} == {"assumed"}
        assert preset.values["heat_w_per_kg"].sure in {"assumed", "derived"}


def test_a_table_made_in_memory_is_filled_too():
    table = tomllib.loads((TOP / "tests" / "broken_farms" / "base" / "farm.toml").read_text(encoding="utf-8"))
    own = {"code": "SHI", "recipe": "oak62", "bag": "2k3", "programme": "overnight", "preset": "shiitake"}
    farm = farm_from_table({**table, "strain": [*table["strain"], own]})
    assert farm.strain_called("SHI") == presets()["shiitake"].strain(**own)
    assert days_to_ready(farm.strain_called("SHI"), 22.0) == 49


def test_the_schema_asks_for_a_full_card_or_a_preset():
    strain = farm_schema()["$defs"]["Strain"]
    assert strain["required"] == list(OWN_KEYS)
    assert strain["if"] == {"not": {"required": ["preset"]}}
    needed = {key for key, field in Strain.model_fields.items() if field.is_required()}
    assert set(strain["then"]["required"]) == needed - set(OWN_KEYS)
    assert strain["properties"]["preset"]["enum"] == list(presets())


def test_the_wheel_takes_every_file_of_the_package():
    """Data files lie inside a package that the wheel takes whole, and no rule leaves TOML out."""
    project = tomllib.loads((TOP / "pyproject.toml").read_text(encoding="utf-8"))
    wheel = project["tool"]["hatch"]["build"]["targets"]["wheel"]
    assert "models" in wheel["packages"]
    assert "exclude" not in wheel
    assert FILE.is_file()
    assert not [line for line in (TOP / ".gitignore").read_text().splitlines() if line.strip() in {"*.toml", "models"}]
