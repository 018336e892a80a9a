"""From a problem to a schedule; and where hard rules leave none, to one that breaks soft rules as little as can be."""

from __future__ import annotations

import time
from dataclasses import replace

from scheduler.timetable.core.breaches import breaches_of
from scheduler.timetable.core.capacity import add_resources
from scheduler.timetable.core.check import check
from scheduler.timetable.core.dispatch import dispatch
from scheduler.timetable.core.hints import hint
from scheduler.timetable.core.model import Expression, Model
from scheduler.timetable.core.objective import objective
from scheduler.timetable.core.options import Options
from scheduler.timetable.core.price import floor_of, terms_of
from scheduler.timetable.core.problem import Problem
from scheduler.timetable.core.schedule import Schedule, Status, gap_of
from scheduler.timetable.core.search import Found, search
from scheduler.timetable.core.units import name_units


def solve(problem: Problem, options: Options | None = None) -> Schedule:
    """Find the schedule of lowest price that keeps every rule.

    Parameters
    ----------
    options : Options, optional
        Limits, seed and who is told.

    Returns
    -------
    Schedule
        With status ``infeasible`` where no schedule keeps every rule; ``unknown`` where a limit came first.
    """
    options = options or Options()
    started = time.perf_counter()
    model, price = _model(problem, relaxed=False)
    if model.impossible:
        return _without("infeasible", started, options)
    model.cp.minimize(price)
    known, asked = _known(problem, options), ""
    if not known and not (options.stop and options.stop.is_set()):
        known, asked = _dispatched(problem, model, options)
    if known:
        hint(model, known.placed, options)
    if asked:
        found = Found({}, 0, 0, "unknown", asked, time.perf_counter() - started, 0.0)
        return _kept(known, found, options) if known else _without("unknown", started, options, asked)
    found = search(model, options, linear=not problem.makespan_only)
    if known and found.status != "infeasible" and (not found.values or known.objective < found.objective):
        return _kept(known, found, options)
    if not found.values:
        return _without(found.status, started, options, found.stop, found.deterministic)
    return _schedule(problem, model, found, options, started)


def solve_or_name(problem: Problem, options: Options | None = None) -> Schedule:
    """Find the best schedule; where none keeps every rule, break soft rules for the lowest price and name them.

    First as `solve`. Where that gives no schedule, the price of broken soft rules is made as low as it can be, and
    then, with no more broken than that, the price of the schedule. Soft are lags with a ``most_price``, windows with
    ``overtime`` and resources with ``extra`` units.

    Returns
    -------
    Schedule
        With its ``breaches``; status ``infeasible`` only where rules that are not soft leave no schedule.
    """
    options = options or Options()
    started = time.perf_counter()
    first = solve(problem, options)
    if first.placed or first.stop in {"stopped", "interrupted"}:
        return first
    model, price = _model(problem, relaxed=True)
    if model.impossible or not model.slack:
        return replace(first, seconds=time.perf_counter() - started)
    slack = sum(model.slack)
    model.cp.minimize(slack)
    least = search(model, replace(options, gap=0.0, progress=None))
    if not least.values:
        return _without(least.status, started, options, least.stop, first.deterministic + least.deterministic)
    work = first.deterministic + least.deterministic
    model.cp.add(slack <= least.objective)
    model.cp.minimize(price)
    hint(model, model.placed(least.values), options)
    found = search(model, options)
    if not found.values:
        found = _priced(problem, model, least, found)
    found.deterministic += work
    named = _schedule(problem, model, found, options, started)
    return replace(named, breaches=breaches_of(problem, named.placed), breach_bound=least.bound)


def breach_price(schedule: Schedule) -> int:
    """Price of the soft rules that a schedule breaks."""
    return sum(breach.price for breach in schedule.breaches)


def _model(problem: Problem, *, relaxed: bool) -> tuple[Model, Expression]:
    model = Model(problem, relaxed)
    if model.impossible:
        return model, 0
    add_resources(model)
    return model, objective(model)


def _known(problem: Problem, options: Options) -> Schedule | None:
    """The schedule to begin with, if it keeps every rule of this problem."""
    known = options.start_from
    if known is None or not known.placed or known.breaches:
        return None
    terms = terms_of(problem, known.placed) if {p.job for p in known.placed} == {j.name for j in problem.jobs} else {}
    price = sum(terms.values())
    fresh = replace(known, terms=terms, objective=price, bound=floor_of(problem), status="feasible")
    return fresh if terms and not check(problem, fresh) else None


def _dispatched(problem: Problem, model: Model, options: Options) -> tuple[Schedule | None, str]:
    """A first schedule without a thought for prices, and whether someone ended its making."""
    placed, asked = dispatch(model, options)
    if not placed:
        return None, asked
    terms = terms_of(problem, placed)
    placed, held = name_units(problem, placed)
    return Schedule(placed, sum(terms.values()), floor_of(problem), 0.0, "feasible", "", held=held, terms=terms), asked


def _priced(problem: Problem, model: Model, least: Found, last: Found) -> Found:
    """The schedule of the first step, with its price, where the second found none."""
    price = sum(terms_of(problem, model.placed(least.values)).values())
    return replace(last, values=least.values, objective=price, bound=floor_of(problem), status="feasible")


def _schedule(problem: Problem, model: Model, found: Found, options: Options, started: float) -> Schedule:
    """The schedule of the values found; its price from its places, for the solver's may have slack in it."""
    placed, held = name_units(problem, model.placed(found.values))
    terms = terms_of(problem, placed)
    price = sum(terms.values())
    proven = found.status == "optimal" or price <= found.bound
    return Schedule(
        placed=placed,
        objective=price,
        bound=min(price, found.bound),
        gap=gap_of(price, found.bound),
        status="optimal" if proven else "feasible",
        stop="optimal" if proven else found.stop,
        held=held,
        terms=terms,
        seconds=time.perf_counter() - started,
        deterministic=found.deterministic,
        seed=options.seed,
    )


def _kept(known: Schedule, found: Found, options: Options) -> Schedule:
    """The schedule that the search began with, where it found none that is better."""
    bound = max(found.bound, known.bound) if found.values else known.bound
    return replace(
        known, bound=bound, gap=gap_of(known.objective, bound), seed=options.seed, stop=found.stop,
        seconds=found.seconds, deterministic=found.deterministic,
    )  # fmt: skip


def _without(status: Status, started: float, options: Options, stop: str = "", work: float = 0.0) -> Schedule:
    return Schedule(
        (), 0, 0, 0.0, status, stop or status,
        seconds=time.perf_counter() - started, deterministic=work, seed=options.seed,
    )  # fmt: skip
