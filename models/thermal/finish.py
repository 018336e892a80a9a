"""After the hold: the vent, cooling in the steriliser, cooling in the cooling room."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from models.farm import Steriliser
from models.thermal.conduction import Floats, Modes, project
from models.thermal.cooling import seconds_until, still_air_coefficient
from models.thermal.curve import CurveRow, minutes_of
from models.thermal.load import LoadPart
from models.thermal.steaming import STEP_S, BagState, surface_temperature


@dataclass(frozen=True, slots=True)
class CoolingPlace:
    """Where bags cool: its air [°C] and surface coefficient [W/m² K] (None: still air), and when they are cool [°C]."""

    air_c: float
    air_w_m2_k: float | None
    below_c: float


@dataclass(frozen=True, slots=True)
class Finish:
    """Hours in place and in the room [h], and the course of the slowest bag from the end of the hold [min, °C]."""

    in_place_h: float
    in_room_h: float
    rows: tuple[CurveRow, ...]


@dataclass(frozen=True, slots=True)
class _Kind:
    """A kind of bag on its way down: modes and amplitudes now [K]."""

    part: LoadPart
    modes: Modes
    amplitudes: Floats
    lag_s: float


def finish(
    steriliser: Steriliser, load: Sequence[LoadPart], states: Sequence[BagState], vessel_c: float, open_c: float,
    ambient_c: float, place: CoolingPlace, end_min: float,
) -> Finish:  # fmt: skip
    """Cool a load after its hold.

    Parameters
    ----------
    load, states
        Kinds of bag and how they stand at the end of the hold; the states are moved on to the end of the vent.
    vessel_c, open_c : float
        Steam in the vessel, and at the pressure of the air [°C].
    ambient_c : float
        Air round the steriliser [°C].
    end_min : float
        End of the hold, from steam on [min].

    Returns
    -------
    Finish
        Bags stay in steam, whose pressure falls evenly to the air's, for ``vent_min``; then in still air in the
        steriliser until the mean of the warmest bag is below ``unload_below_c``; then, each by itself, in the room
        until the slowest core is cool. Water that boils off a bag when the pressure falls is left out, which makes
        the cooling too long rather than too short.

    Raises
    ------
    ThermalError
        The bags can never cool so far.
    """
    rows, after_vent = _vent(steriliser, states, vessel_c, min(vessel_c, open_c), end_min)
    stack = steriliser.stack_factor
    kinds, waits = [], []
    for part, state in zip(load, states, strict=True):
        middle = (after_vent + steriliser.unload_below_c) / 2
        h = round(still_air_coefficient(middle, ambient_c, part.bag.height_mm / 1000 * stack), 1)
        modes = part.modes(h, stack)
        amplitudes = project(state.amplitudes, state.modes, modes) + (ambient_c - after_vent)
        warmest = modes.central_mean(stack)
        what = "the load in the steriliser"
        waits.append(seconds_until(modes, amplitudes, warmest, ambient_c, steriliser.unload_below_c, what))
        kinds.append(_Kind(part, modes, amplitudes, part.surface_lag_s(h, stack)))
    seconds = max(waits)
    kind, arrived, wait = _in_room(kinds, stack, seconds, ambient_c, place)
    offset = end_min + steriliser.vent_min
    rows += _cooling_rows(kind, ambient_c, offset, seconds)
    rows += _cooling_rows(arrived, place.air_c, offset + seconds / STEP_S, wait)
    return Finish(seconds / 3600, wait / 3600, tuple(rows))


def _vent(
    steriliser: Steriliser, states: Sequence[BagState], vessel_c: float, open_c: float, end_min: float
) -> tuple[list[CurveRow], float]:
    """Let the steam off: minute by minute the surroundings fall evenly to the boiling point at the air's pressure."""
    rows, now, passed = [], vessel_c, 0.0
    for minute in minutes_of(steriliser.vent_min):
        length = (minute - passed) * STEP_S
        following = vessel_c + (open_c - vessel_c) * minute / steriliser.vent_min
        for state in states:
            decay = np.exp(-state.modes.rates * length)
            gain = (1 - decay) / (state.modes.rates * length)
            state.amplitudes = state.amplitudes * decay + (following - now) * gain
        now, passed = following, minute
        slowest = min(states, key=lambda state: state.core_c(now))
        surface = surface_temperature(slowest, now)
        rows.append(CurveRow(end_min + minute, now, surface, slowest.core_c(now), slowest.mean_c(now), 0.0))
    return rows, now


def _in_room(
    kinds: Sequence[_Kind], stack: float, seconds: float, ambient_c: float, place: CoolingPlace
) -> tuple[_Kind, _Kind, float]:
    """The kind of bag that is cool last, as it leaves the hold and as it arrives in the room, and its seconds there."""
    finished = []
    for kind in kinds:
        after = kind.amplitudes * np.exp(-kind.modes.rates * seconds)
        surface = ambient_c - float(kind.modes.central_mean(stack) @ after)
        height = kind.part.bag.height_mm / 1000
        still = still_air_coefficient((surface + place.below_c) / 2, place.air_c, height)
        h = round(place.air_w_m2_k or still, 1)
        modes = kind.part.modes(h)
        moved = project(after, kind.modes, modes) + (place.air_c - ambient_c)
        wait = seconds_until(modes, moved, modes.core, place.air_c, place.below_c, "the core in the cooling room")
        finished.append((kind, _Kind(kind.part, modes, moved, kind.part.surface_lag_s(h)), wait))
    return max(finished, key=lambda item: item[2])


def _cooling_rows(kind: _Kind, air_c: float, offset_min: float, seconds: float) -> list[CurveRow]:
    minutes = np.array(minutes_of(seconds / STEP_S))
    modes = kind.modes
    left = np.exp(-np.outer(minutes * STEP_S, modes.rates)) * kind.amplitudes
    cores, means = air_c - left @ modes.core, air_c - left @ modes.mean
    surfaces = air_c - kind.lag_s * (left @ (modes.mean * modes.rates))
    columns = (minutes.tolist(), surfaces.tolist(), cores.tolist(), means.tolist())
    return [
        CurveRow(offset_min + minute, air_c, surface, core, mean, 0.0)
        for minute, surface, core, mean in zip(*columns, strict=True)
    ]
