"""Records what the scenarios must give: ``python -m tests.scenarios.record`` renews ``scenarios/*/expected/``."""

from __future__ import annotations

import json
import subprocess
import sys
from pathlib import Path
from typing import Any

SCENARIOS = Path(__file__).parents[2] / "scenarios"
RECORDED = ("one-drum", "family", "slow-and-fast")
KEPT = (
    "schema",
    "farm",
    "first_week",
    "look_ahead_weeks",
    "weeks",
    "money",
    "money_weeks",
    "objective",
    "bound",
    "gap",
)
PLAN = ("--from", "2027-W02", "--weeks", "16")
TEXTS = {"check.txt": ("check",), "heat.txt": ("heat", "--month", "1")}


def answer(scenario: str, command: str, *options: str) -> str:
    """What a command prints for a scenario."""
    call = [sys.executable, "-m", "scheduler.cli.main", command, "--farm", str(SCENARIOS / scenario), *options]
    done = subprocess.run(call, capture_output=True, text=True, encoding="utf-8", check=False)
    assert done.returncode in (0, 1), done.stderr
    return done.stdout


def plan_of(scenario: str) -> dict[str, Any]:
    """The parts of a scenario's plan that are recorded."""
    document = json.loads(answer(scenario, "plan", *PLAN, "--json"))
    assert document["referee"]["violations"] == []
    return {key: document[key] for key in KEPT}


def main() -> None:
    """Write the recordings anew."""
    for scenario in RECORDED:
        folder = SCENARIOS / scenario / "expected"
        folder.mkdir(exist_ok=True)
        for name, (command, *options) in TEXTS.items():
            (folder / name).write_text(answer(scenario, command, *options), encoding="utf-8")
        text = json.dumps(plan_of(scenario), indent=1, ensure_ascii=False) + "\n"
        (folder / "plan.json").write_text(text, encoding="utf-8")


if __name__ == "__main__":
    main()
