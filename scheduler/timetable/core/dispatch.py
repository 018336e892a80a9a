"""A first schedule as a foreman would make it: of all jobs that can begin, the earliest begins as early as it can."""

from __future__ import annotations

from ortools.sat.python import cp_model

from scheduler.timetable.core.model import Model
from scheduler.timetable.core.options import Options
from scheduler.timetable.core.schedule import Placed
from scheduler.timetable.core.search import attend

SHARE = 0.2
"""Of the limits of the whole search [-]."""


def dispatch(model: Model, options: Options) -> tuple[tuple[Placed, ...], str]:
    """Place the jobs in order of time, without a thought for prices.

    Returns
    -------
    tuple
        The places, empty where that does not come to an end; and ``stopped`` or ``interrupted`` if it was.
    """
    first = model.cp.clone()
    first.clear_objective()
    starts = [first.get_int_var_from_proto_index(variables.start.index) for variables in model.jobs.values()]
    first.add_decision_strategy(starts, cp_model.CHOOSE_LOWEST_MIN, cp_model.SELECT_MIN_VALUE)
    solver = cp_model.CpSolver()
    solver.parameters.num_workers = 1
    solver.parameters.random_seed = options.seed
    solver.parameters.search_branching = cp_model.FIXED_SEARCH
    solver.parameters.linearization_level = 0
    solver.parameters.max_deterministic_time = SHARE * options.max_deterministic_time
    solver.parameters.max_time_in_seconds = SHARE * options.seconds
    name, asked = attend(solver, first, options)
    if name not in {"OPTIMAL", "FEASIBLE"}:
        return (), asked
    solution = solver.response_proto.solution
    return model.placed({variable.index: solution[variable.index] for variable in model.watched}), asked
