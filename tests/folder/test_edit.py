"""Changing values of a farm file: the rest of it stays, byte for byte, and a change that would spoil it is not made."""

from __future__ import annotations

import shutil
from pathlib import Path

import pytest

from scheduler.errors import InputError
from scheduler.folder import read_farm_folder, scenario_folder
from scheduler.folder.edit import set_values


@pytest.fixture
def farm(tmp_path: Path) -> Path:
    shutil.copytree(scenario_folder("one-drum"), tmp_path / "farm")
    return tmp_path / "farm"


def test_only_the_value_changes(farm: Path) -> None:
    file = farm / "farm.toml"
    before = file.read_text(encoding="utf-8")
    set_values(file, {("steriliser", "drum", "loss_w_per_k"): 9.7, ("recipe", "beech63", "conductivity_w_m_k"): 0.391})
    after = file.read_text(encoding="utf-8")
    changed = [(a, b) for a, b in zip(before.splitlines(), after.splitlines(), strict=True) if a != b]
    assert len(changed) == 2
    assert all(a.split("#")[1] == b.split("#")[1] for a, b in changed)
    read = read_farm_folder(farm).farm
    assert read.steriliser[0].loss_w_per_k == 9.7
    assert read.recipe[0].conductivity_w_m_k == 0.391


def test_a_key_that_was_left_out_is_added(farm: Path) -> None:
    set_values(farm / "farm.toml", {("steriliser", "drum", "stack_factor"): 1.5})
    assert read_farm_folder(farm).farm.steriliser[0].stack_factor == 1.5


def test_line_ends_stay(farm: Path) -> None:
    file = farm / "farm.toml"
    file.write_bytes(file.read_bytes().replace(b"\n", b"\r\n"))
    lines = file.read_bytes().count(b"\r\n")
    set_values(file, {("steriliser", "drum", "loss_w_per_k"): 9.7})
    assert file.read_bytes().count(b"\r\n") == lines
    assert read_farm_folder(farm).farm.steriliser[0].loss_w_per_k == 9.7


@pytest.mark.parametrize(
    ("place", "value", "words"),
    [
        (("steriliser", "durm", "loss_w_per_k"), 9.0, "no such table"),
        (("steriliser", "drum", "loss_w_per_k"), -4.0, "loss_w_per_k"),
        (("steriliser", "drum", "lossw"), 4.0, "unknown key"),
    ],
)
def test_a_change_that_would_spoil_the_file_is_not_made(
    farm: Path, place: tuple[str, str, str], value: float, words: str
) -> None:
    before = {path.name: path.read_bytes() for path in farm.iterdir() if path.is_file()}
    with pytest.raises(InputError, match=words) as caught:
        set_values(farm / "farm.toml", {place: value})
    assert "farm.toml" in str(caught.value)
    assert {path.name: path.read_bytes() for path in farm.iterdir() if path.is_file()} == before


def test_a_file_that_is_none_is_said(tmp_path: Path) -> None:
    with pytest.raises(InputError, match="cannot be changed"):
        set_values(tmp_path / "farm.toml", {})
    (tmp_path / "farm.toml").write_text("[site\n", encoding="utf-8")
    with pytest.raises(InputError, match="cannot be changed"):
        set_values(tmp_path / "farm.toml", {})
