"""Rows that seldom bind, added where a solution breaks them: the site's supply by half hour, a room's heat by day."""

from __future__ import annotations

from math import inf

from scheduler.planning.engine import Answer, FloatArray, Relaxation
from scheduler.planning.network import half_hour_draw, supply_may_bind
from scheduler.planning.problem import Pool
from scheduler.planning.stock_and_flow import Reserve, StockAndFlow

TOLERANCE = 1e-6
MOST_AT_ONCE = 3
Key = tuple[str, int]
"""Name of the limit, and half-hour slot or day."""


def heat_limit(pool: Pool) -> str:
    """Name of the limit on a pool's heat."""
    return f"heat {pool.rooms[0].code}"


class SeldomRows:
    """What each column adds to each limit, what the limits leave for it, and which of them have a row already."""

    def __init__(self, flow: StockAndFlow) -> None:
        self.flow = flow
        self._terms: dict[Key, list[tuple[int, float]]] = {}
        self._left: dict[Key, float] = {}
        self._rows: set[Key] = set()
        if supply_may_bind(flow.problem.farm):
            self._draw()
        for index, pool in enumerate(flow.problem.colony_pools):
            if pool.cooling_w is not None:
                self._heat(index, pool, pool.cooling_w)

    def _draw(self) -> None:
        site = self.flow.problem.farm.site
        spare = inf if site.supply_kw is None else site.supply_kw - site.base_load_kw
        for k, arc in enumerate(self.flow.problem.arcs):
            for slot, kw in half_hour_draw(arc):
                self._terms.setdefault(("supply", slot), []).append((self.flow.columns.run[k], kw))
                self._left["supply", slot] = spare
                # Of runs that draw more than a share 1 / (k + 1) of what is left, k are on at once at most. For whole
                # runs the row above says as much; for parts of runs it does not.
                for at_once in range(1, MOST_AT_ONCE + 1):
                    if kw > spare / (at_once + 1) + TOLERANCE:
                        key = (f"supply, {at_once} at once", slot)
                        self._terms.setdefault(key, []).append((self.flow.columns.run[k], 1.0))
                        self._left[key] = float(at_once)

    def _heat(self, index: int, pool: Pool, cooling_w: float) -> None:
        """Heat of bags inoculated into a pool [W a bag], after what the opening stock gives off there."""
        problem, name = self.flow.problem, heat_limit(pool)
        standing = problem.stock_heat(index)
        curves = {strain: problem.bag_heat(strain, index) for strain in self.flow.active}
        for (strain, p, day), column in self.flow.columns.inoculate.items():
            if p != index:
                continue
            for after, watts in enumerate(curves[strain]):
                when = day + after
                if when < problem.days and watts > 0:
                    self._terms.setdefault((name, when), []).append((column, watts))
                    self._left[name, when] = max(0.0, cooling_w - standing[when])

    def broken(self, values: FloatArray) -> list[Key]:
        """Limits without a row that a solution passes."""
        return [
            key
            for key, terms in self._terms.items()
            if key not in self._rows
            and sum(values[column] * amount for column, amount in terms) > self._left[key] + TOLERANCE
        ]

    def add(self, keys: list[Key]) -> None:
        """Give limits a row in the matrix."""
        for name, place in sorted(keys):
            self._rows.add((name, place))
            terms, left = self._terms[name, place], self._left[name, place]
            row = self.flow.matrix.row(name, place, terms, high=left)
            if not name.startswith("supply"):
                self.flow.reserves.append(Reserve(row, left, max(watts for _, watts in terms)))


def relax_within_all(flow: StockAndFlow, seldom: SeldomRows) -> tuple[Relaxation, Answer]:
    """Solve the relaxation, adding rows until none is broken; the relaxation, kept warm, and its answer."""
    while True:
        relaxation = Relaxation(flow.matrix)
        answer = relaxation.solve()
        broken = seldom.broken(answer.known)
        if not broken:
            return relaxation, answer
        seldom.add(broken)
