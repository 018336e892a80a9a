"""Times of planning the scenarios, beside the time of one LP relaxation in the same run.

``python -m tests.benchmarks.plan_times [SCENARIO ...]`` prints a table; it judges nothing.
"""

from __future__ import annotations

import json
import resource
import subprocess
import sys
import time
from pathlib import Path

SCENARIOS = Path(__file__).parents[2] / "scenarios"
WEEKS = {"one-drum": 16, "family": 16, "slow-and-fast": 16, "big-barn": 52}
HEAD = ("scenario", "weeks", "rows", "columns", "LP s", "plan s", "ratio", "objective", "bound", "gap %", "MB")
MAIN = [sys.executable, "-m", "scheduler.cli.main"]


def measure(scenario: str, weeks: int) -> tuple[str, ...]:
    """One row: a plan in a process of its own."""
    place = ["--farm", str(SCENARIOS / scenario), "--from", "2027-W02", "--weeks", str(weeks)]
    done = subprocess.run([*MAIN, "plan", *place, "--json"], capture_output=True, text=True, check=False)
    plan = json.loads(done.stdout)
    relaxation, seconds = plan["relaxation_seconds"], plan["seconds"]
    memory = resource.getrusage(resource.RUSAGE_CHILDREN).ru_maxrss / 1024
    return (
        scenario,
        str(weeks),
        str(plan["size"]["rows"]),
        str(plan["size"]["columns"]),
        f"{relaxation:.1f}",
        f"{seconds:.1f}",
        f"{seconds / max(relaxation, 0.01):.1f}",
        f"{plan['objective']:,.0f}",
        f"{plan['bound']:,.0f}",
        f"{100 * plan['gap']:.2f}",
        f"{memory:,.0f}",
    )


def help_seconds() -> float:
    """The quickest of five starts of ``--help`` [s]."""
    times = []
    for _ in range(5):
        started = time.perf_counter()
        subprocess.run([*MAIN, "--help"], capture_output=True, check=True)
        times.append(time.perf_counter() - started)
    return min(times)


def main() -> None:
    """Print the table; memory is the largest process so far."""
    widths = (14, 6, 8, 8, 7, 7, 6, 12, 12, 6, 7)
    print("".join(f"{name:>{width}}" for name, width in zip(HEAD, widths, strict=True)))
    for scenario in sys.argv[1:] or WEEKS:
        row = measure(scenario, WEEKS[scenario])
        print("".join(f"{value:>{width}}" for value, width in zip(row, widths, strict=True)), flush=True)
    print(f"--help: {help_seconds():.2f} s")


if __name__ == "__main__":
    main()
