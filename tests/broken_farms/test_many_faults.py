"""Faults in several files at once, and folders that are none."""

from __future__ import annotations

from pathlib import Path

import pytest

from scheduler.errors import InputError
from scheduler.folder import read_farm_folder


def test_the_sound_farm_has_no_findings(sound):
    folder = read_farm_folder(sound)
    assert folder.findings == ()
    assert (len(folder.orders), len(folder.stock)) == (3, 3)
    assert folder.path == sound


def test_faults_in_all_files_come_together(sound):
    for file, old, new in (
        ("farm.toml", "be_pct = 85", "be_pct = -85"),
        ("orders.csv", "LIO,tue", "LOI,tue"),
        ("stock.csv", "2026-12-23", "2026-12-32"),
    ):
        path = sound / file
        path.write_text(path.read_text(encoding="utf-8").replace(old, new), encoding="utf-8")
    with pytest.raises(InputError) as caught:
        read_farm_folder(sound)
    assert [(one.file, one.key) for one in caught.value.findings] == [
        ("farm.toml", "strain.OYS.be_pct"),
        ("orders.csv", "row 4, strain"),
        ("stock.csv", "row 2, since"),
    ]


def test_a_fault_in_one_section_does_not_hide_a_misfit_in_others(sound):
    path = sound / "farm.toml"
    text = path.read_text(encoding="utf-8").replace("spot_kg_week = 20", "spot_kg_week = -20")
    path.write_text(text.replace("element_kw = 6.0", "element_kw = 60.0"), encoding="utf-8")
    with pytest.raises(InputError) as caught:
        read_farm_folder(sound)
    assert [one.key for one in caught.value.findings] == ["market.spot_kg_week", "steriliser.drum.element_kw"]


def test_a_long_list_is_cut_in_the_message_and_whole_in_the_findings(sound):
    rows = "".join(f"Mill,OYS,tue,x{k},1\n" for k in range(500))
    (sound / "orders.csv").write_text("customer,strain,weekday,kg,price_per_kg\n" + rows, encoding="utf-8")
    with pytest.raises(InputError) as caught:
        read_farm_folder(sound)
    assert len(caught.value.findings) == 500
    assert str(caught.value).count("\n") == 20
    assert str(caught.value).endswith("... and 480 more; bagweek check lists them all.")


@pytest.mark.parametrize("path", ["no/such/folder", "nul\0byte", "x" * 5000], ids=["missing", "nul", "endless"])
def test_no_folder_is_said(path):
    with pytest.raises(InputError, match=r"a folder that holds farm\.toml"):
        read_farm_folder(path)


def test_a_file_for_a_folder_is_said(sound):
    with pytest.raises(InputError, match="found a file"):
        read_farm_folder(Path(sound) / "farm.toml")
