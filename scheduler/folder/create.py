"""Make a farm folder from a scenario: all of it, or nothing."""

from __future__ import annotations

import os
import re
import shutil
from pathlib import Path

from scheduler.errors import Finding, UsageError
from scheduler.folder.scenarios import DEFAULT, FARM_FILES, scenario_folder
from scheduler.folder.schema import FILE as SCHEMA_FILE
from scheduler.folder.schema import farm_schema_text

_SCHEMA_LINE = re.compile(rb"\A#:schema [^\r\n]*")


def create_farm_folder(target: Path, like: str = DEFAULT) -> tuple[Path, ...]:
    """Copy the farm file, orders and stock of a scenario into a new folder, with the schema of the farm file.

    Parameters
    ----------
    target : Path
        The folder to make; it may exist if it is empty.
    like : str
        Name of a scenario.

    Returns
    -------
    tuple of Path
        The files made.

    Raises
    ------
    UsageError
        There is no such scenario, the folder holds something, or it cannot be written.
    """
    source = scenario_folder(like)
    target = target.absolute()
    half_made = target.parent / f".{target.name[:200]}.{os.getpid()}.part"
    try:
        _refuse_if_taken(target)
        target.parent.mkdir(parents=True, exist_ok=True)
        half_made.mkdir()
        try:
            _fill(half_made, source)
            if target.is_dir():
                _move_files(half_made, target)
            else:
                half_made.rename(target)
        finally:
            shutil.rmtree(half_made, ignore_errors=True)
    except (OSError, ValueError) as error:
        why = getattr(error, "strerror", None) or "no folder can have that name"
        expected = "a folder that can be made"
        raise UsageError(Finding(str(target), "", f"that it cannot ({why.lower()})", expected).sentence()) from error
    return tuple(sorted(target.iterdir()))


def _refuse_if_taken(target: Path) -> None:
    expected = "the name of a folder that does not exist or is empty"
    if target.is_dir():
        if any(target.iterdir()):
            raise UsageError(Finding(str(target), "", "a folder that holds files", expected).sentence())
    elif target.exists() or target.is_symlink():
        raise UsageError(Finding(str(target), "", "a file of that name", expected).sentence())


def _move_files(source: Path, target: Path) -> None:
    """Move files into an empty folder, which may be the one a person stands in; on failure it is empty again."""
    moved: list[Path] = []
    try:
        for path in sorted(source.iterdir()):
            path.rename(target / path.name)
            moved.append(target / path.name)
    except OSError:
        for path in moved:
            path.unlink(missing_ok=True)
        raise


def _fill(folder: Path, source: Path) -> None:
    for name in FARM_FILES:
        if (source / name).is_file():
            shutil.copyfile(source / name, folder / name)
    farm_file = folder / "farm.toml"
    farm_file.write_bytes(_SCHEMA_LINE.sub(b"#:schema " + SCHEMA_FILE.encode(), farm_file.read_bytes()))
    (folder / SCHEMA_FILE).write_text(farm_schema_text(), encoding="utf-8")
