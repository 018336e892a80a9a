"""Jobs, lags and resources in; a schedule out. It knows nothing of what the jobs are.

Time is counted in slots from 0. `solve` finds the schedule of lowest price that keeps every rule; where there is none,
`solve_or_name` breaks soft rules as little as can be and names them; `check` recomputes all of it without a solver.
"""

from scheduler.timetable.core.check import check
from scheduler.timetable.core.hold import Hold
from scheduler.timetable.core.job import Demand, Job, Mode
from scheduler.timetable.core.lag import Lag
from scheduler.timetable.core.options import Options
from scheduler.timetable.core.problem import Evenness, Problem
from scheduler.timetable.core.resource import Resource, Stretch
from scheduler.timetable.core.schedule import Breach, Held, Placed, Schedule
from scheduler.timetable.core.solve import breach_price, solve, solve_or_name

__all__ = [
    "Breach",
    "Demand",
    "Evenness",
    "Held",
    "Hold",
    "Job",
    "Lag",
    "Mode",
    "Options",
    "Placed",
    "Problem",
    "Resource",
    "Schedule",
    "Stretch",
    "breach_price",
    "check",
    "solve",
    "solve_or_name",
]
