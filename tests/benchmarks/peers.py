"""What else could make a plan: the whiteboard rule, and two solvers handed the planner's rows as they are.

- `whiteboard_plan` gives a whole plan that the referee judges like any other, so its money compares line by line.
- `highs_peer` hands all whole-number columns at once to HiGHS, by branch and cut.
- `cp_sat_peer` hands the same rows to CP-SAT through MathOpt. It knows whole numbers only: MathOpt takes continuous
  columns, but counts them in whole units unless told otherwise, and then finds no solution where an opening lot loses
  2.6 bags. Here they count in hundredths (bags, kilograms, hours), which holds whole percentages of lost bags exactly.
  As n/30 hours of mixing are no hundredths, rows of hours say "at least" for it in place of "just": hours cost money,
  so none is added. Columns without a bound end at 100,000.

Both solvers get the rows of supply and room heat that the relaxation breaks; ``broken`` counts those of the rest that
an answer passes. They count lost bags as expected fractions, where a plan loses whole ones, and so have it easier.
"""

from __future__ import annotations

import datetime as dt
import time
from dataclasses import dataclass, replace
from math import inf, isfinite

import numpy as np
from ortools.math_opt.python import mathopt

from scheduler.planning.build import build_model
from scheduler.planning.engine import SEED, branch
from scheduler.planning.problem import Problem
from scheduler.planning.seldom import SeldomRows, relax_within_all
from scheduler.planning.solve import gap_of
from scheduler.planning.whole import bounds_of
from tests.benchmarks.whiteboard import whiteboard_plan

__all__ = ["PeerAnswer", "Rows", "cp_sat_peer", "highs_peer", "whiteboard_plan"]
GAP = 0.005
MANY_NODES = 10**9
THREADS = 2
PARTS = 100.0
"""Parts of one in which CP-SAT counts continuous columns."""
MOST = 1e5
"""Bound of columns that have none, for CP-SAT."""


@dataclass(frozen=True)
class PeerAnswer:
    """What a solver made of the rows: money and bound [currency], relative gap [-], time [s], rows passed."""

    name: str
    objective: float
    bound: float
    gap: float
    seconds: float
    stop: str
    broken: int

    def line(self) -> str:
        """The answer in one line."""
        if not isfinite(self.objective):
            bound = f"{self.bound:,.0f}" if isfinite(self.bound) else "none"
            return f"{self.name}: no plan after {self.seconds:.1f} s ({self.stop}); bound {bound}"
        return (
            f"{self.name}: objective {self.objective:,.0f}, bound {self.bound:,.0f}, gap {100 * self.gap:.2f} %,"
            f" {self.seconds:.1f} s ({self.stop}), {self.broken} rows passed"
        )


class Rows:
    """The planner's rows for a problem, with those of supply and heat that its relaxation breaks."""

    def __init__(self, problem: Problem) -> None:
        self.flow = build_model(problem)
        self.seldom = SeldomRows(self.flow)
        started = time.perf_counter()
        relax_within_all(self.flow, self.seldom)
        self.relaxation_seconds = time.perf_counter() - started
        self.sale_gain = self._sale_gain()

    def answer(self, name: str, values: np.ndarray | None, bound: float, seconds: float, stop: str) -> PeerAnswer:
        """Put a solver's values down as an answer; the gap is measured as that of a plan."""
        if values is None:
            return PeerAnswer(name, -inf, bound, inf, seconds, stop, 0)
        objective = self.flow.matrix.value(values)
        gap = gap_of(bound, objective, float(self.sale_gain @ values))
        return PeerAnswer(name, objective, bound, gap, seconds, stop, len(self.seldom.broken(values)))

    def _sale_gain(self) -> np.ndarray:
        """Price of each column that serves an order [currency/kg]."""
        price = np.zeros(self.flow.matrix.columns)
        for (index, _), column in self.flow.columns.serve.items():
            price[column] = self.flow.problem.order_days[index].price
        return price


def highs_peer(rows: Rows, seconds: float) -> PeerAnswer:
    """All whole-number columns at once to HiGHS, for so many seconds [s]."""
    matrix = rows.flow.matrix
    low, high = bounds_of(matrix)
    started = time.perf_counter()
    found = branch(matrix, low, high, np.array(matrix.whole), gap=GAP, seconds=seconds, nodes=MANY_NODES)
    return rows.answer("HiGHS", found.values, found.bound, time.perf_counter() - started, found.stop)


def cp_sat_peer(rows: Rows, seconds: float) -> PeerAnswer:
    """The same rows to CP-SAT, for so many seconds [s]."""
    matrix = rows.flow.matrix
    low, high = bounds_of(matrix)
    at_least = [
        -inf if name.startswith("labour") else bound
        for (name, _), bound in zip(matrix.row_name, matrix.row_low, strict=True)
    ]
    model = replace(matrix, row_low=at_least).to_model(low, np.minimum(high, MOST), np.array(matrix.whole))
    parameters = mathopt.SolveParameters(
        time_limit=dt.timedelta(seconds=seconds), relative_gap_tolerance=GAP, threads=THREADS, random_seed=SEED
    )
    parameters.cp_sat.mip_var_scaling = PARTS
    started = time.perf_counter()
    try:
        result = mathopt.solve(model, mathopt.SolverType.CP_SAT, params=parameters)
    except Exception as error:  # noqa: BLE001  (MathOpt tells a refused model by an error of its own)
        reason = str(error.__context__ or error).partition("\n")[0]
        return rows.answer("CP-SAT", None, inf, time.perf_counter() - started, f"refused: {reason}")
    took = time.perf_counter() - started
    bound = result.termination.objective_bounds.dual_bound
    stop = result.termination.reason.name.lower()
    if not result.has_primal_feasible_solution():
        return rows.answer("CP-SAT", None, bound, took, stop)
    values = np.asarray(result.variable_values(list(model.variables())), dtype=float)
    return rows.answer("CP-SAT", values, bound, took, stop)
