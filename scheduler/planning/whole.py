"""Whole bags: fix runs, fillings and inoculations one stage after the other, then give the losses whole numbers."""

from __future__ import annotations

import numpy as np

from scheduler.planning.dive import Candidate, Style, dive
from scheduler.planning.engine import Answer, Dead, FloatArray, Relaxation
from scheduler.planning.lots import Made, make_lots
from scheduler.planning.matrix import Matrix
from scheduler.planning.rounding import round_fills, round_inoculations
from scheduler.planning.stock_and_flow import StockAndFlow

BAG_STYLE = Style(window_days=7, sparse=False)
BOLD_BAG_STYLE = Style(window_days=1, sparse=False, bold=True)
FILLED_STYLE = Style(window_days=7, sparse=True)
FREE = float("inf")


def run_candidates(flow: StockAndFlow) -> list[Candidate]:
    """Run columns: one lane for each kind of steriliser."""
    arcs = flow.problem.arcs
    return [Candidate(column, arcs[k].steriliser, arcs[k].load_day) for k, column in enumerate(flow.columns.run)]


def fill_candidates(flow: StockAndFlow) -> list[Candidate]:
    """Filled bags: one lane for each strain."""
    return [
        Candidate(column, strain, flow.groups[group].load_day) for (strain, group), column in flow.columns.fill.items()
    ]


def inoculation_candidates(flow: StockAndFlow) -> list[Candidate]:
    """Inoculated bags: one lane for each strain."""
    return [Candidate(column, strain, day) for (strain, _, day), column in flow.columns.inoculate.items()]


def opening_candidates(flow: StockAndFlow) -> list[Candidate]:
    """Opened, cold-held and kept bags: one lane for each strain."""
    found = [Candidate(column, strain, day) for (strain, _, day, _), column in flow.columns.open.items()]
    found += [Candidate(column, strain, day) for (strain, _, day), column in flow.columns.hold.items()]
    stock = flow.problem.stock.fruiting
    found += [Candidate(column, stock[lot].strain, 0) for (lot, _), column in flow.columns.keep.items()]
    return found


def filled_candidates(flow: StockAndFlow) -> list[Candidate]:
    """Orders that are taken whole or not at all: one lane for each strain."""
    days = flow.problem.order_days
    return [Candidate(column, days[index].strain, days[index].day) for index, column in flow.columns.filled.items()]


def allow_discards(flow: StockAndFlow, relaxation: Relaxation, high: FloatArray) -> None:
    """Let single bags be dropped, so that rounding always has a way out."""
    for table in (flow.columns.drop_cooled, flow.columns.drop_ready):
        for column in table.values():
            high[column] = FREE
            relaxation.bound(column, 0.0, FREE)


def whole_losses(flow: StockAndFlow, made: Made, relaxation: Relaxation) -> None:
    """Replace expected losses by whole ones: shift the bounds of the rows in which they stand.

    The inoculations are fixed, so each row of ready bags has a known fractional inflow; the difference to the whole
    inflow moves to the row's bounds, as does that of the places the lost bags leave.
    """
    shift: dict[int, float] = {}
    for batch in made.batches:
        surplus = batch.bags * batch.loss_pct / 100 - batch.lost
        if batch.loss_pct and surplus and 0 <= batch.ready < flow.problem.days:
            for row in flow.loss_rows(batch.strain, batch.pool, batch.ready, batch.deadline):
                shift[row] = shift.get(row, 0.0) + surplus
    for row, amount in shift.items():
        low, high = flow.matrix.row_low[row] + amount, flow.matrix.row_high[row] + amount
        relaxation.bound_row(row, low, high)


def whole_bags(
    flow: StockAndFlow, relaxation: Relaxation, answer: Answer, low: FloatArray, high: FloatArray, *, bold: bool = False
) -> tuple[Answer, Made]:
    """Make every bag whole, runs being fixed.

    Parameters
    ----------
    bold : bool
        Round all fillings at once, and in larger batches after that; faster, and a little dearer.

    Returns
    -------
    Answer, Made
        The last relaxation, with whole run, fill, inoculation, cold and opening columns, and the lots in it.

    Raises
    ------
    Dead
        Some stage has no whole solution.
    """
    allow_discards(flow, relaxation, high)
    style = BOLD_BAG_STYLE if bold else BAG_STYLE
    if bold:
        answer, fills = _at_once(relaxation, answer, round_fills(flow, answer.known), low, high)
        if fills:
            answer, _ = _at_once(relaxation, answer, round_inoculations(flow, answer.known, fills), low, high)
    for candidates in (fill_candidates(flow), inoculation_candidates(flow)):
        answer = dive(relaxation, answer, candidates, style, low, high)
    made = make_lots(flow, answer.known)
    return open_bags(flow, made, relaxation, low, high, style), made


def _at_once(
    relaxation: Relaxation, answer: Answer, values: dict[int, float], low: FloatArray, high: FloatArray
) -> tuple[Answer, dict[int, float]]:
    """Fix columns at whole values; all as it was, and no values, where that leaves nothing feasible."""
    before = {column: (float(low[column]), float(high[column])) for column in values}
    fix(relaxation, low, high, values)
    found = relaxation.solve()
    if found.values is not None:
        return found, values
    for column, (least, most) in before.items():
        low[column], high[column] = least, most
        relaxation.bound(column, least, most)
    return answer, {}


def open_bags(
    flow: StockAndFlow, made: Made, relaxation: Relaxation, low: FloatArray, high: FloatArray, style: Style = BAG_STYLE
) -> Answer:
    """Give losses whole numbers and decide openings as whole bags; runs, fillings and inoculations being fixed.

    Raises
    ------
    Dead
        The openings have no whole solution.
    """
    allow_discards(flow, relaxation, high)
    whole_losses(flow, made, relaxation)
    answer = relaxation.solve()
    if answer.values is None:
        raise Dead
    answer = dive(relaxation, answer, opening_candidates(flow), style, low, high)
    return dive(relaxation, answer, filled_candidates(flow), FILLED_STYLE, low, high)


def fix(relaxation: Relaxation, low: FloatArray, high: FloatArray, values: dict[int, float]) -> None:
    """Fix columns at values."""
    for column, value in values.items():
        low[column] = high[column] = value
        relaxation.bound(column, value, value)


def bounds_of(matrix: Matrix) -> tuple[FloatArray, FloatArray]:
    """Fresh column bounds of a matrix."""
    return np.array(matrix.column_low), np.array(matrix.column_high)
