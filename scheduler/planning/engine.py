"""The solvers behind the plan: an LP relaxation by GLOP, integers by HiGHS, both through MathOpt.

Solves run in a thread of their own, so that an interrupt from the keyboard is seen at once: HiGHS cannot be stopped
from outside, and is then left behind.
"""

from __future__ import annotations

import datetime as dt
import re
import threading
import time
from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass
from math import inf, nan
from typing import Any

import numpy as np
from numpy.typing import NDArray
from ortools.math_opt.python import mathopt

from scheduler.planning.matrix import Matrix

FloatArray = NDArray[np.float64]
BoolArray = NDArray[np.bool_]
Listener = Callable[[float, float], None]
SEED = 1

_HIGHS_LINE = re.compile(r"%\s+(?P<bound>-?[\d.]+(?:e[+-]?\d+)?|-?inf)\s+(?P<best>-?[\d.]+(?:e[+-]?\d+)?|-?inf)\s")


@dataclass(frozen=True, slots=True)
class Answer:
    """What a solve gave: column values (None if it found none), objective, proven bound, why it stopped, time [s]."""

    values: FloatArray | None
    objective: float
    bound: float
    stop: str
    seconds: float = 0.0

    @property
    def known(self) -> FloatArray:
        """The column values of a solve that found some; ArithmeticError otherwise."""
        if self.values is None:
            raise ArithmeticError(f"a solve ended without values: {self.stop}")
        return self.values


LARGE_COLUMNS = 40_000


class Dead(Exception):  # noqa: N818  (not an error of the user's: a search found no whole values)
    """A search ran into bounds that nothing satisfies."""


class Late(Dead):
    """The time is over, and there is a plan already."""


class Relaxation:
    """The linear relaxation, kept while its bounds move.

    Small models are solved by GLOP, which starts each solve from the basis of the one before; large ones by the
    interior-point method of HiGHS, which needs no start and is many times faster there.
    """

    def __init__(self, matrix: Matrix) -> None:
        low, high = np.array(matrix.column_low), np.array(matrix.column_high)
        self.large = matrix.columns > LARGE_COLUMNS
        self._model = matrix.to_model(low, high, np.zeros(matrix.columns, dtype=bool))
        self._columns = list(self._model.variables())
        self._rows = list(self._model.linear_constraints())
        self._parameters = mathopt.SolveParameters(random_seed=SEED)
        if self.large:
            self._parameters.lp_algorithm = mathopt.LPAlgorithm.BARRIER
        else:
            self._parameters.glop.use_preprocessing = False
            self._solver = mathopt.IncrementalSolver(self._model, mathopt.SolverType.GLOP)
        self.solves = 0
        self.deadline = inf

    def bound(self, column: int, low: float, high: float) -> None:
        """Set the bounds of a column."""
        self._columns[column].lower_bound = low
        self._columns[column].upper_bound = high

    def bound_row(self, row: int, low: float, high: float) -> None:
        """Set the bounds of a row."""
        self._rows[row].lower_bound = low
        self._rows[row].upper_bound = high

    def prefer(self, columns: Iterable[int], gain: float) -> None:
        """Add a slight preference to columns, to choose among plans that earn the same; bounds no longer hold after."""
        for column in columns:
            self._model.objective.set_linear_coefficient(self._columns[column], gain)

    def solve(self) -> Answer:
        """Solve to the optimum within the bounds as they are now.

        Raises
        ------
        Late
            ``deadline``, a moment of `time.perf_counter`, has passed.
        """
        if time.perf_counter() > self.deadline:
            raise Late
        self.solves += 1
        result = _in_thread(self._solve)
        if result.termination.reason != mathopt.TerminationReason.OPTIMAL:
            return Answer(None, nan, inf, result.termination.reason.name.lower())
        values = np.asarray(result.variable_values(self._columns), dtype=float)
        return Answer(values, result.objective_value(), result.objective_value(), "optimal")

    def _solve(self) -> Any:
        if not self.large:
            return self._solver.solve(params=self._parameters)
        try:
            return mathopt.solve(self._model, mathopt.SolverType.HIGHS, params=self._parameters)
        except (AttributeError, RuntimeError, ValueError):
            # The interior-point method has given up on its accuracy; the simplex method takes longer and does not.
            simplex = mathopt.SolveParameters(random_seed=SEED, lp_algorithm=mathopt.LPAlgorithm.DUAL_SIMPLEX)
            return mathopt.solve(self._model, mathopt.SolverType.GLOP, params=simplex)


def branch(
    matrix: Matrix,
    low: FloatArray,
    high: FloatArray,
    whole: BoolArray,
    *,
    gap: float,
    seconds: float,
    nodes: int,
    listener: Listener | None = None,
) -> Answer:
    """Search whole-number values of the marked columns until a relative gap, a node count or a time is reached.

    The node limit is the one meant to bind: it stops at the same place every time. The time is a safety net.
    """
    model = matrix.to_model(low, high, whole)
    parameters = mathopt.SolveParameters(
        relative_gap_tolerance=gap, time_limit=dt.timedelta(seconds=max(0.1, seconds)), random_seed=SEED
    )
    parameters.highs.int_options["mip_max_nodes"] = nodes

    def hear(lines: Sequence[str]) -> None:
        for line in lines:
            match = _HIGHS_LINE.search(line)
            if match and listener is not None:
                listener(float(match["best"]), float(match["bound"]))

    result = _in_thread(lambda: mathopt.solve(model, mathopt.SolverType.HIGHS, params=parameters, msg_cb=hear))
    bound = result.termination.objective_bounds.dual_bound
    if not result.has_primal_feasible_solution():
        return Answer(None, nan, bound, _stop_reason(result))
    return Answer(_values(result, model), result.objective_value(), bound, _stop_reason(result))


def _values(result: Any, model: mathopt.Model) -> FloatArray:
    return np.asarray(result.variable_values(list(model.variables())), dtype=float)


def _stop_reason(result: Any) -> str:
    termination = result.termination
    if termination.reason == mathopt.TerminationReason.OPTIMAL:
        return "gap reached"
    limit = termination.limit
    names = {mathopt.Limit.TIME: "time limit", mathopt.Limit.NODE: "node limit"}
    return names.get(limit, "node limit" if result.has_primal_feasible_solution() else "no plan found")


def _in_thread(solve: Callable[[], Any]) -> Any:
    outcome: dict[str, Any] = {}

    def work() -> None:
        try:
            outcome["result"] = solve()
        except Exception as error:  # noqa: BLE001  (handed to the caller's thread below)
            outcome["error"] = error

    worker = threading.Thread(target=work, daemon=True, name="solve")
    worker.start()
    while worker.is_alive():
        worker.join(0.05)
    if "error" in outcome:
        raise outcome["error"]
    return outcome["result"]
