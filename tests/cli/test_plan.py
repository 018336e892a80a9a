"""``bagweek plan`` as a user meets it: keys, width, pipes, exit codes, an interrupt."""

from __future__ import annotations

import json
import os
import signal
import subprocess
import sys
import time
from pathlib import Path

import pytest

SCENARIOS = Path(__file__).parents[2] / "scenarios"
WEEK_KEYS = {"week", "bags", "runs", "kg", "orders_kg", "short_kg", "room_peak", "labour_h", "money"}
RUN_KEYS = {"code", "steriliser", "load_start", "ready", "unload", "bags", "lots", "energy_kwh"}
LOT_KEYS = {"code", "strain", "bags", "run", "inoculated", "ready", "opened", "room", "flushes", "picks"}
KEYS = {"weeks", "runs", "lots", "money", "objective", "bound", "gap", "status", "stop", "seconds", "versions",
        "shortfalls", "referee", "seed", "limits"}  # fmt: skip


def command(*options: str, scenario: str = "one-drum") -> list[str]:
    place = ["--farm", str(SCENARIOS / scenario), "--from", "2027-W02"]
    return [sys.executable, "-m", "scheduler.cli.main", "plan", *place, *options]


def run(*options: str) -> subprocess.CompletedProcess[str]:
    return subprocess.run(command(*options), capture_output=True, text=True, encoding="utf-8", check=False)


def test_document_holds_every_key_and_adds_up() -> None:
    document = json.loads(run("--weeks", "4", "--json").stdout)
    assert document["schema"] == "bagweek/plan/1"
    assert document.keys() >= KEYS
    assert len(document["weeks"]) == 4
    assert all(row.keys() >= WEEK_KEYS for row in document["weeks"])
    assert all(row.keys() >= RUN_KEYS for row in document["runs"])
    assert all(row.keys() >= LOT_KEYS for row in document["lots"])
    assert sum(document["money"].values()) == pytest.approx(document["objective"], abs=0.05)
    assert document["objective"] <= document["bound"]
    assert document["referee"]["violations"] == []
    bags = sum(sum(row["bags"].values()) for row in document["weeks"])
    assert bags == sum(sum(run["bags"].values()) for run in document["runs"] if not run["look_ahead"])


def test_screen_fits_a_pipe_without_colour() -> None:
    done = run("--weeks", "4")
    assert done.returncode in (0, 1)
    assert max(len(line) for line in done.stdout.splitlines()) <= 80
    assert "\x1b" not in done.stdout + done.stderr
    for heading in ("Week by week", "Bags to make, by strain", "Fullest night", "day by day", "Money", "What limits",
                    "How good it is"):  # fmt: skip
        assert heading in done.stdout
    assert "no rule broken" in done.stdout
    assert "no safety control" in " ".join(done.stdout.split())
    assert "plan found" in done.stderr


@pytest.mark.parametrize(
    ("options", "words"),
    [
        (("--weeks", "0"), "--weeks"),
        (("--from", "2027-W60"), "W60"),
        (("--from", "soon"), "2027-W03"),
        (("--gap", "2"), "--gap"),
    ],
)
def test_wrong_options_are_one_sentence(options: tuple[str, ...], words: str) -> None:
    done = run(*options)
    assert (done.returncode, done.stdout) == (2, "")
    assert words in done.stderr
    assert len(done.stderr.strip().splitlines()) == 1


@pytest.mark.skipif(os.name == "nt", reason="a console interrupt cannot be sent to one process there")
def test_interrupt_before_a_plan_says_so() -> None:
    with subprocess.Popen(command("--weeks", "40", scenario="big-barn"), stdout=-1, stderr=-1, text=True) as process:
        time.sleep(3.0)
        process.send_signal(signal.SIGINT)
        out, err = process.communicate(timeout=20)
    assert process.returncode in (3, 130)
    assert out == ""
    assert "Traceback" not in err


def test_the_model_can_be_saved_and_a_bad_place_is_refused(tmp_path: Path) -> None:
    file = tmp_path / "model.mps"
    done = run("--weeks", "1", "--gap", "0.5", "--save-model", str(file))
    assert done.returncode in {0, 1}, done.stderr
    assert file.read_text(encoding="ascii").endswith("ENDATA\n")
    done = run("--weeks", "1", "--save-model", str(tmp_path / "no" / "model.mps"))
    assert (done.returncode, done.stdout) == (2, "")
    assert "--save-model" in done.stderr
