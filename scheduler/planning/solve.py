"""From a farm folder's content to a plan: relax, dive to whole runs, make bags whole, improve until the gap is met."""

from __future__ import annotations

import time
from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass, replace
from importlib.metadata import version

import numpy as np

from models.calendar import Week
from models.farm import Farm, Order, StockLot
from models.plan import Margin, Plan, SolveReport
from scheduler.errors import NoPlanError
from scheduler.planning.account import account_of, hours_of, picked_openings, shortfalls_of
from scheduler.planning.bold import bold_plan
from scheduler.planning.build import build_model
from scheduler.planning.dive import Style, dive
from scheduler.planning.engine import SEED, Answer, Dead, FloatArray, Relaxation, branch
from scheduler.planning.lots import Made, make_lots
from scheduler.planning.problem import Problem, state_problem
from scheduler.planning.rooms import House
from scheduler.planning.seldom import Key, SeldomRows, relax_within_all
from scheduler.planning.sold import deliveries_of, surplus_of
from scheduler.planning.whole import bounds_of, fix, open_bags, run_candidates, whole_bags

Progress = Callable[[str, float | None, float | None, float | None], None]
STYLES = (
    Style(10, sparse=True, bold=True), Style(10, sparse=True), Style(3, sparse=True), Style(5, sparse=True),
    Style(7, sparse=True), Style(14, sparse=True),
)  # fmt: skip
"""How small and middling farms are dived, one after the other, until the gap is met."""
RESERVES = (1.0, 2.0, 4.0)
WAIT_COST = 2e-3
"""Slight price of a cooled bag that waits another day: of plans that earn the same, the sooner one is chosen."""
ROW_ROUNDS = 12
EXACT_COLUMNS = 900
EXACT_NODES = 20_000
RUN_NODES = 400


@dataclass(frozen=True, slots=True)
class SolveLimits:
    """When to stop: relative gap [-] and wall time [s]."""

    gap: float = 0.005
    seconds: float = 60.0


@dataclass
class _Search:
    """The best plan so far and what is proven about it."""

    bound: float
    plan: Plan | None = None
    stop: str = "gap reached"

    @property
    def gap(self) -> float:
        return float("inf") if self.plan is None else gap_of(self.bound, self.plan.money.total, self.plan.money.sales)


def gap_of(bound: float, objective: float, sales: float) -> float:
    """Relative gap (bound - objective) / max(abs(bound), sales), 0 where nothing is at stake [-]."""
    scale = max(abs(bound), sales)
    return max(0.0, bound - objective) / scale if scale > 0 else 0.0


class Planner:
    """One planning problem on its way to a plan."""

    def __init__(self, problem: Problem, limits: SolveLimits, progress: Progress | None) -> None:
        self.problem = problem
        self.limits = limits
        self.started = time.perf_counter()
        self._progress = progress
        self.relaxation_seconds = 0.0
        self._tell("building the model", None)
        self.flow = build_model(problem)
        self.seldom = SeldomRows(self.flow)

    def run(self) -> Plan:
        """Search until the gap is met or the time is over; the best plan found."""
        search = _Search(bound=float("inf"))
        try:
            self._search(search)
        except KeyboardInterrupt:
            search.stop = "interrupted"
        if search.plan is None:
            raise NoPlanError(f"no plan was found before the search ended ({search.stop}); allow more --seconds")
        return self._signed(search)

    def _search(self, search: _Search) -> None:
        relaxation, base = self._relaxed(search)
        self.relaxation_seconds = base.seconds / max(1, relaxation.solves)
        if relaxation.large:
            self._round_boldly(search, relaxation, base)
        else:
            self._try_styles(search, relaxation, base)
        if search.plan is None:
            self._without_runs(search)

    def _relaxed(self, search: _Search) -> tuple[Relaxation, Answer]:
        """The relaxation within every row there is; it may only lower the bound."""
        started = time.perf_counter()
        self._tell("solving the relaxation", search)
        relaxation, answer = relax_within_all(self.flow, self.seldom)
        search.bound = min(search.bound, answer.objective)
        return relaxation, replace(answer, seconds=time.perf_counter() - started)

    def _try_styles(self, search: _Search, relaxation: Relaxation, base: Answer) -> None:
        """Small farms: dive in one style after the other until the gap is met."""
        for number, style in enumerate(STYLES):
            for _ in range(ROW_ROUNDS):
                broken = self._dive(search, self._fresh(relaxation), base, style)
                if not broken or (self._time_left() <= 0 and search.plan is not None):
                    break
                self.seldom.add(broken)
                relaxation, base = self._relaxed(search)
            if search.gap <= self.limits.gap:
                return
            if self._time_left() <= 0 and search.plan is not None:
                search.stop = "time limit"
                return
            if number == 0 and sum(self.flow.matrix.whole) <= EXACT_COLUMNS:
                self._exact(search, self._fresh(relaxation))
                if search.gap <= self.limits.gap:
                    return
        search.stop = "every search style tried"
        self._branch_on_runs(search, self._fresh(relaxation))

    def _branch_on_runs(self, search: _Search, relaxation: Relaxation) -> None:
        """Where diving leaves a gap: search whole runs with bags in parts, then make those bags whole."""
        matrix = self.flow.matrix
        low, high = bounds_of(matrix)
        whole = np.zeros(matrix.columns, dtype=bool)
        whole[self.flow.columns.run] = True
        self._tell("searching runs", search)
        found = branch(
            matrix, low, high, whole, gap=self.limits.gap / 4, seconds=self._time_left(), nodes=RUN_NODES,
            listener=lambda _, bound: self._tell("searching runs", search, bound),
        )  # fmt: skip
        search.bound = min(search.bound, found.bound)
        if search.gap <= self.limits.gap:
            search.stop = "gap reached"
        if found.values is None or self.seldom.broken(found.values):
            return
        runs = {column: float(round(found.values[column])) for column in self.flow.columns.run}
        fix(relaxation, low, high, runs)
        try:
            answer, made = whole_bags(self.flow, relaxation, relaxation.solve(), low, high)
        except Dead:
            return
        if self.seldom.broken(answer.known):
            return
        self._offer(search, answer.known, made)
        search.stop = "gap reached" if search.gap <= self.limits.gap else f"runs searched: {found.stop}"

    def _time_left(self) -> float:
        return self.limits.seconds - (time.perf_counter() - self.started)

    def _fresh(self, relaxation: Relaxation) -> Relaxation:
        """The relaxation with all bounds as at the start; from here on it only guides, the bound is known."""
        matrix = self.flow.matrix
        for column in range(matrix.columns):
            relaxation.bound(column, matrix.column_low[column], matrix.column_high[column])
        for row in range(matrix.rows):
            relaxation.bound_row(row, matrix.row_low[row], matrix.row_high[row])
        relaxation.prefer(self.flow.columns.cooled.values(), -WAIT_COST)
        return relaxation

    def _dive(self, search: _Search, relaxation: Relaxation, base: Answer, style: Style) -> list[Key]:
        """Dive to whole runs and bags; the limits without a row that it breaks, if it does."""
        low, high = bounds_of(self.flow.matrix)
        if search.plan is not None:
            relaxation.deadline = self.started + self.limits.seconds
        try:
            self._tell("choosing runs", search)
            answer = dive(relaxation, base, run_candidates(self.flow), style, low, high)
            broken = self.seldom.broken(answer.known)
            if broken:
                return broken
            self._tell("making bags whole", search)
            answer, made = whole_bags(self.flow, relaxation, answer, low, high, bold=style.bold)
        except Dead:
            return []
        broken = self.seldom.broken(answer.known)
        if not broken:
            self._offer(search, answer.known, made)
        return broken

    def _round_boldly(self, search: _Search, relaxation: Relaxation, base: Answer) -> None:
        """Large farms: one rounding a stage, with more kept back where it failed."""
        reserves = list(RESERVES)
        for _ in range(ROW_ROUNDS):
            if not reserves:
                return
            low, high = bounds_of(self.flow.matrix)
            self._tell("rounding runs and bags", search)
            try:
                answer, made = bold_plan(self.flow, self._fresh(relaxation), base.known, low, high, reserves[0])
            except Dead:
                search.stop = "rounding found no plan"
                reserves.pop(0)
                continue
            broken = self.seldom.broken(answer.known)
            if not broken:
                self._offer(search, answer.known, made)
                search.stop = "gap reached" if search.gap <= self.limits.gap else "one rounding done"
                return
            self.seldom.add(broken)
            relaxation, base = self._relaxed(search)

    def _without_runs(self, search: _Search) -> None:
        """The plan that steams nothing: what already stands in the rooms is opened and sold."""
        for _ in range(ROW_ROUNDS):
            relaxation = Relaxation(self.flow.matrix)
            low, high = bounds_of(self.flow.matrix)
            fix(relaxation, low, high, dict.fromkeys(self.flow.columns.run, 0.0))
            try:
                answer, made = whole_bags(self.flow, relaxation, relaxation.solve(), low, high)
            except Dead:
                return
            broken = self.seldom.broken(answer.known)
            if not broken:
                search.stop = "no plan with runs found"
                self._offer(search, answer.known, made)
                return
            self.seldom.add(broken)

    def _exact(self, search: _Search, relaxation: Relaxation) -> None:
        """On small farms, search all whole numbers at once; it also lowers the bound."""
        matrix = self.flow.matrix
        low, high = bounds_of(matrix)
        found = branch(
            matrix, low, high, np.array(matrix.whole), gap=min(self.limits.gap, 1e-4), seconds=self._time_left(),
            nodes=EXACT_NODES, listener=lambda _, bound: self._tell("searching whole numbers", search, bound),
        )  # fmt: skip
        search.bound = min(search.bound, found.bound)
        if found.values is None or self.seldom.broken(found.values):
            return
        made = make_lots(self.flow, found.values)
        if not any(batch.loss_pct for batch in made.batches):
            self._offer(search, found.values, made)
            return
        # Losses are whole bags: the openings are decided again with them.
        made_columns = [*self.flow.columns.run, *self.flow.columns.fill.values(), *self.flow.columns.inoculate.values()]
        fix(relaxation, low, high, {column: float(round(found.values[column])) for column in made_columns})
        try:
            answer = open_bags(self.flow, made, relaxation, low, high)
        except Dead:
            return
        self._offer(search, answer.known, made)

    def _offer(self, search: _Search, values: FloatArray, made: Made) -> None:
        plan = self._plan(values, made)
        if search.plan is None or plan.money.total > search.plan.money.total + 1e-9:
            search.plan = plan
        self._tell("plan found", search)

    def _plan(self, values: FloatArray, made: Made) -> Plan:
        flow, problem = self.flow, self.problem
        housed = House(flow, values, made).run()
        lot_strain = {lot.code: lot.strain for lot in made.lots}
        openings = picked_openings(flow, values, housed, lot_strain)
        deliveries, surplus = deliveries_of(flow, values), surplus_of(flow, values)
        labour, shortfalls = hours_of(flow, values), shortfalls_of(flow, values, housed)
        money = account_of(
            problem.farm, flow, made.runs, housed.inoculations, openings, deliveries, surplus, labour, shortfalls,
            lot_strain,
        )  # fmt: skip
        return Plan(
            first_week=problem.first_week,
            weeks=problem.weeks,
            look_ahead_weeks=problem.look_ahead_weeks,
            runs=tuple(made.runs),
            lots=tuple(made.lots),
            inoculations=tuple(housed.inoculations),
            holdings=tuple(housed.holdings),
            openings=openings,
            discards=tuple(housed.discards),
            deliveries=deliveries,
            surplus=surplus,
            labour=labour,
            shortfalls=shortfalls,
            money=money,
            report=self._report(money.total, 0.0, money.sales, ""),
            assumptions=assumptions_of(problem),
        )

    def _signed(self, search: _Search) -> Plan:
        assert search.plan is not None  # noqa: S101  (the caller has checked)
        money = search.plan.money
        bound = max(search.bound, money.total)
        return replace(search.plan, report=self._report(money.total, bound, money.sales, search.stop))

    def _report(self, objective: float, bound: float, sales: float, stop: str) -> SolveReport:
        gap = gap_of(bound, objective, sales)
        matrix = self.flow.matrix
        return SolveReport(
            objective=objective,
            bound=bound,
            gap=gap,
            status="optimal" if gap <= 1e-6 else "feasible",
            stop=stop,
            seconds=time.perf_counter() - self.started,
            relaxation_seconds=self.relaxation_seconds,
            seed=SEED,
            versions={name: version(name) for name in ("bagweek", "ortools", "numpy")},
            limits={"gap": self.limits.gap, "seconds": self.limits.seconds},
            size={"rows": matrix.rows, "columns": matrix.columns, "runs": len(self.flow.columns.run)},
        )

    def _tell(self, stage: str, search: _Search | None, bound: float | None = None) -> None:
        if self._progress is None:
            return
        if search is None or not np.isfinite(search.bound):
            self._progress(stage, None, None, None)
            return
        best = None if search.plan is None else search.plan.money.total
        proven = search.bound if bound is None or not np.isfinite(bound) else min(bound, search.bound)
        self._progress(stage, best, proven, None if search.plan is None else search.gap)


def assumptions_of(problem: Problem) -> tuple[str, ...]:
    """What the plan takes for granted where the farm file is silent."""
    notes = [
        "The order of work within a day is not fixed here: hours are balanced by day and skill.",
        "Growth, yields and losses are expected values.",
    ]
    if not problem.farm.rooms_of("cooling"):
        notes.append("No cooling room is named: bags cool at the month's ambient temperature, places not limited.")
    if problem.farm.site.supply_kw is None:
        notes.append("No supply_kw is given: electrical power is not limited.")
    return tuple(notes)


def plan_weeks(
    farm: Farm,
    orders: Sequence[Order],
    stock: Sequence[StockLot],
    first_week: Week,
    weeks: int,
    *,
    limits: SolveLimits | None = None,
    progress: Progress | None = None,
    margins: Mapping[tuple[str, Week], Margin] | None = None,
) -> Plan:
    """Plan the weekly bag production of a farm.

    Parameters
    ----------
    farm, orders, stock
        The content of a farm folder.
    first_week : Week
        The plan starts on its Monday.
    weeks : int
        Weeks asked for; look-ahead weeks are added behind them.
    limits : SolveLimits
        When to stop.
    progress : callable, optional
        Called with the stage and, where known, best money, bound and gap.
    margins : mapping, optional
        What is kept ready, by strain code and week of delivery; see `scheduler.sure`.

    Returns
    -------
    Plan
        The best plan found, with whole bags, its bound and why the search stopped.

    Raises
    ------
    NoPlanError
        The search was interrupted, or ran out of time, before a first plan.
    """
    limits = limits or SolveLimits()
    problem = state_problem(farm, orders, stock, first_week, weeks, margins)
    return Planner(problem, limits, progress).run()
