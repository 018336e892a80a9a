"""A schedule to begin with: every variable is worked out from it first, for a hint with holes is lost easily."""

from __future__ import annotations

from ortools.sat.python import cp_model

from scheduler.timetable.core.model import Model
from scheduler.timetable.core.options import Options
from scheduler.timetable.core.schedule import Placed


def hint(model: Model, placed: tuple[Placed, ...], options: Options) -> bool:
    """Hint every variable of the model from a schedule; False, and no hint, where the schedule does not fit it."""
    model.cp.clear_hints()
    for part in placed:
        variables = model.jobs[part.job]
        model.cp.add_hint(variables.start, part.start)
        for choice, literal in zip(variables.choices, variables.taken, strict=True):
            if literal is not None:
                here = any(low <= part.start <= high for low, high in choice.starts)
                same = choice.mode == part.mode and choice.elapsed == part.end - part.start
                pieces = choice.pieces(part.start) == part.pieces
                model.cp.add_hint(literal, int(here and same and pieces))
    solver = cp_model.CpSolver()
    solver.parameters.num_workers = 1
    solver.parameters.random_seed = options.seed
    solver.parameters.fix_variables_to_their_hinted_value = True
    solver.parameters.max_deterministic_time = options.max_deterministic_time
    solver.parameters.max_time_in_seconds = options.seconds
    status = solver.status_name(solver.solve(model.cp))
    model.cp.clear_hints()
    if status not in {"OPTIMAL", "FEASIBLE"}:
        return False
    values = list(solver.response_proto.solution)
    for index, value in enumerate(values):
        model.cp.add_hint(model.cp.get_int_var_from_proto_index(index), value)
    return True
