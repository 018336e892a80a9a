"""Change values of ``farm.toml`` in place: comments, order and layout stay."""

from __future__ import annotations

import os
import tempfile
from collections.abc import Mapping
from pathlib import Path
from typing import Any

import tomlkit
from tomlkit.exceptions import TOMLKitError

from scheduler.errors import Finding, InputError
from scheduler.folder.farm_file import read_farm_file

Place = tuple[str, str, str]
"""Section, code, key: ``("steriliser", "drum", "loss_w_per_k")``."""


def set_values(path: Path, values: Mapping[Place, Any]) -> None:
    """Write values into coded tables of a farm file.

    Parameters
    ----------
    path : Path
        The ``farm.toml``.
    values : mapping
        New values by section, code and key; a key that the table lacks is added at its end.

    Raises
    ------
    InputError
        The file cannot be read or written, has no such table, or would not be a sound farm file any more; it is then
        left as it is.
    """
    try:
        text = path.read_bytes().decode("utf-8-sig")
        document = tomlkit.parse(text)
    except (OSError, UnicodeDecodeError, TOMLKitError) as error:
        raise InputError(
            (Finding(path.name, "", f"that it cannot be changed ({error})", "a sound farm file"),)
        ) from error
    for (section, code, key), value in values.items():
        tables = [table for table in document.get(section, []) if table.get("code") == code]
        if not tables:
            raise InputError(
                (Finding(path.name, f"{section}.{code}", "no such table", f"a [[{section}]] of that code"),)
            )
        fresh = tomlkit.item(value)
        if key in tables[0]:
            fresh.trivia.comment_ws = tables[0].item(key).trivia.comment_ws
            fresh.trivia.comment = tables[0].item(key).trivia.comment
        tables[0][key] = fresh
    _replace(path, tomlkit.dumps(document))


def _replace(path: Path, text: str) -> None:
    """Write beside the file, check, and put it in its place at once."""
    try:
        handle, name = tempfile.mkstemp(prefix=".farm-", suffix=".toml", dir=path.parent)
        with os.fdopen(handle, "wb") as out:
            out.write(text.encode("utf-8"))
    except OSError as error:
        why = error.strerror or "unknown reason"
        raise InputError(
            (Finding(path.name, "", f"that it cannot be written ({why})", "a file that can be"),)
        ) from error
    fresh = Path(name)
    try:
        findings: list[Finding] = []
        read = read_farm_file(fresh, findings)
        if read.farm is None:
            faults = (Finding(path.name, one.key, one.found, one.expected, one.nearest) for one in findings)
            raise InputError(tuple(faults))
        fresh.chmod(path.stat().st_mode & 0o777)
        fresh.replace(path)
    except OSError as error:
        why = error.strerror or "unknown reason"
        raise InputError(
            (Finding(path.name, "", f"that it cannot be written ({why})", "a file that can be"),)
        ) from error
    finally:
        fresh.unlink(missing_ok=True)
