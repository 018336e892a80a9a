"""``bagweek learn`` as a user meets it."""

from __future__ import annotations

import json
import shutil
import subprocess
import sys
from datetime import date, timedelta
from pathlib import Path

import pytest

from scheduler.folder import read_farm_folder

TOP = Path(__file__).parents[2]
BASE = TOP / "tests" / "broken_farms" / "base"
DRY_KG = 2.3 * 0.38
HEAD = "lot,day,kg,bags,inoculated,bags_inoculated,ready,opened\n"
PRESET = """
[[strain]]
code = "GRY"
preset = "grey-oyster"
recipe = "oak62"
bag = "2k3"
programme = "overnight"
"""


def run(*options: str, cwd: Path | None = None) -> subprocess.CompletedProcess[str]:
    command = [sys.executable, "-m", "scheduler.cli.main", "learn", *options]
    return subprocess.run(
        command, capture_output=True, text=True, encoding="utf-8", check=False, cwd=cwd,
        env={"PYTHONPATH": str(TOP), "PATH": "", "COLUMNS": "80", "PYTHONIOENCODING": "utf-8"},
    )  # fmt: skip


def rows(number: int, be_pct: float, strain: str = "OYS") -> str:
    """Rows of one lot: 94 of 100 bags stand, 20 days to ready, 9 to the first pick, 12 between flushes."""
    inoculated = date(2027, 1, 4) + timedelta(days=7 * number)
    ready = inoculated + timedelta(days=20)
    lot, text = f"27W{number:02d}-{strain}-1", ""
    for flush, share in enumerate((0.55, 0.30, 0.15)):
        day = ready + timedelta(days=9 + 12 * flush)
        told = f"{inoculated},100,{ready},{ready}" if flush == 0 else ",,,"
        text += f"{lot},{day},{be_pct / 100 * share * DRY_KG * 94:.2f},94,{told}\n"
    return text


@pytest.fixture
def farm(tmp_path: Path) -> Path:
    """The sound farm with pickings of eight lots that yield 75 %, give or take."""
    folder = Path(shutil.copytree(BASE, tmp_path / "farm"))
    steady = "".join(rows(number, 75 + 4 * (number % 3 - 1)) for number in range(1, 9))
    (folder / "picks.csv").write_text(HEAD + steady, encoding="utf-8")
    return folder


def test_the_screen_shows_before_and_after_and_proposes(farm: Path) -> None:
    before = (farm / "farm.toml").read_bytes()
    done = run(cwd=farm)
    assert (done.returncode, done.stderr) == (0, "")
    assert done.stdout == run("--farm", str(farm)).stdout
    lines = done.stdout.splitlines()
    assert lines[0] == "Larch Yard: learned from 8 lots of picks.csv"
    assert max(len(line) for line in lines) <= 80
    assert "\x1b" not in done.stdout
    row = next(line.split() for line in lines if line.startswith("be_pct"))
    assert row[:4] == ["be_pct,", "%", "85.0", "77.4"]
    assert row[-1] == "8"
    assert "Lines for farm.toml (--write puts them there)" in done.stdout
    assert '[[strain]]  code = "OYS"' in lines
    assert "  be_pct = 77.4" in lines
    assert "assumed" in done.stdout
    assert (farm / "farm.toml").read_bytes() == before


def test_write_changes_the_values_and_nothing_else(farm: Path) -> None:
    file = farm / "farm.toml"
    file.write_text(file.read_text("utf-8").replace("be_pct = 85\n", "be_pct = 85  # a trial\n", 1), encoding="utf-8")
    before = file.read_text("utf-8").splitlines()
    document = json.loads(run("--farm", str(farm), "--json").stdout)
    lines = {line["key"]: line["value"] for line in document["lines"]}
    done = run("--farm", str(farm), "--write")
    assert done.returncode == 0
    assert "Written into farm.toml" in done.stdout
    assert "--since 2027-03-31" in " ".join(done.stdout.split())
    after = file.read_text("utf-8").splitlines()
    changed = [(a, b) for a, b in zip(before, after, strict=True) if a != b]
    assert ("be_pct = 85  # a trial", f"be_pct = {lines['strain.OYS.be_pct']}  # a trial") in changed
    assert {f"strain.OYS.{a.split(' =')[0]}" for a, _ in changed} == set(lines)
    strain = read_farm_folder(farm).farm.strain_called("OYS")
    assert {key: getattr(strain, key.rpartition(".")[2]) for key in lines} == lines


def test_a_strain_with_a_preset_gets_keys_of_its_own(farm: Path) -> None:
    file = farm / "farm.toml"
    file.write_text(file.read_text("utf-8").replace("[[crew]]", f"{PRESET}\n[[crew]]", 1), encoding="utf-8")
    (farm / "picks.csv").write_text(HEAD + "".join(rows(n, 75, "GRY") for n in range(1, 5)), encoding="utf-8")
    assert run("--farm", str(farm), "--write").returncode == 0
    folder = read_farm_folder(farm)
    assert {"be_pct", "preset", "pin_days"} <= folder.written["GRY"]
    assert folder.farm.strain_called("GRY").be_pct == 83.3  # (2 × 100 + 4 × 75) / 6


def test_the_document_has_its_keys(farm: Path) -> None:
    done = run("--farm", str(farm), "--json")
    document = json.loads(done.stdout)
    assert (document["schema"], document["farm"], document["written"]) == ("bagweek/learn/1", "Larch Yard", False)
    strain = document["strains"][0]
    assert {"strain", "lots", "keys", "drift"} <= set(strain)
    assert (strain["strain"], strain["lots"], strain["drift"]) == ("OYS", 8, [])
    keys = {one["key"]: one for one in strain["keys"]}
    assert all(set(one) == {"key", "before", "after", "low", "high", "lots", "proposed"} for one in keys.values())
    assert keys["flush_share"]["before"] == keys["flush_share"]["after"] == [0.55, 0.3, 0.15]
    assert keys["be_pct"]["low"] < keys["be_pct"]["after"] < keys["be_pct"]["high"]
    assert json.loads(run("--farm", str(farm), "--json", "--write").stdout)["written"] is True


def test_drift_is_said_and_is_exit_code_1(farm: Path) -> None:
    with (farm / "picks.csv").open("a", encoding="utf-8") as file:
        file.write("".join(rows(number, 40) for number in (9, 10, 11)))
    done = run("--farm", str(farm))
    assert done.returncode == 1
    assert "! Drift: be_pct: 27W09-OYS-1, 27W10-OYS-1, 27W11-OYS-1 gave 40.0 on average" in " ".join(
        done.stdout.split()
    )
    document = json.loads(run("--farm", str(farm), "--json").stdout)
    assert len(document["strains"][0]["drift"]) == 1


def test_another_file_and_later_lots_only(farm: Path, tmp_path: Path) -> None:
    other = tmp_path / "season.csv"
    (farm / "picks.csv").rename(other)
    done = run("--farm", str(farm), "--picks", str(other), "--since", "2027-03-01", "--json")
    assert json.loads(done.stdout)["strains"][0]["lots"] == 5


@pytest.mark.parametrize(
    ("options", "words"),
    [
        ((), ["picks.csv", "lot,day,kg,bags", "no such file"]),
        (("--picks", "nothing.csv"), ["nothing.csv", "no such file"]),
        (("--farm", "nowhere"), ["nowhere", "no such folder"]),
    ],
)
def test_bad_input_is_one_sentence(farm: Path, options: tuple[str, ...], words: list[str]) -> None:
    (farm / "picks.csv").unlink()
    done = run(*options, cwd=farm)
    assert (done.returncode, done.stdout) == (2, "")
    assert all(word in done.stderr for word in words), done.stderr
    assert len(done.stderr.splitlines()) == 1


def test_command_is_known_without_heavy_imports() -> None:
    heavy = "{'numpy', 'pydantic', 'scipy', 'pandas', 'ortools', 'rich.console'}"
    code = f"import sys, scheduler.cli.learn; print(sorted({heavy} & set(sys.modules)))"
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True, cwd=TOP)
    assert done.stdout.strip() == "[]"
