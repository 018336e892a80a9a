"""The weekly model as text in the free MPS format, for inspection and for other solvers."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import fields
from math import inf

from models.calendar import Week
from models.farm import Farm, Order, StockLot
from scheduler.planning.build import build_model
from scheduler.planning.matrix import Matrix
from scheduler.planning.problem import state_problem
from scheduler.planning.seldom import SeldomRows, relax_within_all
from scheduler.planning.stock_and_flow import StockAndFlow

OBJECTIVE = "money"


def model_text(farm: Farm, orders: Sequence[Order], stock: Sequence[StockLot], first_week: Week, weeks: int) -> str:
    """The model that `plan_weeks` searches, with every row that its relaxation needs.

    Returns
    -------
    str
        Free MPS: maximise ``money``; columns named after what they decide and their indices, rows after their limit and
        day. Whole-number columns stand between markers.
    """
    flow = build_model(state_problem(farm, orders, stock, first_week, weeks))
    relax_within_all(flow, SeldomRows(flow))
    return "\n".join([*_lines(flow), ""])


def _lines(flow: StockAndFlow) -> Iterator[str]:
    matrix = flow.matrix
    rows = [f"r{number}_{_word(name)}_{key}" for number, (name, key) in enumerate(matrix.row_name)]
    kinds = [_kind(low, high) for low, high in zip(matrix.row_low, matrix.row_high, strict=True)]
    yield from ("NAME bagweek", "OBJSENSE", "    MAX", "ROWS", f" N {OBJECTIVE}")
    yield from (f" {kind} {row}" for kind, row in zip(kinds, rows, strict=True))
    yield "COLUMNS"
    names = column_names(flow)
    yield from _columns(matrix, names, rows)
    yield "RHS"
    if matrix.constant:
        # A constant of the objective stands there with its sign turned.
        yield f" RHS {OBJECTIVE} {-matrix.constant!r}"
    for kind, row, low, high in zip(kinds, rows, matrix.row_low, matrix.row_high, strict=True):
        bound = low if kind in "GE" else high
        if kind != "N" and bound:
            yield f" RHS {row} {bound!r}"
    yield "RANGES"
    for kind, row, low, high in zip(kinds, rows, matrix.row_low, matrix.row_high, strict=True):
        if kind == "L" and low > -inf:
            yield f" RNG {row} {high - low!r}"
    yield "BOUNDS"
    for name, low, high in zip(names, matrix.column_low, matrix.column_high, strict=True):
        if low != 0:
            yield f" LO BND {name} {low!r}"
        yield f" UP BND {name} {high!r}" if high < inf else f" PL BND {name}"
    yield "ENDATA"


def _columns(matrix: Matrix, names: Sequence[str], rows: Sequence[str]) -> Iterator[str]:
    entries: list[list[tuple[int, float]]] = [[] for _ in names]
    for number, entry in enumerate(matrix.entries):
        for column, value in entry.items():
            entries[column].append((number, value))
    marked = False
    for column, name in enumerate(names):
        if matrix.whole[column] != marked:
            marked = not marked
            yield f" M{column} 'MARKER' 'INT{'ORG' if marked else 'END'}'"
        if matrix.gain[column] or not entries[column]:
            yield f" {name} {OBJECTIVE} {matrix.gain[column]!r}"
        yield from (f" {name} {rows[number]} {value!r}" for number, value in entries[column])
    if marked:
        yield f" M{matrix.columns} 'MARKER' 'INTEND'"


def column_names(flow: StockAndFlow) -> list[str]:
    """What each column decides: its table and indices; ``x`` and its number for those that only help."""
    names = [f"x{column}" for column in range(flow.matrix.columns)]
    for column in flow.columns.run:
        names[column] = f"run_{column}"
    for table in fields(flow.columns):
        cells = getattr(flow.columns, table.name)
        if isinstance(cells, dict):
            for key, column in cells.items():
                if isinstance(column, int):
                    parts = key if isinstance(key, tuple) else (key,)
                    names[column] = "_".join([table.name, *(_word(str(part)) for part in parts)])
    return names


def _kind(low: float, high: float) -> str:
    if low == high:
        return "E"
    if high < inf:
        return "L"
    return "G" if low > -inf else "N"


def _word(text: str) -> str:
    return "".join(letter if letter.isalnum() else "-" for letter in text)
