"""The site's supply by half hour: rows that seldom bind, added only where a solution breaks them."""

from __future__ import annotations

from math import inf

from scheduler.planning.engine import Answer, FloatArray, Relaxation
from scheduler.planning.network import half_hour_draw, supply_may_bind
from scheduler.planning.stock_and_flow import StockAndFlow

TOLERANCE_KW = 1e-6


class Supply:
    """Draw of every run by half-hour slot, and the slots that have a row already."""

    def __init__(self, flow: StockAndFlow) -> None:
        self.flow = flow
        self.binding = supply_may_bind(flow.problem.farm)
        self._draw: dict[int, list[tuple[int, float]]] = {}
        self._rows: set[int] = set()
        if not self.binding:
            return
        for k, arc in enumerate(flow.problem.arcs):
            for slot, kw in half_hour_draw(arc):
                self._draw.setdefault(slot, []).append((flow.columns.run[k], kw))

    @property
    def spare_kw(self) -> float:
        """Power left for the elements [kW]."""
        site = self.flow.problem.farm.site
        return inf if site.supply_kw is None else site.supply_kw - site.base_load_kw

    def broken(self, values: FloatArray) -> list[int]:
        """Slots without a row in which the runs of a solution draw too much."""
        return [
            slot
            for slot, terms in self._draw.items()
            if slot not in self._rows
            and sum(values[column] * kw for column, kw in terms) > self.spare_kw + TOLERANCE_KW
        ]

    def add(self, slots: list[int]) -> None:
        """Give slots a row in the matrix."""
        for slot in sorted(slots):
            self._rows.add(slot)
            self.flow.matrix.row("supply", slot, self._draw[slot], high=self.spare_kw)


def relax_within_supply(flow: StockAndFlow, supply: Supply) -> tuple[Relaxation, Answer]:
    """Solve the relaxation, adding supply rows until none is broken; the relaxation, kept warm, and its answer."""
    while True:
        relaxation = Relaxation(flow.matrix)
        answer = relaxation.solve()
        broken = supply.broken(answer.known)
        if not broken:
            return relaxation, answer
        supply.add(broken)
