"""One run of the solver: the best values so far are kept here, so that an ended search still gives a schedule."""

from __future__ import annotations

import math
import threading
import time
from dataclasses import dataclass
from typing import Any

from ortools.sat.python import cp_model

from scheduler.timetable.core.model import Model
from scheduler.timetable.core.options import Options
from scheduler.timetable.core.schedule import Status

TURN_SECONDS = 0.05
"""How often a running search is asked to stop once it should [s]."""
CLOCK_SHARE = 0.98
"""A search that took this share of its seconds is counted as ended by them [-]."""
ROUNDING = 1e-6
"""Prices are whole: a bound may be rounded up, but not for the last digits of a float."""


@dataclass
class Found:
    """What a search came to; ``values`` by index of the watched variables, empty where there is no schedule."""

    values: dict[int, int]
    objective: int
    bound: int
    status: Status
    stop: str
    seconds: float
    deterministic: float


class _Keeper(cp_model.CpSolverSolutionCallback):
    """Keeps the best values and tells of them."""

    def __init__(self, model: Model, options: Options, started: float) -> None:
        super().__init__()
        self.values: dict[int, int] = {}
        self.price = 0
        self._watched = model.watched
        self._options = options
        self._started = started

    def on_solution_callback(self) -> None:
        """Keep a better solution; the solver calls this by name."""
        self.values = {variable.index: int(self.value(variable)) for variable in self._watched}
        self.price = round(self.objective_value)
        if self._options.progress:
            elapsed = time.perf_counter() - self._started
            self._options.progress(elapsed, self.objective_value, self.best_objective_bound)


def search(model: Model, options: Options, *, linear: bool = True) -> Found:
    """Search until proven, or a limit, or a stop; Ctrl-C ends it like a stop.

    Parameters
    ----------
    linear : bool
        Whether linear relaxations help: they do for costs and do harm where only the end counts.
    """
    started = time.perf_counter()
    solver = _solver(options, linear)
    keeper = _Keeper(model, options, started)
    if options.stop is not None and options.stop.is_set():
        return Found({}, 0, 0, "unknown", "stopped", 0.0, 0.0)
    name, asked = attend(solver, model.cp, options, keeper)
    return _found(model, options, solver, name, keeper, asked, time.perf_counter() - started)


def attend(solver: Any, cp: Any, options: Options, keeper: Any = None) -> tuple[str, str]:
    """Run a solver beside this thread and ask it to stop on the stop event or on Ctrl-C.

    Returns
    -------
    tuple of str
        Name of the solver's status; and ``stopped``, ``interrupted`` or nothing.
    """
    solver.parameters.catch_sigint_signal = False
    done = threading.Event()
    result: list[Any] = []

    def work() -> None:
        try:
            result.append(solver.solve(cp, keeper))
        finally:
            done.set()

    asked = ""
    thread = threading.Thread(target=work, daemon=True)
    thread.start()
    while not done.is_set():
        try:
            done.wait(TURN_SECONDS)
        except KeyboardInterrupt:
            asked = "interrupted"
        if options.stop is not None and options.stop.is_set():
            asked = asked or "stopped"
        if asked and not done.is_set():
            solver.stop_search()
    thread.join()
    if not result:
        raise RuntimeError("the solver ended without an answer")
    return solver.status_name(result[0]), asked


def _solver(options: Options, linear: bool) -> Any:
    solver = cp_model.CpSolver()
    parameters = solver.parameters
    parameters.num_workers = options.workers
    parameters.interleave_search = options.interleave_search
    parameters.random_seed = options.seed
    parameters.max_deterministic_time = options.max_deterministic_time
    parameters.max_time_in_seconds = options.seconds
    parameters.relative_gap_limit = options.gap
    if not linear:
        parameters.linearization_level = 0
    return solver


def _found(
    model: Model, options: Options, solver: Any, name: str, keeper: _Keeper, asked: str, seconds: float
) -> Found:
    response = solver.response_proto
    work = float(response.deterministic_time)
    if name == "MODEL_INVALID":
        raise ValueError(f"the solver refuses the model: {model.cp.validate()}")
    if name == "INFEASIBLE":
        return Found({}, 0, 0, "infeasible", "infeasible", seconds, work)
    objective = keeper.price if model.cp.has_objective() else 0
    values = keeper.values
    if not values:
        return Found({}, 0, 0, "unknown", asked or _limit(options, solver), seconds, work)
    bound = math.ceil(response.best_objective_bound - ROUNDING) if model.cp.has_objective() else 0
    proven = name == "OPTIMAL" and objective <= bound
    if proven:
        stop = "optimal"
    elif name == "OPTIMAL":
        stop = "gap reached"
    else:
        stop = asked or _limit(options, solver)
    return Found(values, objective, min(objective, bound), "optimal" if proven else "feasible", stop, seconds, work)


def _limit(options: Options, solver: Any) -> str:
    """Which limit it was; searches that take turns report less work than the limit counts, so the clock decides."""
    return "time limit" if solver.wall_time >= CLOCK_SHARE * options.seconds else "deterministic limit"
