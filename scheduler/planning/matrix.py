"""A sparse linear model as growing arrays, and its hand-over to MathOpt.

MathOpt's own objects are convenient for small models; a season of days has hundreds of thousands of entries, so the
model is kept as arrays and handed over as one message.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, field
from math import inf

import numpy as np
from numpy.typing import NDArray
from ortools.math_opt import model_pb2
from ortools.math_opt.python import mathopt

Terms = Iterable[tuple[int, float]]


@dataclass
class Matrix:
    """Columns with bounds and gains, rows with bounds, and the entries between them. Maximised."""

    column_low: list[float] = field(default_factory=list)
    column_high: list[float] = field(default_factory=list)
    gain: list[float] = field(default_factory=list)
    whole: list[bool] = field(default_factory=list)
    row_low: list[float] = field(default_factory=list)
    row_high: list[float] = field(default_factory=list)
    row_name: list[tuple[str, int]] = field(default_factory=list)
    entries: list[dict[int, float]] = field(default_factory=list)
    constant: float = 0.0

    def column(self, *, gain: float = 0.0, low: float = 0.0, high: float = inf, whole: bool = False) -> int:
        """Add a column and return its index."""
        self.column_low.append(low)
        self.column_high.append(high)
        self.gain.append(gain)
        self.whole.append(whole)
        return len(self.gain) - 1

    def row(self, name: str, key: int, terms: Terms, *, low: float = -inf, high: float = inf) -> int:
        """Add a row ``low <= sum(coefficient × column) <= high`` and return its index; equal columns add up."""
        entry: dict[int, float] = {}
        for column, coefficient in terms:
            entry[column] = entry.get(column, 0.0) + coefficient
        self.entries.append({column: value for column, value in entry.items() if value != 0.0})
        self.row_low.append(low)
        self.row_high.append(high)
        self.row_name.append((name, key))
        return len(self.entries) - 1

    @property
    def columns(self) -> int:
        """Number of columns."""
        return len(self.gain)

    @property
    def rows(self) -> int:
        """Number of rows."""
        return len(self.entries)

    def value(self, solution: NDArray[np.float64]) -> float:
        """Objective of a solution."""
        return float(np.asarray(self.gain) @ solution) + self.constant

    def to_model(
        self,
        low: NDArray[np.float64],
        high: NDArray[np.float64],
        whole: NDArray[np.bool_],
    ) -> mathopt.Model:
        """The model with these column bounds and whole-number columns, as a MathOpt model."""
        proto = model_pb2.ModelProto(name="bagweek")
        columns, rows = range(self.columns), range(self.rows)
        proto.variables.ids.extend(columns)
        proto.variables.lower_bounds.extend(low.tolist())
        proto.variables.upper_bounds.extend(high.tolist())
        proto.variables.integers.extend(whole.tolist())
        proto.objective.maximize = True
        proto.objective.offset = self.constant
        used = [column for column in columns if self.gain[column] != 0.0]
        proto.objective.linear_coefficients.ids.extend(used)
        proto.objective.linear_coefficients.values.extend(self.gain[column] for column in used)
        proto.linear_constraints.ids.extend(rows)
        proto.linear_constraints.lower_bounds.extend(self.row_low)
        proto.linear_constraints.upper_bounds.extend(self.row_high)
        row_ids: list[int] = []
        column_ids: list[int] = []
        values: list[float] = []
        for row, entry in enumerate(self.entries):
            ordered = sorted(entry.items())
            row_ids.extend([row] * len(ordered))
            column_ids.extend(column for column, _ in ordered)
            values.extend(value for _, value in ordered)
        proto.linear_constraint_matrix.row_ids.extend(row_ids)
        proto.linear_constraint_matrix.column_ids.extend(column_ids)
        proto.linear_constraint_matrix.coefficients.extend(values)
        return mathopt.Model.from_model_proto(proto)
