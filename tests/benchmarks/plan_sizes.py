"""Plans invented farms of growing size, beside the time of one LP relaxation and beside what else could plan them.

``python -m tests.benchmarks.plan_sizes [--sizes small,medium] [--peers] [--seconds 60]`` prints one table, with
``--peers`` the money of each peer below it, and how the cost grows with the size. It judges nothing. Each size has a
process of its own, whose peak memory is read before the peers start. Times are noisy on a machine that does other work:
the ratio of plan to relaxation, both of one run, says more than either.
"""

from __future__ import annotations

import argparse
import json
import resource
import subprocess
import sys
import time
from typing import Any

import numpy as np

from models.plan import MONEY_LINES, Account
from scheduler.planning import SolveLimits, plan_weeks
from scheduler.planning.problem import state_problem
from scheduler.referee import referee
from tests.benchmarks.farms import FIRST_WEEK, SHAPES, farm_of, weeks_of

HEAD = (
    ("size", 8), ("rows", 9), ("columns", 9), ("LP s", 8), ("plan s", 8), ("ratio", 7), ("objective", 12),
    ("bound", 12), ("gap %", 7), ("broken", 7), ("MB", 7), ("stop", 26),
)  # fmt: skip
DEFAULT_SIZES = "small,medium"


def measure(size: str, seconds: float, *, peers: bool) -> dict[str, Any]:
    """Plan one size in this process; the measured values by name."""
    farm, orders, stock = farm_of(size)
    weeks = weeks_of(size)
    started = time.perf_counter()
    plan = plan_weeks(farm, orders, stock, FIRST_WEEK, weeks, limits=SolveLimits(seconds=seconds))
    took = time.perf_counter() - started
    memory = resource.getrusage(resource.RUSAGE_SELF).ru_maxrss / 1024
    report = plan.report
    found: dict[str, Any] = {
        "size": size, "rows": report.size["rows"], "columns": report.size["columns"],
        "relaxation": report.relaxation_seconds, "solve": report.seconds, "whole": took,
        "objective": report.objective, "bound": report.bound, "gap": report.gap, "stop": report.stop,
        "megabytes": memory, "broken": len(referee(farm, orders, stock, plan).violations),
        "plan": _lines(plan.money), "peers": [],
    }  # fmt: skip
    if peers:
        found |= _beside(size, seconds)
    return found


def _beside(size: str, seconds: float) -> dict[str, Any]:
    """Money, time and verdict of the whiteboard, and what HiGHS and CP-SAT say."""
    from tests.benchmarks.peers import Rows, cp_sat_peer, highs_peer, whiteboard_plan  # noqa: PLC0415  (memory)

    farm, orders, stock = farm_of(size)
    started = time.perf_counter()
    board = whiteboard_plan(farm, orders, stock, FIRST_WEEK, weeks_of(size))
    took = time.perf_counter() - started
    rows = Rows(state_problem(farm, orders, stock, FIRST_WEEK, weeks_of(size)))
    return {
        "whiteboard": _lines(board.money),
        "whiteboard_seconds": took,
        "whiteboard_broken": len(referee(farm, orders, stock, board).violations),
        "peers": [peer(rows, seconds).line() for peer in (highs_peer, cp_sat_peer)],
    }


def _lines(money: Account) -> dict[str, float]:
    return {line: getattr(money, line) for line in MONEY_LINES} | {"total": money.total}


def in_a_child(size: str, seconds: float, *, peers: bool) -> dict[str, Any] | None:
    """`measure` in a process of its own; None, with the reason printed, where it came to nothing."""
    command = [sys.executable, "-m", "tests.benchmarks.plan_sizes", "--one", size, "--seconds", str(seconds)]
    done = subprocess.run([*command, *(["--peers"] if peers else [])], capture_output=True, text=True, check=False)
    if done.returncode:
        print(f"{size}: no plan: {done.stderr.strip().splitlines()[-1:]}", flush=True)
        return None
    return json.loads(done.stdout)


def row_of(found: dict[str, Any]) -> str:
    """One row of the table."""
    values = (
        found["size"], f"{found['rows']:,}", f"{found['columns']:,}", f"{found['relaxation']:.2f}",
        f"{found['solve']:.1f}", f"{found['solve'] / max(0.01, found['relaxation']):.1f}",
        f"{found['objective']:,.0f}", f"{found['bound']:,.0f}", f"{100 * found['gap']:.2f}", found["broken"],
        f"{found['megabytes']:,.0f}", found["stop"],
    )  # fmt: skip
    return "".join(f"{value!s:>{width}}" for value, (_, width) in zip(values, HEAD, strict=True))


def print_peers(found: dict[str, Any]) -> None:
    """Money of plan and whiteboard line by line, and the solvers' answers."""
    plan, board = found["plan"], found["whiteboard"]
    print(f"\n{found['size']}: plan beside the whiteboard ({found['whiteboard_broken']} rules broken)")
    print(f"{'':>12}{'plan':>14}{'whiteboard':>14}{'difference':>14}")
    for line in (*MONEY_LINES, "total"):
        print(f"{line:>12}{plan[line]:>14,.0f}{board[line]:>14,.0f}{plan[line] - board[line]:>14,.0f}")
    more = 100 * (plan["total"] - board["total"]) / abs(board["total"])
    print(f"{'seconds':>12}{found['whole']:>14.1f}{found['whiteboard_seconds']:>14.1f}  (model building included)")
    print(f"the plan earns {more:.1f} % more than the whiteboard")
    for line in found["peers"]:
        print(line)


def growth(table: list[dict[str, Any]]) -> None:
    """Print how time and memory grow with the columns: the slope of a line through their logarithms."""
    if len(table) < 2:
        return
    columns = np.log([item["columns"] for item in table])
    print()
    for name, key in (("relaxation time", "relaxation"), ("plan time", "solve"), ("peak memory", "megabytes")):
        slope = np.polyfit(columns, np.log([max(1e-3, item[key]) for item in table]), 1)[0]
        print(f"{name} grows with columns to the power {slope:.2f}")


def main() -> None:
    """Print the table, the peers and the growth."""
    parser = argparse.ArgumentParser(description=__doc__, formatter_class=argparse.RawDescriptionHelpFormatter)
    parser.add_argument("--sizes", default=DEFAULT_SIZES, help=f"of {', '.join(SHAPES)}; default {DEFAULT_SIZES}")
    parser.add_argument("--seconds", type=float, default=60.0, help="time for each plan and each solver [s]")
    parser.add_argument("--peers", action="store_true", help="also the whiteboard, HiGHS and CP-SAT")
    parser.add_argument("--one", choices=SHAPES, help="measure this size only and print it as JSON")
    asked = parser.parse_args()
    if asked.one:
        print(json.dumps(measure(asked.one, asked.seconds, peers=asked.peers)))
        return
    print("".join(f"{name:>{width}}" for name, width in HEAD))
    table = []
    for size in asked.sizes.split(","):
        found = in_a_child(size, asked.seconds, peers=asked.peers)
        if found is not None:
            table.append(found)
            print(row_of(found), flush=True)
    for found in table if asked.peers else ():
        print_peers(found)
    growth(table)


if __name__ == "__main__":
    main()
