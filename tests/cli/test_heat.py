"""``bagweek heat`` as a user meets it."""

from __future__ import annotations

import json
import os
import re
import shutil
import subprocess
import sys
import tomllib
from pathlib import Path

import pytest

from models.farm import Tariff
from scheduler.tariff import energy_cost

FARM = Path(__file__).parents[2] / "scenarios" / "one-drum"
KEYS = {
    "boiling_c", "boil_up_h", "heat_up_h", "hold_h", "vent_h", "cool_in_place_h", "cool_down_h", "ready_to_unload_h",
    "ready_to_inoculate_h", "energy_kwh", "cost", "heat_into_load_mj", "condensate_kg", "mean_hold_kw", "hold_duty",
    "log_reduction", "curve", "balance_error_pct", "cautions",
}  # fmt: skip


def run(*options: str) -> subprocess.CompletedProcess[str]:
    command = [sys.executable, "-m", "scheduler.cli.main", "heat", "--farm", str(FARM), "--month", "1", *options]
    return subprocess.run(command, capture_output=True, text=True, encoding="utf-8", check=False)


def test_document_holds_every_key() -> None:
    document = json.loads(run("--json").stdout)
    assert document["schema"] == "bagweek/heat/1"
    assert document.keys() >= KEYS
    total = sum(document[key] for key in ("heat_up_h", "hold_h", "vent_h", "cool_in_place_h"))
    assert document["ready_to_unload_h"] == pytest.approx(total, abs=1e-3)
    assert document["balance_error_pct"] <= 0.1
    minutes = [row["minutes"] for row in document["curve"]]
    assert minutes == list(range(int(60 * document["ready_to_inoculate_h"] + 1e-6) + 1))


def test_cost_follows_the_clock(tmp_path: Path) -> None:
    """The same cycle costs less by night where the tariff says so, and the flat price times its energy where not."""
    shutil.copytree(FARM, tmp_path / "farm")
    file = tmp_path / "farm" / "farm.toml"
    text = file.read_text(encoding="utf-8")
    tariff = tomllib.loads(text)["tariff"]
    night = tariff["periods"][0]["price"]
    file.write_text(re.sub(r"^periods = .*$", "", text, flags=re.MULTILINE), encoding="utf-8")
    flat, day, late = (
        json.loads(run("--json", "--farm", str(folder), "--steam-on", clock).stdout)
        for folder, clock in ((file.parent, "09:00"), (FARM, "09:00"), (FARM, "23:00"))
    )
    assert flat["cost"] == pytest.approx(tariff["default"] * flat["energy_kwh"], abs=0.006)
    assert flat["energy_kwh"] == day["energy_kwh"] == late["energy_kwh"]
    assert night * late["energy_kwh"] < late["cost"] < day["cost"] < flat["cost"] + 0.006


def test_price_of_a_quarter_by_hand() -> None:
    """Steam on at 22:30 with night from 23:00 to 08:00: two quarters by day, the rest by night."""
    tariff = Tariff.model_validate({"default": 0.3, "periods": [{"from": "23:00", "to": "08:00", "price": 0.1}]})
    assert energy_cost(tariff, 22 * 60 + 30, [2.0, 2.0, 1.0, 1.0]) == pytest.approx(4 * 0.3 + 2 * 0.1)
    assert energy_cost(tariff, 7 * 60 + 45, [1.0, 1.0]) == pytest.approx(0.1 + 0.3)


def test_command_is_known_without_heavy_imports() -> None:
    code = "import sys, scheduler.cli.heat; print(sorted({'numpy', 'pydantic', 'scipy', 'pandas'} & set(sys.modules)))"
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True)
    assert done.stdout.strip() == "[]"


def test_phases_add_up_on_the_screen() -> None:
    lines = run().stdout.splitlines()
    rows = [line for line in lines if line.endswith("°C") and " h " in line]
    assert len(rows) == 6
    hours = [float(line[27:35]) for line in rows]
    passed = [float(line[35:45]) for line in rows]
    assert passed == pytest.approx([sum(hours[: k + 1]) for k in range(6)], abs=0.04)
    assert "+1 d" in rows[-1]


def test_screen_fits_and_warns() -> None:
    done = run()
    assert done.returncode == 0
    assert max(len(line) for line in done.stdout.splitlines()) <= 80
    assert "\x1b" not in done.stdout
    assert all(word in done.stdout for word in ("indicative only", "relief valve", "no safety control"))


@pytest.mark.parametrize(
    ("options", "words"),
    [
        (("--steriliser", "durm"), ["--steriliser", "'durm'", "did you mean 'drum'?"]),
        (("--strain", "OYX"), ["--strain", "OYS, LIO", "did you mean 'OYS'?"]),
        (("--bags", "500"), ["at most 104 bags"]),
        (("--bags", "0"), ["--bags", "above 0"]),
        (("--bags", "60,no"), ["--bags", "such as 4,6,9", "60,no"]),
        (("--bags", "60.5"), ["--bags", "whole numbers"]),
        (("--bags", "60,500"), ["at most 104 bags"]),
        (("--hold", "-1"), ["--hold", "from 0 to 96"]),
        (("--loss", "x"), ["--loss", "'x'"]),
        (("--bag", "2k2"), ["--bag", "did you mean '2k1'?"]),
        (("--mixed", "OYS"), ["--mixed", "OYS=60,LIO=44"]),
        (("--mixed", "OYS=60,LIO=60"), ["--mixed", "at most 104"]),
        (("--mixed", "OYS=60,OYS=10"), ["each strain once"]),
        (("--mixed", "OYS=6,LIO=4", "--strain", "OYS"), ["leave --strain out"]),
        (("--mixed", "OYS=6,LIO=4", "--bags", "8"), ["--bags", "a load of one kind"]),
        (("--water-pct", "0"), ["--water-pct", "above 0 %"]),
        (("--water-pct", "100"), ["--water-pct", "below 100 %"]),
        (("--unload-by", "08:10", "--steam-on", "16:00"), ["leave --steam-on out"]),
        (("--unload-by", "8.10"), ["--unload-by", "'8.10'"]),
        (("--interrupted", "100"), ["--resume-after", "or neither"]),
        (("--interrupted", "5000", "--resume-after", "10"), ["--interrupted", "minute 5000"]),
        (("--interrupted", "100", "--resume-after", "-5"), ["--resume-after", "-5"]),
        (("--write",), ["--write", "--fit"]),
        (("--fit", "nothing.csv"), ["nothing.csv", "no such file"]),
        (("--element-kw", "4,6", "--unload-by", "08:00"), ["side by side"]),
        (("--element-kw", "-3"), ["--element-kw", "above 0"]),
        (("--element-kw", "0.5"), ["never reaches"]),
        (("--start-c", "99"), ["--start-c", "95"]),
        (("--steam-on", "25:00"), ["--steam-on", "25:00"]),
        (("--month", "13"), ["--month"]),
    ],
)
def test_bad_input_is_one_sentence(options: tuple[str, ...], words: list[str]) -> None:
    done = run(*options)
    assert (done.returncode, done.stdout) == (2, "")
    assert all(word in done.stderr for word in words), done.stderr
    assert len(done.stderr.strip().splitlines()) == 1
    assert "Traceback" not in done.stderr


def test_changes_side_by_side() -> None:
    """Every combination, the farm as it is first; a bigger element is never slower, fewer bags never either."""
    document = json.loads(run("--json", "--element-kw", "4,9,13", "--bags", "60,104").stdout)
    rows = document["what_if"]
    assert [(row["element_kw"], row["bags"]) for row in rows] == [
        (9, 104), (4, 60), (4, 104), (9, 60), (9, 104), (13, 60), (13, 104),
    ]  # fmt: skip
    assert rows[0] == rows[4]
    assert rows[0]["heat_up_h"] == document["heat_up_h"]
    by = {(row["element_kw"], row["bags"]): row["heat_up_h"] for row in rows}
    assert by[4, 104] > by[9, 104] > by[13, 104]
    assert all(by[kw, 60] < by[kw, 104] for kw in (4, 9, 13))
    screen = run("--element-kw", "4,9,13", "--bags", "60,104").stdout
    assert max(len(line) for line in screen.splitlines()) <= 80
    assert re.search(r"^now +9 +104 ", screen, re.MULTILINE)
    assert re.search(r"^    s +4 +60 ", screen, re.MULTILINE)
    assert re.search(r"^    p +13 +60 ", screen, re.MULTILINE)


def test_a_change_without_a_cycle_says_why_and_the_others_stand() -> None:
    screen = run("--element-kw", "0.5,9").stdout
    assert "none" in screen
    assert "never reaches 95" in " ".join(screen.split())
    document = json.loads(run("--element-kw", "0.5,9", "--json").stdout)
    assert document["what_if"][1]["problem"]
    assert document["what_if"][2]["problem"] == ""


def test_a_slow_heat_up_says_what_would_help() -> None:
    """One bag more, or half a kilowatt less, is too slow; the hint itself is not."""
    assert "Hot within" not in run("--element-kw", "4", "--bags", "20").stdout
    text = " ".join(run("--element-kw", "4").stdout.split())
    fewer = int(re.search(r"Hot within 6 h would be at most (\d+) bag", text)[1])
    enough = float(re.search(r"an element of ([\d.]+) kW", text)[1])
    hours = [
        json.loads(run("--json", *options).stdout)["heat_up_h"]
        for options in (
            ("--element-kw", "4", "--bags", str(fewer)), ("--element-kw", "4", "--bags", str(fewer + 1)),
            ("--element-kw", str(enough)), ("--element-kw", str(enough - 0.5)),
        )
    ]  # fmt: skip
    assert hours[0] <= 6 < hours[1]
    assert hours[2] <= 6 < hours[3]


def test_latest_steam_on_meets_the_moment_it_was_asked_for() -> None:
    document = json.loads(run("--json", "--unload-by", "2027-03-28 08:10").stdout)
    late = json.loads(run("--json", "--steam-on", document["steam_on"][:16]).stdout)
    assert document["steam_on"].startswith("2027-03-27T")
    assert document["ready_to_unload"] == late["ready_to_unload"] == "2027-03-28T08:10:00+01:00"
    assert late["cost"] == document["cost"]


def test_energy_by_period_adds_up() -> None:
    document = json.loads(run("--json", "--steam-on", "20:00").stdout)
    parts = document["energy_by_period"]
    assert [part["period"] for part in parts] == ["23:00-08:00", "other hours"]
    assert sum(part["kwh"] for part in parts) == pytest.approx(document["energy_kwh"], abs=0.01)
    assert sum(part["cost"] for part in parts) == pytest.approx(document["cost"], abs=0.02)


def test_water_and_mix() -> None:
    document = json.loads(run("--json", "--water-pct", "60").stdout)
    assert document["water_kg"] == document["condensate_kg"]
    assert document["mix"][0]["dry_kg"] == pytest.approx(104 * 2.1 * 0.4, abs=0.01)
    assert document["mix"][0]["add_water_kg"] == pytest.approx(104 * 2.1 * 0.6, abs=0.01)


def test_a_mixed_load_is_as_slow_as_its_slowest_bag() -> None:
    mixed = json.loads(run("--json", "--mixed", "OYS=60,LIO=44").stdout)
    plain = json.loads(run("--json").stdout)
    assert [part["bags"] for part in mixed["load"]] == [60, 44]
    assert mixed["heat_up_h"] == pytest.approx(plain["heat_up_h"], abs=1e-3)
    assert "60 bags of OYS and 44 of LIO" in run("--mixed", "OYS=60,LIO=44").stdout


def test_a_power_cut_on_the_screen_and_as_a_document() -> None:
    screen = run("--interrupted", "400", "--resume-after", "120").stdout
    assert max(len(line) for line in screen.splitlines()) <= 80
    words = " ".join(screen.split())
    assert all(part in words for part in ("Power off from 22:40 to 00:40 +1 d", "count the whole hold again", "probe"))
    found = json.loads(run("--json", "--interrupted", "400", "--resume-after", "120").stdout)
    assert found["ready_to_unload_h"] > found["interrupted"]["planned_ready_to_unload_h"] + 3
    assert found["interrupted"]["hold_restarts"] >= 1


def test_a_fit_is_a_proposal_until_it_is_written(tmp_path: Path) -> None:
    """A log made with another loss: the proposal leaves the file alone, ``--write`` changes just the value."""
    shutil.copytree(FARM, tmp_path / "farm")
    file = tmp_path / "farm" / "farm.toml"
    made = json.loads(run("--json", "--loss", "15").stdout)["curve"]
    lines = ["minutes,steam_c,core_c,kw"]
    for low, row in zip([None, *made[:900:10]], made[:901:10], strict=True):
        kw = 0.0 if low is None else sum(made[int(low["minutes"]) + k]["element_kw"] for k in range(1, 11)) / 10
        lines.append(f"{row['minutes']:g},{row['steam_c']},{row['core_c']},{kw:.3f}")
    log = tmp_path / "run.csv"
    log.write_text("\n".join(lines), encoding="utf-8")
    before = file.read_text(encoding="utf-8")
    options = ("--farm", str(file.parent), "--fit", str(log))
    shown = run(*options)
    assert shown.returncode == 0, shown.stderr
    assert max(len(line) for line in shown.stdout.splitlines()) <= 80
    assert "Lines for farm.toml" in shown.stdout
    assert file.read_text(encoding="utf-8") == before
    written = json.loads(run(*options, "--write", "--json").stdout)["fit"]
    assert written["written"]
    after = tomllib.loads(file.read_text(encoding="utf-8"))
    assert after["steriliser"][0]["loss_w_per_k"] == pytest.approx(15, rel=0.05)
    changed = [
        (old, new)
        for old, new in zip(before.splitlines(), file.read_text(encoding="utf-8").splitlines(), strict=True)
        if old != new
    ]
    assert 1 <= len(changed) <= 3
    assert all(old.partition("#")[2] == new.partition("#")[2] for old, new in changed)


def test_a_terminal_of_ascii_gets_ascii() -> None:
    command = [sys.executable, "-m", "scheduler.cli.main", "heat", "--farm", str(FARM), "--month", "1"]
    environment = os.environ | {"PYTHONIOENCODING": "ascii"}
    done = subprocess.run(command, capture_output=True, env=environment, check=False)
    assert done.returncode == 0, done.stderr
    assert done.stdout.isascii()
    assert b"95 C in the coldest" in done.stdout
    assert b"?" not in done.stdout
