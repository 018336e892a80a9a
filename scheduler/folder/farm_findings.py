"""Turn the faults of a farm table into findings that name keys as a grower writes them."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any, get_args

from pydantic import BaseModel, ValidationError

from models.farm import Farm
from models.farm.references import Mismatch, nearest_choice
from scheduler.errors import Finding
from scheduler.folder.plain_words import expected_and_found, shown

FILE = "farm.toml"

_SPECIAL: dict[tuple[str | int, ...], str] = {
    ("site", "ambient_c"): "one temperature in °C, or a list of twelve, one a month",
}
"""Keys that take values of several kinds: said in one finding instead of one for each kind."""


def of_mismatch(mismatch: Mismatch) -> Finding:
    """Place a mismatch between parts of the farm in its file."""
    return Finding(FILE, mismatch.key, mismatch.found, mismatch.expected, mismatch.nearest, severity=mismatch.severity)


def of_validation(error: ValidationError, table: Mapping[str, Any]) -> list[Finding]:
    """Put all faults of a farm table in words, in the order of the model, each key once."""
    unknown = [detail["loc"] for detail in error.errors(include_url=False) if detail["type"] == "extra_forbidden"]
    meant = {(*loc[:-1], nearest_choice(str(loc[-1]), known_keys(loc[:-1]))) for loc in unknown}
    found: dict[str, Finding] = {}
    for detail in error.errors(include_url=False):
        loc = _in_file(detail["loc"], table)
        if (detail["type"] == "missing" and loc in meant) or _all_faulty(detail, table):
            continue
        finding = _finding(detail, loc, table)
        found.setdefault(finding.key, finding)
    return list(found.values())


def _all_faulty(detail: Any, table: Mapping[str, Any]) -> bool:
    """Tell a list that is short only because its items are faulty, which is said of each item."""
    loc = detail["loc"]
    return detail["type"] == "too_short" and len(loc) == 1 and bool(table.get(loc[0]))


def known_keys(loc: Sequence[str | int]) -> list[str]:
    """List the keys that the table at a place of the farm file may have."""
    model: Any = Farm
    for part in loc:
        if isinstance(part, int):
            continue
        fields = {field.alias or name: field for name, field in model.model_fields.items()}
        if part not in fields:
            return []
        model = _model_in(fields[part].annotation)
        if model is None:
            return []
    return [field.alias or name for name, field in model.model_fields.items()]


def _model_in(annotation: Any) -> type[BaseModel] | None:
    """Find the model in an annotation such as ``tuple[Recipe, ...]``."""
    if isinstance(annotation, type) and not get_args(annotation):
        return annotation if issubclass(annotation, BaseModel) else None
    return next((model for part in get_args(annotation) if (model := _model_in(part))), None)


def _in_file(loc: tuple[str | int, ...], table: Mapping[str, Any]) -> tuple[str | int, ...]:
    """Cut what is not in the file off a place: names of validators and kinds of a union."""
    if loc[:2] in _SPECIAL:
        return loc[:2]
    here: Any = table
    for depth, part in enumerate(loc):
        inside = isinstance(here, list) and isinstance(part, int) and part < len(here)
        if not inside and not (isinstance(here, dict) and part in here):
            last = depth == len(loc) - 1 and isinstance(here, dict)
            return loc if last else loc[:depth]
        here = here[part]
    return loc


def key_path(loc: Sequence[str | int], table: Mapping[str, Any]) -> str:
    """Write a place as a dotted path with list items by code, or by number where they have none."""
    here: Any = table
    words: list[str] = []
    for part in loc:
        here = _step(here, part)
        if isinstance(part, str):
            words.append(part)
            continue
        code = here.get("code") if isinstance(here, dict) else None
        if isinstance(code, str) and code.strip() and len(code) <= 40:
            words.append(" ".join(code.split()))
        else:
            words[-1] += f" number {part + 1}"
    return ".".join(words)


def _step(here: Any, part: str | int) -> Any:
    if isinstance(here, dict):
        return here.get(part)
    return here[part] if isinstance(here, list) and isinstance(part, int) and part < len(here) else None


def _finding(detail: Any, loc: tuple[str | int, ...], table: Mapping[str, Any]) -> Finding:
    key, name = key_path(loc, table), str(loc[-1]) if loc else ""
    value: Any = table
    for part in loc:
        value = _step(value, part)
    listed = len(loc) == 1 and name in Farm.model_fields and "tuple" in str(Farm.model_fields[name].annotation)
    kind = detail["type"]
    if kind == "extra_forbidden":
        known = known_keys(loc[:-1])
        where = key_path(loc[:-1], table) or "a farm file"
        near = nearest_choice(name, known)
        expected = f"a key that {where} has" + ("" if near or len(known) > 12 else f" ({', '.join(known)})")
        return Finding(FILE, key, f"the unknown key '{name}'", expected, near)
    if kind == "missing":
        return _missing(key, loc, value, listed=listed)
    if loc[:2] in _SPECIAL and kind != "value_error":
        return Finding(FILE, key, shown(value), _SPECIAL[loc[:2]])
    if kind in {"model_type", "model_attributes_type", "dataclass_type"} or (listed and kind == "tuple_type"):
        section = str(loc[0])
        form = f"tables written [[{section}]]" if listed or len(loc) > 1 else f"a table written [{section}]"
        if len(loc) > 2:
            form = "a table in braces"
        return Finding(FILE, key, _brackets(name, value), form)
    if listed and kind == "too_short":
        return Finding(FILE, key, "none", f"at least one [[{name}]] table")
    return _worded(detail, key, value)


def _brackets(name: str, value: object) -> str:
    if isinstance(value, dict):
        return f"[{name}] in single brackets"
    return f"[[{name}]] in double brackets" if isinstance(value, list) and value else shown(value)


def _missing(key: str, loc: tuple[str | int, ...], value: object, *, listed: bool) -> Finding:
    if listed:
        return Finding(FILE, key, "none", f"at least one [[{loc[0]}]] table")
    if isinstance(value, list):
        return Finding(FILE, key, f"only {shown(value)}", "one value more")
    expected = f"a table written [{loc[0]}]" if len(loc) == 1 else "a value for this key"
    return Finding(FILE, key, "it missing", expected)


def _worded(detail: Any, key: str, value: object) -> Finding:
    expected, found = expected_and_found(detail, value)
    near = ""
    if detail["type"] == "literal_error" and isinstance(detail["input"], str):
        choices = [word.strip(" '") for word in detail["ctx"]["expected"].replace(" or ", ",").split(",")]
        near = nearest_choice(detail["input"], choices)
        found = shown(detail["input"])
    return Finding(FILE, key, found, expected, near)
