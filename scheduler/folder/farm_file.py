"""Read ``farm.toml``: text, table, farm, with every fault found on the way."""

from __future__ import annotations

import json
import tomllib
from collections.abc import Mapping
from dataclasses import dataclass, field
from datetime import date, time
from pathlib import Path
from typing import Any

from pydantic import TypeAdapter, ValidationError

from models.farm import Farm
from models.farm.plausible import plausibility
from models.farm.references import CODED_SECTIONS, duplicate_codes, unknown_references
from scheduler.errors import Finding
from scheduler.folder.farm_findings import FILE, of_mismatch, of_validation
from scheduler.folder.presets import with_presets
from scheduler.folder.text_file import MEGABYTE, read_text
from scheduler.folder.toml_faults import toml_fault

LIMIT = 1 * MEGABYTE


@dataclass(frozen=True, slots=True)
class FarmFile:
    """What could be read of ``farm.toml``: the farm when it is sound, and the codes in it in any case.

    ``written`` holds, by strain code, the keys that stand in the file itself and not only in a preset.
    """

    farm: Farm | None = None
    codes: Mapping[str, tuple[str, ...]] = field(default_factory=dict)
    written: Mapping[str, frozenset[str]] = field(default_factory=dict)


def read_farm_file(path: Path, findings: list[Finding]) -> FarmFile:
    """Read and check ``farm.toml``; findings are added to the list."""
    text = read_text(path, LIMIT, "a farm file (`bagweek new DIR` makes one)", findings)
    table = None if text is None else _table(text, findings)
    if table is None:
        return FarmFile()
    codes = {section: _codes(table, section) for section in CODED_SECTIONS}
    strains = [one for one in _tables(table, "strain") if isinstance(one.get("code"), str)]
    written = {one["code"]: frozenset(one) for one in strains}
    table, mine = with_presets(table)
    mine += [of_mismatch(one) for one in duplicate_codes(codes)]
    mine += [of_mismatch(one) for one in unknown_references(strains, codes)]
    unresolved = bool(mine)
    try:
        farm = farm_from_table(table)
    except ValidationError as error:
        findings += of_validation(error, table) + mine
        broken = {str(detail["loc"][0]) for detail in error.errors(include_url=False) if detail["loc"]}
        if not unresolved:
            findings += _partial(table, broken)
        return FarmFile(codes=codes)
    if not unresolved:
        mine += [of_mismatch(one) for one in plausibility(farm)]
    findings += mine
    sound = all(finding.severity == "warning" for finding in mine)
    return FarmFile(farm if sound else None, codes, written)


def farm_from_table(table: Mapping[str, Any]) -> Farm:
    """Make a farm from a table as TOML reads it.

    Numbers in quotes and true or false for a number are refused; ``110.0`` counts as a whole number. Strains are filled
    from their presets.

    Raises
    ------
    pydantic.ValidationError
        The table does not describe a farm; `scheduler.folder.farm_findings.of_validation` puts it in words.
    """
    return Farm.model_validate_json(json.dumps(_plain(with_presets(table)[0])), strict=True)


def _plain(value: Any) -> Any:
    """Turn what TOML knows and JSON does not into JSON: dates, times, whole numbers written 1.0."""
    if isinstance(value, Mapping):
        return {key: _plain(item) for key, item in value.items()}
    if isinstance(value, list | tuple):
        return [_plain(item) for item in value]
    if isinstance(value, float) and value.is_integer() and abs(value) < 1e15:
        return int(value)
    return value.isoformat() if isinstance(value, date | time) else value


def _table(text: str, findings: list[Finding]) -> dict[str, Any] | None:
    try:
        return tomllib.loads(text)
    except tomllib.TOMLDecodeError as error:
        findings.append(toml_fault(FILE, text, str(error)))
    except RecursionError:
        findings.append(Finding(FILE, "", "brackets nested too deep", "tables and lists as a farm file has them"))
    except ValueError:
        findings.append(Finding(FILE, "", "a number of thousands of digits", "numbers of ordinary size"))
    return None


def _tables(table: Mapping[str, Any], section: str) -> list[dict[str, Any]]:
    items = table.get(section)
    return [item for item in items if isinstance(item, dict)] if isinstance(items, list) else []


def _codes(table: Mapping[str, Any], section: str) -> tuple[str, ...]:
    return tuple(item["code"] for item in _tables(table, section) if isinstance(item.get("code"), str))


def _partial(table: Mapping[str, Any], broken: set[str]) -> list[Finding]:
    """Check the sound sections of a farm with a fault elsewhere."""
    sound = frozenset(Farm.model_fields) - broken
    values = {}
    for section in sound:
        field_type = Farm.model_fields[section]
        if section in table:
            raw = json.dumps(_plain(table[section]))
            adapter: TypeAdapter[Any] = TypeAdapter(field_type.annotation)  # type: ignore[arg-type]
            values[section] = adapter.validate_json(raw, strict=True)
        else:
            values[section] = field_type.get_default(call_default_factory=True)
    farm = Farm.model_construct(**values)
    return [of_mismatch(one) for one in plausibility(farm, sound)]
