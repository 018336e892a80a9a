"""Plans random farms of mixed shape and prints how near to the bound each came, and whether the referee agrees.

``python -m tests.benchmarks.random_farms [--count 30] [--first 1] [--seconds 10]`` prints a table; it judges nothing.
Each farm is planned in a process of its own, which is ended when it takes ``--patience`` (5) times its seconds. Times
are noisy on a machine that does other work.
"""

from __future__ import annotations

import argparse
import json
import subprocess
import sys
import time
from dataclasses import asdict, dataclass

from scheduler.errors import NoPlanError
from scheduler.planning import SolveLimits, plan_weeks
from scheduler.referee import referee
from tests.benchmarks.farms import FIRST_WEEK, Shape, random_farm, random_shape

HEAD = (
    ("seed", 5), ("units", 6), ("strains", 8), ("weeks", 6), ("demand", 7), ("slack", 6), ("rows", 7), ("columns", 8),
    ("gap %", 7), ("seconds", 8), ("broken", 7), ("stop", 32),
)  # fmt: skip
GOOD_GAP = 0.01


@dataclass(frozen=True)
class Outcome:
    """How the plan of one random farm came out; ``gap`` is infinite where there was none."""

    seed: int
    shape: Shape
    gap: float
    seconds: float
    broken: tuple[str, ...]
    stop: str
    rows: int = 0
    columns: int = 0

    def line(self) -> str:
        """The outcome as a row of the table."""
        shape = self.shape
        values = (
            self.seed, shape.units, shape.strains, shape.weeks, shape.demand, shape.slack, self.rows, self.columns,
            f"{100 * self.gap:.2f}", f"{self.seconds:.1f}", len(self.broken), self.stop,
        )  # fmt: skip
        return "".join(f"{value!s:>{width}}" for value, (_, width) in zip(values, HEAD, strict=True))


def measure(seed: int, seconds: float) -> Outcome:
    """Plan one random farm within so many seconds [s] and have the referee look at it."""
    shape = random_shape(seed)
    farm, orders, stock = random_farm(seed)
    started = time.perf_counter()
    try:
        plan = plan_weeks(farm, orders, stock, FIRST_WEEK, shape.weeks, limits=SolveLimits(seconds=seconds))
    except NoPlanError as error:
        return Outcome(seed, shape, float("inf"), time.perf_counter() - started, (), str(error))
    took = time.perf_counter() - started
    verdict = referee(farm, orders, stock, plan)
    broken = tuple(f"{item.rule} {item.where}: {item.found}, {item.limit}" for item in verdict.violations)
    report = plan.report
    return Outcome(seed, shape, report.gap, took, broken, report.stop, report.size["rows"], report.size["columns"])


def in_a_child(seed: int, seconds: float, patience: float) -> Outcome:
    """`measure` in a process of its own, given up after ``patience`` times the seconds."""
    command = [sys.executable, "-m", "tests.benchmarks.random_farms", "--one", str(seed), "--seconds", str(seconds)]
    try:
        done = subprocess.run(command, capture_output=True, text=True, check=True, timeout=patience * seconds + 10)
    except subprocess.TimeoutExpired as expired:
        return Outcome(seed, random_shape(seed), float("inf"), expired.timeout, (), "given up: far over its time")
    values = json.loads(done.stdout)
    return Outcome(seed, random_shape(seed), **values | {"broken": tuple(values["broken"])})


def main() -> None:
    """Print the table and its summary."""
    parser = argparse.ArgumentParser(description=__doc__, formatter_class=argparse.RawDescriptionHelpFormatter)
    parser.add_argument("--count", type=int, default=30, help="how many farms")
    parser.add_argument("--first", type=int, default=1, help="seed of the first farm")
    parser.add_argument("--seconds", type=float, default=10.0, help="time a plan may take [s]")
    parser.add_argument("--patience", type=float, default=5.0, help="times the seconds after which it is given up")
    parser.add_argument("--one", type=int, help="plan the farm of this seed only and print the outcome as JSON")
    asked = parser.parse_args()
    if asked.one is not None:
        outcome = asdict(measure(asked.one, asked.seconds))
        print(json.dumps({key: value for key, value in outcome.items() if key not in ("seed", "shape")}))
        return
    print("".join(f"{name:>{width}}" for name, width in HEAD))
    outcomes = []
    for seed in range(asked.first, asked.first + asked.count):
        outcomes.append(in_a_child(seed, asked.seconds, asked.patience))
        print(outcomes[-1].line(), flush=True)
        for text in outcomes[-1].broken[:5]:
            print(f"      broken: {text}")
    good = sum(item.gap <= GOOD_GAP for item in outcomes)
    none = sum(item.gap == float("inf") for item in outcomes)
    broken = sum(bool(item.broken) for item in outcomes)
    print(f"{good} of {len(outcomes)} within {100 * GOOD_GAP:g} %; {none} without a plan; {broken} with a broken rule")
    print(f"seconds: median {sorted(item.seconds for item in outcomes)[len(outcomes) // 2]:.1f}", end=", ")
    print(f"most {max(item.seconds for item in outcomes):.1f}")


if __name__ == "__main__":
    main()
