"""The steamed part of a cycle: boil-up, heat-up while steam is short, hold at the thermostat; minute by minute.

One energy balance: what the generator gives goes into bags, metal and losses. While steam is short the vessel's
temperature is what makes the balance close; at saturation the thermostat cuts the power to what is absorbed. Bag heat
is linear in the new vessel temperature, so each minute is one division.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field

import numpy as np

from models.thermal.conduction import Floats, Modes
from models.thermal.errors import ThermalError

STEP_S = 60.0
LONGEST_HEAT_UP_MIN = 5 * 1440
FIRST_MINUTES, FIRST_PARTS = 3, 6
"""Minutes from the first steam that are cut into parts, as the vessel's temperature bends most there."""
GONE = 40.0
"""A mode that decays by this exponent in one step has gone."""


@dataclass(frozen=True, slots=True)
class Stride:
    """A step: what is left of each mode, what a rise of one kelvin adds, and what it adds to the mean at once [-]."""

    decay: Floats
    gain: Floats
    uptake: float


@dataclass
class BagState:
    """Bags of one kind in the vessel: their modes, amplitudes [K], and heat capacity of all of them [kJ/K]."""

    modes: Modes
    capacity_kj_k: float
    surface_w_k: float
    amplitudes: Floats
    _steps: dict[float, Stride] = field(default_factory=dict, repr=False)

    def stride(self, seconds: float) -> Stride:
        """What a step of so many seconds does; worked out once."""
        known = self._steps.get(seconds)
        if known is None:
            exponent = self.modes.rates * seconds
            decay = np.where(exponent < GONE, np.exp(-exponent), 0.0)
            gain = -np.expm1(-exponent) / exponent
            known = self._steps[seconds] = Stride(decay, gain, 1 - float(self.modes.mean @ gain))
        return known

    def core_c(self, vessel_c: float) -> float:
        """Temperature of the coldest point [°C]."""
        return vessel_c - float(self.modes.core @ self.amplitudes)

    def mean_c(self, vessel_c: float) -> float:
        """Mean temperature [°C]."""
        return vessel_c - float(self.modes.mean @ self.amplitudes)


@dataclass(frozen=True, slots=True)
class Vessel:
    """The steriliser as the balance sees it: powers [kW], capacities [kJ/K], losses [kW/K], temperatures [°C]."""

    element_kw: float
    generator_loss_kw: float
    steam_share: float
    metal_kj_k: float
    loss_kw_k: float
    ambient_c: float
    boil_c: float

    @property
    def steam_kw(self) -> float:
        """Heat that the steam can bring into the vessel [kW]."""
        return max(0.0, self.element_kw - self.generator_loss_kw) * self.steam_share

    def element_for(self, heat_kw: float) -> float:
        """Element power that brings so much heat into the vessel [kW]."""
        return heat_kw / self.steam_share + self.generator_loss_kw


@dataclass
class Trace:
    """Minute by minute from steam on: vessel, slowest core, its mean, element power and heat into bags and metal."""

    minutes: list[float] = field(default_factory=list)
    vessel_c: list[float] = field(default_factory=list)
    core_c: list[float] = field(default_factory=list)
    mean_c: list[float] = field(default_factory=list)
    surface_c: list[float] = field(default_factory=list)
    element_kw: list[float] = field(default_factory=list)
    delivered_kj: float = 0.0
    stored_kj: float = 0.0
    lost_kj: float = 0.0


def heat_up(vessel: Vessel, bags: Sequence[BagState], target_c: float, start_c: float, trace: Trace) -> float:
    """Steam until the coldest core is at its target; fills the trace.

    Returns
    -------
    float
        Minutes of steaming, the last one in part [min].

    Raises
    ------
    ThermalError
        The target is not reached within five days.
    """
    vessel_c, minute = start_c, 0
    while minute < LONGEST_HEAT_UP_MIN:
        before = min(state.core_c(vessel_c) for state in bags)
        vessel_c = step(vessel, bags, vessel_c, trace, parts=FIRST_PARTS if minute < FIRST_MINUTES else 1)
        after = min(state.core_c(vessel_c) for state in bags)
        if after >= target_c:
            return minute + (target_c - before) / (after - before)
        minute += 1
    raise ThermalError(_never(vessel, bags, target_c, vessel_c))


def _never(vessel: Vessel, bags: Sequence[BagState], target_c: float, vessel_c: float) -> str:
    needed = vessel.element_for(vessel.loss_kw_k * (target_c - vessel.ambient_c))
    core = min(state.core_c(vessel_c) for state in bags)
    return (
        f"the coldest core stays at {core:.1f} °C and never reaches {target_c:g} °C: losses alone take"
        f" {needed:.2f} kW of the element's {vessel.element_kw:g} kW; a bigger element or better insulation is needed"
    )


def step(
    vessel: Vessel,
    bags: Sequence[BagState],
    vessel_c: float,
    trace: Trace,
    *,
    parts: int = 1,
    steam_kw: float | None = None,
) -> float:
    """One minute of steam; the new vessel temperature [°C].

    Parameters
    ----------
    parts : int
        Equal parts of the minute in each of which the vessel's temperature is taken to change evenly.
    steam_kw : float, optional
        What the steam can bring in that minute, in place of what the element gives [kW]; without any the vessel cools.
    """
    available = vessel.steam_kw if steam_kw is None else steam_kw
    delivered = 0.0
    for _ in range(parts):
        vessel_c, heat = _advance(vessel, bags, vessel_c, STEP_S / parts, available, trace)
        delivered += heat
    _note(vessel, bags, vessel_c, delivered / STEP_S, trace)
    return vessel_c


def _advance(
    vessel: Vessel, bags: Sequence[BagState], vessel_c: float, seconds: float, available_kw: float, trace: Trace
) -> tuple[float, float]:
    """Let some time pass; the new vessel temperature [°C], and the heat that the steam brought [kJ]."""
    strides = [state.stride(seconds) for state in bags]
    fixed = slope = 0.0
    for state, stride in zip(bags, strides, strict=True):
        # mean after = T1 - mean @ (u decay + (T1 - T0) gain); before = T0 - mean @ u
        slope += state.capacity_kj_k * stride.uptake
        fixed += state.capacity_kj_k * float(state.modes.mean @ (state.amplitudes * (1 - stride.decay)))
    slope += vessel.metal_kj_k
    loss_before = vessel.loss_kw_k * (vessel_c - vessel.ambient_c) * seconds
    # heat needed for a rise x: slope x + fixed + loss_before + loss slope x / 2
    full = slope + vessel.loss_kw_k * seconds / 2
    rise = (available_kw * seconds - fixed - loss_before) / full
    rise = min(rise, vessel.boil_c - vessel_c)
    heat = max(0.0, full * rise + fixed + loss_before)
    for state, stride in zip(bags, strides, strict=True):
        state.amplitudes = state.amplitudes * stride.decay + rise * stride.gain
    trace.delivered_kj += heat
    trace.stored_kj += slope * rise + fixed
    trace.lost_kj += loss_before + vessel.loss_kw_k * rise / 2 * seconds
    return vessel_c + rise, heat


def _note(vessel: Vessel, bags: Sequence[BagState], vessel_c: float, heat_kw: float, trace: Trace) -> None:
    slowest = min(bags, key=lambda state: state.core_c(vessel_c))
    trace.minutes.append(float(len(trace.minutes) + 1))
    trace.vessel_c.append(vessel_c)
    trace.core_c.append(slowest.core_c(vessel_c))
    trace.mean_c.append(slowest.mean_c(vessel_c))
    trace.surface_c.append(surface_temperature(slowest, vessel_c))
    trace.element_kw.append(vessel.element_for(heat_kw))


def surface_temperature(state: BagState, vessel_c: float) -> float:
    """Mean surface temperature of a bag, from the heat that flows through it [°C]."""
    flow_kw = state.capacity_kj_k * float(state.modes.mean @ (state.modes.rates * state.amplitudes))
    return vessel_c if state.surface_w_k == 0 else vessel_c - 1000 * flow_kw / state.surface_w_k


def hold(vessel: Vessel, bags: Sequence[BagState], minutes: int, vessel_c: float, trace: Trace) -> float:
    """Hold for whole minutes; the vessel temperature at the end [°C]."""
    while minutes > 0:
        if vessel_c >= vessel.boil_c - 1e-9 and _demand_kw(vessel, bags) <= vessel.steam_kw:
            _hold_at_boil(vessel, bags, minutes, trace)
            return vessel.boil_c
        vessel_c = step(vessel, bags, vessel_c, trace)
        minutes -= 1
    return vessel_c


def _demand_kw(vessel: Vessel, bags: Sequence[BagState]) -> float:
    """Heat taken up in the next minute at the boiling point [kW]; it only falls from there."""
    into = sum(
        state.capacity_kj_k * float(state.modes.mean @ (state.amplitudes * -np.expm1(-state.modes.rates * STEP_S)))
        for state in bags
    )
    return into / STEP_S + vessel.loss_kw_k * (vessel.boil_c - vessel.ambient_c)


def _hold_at_boil(vessel: Vessel, bags: Sequence[BagState], minutes: int, trace: Trace) -> None:
    """All minutes of a hold at constant temperature at once: every mode decays, the thermostat gives what is taken."""
    slowest = min(bags, key=lambda state: state.core_c(vessel.boil_c))
    loss = vessel.loss_kw_k * (vessel.boil_c - vessel.ambient_c)
    heat = np.full(minutes, loss * STEP_S)
    passed = STEP_S * np.arange(minutes + 1)
    for state in bags:
        left = np.exp(-np.outer(passed, state.modes.rates)) * state.amplitudes
        deficit = left @ state.modes.mean
        heat += state.capacity_kj_k * (deficit[:-1] - deficit[1:])
        if state is slowest:
            flow = state.capacity_kj_k * (left[1:] @ (state.modes.mean * state.modes.rates))
            trace.core_c.extend((vessel.boil_c - left[1:] @ state.modes.core).tolist())
            trace.mean_c.extend((vessel.boil_c - deficit[1:]).tolist())
            trace.surface_c.extend((vessel.boil_c - 1000 * flow / state.surface_w_k).tolist())
        state.amplitudes = left[-1]
    first = len(trace.minutes) + 1
    trace.minutes.extend(float(first + k) for k in range(minutes))
    trace.vessel_c.extend([vessel.boil_c] * minutes)
    trace.element_kw.extend((heat / STEP_S / vessel.steam_share + vessel.generator_loss_kw).tolist())
    trace.delivered_kj += float(heat.sum())
    trace.lost_kj += loss * STEP_S * minutes
    trace.stored_kj += float(heat.sum()) - loss * STEP_S * minutes
