"""Estimate what a logged run tells of a steriliser and its load: vessel loss, surface coefficient, diffusivity."""

from __future__ import annotations

from copy import copy
from dataclasses import dataclass
from math import exp, log

import numpy as np
from numpy.typing import NDArray

from models.thermal.conduction import Floats, bag_modes
from models.thermal.cycle import Setting
from models.thermal.errors import ThermalError
from models.thermal.load import LoadPart
from models.thermal.substrate import bag_heat_capacity, diffusivity

Flags = NDArray[np.bool_]
FEWEST_ROWS = 8
SHORT_OF_BOILING_K = 1.5
"""Steam this far below boiling is short, so that the element runs all the time [K]."""
STEAM_COMES_K = 15.0
"""A vessel this much above its start gets steam, so that the generator boils [K]."""
BLOCK_MIN = 15.0
"""Power is compared over blocks of at least this length, as a thermostat switches it on and off [min]."""
NOISE_K, NOISE_KW_SHARE = 0.3, 0.05
"""Expected scatter of a core [K], and of a block's power over the element's [-]; only their ratio matters."""
TOLD_APART_BELOW = 0.9
"""An undetermined estimate more correlated than this with another is not told apart from it [-]."""
DETERMINED_WITHIN = 0.4
"""An estimate whose 95 % range reaches further than this share of it is not determined by the data [-]."""
PROBE_K = 0.5
"""How far a probe is taken to be off throughout [K]; class 1 thermocouples of IEC 60584-1 may be 1.5 K off."""
STEP_S = 120.0
"""Longest step of the model between rows of a log [s]."""
NAMES = ("diffusivity", "surface", "loss")


@dataclass(frozen=True, slots=True)
class RunLog:
    """A logged run.

    Attributes
    ----------
    minutes : tuple of float
        Since steam on, rising [min].
    steam_c, core_c : tuple of float
        In the vessel, and in the core of the slowest bag [°C].
    kw : tuple of float, optional
        Element power, mean since the row before [kW].
    """

    minutes: tuple[float, ...]
    steam_c: tuple[float, ...]
    core_c: tuple[float, ...]
    kw: tuple[float, ...] | None = None


@dataclass(frozen=True, slots=True)
class Estimate:
    """A value the data give, with its 95 % range, beside the one before; not ``determined``: the one before is kept."""

    name: str
    unit: str
    before: float
    value: float
    low: float
    high: float
    determined: bool


@dataclass(frozen=True, slots=True)
class Fit:
    """What a log tells.

    Attributes
    ----------
    estimates : tuple of Estimate
        ``conductivity_w_m_k``, ``surface_w_m2_k``, ``loss_w_per_k``, in this order.
    core_c : tuple of float
        Modelled core at each row of the log, in the steam that was logged [°C].
    rms_k, worst_k : float
        Modelled less measured core: root mean square, and largest without sign [K].
    before_rms_k : float
        The same root mean square with the values before [K].
    power_blocks : int
        Blocks of time in which power was known.
    not_told_apart : tuple of (str, str)
        Pairs of names that the data cannot tell apart.
    """

    estimates: tuple[Estimate, ...]
    core_c: tuple[float, ...]
    rms_k: float
    worst_k: float
    before_rms_k: float
    power_blocks: int
    not_told_apart: tuple[tuple[str, str], ...]


def fit_run(log_: RunLog, setting: Setting, part: LoadPart, surface_w_m2_k: float, stack_factor: float = 1.0) -> Fit:
    """Fit vessel loss, surface coefficient and diffusivity to a logged run.

    Parameters
    ----------
    log_ : RunLog
        Rows from steam on.
    setting : Setting
        The steriliser as the farm file tells it.
    part : LoadPart
        The load: one kind of bag.
    surface_w_m2_k, stack_factor : float
        Surface coefficient before [W/m² K], and how the bags stand [-].

    Raises
    ------
    ThermalError
        Fewer than eight rows, or a core that hardly warms.

    Notes
    -----
    The core is modelled in the steam that was logged, so that it depends on the bag alone; between rows the steam
    follows a monotone cubic. The loss comes from power: what the element gives, less generator loss and make-up heat,
    is what bags and metal take up and the vessel loses; power is logged, or known to be the element's while steam is
    short. Least squares over the logarithms of diffusivity and surface coefficient and over the loss; ranges from the
    curvature at the optimum, widened for errors that follow each other, sqrt((1 + r) / (1 - r)) at a lag-one
    correlation r, and by what a steam probe that is `PROBE_K` off and the way between rows (cubic or straight) would
    change. A value that the data do not determine, alone or apart from another, keeps what the farm file says and the
    others are fitted again; their ranges then hold for that value. Conductivity = diffusivity × density × heat
    capacity, as in the model of the cycle.
    """
    model = _Model(log_, setting, part, stack_factor)
    before = np.array([log(diffusivity(part.recipe, part.bag)), log(surface_w_m2_k), setting.vessel.loss_kw_k])
    free = np.array([True, True, model.blocks > 0])
    apart: list[tuple[str, str]] = []
    while True:
        values, jacobian = _solve(model, before, free)
        spread, correlation = _uncertainty(model, values, jacobian)
        drop = _least_known(values, spread, correlation, free, apart)
        if drop is None:
            break
        free = free.copy()
        free[drop] = False
    wide = np.zeros(3)
    wide[free] = 1.96 * spread
    modelled = model.core(values)
    errors = modelled - model.core_c
    return Fit(
        estimates=_estimates(part, before, values, wide, free),
        core_c=tuple(modelled.tolist()),
        rms_k=float(np.sqrt((errors**2).mean())),
        worst_k=float(np.abs(errors).max()),
        before_rms_k=float(np.sqrt(((model.core(before) - model.core_c) ** 2).mean())),
        power_blocks=model.blocks,
        not_told_apart=tuple(apart),
    )


_SCALE = np.array([0.3, 0.5, 0.005])
_LOW = np.array([log(1e-8), log(2.0), 0.0])
_HIGH = np.array([log(5e-6), log(20_000.0), 1.0])


def _placed(before: Floats, x: Floats, free: Flags) -> Floats:
    values = before.copy()
    values[free] = x
    return values


def _solve(model: _Model, before: Floats, free: Flags) -> tuple[Floats, Floats]:
    """All values at the optimum over the free ones, and the slopes of the residuals there [residual, free value]."""
    from scipy.optimize import least_squares

    def residuals(x: Floats) -> Floats:
        return model.residuals(_placed(before, x, free))

    solved = least_squares(residuals, before[free], x_scale=_SCALE[free], bounds=(_LOW[free], _HIGH[free]))
    return _placed(before, np.asarray(solved.x), free), np.asarray(solved.jac)


def _uncertainty(model: _Model, values: Floats, jacobian: Floats) -> tuple[Floats, Floats]:
    """Standard deviations and correlations of the free values."""
    residuals, count = model.residuals(values), jacobian.shape[1]
    core = residuals[: model.rows]
    variance = float(residuals @ residuals) / max(1, len(residuals) - count)
    lag = float(core[1:] @ core[:-1]) / max(float(core @ core), 1e-30)
    lag = min(max(lag, 0.0), 0.98)
    covariance = np.linalg.pinv(jacobian.T @ jacobian) * variance * (1 + lag) / (1 - lag)
    moves = np.linalg.pinv(jacobian)
    for other in (model.with_steam(PROBE_K), model.with_steam(0.0, straight=True)):
        shift = moves @ (other.residuals(values) - residuals)
        covariance += np.outer(shift, shift)
    spread = np.sqrt(np.maximum(np.diag(covariance), 0.0))
    scale = np.where(spread > 0, spread, 1.0)
    spread[np.linalg.norm(jacobian, axis=0) < 1e-9] = np.inf
    return spread, covariance / np.outer(scale, scale)


def _least_known(
    values: Floats, spread: Floats, correlation: Floats, free: Flags, apart: list[tuple[str, str]]
) -> int | None:
    """Which of the free values to keep as it was before: the least determined, if it is not determined at all."""
    places = np.flatnonzero(free)
    if not len(places):
        return None
    relative = [
        1.96 * float(spread[k]) / (max(float(values[place]), 1e-9) if place == 2 else 1.0)
        for k, place in enumerate(places)
    ]
    worst = int(np.argmax(relative))
    if relative[worst] <= DETERMINED_WITHIN:
        return None
    others = [k for k in range(len(places)) if k != worst and abs(correlation[worst, k]) > TOLD_APART_BELOW]
    apart += [(NAMES[places[min(k, worst)]], NAMES[places[max(k, worst)]]) for k in others]
    return int(places[worst])


def _estimates(part: LoadPart, before: Floats, values: Floats, wide: Floats, free: Flags) -> tuple[Estimate, ...]:
    heat = bag_heat_capacity(part.recipe) * 1000 * part.bag.wet_kg / part.bag.volume_m3
    found = []
    for place, (name, unit, factor) in enumerate(
        (("conductivity_w_m_k", "W/m K", heat), ("surface_w_m2_k", "W/m² K", 1.0))
    ):
        was, now = factor * exp(before[place]), factor * exp(values[place])
        low, high = now * exp(-wide[place]), now * exp(wide[place])
        found.append(Estimate(name, unit, was, now, low, high, bool(free[place])))
    now = 1000 * float(values[2])
    low, high = max(0.0, now - 1000 * float(wide[2])), now + 1000 * float(wide[2])
    found.append(Estimate("loss_w_per_k", "W/K", 1000 * float(before[2]), now, low, high, bool(free[2])))
    return tuple(found)


class _Model:
    """Core and power of a run in the steam that was logged."""

    def __init__(self, log_: RunLog, setting: Setting, part: LoadPart, stack_factor: float) -> None:
        if len(log_.minutes) < FEWEST_ROWS:
            raise ThermalError(f"at least {FEWEST_ROWS} rows were expected; found {len(log_.minutes)}")
        self.core_c = np.array(log_.core_c)
        if self.core_c.max() - self.core_c[0] < STEAM_COMES_K:
            raise ThermalError(
                f"a core that warms by {STEAM_COMES_K:g} K or more was expected;"
                f" found {self.core_c.max() - self.core_c[0]:.1f} K"
            )
        self.seconds = 60 * np.array(log_.minutes)
        self.steam_c = np.array(log_.steam_c)
        self.setting, self.part, self.stack = setting, part, stack_factor
        self.rows = len(self.core_c)
        self.capacity_kj_k = part.wet_kg * bag_heat_capacity(part.recipe)
        self.spans = self._power_spans(log_)
        self.blocks = len(self.spans)
        self.cut_into_steps(straight=False)

    def with_steam(self, shift_k: float, *, straight: bool = False) -> _Model:
        """The same run in steam that differs by so much [K], or goes straight from row to row."""
        other = copy(self)
        other.steam_c = self.steam_c + shift_k
        other.cut_into_steps(straight=straight)
        return other

    def cut_into_steps(self, *, straight: bool) -> None:
        """Cut the time between rows into short steps; note at which of them each row stands."""
        from scipy.interpolate import PchipInterpolator

        counts = np.maximum(1, np.ceil(np.diff(self.seconds) / STEP_S)).astype(int)
        pieces = [
            np.linspace(self.seconds[k], self.seconds[k + 1], count, endpoint=False) for k, count in enumerate(counts)
        ]
        self.fine_s = np.append(np.concatenate(pieces), self.seconds[-1])
        self.at_row = np.concatenate(([0], np.cumsum(counts)))
        if straight:
            self.fine_c = np.interp(self.fine_s, self.seconds, self.steam_c)
        else:
            self.fine_c = np.asarray(PchipInterpolator(self.seconds, self.steam_c)(self.fine_s))

    def _power_spans(self, log_: RunLog) -> list[tuple[int, int, float]]:
        """Blocks of rows (first, last) with a known mean power [kW], from when the generator boils."""
        spans: list[tuple[int, int, float]] = []
        first = None
        near = self.steam_c > self.setting.vessel.boil_c - SHORT_OF_BOILING_K
        last = self.rows if log_.kw is not None or not near.any() else int(np.argmax(near))
        for row in range(1, last):
            known = self.steam_c[row - 1] > self.steam_c[0] + STEAM_COMES_K
            if not known:
                first = None
                continue
            first = row - 1 if first is None else first
            if self.seconds[row] - self.seconds[first] >= 60 * BLOCK_MIN:
                spans.append((first, row, self._mean_power(log_, first, row)))
                first = None
        return spans

    def _mean_power(self, log_: RunLog, first: int, last: int) -> float:
        if log_.kw is None:
            return self.setting.vessel.element_kw
        lengths = np.diff(self.seconds[first : last + 1])
        return float(np.array(log_.kw[first + 1 : last + 1]) @ lengths / lengths.sum())

    def _fields(self, values: Floats) -> tuple[Floats, Floats]:
        """Core and mean of the slowest bag at each row [°C]."""
        alpha, surface = exp(values[0]), exp(values[1])
        heat = bag_heat_capacity(self.part.recipe) * 1000 * self.part.bag.wet_kg / self.part.bag.volume_m3
        modes = bag_modes.__wrapped__(self.part.bag, alpha, alpha * heat, surface, self.stack)
        amplitudes = np.full(len(modes.rates), self.steam_c[0] - self.core_c[0])
        core, mean = np.empty(len(self.fine_s)), np.empty(len(self.fine_s))
        lengths, rises = np.diff(self.fine_s), np.diff(self.fine_c)
        decays = np.exp(-np.outer(lengths, modes.rates))
        gains = (1 - decays) / np.outer(lengths, modes.rates)
        for row in range(len(self.fine_s)):
            if row:
                amplitudes = amplitudes * decays[row - 1] + rises[row - 1] * gains[row - 1]
            core[row] = self.fine_c[row] - modes.core @ amplitudes
            mean[row] = self.fine_c[row] - modes.mean @ amplitudes
        return core[self.at_row], mean[self.at_row]

    def core(self, values: Floats) -> Floats:
        """Core at each row [°C]."""
        return self._fields(values)[0]

    def residuals(self, values: Floats) -> Floats:
        """Modelled less measured, over the expected scatter: cores by row, then powers by block [-]."""
        core, mean = self._fields(values)
        vessel = self.setting.vessel
        power = []
        for first, last, kw in self.spans:
            length = self.seconds[last] - self.seconds[first]
            stored = self.capacity_kj_k * (mean[last] - mean[first])
            stored += vessel.metal_kj_k * (self.steam_c[last] - self.steam_c[first])
            warm = np.trapezoid(self.steam_c[first : last + 1] - vessel.ambient_c, self.seconds[first : last + 1])
            lost = values[2] * float(warm)
            power.append((vessel.element_for((stored + lost) / length) - kw) / (NOISE_KW_SHARE * vessel.element_kw))
        return np.concatenate([(core - self.core_c) / NOISE_K, np.array(power)])
