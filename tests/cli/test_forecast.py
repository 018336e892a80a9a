"""``bagweek forecast`` and ``bagweek plan --sure`` as a user meets them."""

from __future__ import annotations

import json
import subprocess
import sys
from functools import lru_cache
from pathlib import Path

import pytest

FARM = Path(__file__).parents[2] / "scenarios" / "one-drum"
SPAN = ("--from", "2027-W02", "--weeks", "6", "--gap", "0.02", "--seconds", "20")


@lru_cache(maxsize=8)
def run(command: str, *options: str) -> subprocess.CompletedProcess[str]:
    words = [sys.executable, "-m", "scheduler.cli.main", command, "--farm", str(FARM), *SPAN, *options]
    return subprocess.run(words, capture_output=True, text=True, encoding="utf-8", check=False)


def test_document() -> None:
    document = json.loads(run("forecast", "--json", "--draws", "2000").stdout)
    assert document["schema"] == "bagweek/forecast/1"
    assert (document["draws"], document["seed"]) == (2000, 1)
    assert document["weeks"]
    for row in document["weeks"]:
        assert row["p10"] <= row["p50"] <= row["p90"]
        assert row.keys() >= {"week", "strain", "mean", "planned", "ordered"}
    assert all(0 <= order["chance_filled"] <= 1 for order in document["orders"])
    assert [order["day"] for order in document["orders"]] == sorted(order["day"] for order in document["orders"])
    assert set(document["helps_from"]) == {"OYS", "LIO"}


def test_screen_fits_and_names_what_helps() -> None:
    done = run("forecast", "--draws", "2000")
    assert done.returncode in {0, 1}
    assert max(len(line) for line in done.stdout.splitlines()) <= 80
    assert "\x1b" not in done.stdout
    text = " ".join(done.stdout.split())
    assert all(words in text for words in ("kg picked a week", "Chance that each order is filled", "2,000 seasons"))


def test_a_sure_plan_is_surer_and_says_what_it_costs() -> None:
    document = json.loads(run("plan", "--sure", "0.85", "--json").stdout)
    sure = document["sure"]
    assert document["referee"]["violations"] == []
    before = sum(max(0.0, 0.85 - order["chance_before"]) for order in sure["orders"])
    after = sum(max(0.0, 0.85 - order["chance_filled"]) for order in sure["orders"])
    assert after <= before
    assert sure["unreachable"] == sum(order["chance_filled"] < 0.85 for order in sure["orders"])
    assert 1 <= sure["rounds"] <= 10
    if sure["margins"]:
        assert after < before
        assert sure["cost"] > 0


@pytest.mark.parametrize(
    ("command", "options", "words"),
    [
        ("forecast", ("--draws", "20"), ["--draws", "100"]),
        ("forecast", ("--seed", "-1"), ["--seed"]),
        ("forecast", ("--from", "2027-W60"), ["--from", "W60"]),
        ("plan", ("--sure", "1"), ["--sure", "below 1"]),
        ("plan", ("--sure", "90%"), ["--sure", "number"]),
    ],
)
def test_bad_input_is_one_sentence(command: str, options: tuple[str, ...], words: list[str]) -> None:
    done = run(command, *options)
    assert (done.returncode, done.stdout) == (2, "")
    assert all(word in done.stderr for word in words), done.stderr
    assert "Traceback" not in done.stderr
    assert len(done.stderr.strip().splitlines()) == 1
