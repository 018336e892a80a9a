"""``bagweek heat`` as a user meets it."""

from __future__ import annotations

import json
import subprocess
import sys
from pathlib import Path

import pytest

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
    assert len(document["curve"]) == pytest.approx(60 * document["ready_to_inoculate_h"], abs=4)


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
