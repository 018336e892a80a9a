"""The same steam cycle by the method of lines: finite volumes in space, SciPy's BDF in time.

Written apart from the production solver: it shares the farm's numbers with it and nothing else.
"""

from __future__ import annotations

from dataclasses import dataclass
from math import pi

import numpy as np
from scipy.integrate import solve_ivp
from scipy.sparse import coo_matrix, csc_matrix


@dataclass(frozen=True)
class PeerCase:
    """A load of cylinders in a steriliser: SI units, powers in W, temperatures in °C."""

    radius: float
    height: float
    bags: int
    conductivity: float
    volumetric_heat: float
    surface: float
    metal: float
    loss: float
    steam: float
    ambient: float
    start: float
    boiling: float


@dataclass(frozen=True)
class PeerCourse:
    """Seconds, vessel, core and mean; and how often the right-hand side was asked for."""

    seconds: np.ndarray
    vessel: np.ndarray
    core: np.ndarray
    mean: np.ndarray
    calls: int


def grid(case: PeerCase, across: int, along: int) -> tuple[csc_matrix, np.ndarray, np.ndarray]:
    """Conduction between cells of half a cylinder, what each passes to the steam [W/K], heat capacities [J/K]."""
    dr, dz = case.radius / across, case.height / 2 / along
    faces = dr * np.arange(across + 1)
    ring = pi * (faces[1:] ** 2 - faces[:-1] ** 2)
    heat = case.volumetric_heat * np.outer(ring, np.full(along, dz)).ravel()
    number = np.arange(across * along).reshape(across, along)
    rows, columns, values = [], [], []

    def join(a: np.ndarray, b: np.ndarray, conductance: np.ndarray) -> None:
        for i, j, sign in ((a, b, 1.0), (b, a, 1.0), (a, a, -1.0), (b, b, -1.0)):
            rows.append(i.ravel())
            columns.append(j.ravel())
            values.append(sign * conductance.ravel())

    radial = np.repeat((case.conductivity * 2 * pi * faces[1:-1] * dz / dr)[:, None], along, axis=1)
    join(number[:-1], number[1:], radial)
    axial = np.repeat((case.conductivity * ring / dz)[:, None], along - 1, axis=1)
    join(number[:, :-1], number[:, 1:], axial)
    outward = np.zeros((across, along))
    outward[-1] += 2 * pi * case.radius * dz / (1 / case.surface + dr / 2 / case.conductivity)
    outward[:, -1] += ring / (1 / case.surface + dz / 2 / case.conductivity)
    size = across * along
    inner = coo_matrix((np.concatenate(values), (np.concatenate(rows), np.concatenate(columns))), (size, size)).tocsc()
    return inner, outward.ravel(), heat


def peer_course(case: PeerCase, seconds: float, *, across: int = 30, along: int = 40, rtol: float = 1e-6) -> PeerCourse:
    """Steam for so long; one value a minute."""
    inner, outward, heat = grid(case, across, along)
    size = len(heat)
    halves = 2 * case.bags
    calls = 0

    def flow(vessel: float, cells: np.ndarray) -> np.ndarray:
        return inner @ cells + outward * (vessel - cells)

    def short(_: float, state: np.ndarray) -> np.ndarray:
        nonlocal calls
        calls += 1
        vessel, cells = state[0], state[1:]
        into = halves * float(outward @ (vessel - cells))
        rise = (case.steam - into - case.loss * (vessel - case.ambient)) / case.metal
        return np.concatenate(([rise], flow(vessel, cells) / heat))

    def boiling(_: float, cells: np.ndarray) -> np.ndarray:
        nonlocal calls
        calls += 1
        return flow(case.boiling, cells) / heat

    diagonal = coo_matrix((outward, (np.arange(size), np.arange(size))), (size, size)).tocsc()
    slopes = coo_matrix((1 / heat, (np.arange(size), np.arange(size))), (size, size)).tocsc() @ (inner - diagonal)
    vessel_row = np.concatenate(([-(halves * outward.sum() + case.loss)], halves * outward)) / case.metal
    joined = _bordered(slopes, vessel_row, outward / heat)

    def reached(_: float, state: np.ndarray) -> float:
        return float(state[0] - case.boiling)

    reached.terminal = True  # type: ignore[attr-defined]
    reached.direction = 1  # type: ignore[attr-defined]
    times = np.arange(0.0, seconds + 1, 60.0)
    first = solve_ivp(
        short, (0, seconds), np.full(size + 1, case.start), method="BDF", jac=joined, rtol=rtol, atol=1e-4,
        t_eval=times, events=reached,
    )  # fmt: skip
    vessel, cells = first.y[0], first.y[1:]
    if len(first.t_events[0]):
        at, state = float(first.t_events[0][0]), first.y_events[0][0]
        later = times[times > at]
        second = solve_ivp(
            boiling, (at, seconds), state[1:], method="BDF", jac=slopes, rtol=rtol, atol=1e-4, t_eval=later
        )
        kept = first.t <= at
        vessel = np.concatenate([vessel[kept], np.full(len(later), case.boiling)])
        cells = np.concatenate([cells[:, kept], second.y], axis=1)
    field = cells.reshape(across, along, -1)
    # Cells know their middle; the centre follows from the two nearest, flat there in both directions.
    axis = (9 * field[0] - field[1]) / 8
    core = (9 * axis[0] - axis[1]) / 8
    return PeerCourse(times, vessel, core, heat @ cells / heat.sum(), calls)


def _bordered(slopes: csc_matrix, row: np.ndarray, column: np.ndarray) -> csc_matrix:
    """The slopes of all cells with the row and the column of the vessel around them."""
    size = slopes.shape[0]
    inner = slopes.tocoo()
    rows = np.concatenate([inner.row + 1, np.zeros(size + 1, dtype=int), np.arange(1, size + 1)])
    columns = np.concatenate([inner.col + 1, np.arange(size + 1), np.zeros(size, dtype=int)])
    return coo_matrix((np.concatenate([inner.data, row, column]), (rows, columns)), (size + 1, size + 1)).tocsc()
