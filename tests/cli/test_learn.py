"""``bagweek learn`` as a user meets it."""

from __future__ import annotations

import json
import shutil
import subprocess
import sys
import tomllib
from datetime import date, timedelta
from pathlib import Path

import pytest

SCENARIO = Path(__file__).parents[2] / "scenarios" / "one-drum"


@pytest.fixture
def farm(tmp_path: Path) -> Path:
    """A farm whose six lots gave four fifths of what the card says."""
    shutil.copytree(SCENARIO, tmp_path / "farm")
    rows = ["lot,day,kg,bags,inoculated,bags_inoculated,ready,opened"]
    for week in range(20, 26):
        monday = date.fromisocalendar(2026, week, 1)
        dates = [monday, 100, monday + timedelta(days=20), monday + timedelta(days=21)]
        for number, share in enumerate((0.55, 0.3, 0.15)):
            day = monday + timedelta(days=31 + 12 * number)
            noted = ",".join(map(str, dates)) if number == 0 else ",,,"
            rows.append(f"26W{week}-OYS-1,{day},{90 * 2.1 * 0.37 * 0.68 * share:.2f},90,{noted}")
    (tmp_path / "farm" / "picks.csv").write_text("\n".join(rows), encoding="utf-8")
    return tmp_path / "farm"


def run(farm: Path, *options: str) -> subprocess.CompletedProcess[str]:
    words = [sys.executable, "-m", "scheduler.cli.main", "learn", "--farm", str(farm), *options]
    return subprocess.run(words, capture_output=True, text=True, encoding="utf-8", check=False)


def test_a_proposal_leaves_the_file(farm: Path) -> None:
    before = (farm / "farm.toml").read_bytes()
    done = run(farm)
    assert done.returncode == 0, done.stderr
    assert max(len(line) for line in done.stdout.splitlines()) <= 80
    assert "Lines for farm.toml" in done.stdout
    assert (farm / "farm.toml").read_bytes() == before


def test_written_values_stand_in_their_places(farm: Path) -> None:
    before = (farm / "farm.toml").read_text(encoding="utf-8")
    document = json.loads(run(farm, "--write", "--json").stdout)
    assert (document["schema"], document["written"]) == ("bagweek/learn/1", True)
    (learned,) = document["strains"]
    keys = {key["key"]: key for key in learned["keys"]}
    assert learned["lots"] == 6
    assert 68 < keys["be_pct"]["after"] < 76
    assert keys["be_pct"]["low"] < keys["be_pct"]["after"] < keys["be_pct"]["high"]
    assert keys["loss_pct"]["after"] > keys["loss_pct"]["before"]
    after = (farm / "farm.toml").read_text(encoding="utf-8")
    card = next(card for card in tomllib.loads(after)["strain"] if card["code"] == "OYS")
    for name, key in keys.items():
        if key["proposed"]:
            assert card[name] == key["after"], name
    changed = [line for line in before.splitlines() if line not in after.splitlines()]
    comments = {line.partition("#")[2] for line in after.splitlines()}
    assert all(line.partition("#")[2] in comments for line in changed)
    again = json.loads(run(farm, "--json").stdout)
    assert not again["written"]


def test_drift_has_an_exit_code(farm: Path) -> None:
    file = farm / "picks.csv"
    rows = file.read_text(encoding="utf-8").splitlines()
    for week in range(26, 29):
        monday = date.fromisocalendar(2026, week, 1)
        for number in range(3):
            rows.append(f"26W{week}-OYS-1,{monday + timedelta(days=31 + 12 * number)},4,90,,,,")
    file.write_text("\n".join(rows), encoding="utf-8")
    done = run(farm)
    assert done.returncode == 1
    assert "drifts" in done.stdout


@pytest.mark.parametrize(("options", "words"), [((), "no such file"), (("--picks", "none.csv"), "none.csv")])
def test_without_pickings(tmp_path: Path, options: tuple[str, ...], words: str) -> None:
    shutil.copytree(SCENARIO, tmp_path / "farm")
    done = run(tmp_path / "farm", *options)
    assert (done.returncode, done.stdout) == (2, "")
    assert words in done.stderr
    assert len(done.stderr.strip().splitlines()) == 1
