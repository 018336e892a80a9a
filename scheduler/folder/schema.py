"""The JSON Schema of the farm file, for editors that complete and check it."""

from __future__ import annotations

import json
from typing import Any

from models.farm import Farm
from scheduler.folder.presets import OWN_KEYS, presets

FILE = "farm.schema.json"


def farm_schema() -> dict[str, Any]:
    """Return the JSON Schema of ``farm.toml``, with a description of every key.

    A strain needs all its required keys only where it names no preset, and a preset must be one that there is.
    """
    schema = Farm.model_json_schema(mode="validation")
    strain = schema["$defs"]["Strain"]
    strain["if"] = {"not": {"required": ["preset"]}}
    strain["then"] = {"required": [key for key in strain["required"] if key not in OWN_KEYS]}
    strain["required"] = list(OWN_KEYS)
    strain["properties"]["preset"]["enum"] = [*presets()]
    del strain["properties"]["preset"]["default"]
    head = {
        "$schema": "https://json-schema.org/draft/2020-12/schema",
        "title": "bagweek farm file",
        "description": "Substrate, steam, rooms, strains, people and prices of a farm. Keys end in their unit.",
    }
    return {**head, **{key: value for key, value in schema.items() if key not in head}}


def farm_schema_text() -> str:
    """Return the JSON Schema as the text of a file."""
    return json.dumps(farm_schema(), indent=2, ensure_ascii=False) + "\n"
