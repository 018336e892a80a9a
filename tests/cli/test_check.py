"""``bagweek check``: exit codes, what goes where, and the JSON document."""

from __future__ import annotations

import io
import json
import os
import shutil
import subprocess
import sys
from pathlib import Path

import pytest
import typer
from rich.console import Console
from typer.testing import CliRunner

from scheduler.capacity import Capacity
from scheduler.cli.check import check
from scheduler.errors import Finding
from scheduler.views.check import show_check

TOP = Path(__file__).parents[2]
BASE = TOP / "tests" / "broken_farms" / "base"


@pytest.fixture
def farm(tmp_path):
    return Path(shutil.copytree(BASE, tmp_path / "farm"))


def run(*arguments: str):
    app = typer.Typer()
    app.command("check")(check)
    return CliRunner().invoke(app, list(arguments))


def change(path: Path, old: str, new: str) -> None:
    text = path.read_text(encoding="utf-8")
    assert old in text
    path.write_text(text.replace(old, new), encoding="utf-8")


def test_sound_farm(farm):
    done = run("--farm", str(farm))
    assert done.exit_code == 0, done.output
    assert done.stderr == ""
    assert done.stdout.startswith("Larch Yard: no findings\n")
    assert "\x1b" not in done.stdout
    assert max(len(line) for line in done.stdout.splitlines()) <= 80
    for title in ("Mixing", "Sterilising", "Cooling", "Inoculating", "Colonising", "Opening", "Fruiting", "Picking"):
        assert f"\n{title}" in done.stdout


def test_warnings_are_shown_and_give_1(farm):
    change(farm / "farm.toml", "cooling_w = 2000", "cooling_w = 1000")
    done = run("--farm", str(farm))
    assert done.exit_code == 1
    assert done.stderr == ""
    assert done.stdout.startswith("Larch Yard: 1 finding\n  farm.toml, room.shelf.cooling_w: expected")


def test_errors_go_to_stderr_one_a_line_and_give_2(farm):
    change(farm / "farm.toml", "be_pct = 85", "be_pc = 85")
    change(farm / "orders.csv", "LIO,tue", "LOI,tue")
    done = run("--farm", str(farm))
    assert done.exit_code == 2
    assert done.stdout == ""
    assert [line.split(":")[0] for line in done.stderr.splitlines()] == [
        "farm.toml, strain.OYS.be_pc",
        "orders.csv, row 4, strain",
    ]
    assert "Traceback" not in done.output


def test_json_of_a_sound_farm(farm):
    done = run("--farm", str(farm), "--json", "--month", "4")
    document = json.loads(done.stdout)
    assert next(iter(document)) == "schema"
    assert document["schema"] == "bagweek/check/1"
    assert document["farm"] == "Larch Yard"
    assert document["sound"] is True
    assert document["findings"] == []
    assert {one["month"] for one in document["capacity"] if one["stage"] == "sterilise"} == {4}
    assert all(one["bags_week"] > 0 for one in document["capacity"])


def test_json_of_a_broken_farm(farm):
    change(farm / "farm.toml", "be_pct = 85", "be_pc = 85")
    done = run("--farm", str(farm), "--json")
    assert done.exit_code == 2
    document = json.loads(done.stdout)
    assert document["sound"] is False
    assert document["capacity"] == []
    assert document["findings"] == [
        {
            "severity": "error", "file": "farm.toml", "key": "strain.OYS.be_pc", "found": "the unknown key 'be_pc'",
            "expected": "a key that strain.OYS has", "nearest": "be_pct",
            "sentence": "farm.toml, strain.OYS.be_pc: expected a key that strain.OYS has, found the unknown key"
            " 'be_pc'; did you mean 'be_pct'?",
        }
    ]  # fmt: skip


def test_schema_needs_no_farm(tmp_path, monkeypatch):
    monkeypatch.chdir(tmp_path)
    done = run("--schema")
    assert done.exit_code == 0
    assert json.loads(done.stdout)["title"] == "bagweek farm file"


@pytest.mark.parametrize("month", ["0", "13", "May"])
def test_a_month_is_1_to_12(farm, month):
    assert run("--farm", str(farm), "--month", month).exit_code == 2


def test_importing_the_commands_is_light():
    heavy = "{'numpy', 'pandas', 'ortools', 'pydantic', 'scipy', 'rich.console'}"
    code = (
        "import sys, scheduler.cli.check, scheduler.cli.new;"
        f"print(sorted({heavy} & set(sys.modules) - {{'rich.console'}}))"
    )
    environment = {**os.environ, "PYTHONPATH": str(TOP)}
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True, env=environment)
    assert done.stdout.strip() == "[]"


def printed(width: int, **options) -> str:
    file = io.StringIO()
    console = Console(file=file, width=width, highlight=False, **options)
    findings = [Finding("farm.toml", "room.shelf", "too [much] of it", "less", severity="warning")] * 2
    rows = [
        Capacity("sterilise", "a steriliser with a very long name, and a programme", 12345.6, None, "so", 1),
        Capacity("sterilise", "a steriliser with a very long name, and a programme", 12345.6, None, "so", 7),
        Capacity("cool", "", None, None, "no cooling room"),
        Capacity("fruit", "OYS", 9.87, 0.123, "few"),
    ]
    show_check(console, "Larch Yard", findings, rows)
    return file.getvalue()


def test_layout():
    assert printed(120) == printed(80)
    lines = printed(80).splitlines()
    assert lines[0] == "Larch Yard: 2 findings"
    assert "too [much] of it" in lines[1]
    body = "\n".join(lines[lines.index("─" * 80) + 1 :])
    assert body.splitlines() == [
        "Sterilising  a steriliser with a very long name, and a programme, January and July",
        f"{'12,346':>69}",
        "               so",
        f"{'Cooling':<58}{'no limit':>11}",
        "               no cooling room",
        f"{'Fruiting     OYS':<58}{'9.87':>11}{'0.123':>11}",
        "               few",
    ]


def test_colour_only_where_it_is_wanted(monkeypatch):
    monkeypatch.delenv("NO_COLOR", raising=False)
    assert "\x1b[33m" in printed(80, force_terminal=True, color_system="standard")
    monkeypatch.setenv("NO_COLOR", "1")
    assert "\x1b[33m" not in printed(80, force_terminal=True, color_system="standard")


def test_a_steriliser_too_weak_to_heat_its_load_is_a_warning(farm):
    change(farm / "farm.toml", "loss_w_per_k = 9.0", "loss_w_per_k = 80.0")
    done = run("--farm", str(farm))
    assert done.exit_code == 1, done.output
    assert "farm.toml, programme.overnight: expected a steriliser that can run full loads" in done.stdout
