"""``bagweek heat`` as a user meets it."""

from __future__ import annotations

import json
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
        (("--bags", "0"), ["--bags"]),
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
