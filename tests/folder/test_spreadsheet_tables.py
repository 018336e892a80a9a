"""Tables as spreadsheet programs write them are read, not refused."""

from __future__ import annotations

import shutil
from datetime import date
from pathlib import Path

import pytest

from models.calendar import Week
from scheduler.folder import read_farm_folder

BASE = Path(__file__).parents[1] / "broken_farms" / "base"

PLAIN = (
    "customer,strain,weekday,kg,price_per_kg,first_week,last_week,priority\n"
    "Mill Café,OYS,tue,14.5,11.50,2027-W07,,2\n"
    "Lock Grocer,LIO,fri,6,17.00,,,\n"
)
SEMICOLONS = PLAIN.replace(",", ";").replace("14.5", "14,5").replace("11.50", "11,50").replace("17.00", "17,00")

VARIANTS = {
    "plain": PLAIN.encode(),
    "byte-order mark": b"\xef\xbb\xbf" + PLAIN.encode(),
    "utf-16 little endian": b"\xff\xfe" + PLAIN.encode("utf-16-le"),
    "utf-16 big endian": b"\xfe\xff" + PLAIN.encode("utf-16-be"),
    "semicolons and decimal commas": SEMICOLONS.encode(),
    "semicolons, decimal points": PLAIN.replace(",", ";").encode(),
    "tabs": PLAIN.replace(",", "\t").encode(),
    "tabs, utf-16": b"\xff\xfe" + PLAIN.replace(",", "\t").encode("utf-16-le"),
    "delimiter named first": b"sep=;\r\n" + SEMICOLONS.encode(),
    "carriage returns": PLAIN.replace("\n", "\r\n").encode(),
    "no last line end": PLAIN.rstrip("\n").encode(),
    "blank lines": PLAIN.replace("\n", "\n\n,,,,,,,\n").encode(),
    "blank lines before": b"\n\n" + PLAIN.encode(),
    "all quoted": "".join(
        ",".join(f'"{cell}"' for cell in line.split(",")) + "\r\n" for line in PLAIN.splitlines()
    ).encode(),
    "quoted decimal commas": PLAIN.replace("14.5", '"14,5"').replace("11.50", '"11,50"').encode(),
    "title case": PLAIN.replace("customer,strain,weekday,kg,price_per_kg", "Customer,STRAIN,Weekday,KG,Price per kg")
    .replace("first_week", "First week")
    .replace("last_week", "last-week")
    .encode(),
    "spaces round cells": PLAIN.replace(",", " , ").encode(),
    "trailing delimiters": PLAIN.replace("\n", ",,,\n").encode(),
    "weekday names": PLAIN.replace("tue", "Tuesday").replace("fri", "FRI.").encode(),
    "small letters in weeks": PLAIN.replace("2027-W07", "2027-w7").encode(),
    "whole number with decimals": PLAIN.replace(",2\n", ",2.0\n").encode(),
    "other order": (
        "priority,price_per_kg,kg,last_week,first_week,weekday,strain,customer\n"
        "2,11.50,14.5,,2027-W07,tue,OYS,Mill Café\n,17,6,,,fri,LIO,Lock Grocer\n"
    ).encode(),
    "columns left out": (
        "customer,strain,weekday,kg,price_per_kg,first_week,priority\n"
        "Mill Café,OYS,tue,14.5,11.50,2027-W07,2\nLock Grocer,LIO,fri,6,17\n"
    ).encode(),
}  # fmt: skip


@pytest.fixture
def farm(tmp_path: Path) -> Path:
    return Path(shutil.copytree(BASE, tmp_path / "farm"))


@pytest.mark.parametrize("variant", VARIANTS)
def test_variants_are_read_alike(farm, variant):
    (farm / "orders.csv").write_bytes(VARIANTS[variant])
    folder = read_farm_folder(farm)
    first, second = folder.orders
    assert folder.findings == ()
    assert (first.customer, first.strain, first.weekday, first.kg, first.price_per_kg) == (
        "Mill Café", "OYS", "tue", 14.5, 11.5,
    )  # fmt: skip
    assert (first.first_week, first.last_week, first.priority) == (Week(2027, 7), None, 2)
    assert (second.customer, second.weekday, second.kg, second.price_per_kg) == ("Lock Grocer", "fri", 6.0, 17.0)
    assert (second.first_week, second.last_week, second.priority) == (None, None, 1)


def test_a_quoted_cell_keeps_delimiters_quotes_and_line_ends(farm):
    row = '"Mill, ""the"" Café;\nback door",OYS,tue,1,2\n'
    (farm / "orders.csv").write_text("customer,strain,weekday,kg,price_per_kg\n" + row, encoding="utf-8")
    assert read_farm_folder(farm).orders[0].customer == 'Mill, "the" Café; back door'


WARNED = {
    "extra column": (PLAIN.replace("priority", "priority,note").encode(), "'note'"),
    "optional column misspelt": (PLAIN.replace("priority", "prioritty").encode(), "did you mean 'priority'"),
    "windows-1252": (PLAIN.encode("cp1252"), "Windows-1252"),
    "the same order twice": (PLAIN.encode() + PLAIN.splitlines()[1].encode(), "the same as in row 2"),
    "no orders": (PLAIN.splitlines()[0].encode(), "at least one order"),
}


@pytest.mark.parametrize("variant", WARNED)
def test_oddities_are_read_with_a_warning(farm, variant):
    data, words = WARNED[variant]
    (farm / "orders.csv").write_bytes(data)
    (finding,) = read_farm_folder(farm).findings
    assert finding.severity == "warning"
    assert words in finding.sentence()


@pytest.mark.parametrize("text", ["2026-12-23", "23.12.2026", "2026-12-23 00:00:00", "2026-12-23T00:00"])
def test_dates_of_spreadsheets(farm, text):
    path = farm / "stock.csv"
    path.write_text(path.read_text(encoding="utf-8").replace("2026-12-23", text), encoding="utf-8")
    assert read_farm_folder(farm).stock[0].since == date(2026, 12, 23)


def test_no_stock_is_no_fault(farm):
    (farm / "stock.csv").unlink()
    assert read_farm_folder(farm).stock == ()


def test_a_full_room_is_a_warning(farm):
    path = farm / "stock.csv"
    path.write_text(path.read_text(encoding="utf-8").replace(",60,", ",1401,"), encoding="utf-8")
    (finding,) = read_farm_folder(farm).findings
    assert finding.sentence() == "stock.csv, bags: expected at most the 1400 places of room shelf, found 1401 in it."


def test_a_farm_file_from_a_spreadsheet_editor_is_read(farm):
    path = farm / "farm.toml"
    path.write_bytes(b"\xef\xbb\xbf" + path.read_bytes().replace(b"\n", b"\r\n"))
    assert read_farm_folder(farm).findings == ()


@pytest.mark.parametrize("number", ["110.0", "1_10", "0x6E"])
def test_whole_numbers_as_toml_has_them(farm, number):
    path = farm / "farm.toml"
    path.write_text(path.read_text(encoding="utf-8").replace("places = 110", f"places = {number}"), encoding="utf-8")
    assert read_farm_folder(farm).farm.steriliser[0].places == 110


FARM_WARNED = {
    "heavy bag": ("wet_kg = 3.0", "wet_kg = 4.5", "bag.block.wet_kg"),
    "room cannot be full": ("cooling_w = 2000", "cooling_w = 1000", "room.shelf.cooling_w"),
    "summer too warm to unload": ("unload_below_c = 60", "unload_below_c = 17", "steriliser.drum.unload_below_c"),
}


@pytest.mark.parametrize("variant", FARM_WARNED)
def test_what_is_odd_but_possible_is_a_warning(farm, variant):
    old, new, key = FARM_WARNED[variant]
    path = farm / "farm.toml"
    path.write_text(path.read_text(encoding="utf-8").replace(old, new), encoding="utf-8")
    assert [(one.key, one.severity) for one in read_farm_folder(farm).findings] == [(key, "warning")]
