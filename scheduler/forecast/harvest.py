"""Draw the harvest: kilograms by strain and day in many seasons that might be."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from models.farm import Farm
from scheduler.forecast.lots import Floats, Lots
from scheduler.forecast.spread import Generator, gamma, lognormal, lost_bags, variance_parts

CHUNK = 500
"""Draws worked on at once; part of what a seed stands for."""
Singles = NDArray[np.float32]


@dataclass(frozen=True)
class Harvest:
    """What was drawn.

    Attributes
    ----------
    ripe : ndarray
        Kilograms that ripen by strain, day and draw, each on the first day on which somebody picks [kg].
    picked : ndarray
        The same of what the plan picks: without what it leaves because nobody orders it [kg], by strain, week, draw.
    """

    ripe: Singles
    picked: Singles


def draw_harvest(farm: Farm, lots: Lots, next_pick: NDArray[np.int64], draws: int, seed: int) -> Harvest:
    """Draw seasons.

    Parameters
    ----------
    next_pick : ndarray
        For each day from 0 the first day from it on which somebody picks; days at or past the end are left out [d].
    draws, seed : int
        Number of seasons, and the seed of PCG64.
    """
    strains, days = len(farm.strain), len(next_pick)
    ripe = np.zeros((strains, days, draws), dtype=np.float32)
    picked = np.zeros((strains, days // 7, draws), dtype=np.float32)
    for chunk, start in enumerate(range(0, draws, CHUNK)):
        size = min(CHUNK, draws - start)
        rng = np.random.Generator(np.random.PCG64(np.random.SeedSequence([seed, chunk])))
        factor, day = _season(farm, lots, rng, size)
        day = np.where(day < days, next_pick[np.clip(day, 0, days - 1)], days)
        strain = lots.strain[lots.open_lot[lots.pick_open]]
        cell = ((strain[:, None] * (days + 1) + np.minimum(day, days)) * size + np.arange(size)).ravel()
        shape = (strains, days + 1, size)
        count = int(np.prod(shape))
        all_ripe = np.bincount(cell, (lots.ripe_kg[:, None] * factor).ravel(), minlength=count).reshape(shape)
        ripe[:, :, start : start + size] = all_ripe[:, :days]
        all_picked = np.bincount(cell, (lots.pick_kg[:, None] * factor).ravel(), minlength=count).reshape(shape)
        weeks = all_picked[:, :days].reshape(strains, days // 7, 7, size).sum(axis=2)
        picked[:, :, start : start + size] = weeks
    return Harvest(ripe, picked)


def _season(farm: Farm, lots: Lots, rng: Generator, size: int) -> tuple[Floats, NDArray[np.int64]]:
    """For each flush and draw: kilograms over those planned [-], and the day on which it is ripe [d]."""
    count = len(lots.strain)
    left = lots.bags[:, None] - lost_bags(rng, lots.bags, lots.loss, farm.spread.loss_correlation, size)
    survived = np.where(lots.planned[:, None] > 0, left / np.maximum(lots.planned, 1e-9)[:, None], 1.0)
    common = rng.standard_normal(size)
    run, pins, rests, whole = (np.ones((count, size)) for _ in range(4))
    own_cv = np.zeros(count)
    for number, strain in enumerate(farm.strain):
        mine = lots.strain == number
        shape = (int(mine.sum()), size)
        for times in (run, pins, rests):
            times[mine] = lognormal(rng, strain.days_cv, shape)
        farm_cv, lot_cv, own_cv[mine] = variance_parts(strain.yield_cv, farm.spread.farm_share, farm.spread.lot_share)
        s = np.sqrt(np.log1p(farm_cv**2))
        whole[mine] = np.exp(s * common - s * s / 2) * gamma(rng, lot_cv, shape)
    own = gamma(rng, own_cv[lots.open_lot] / np.sqrt(np.maximum(lots.open_bags, 1.0)), (len(lots.open_lot), size))
    lot_of_pick = lots.open_lot[lots.pick_open]
    factor = (survived * whole)[lot_of_pick] * own[lots.pick_open]
    spare = lots.open_slack + np.ceil(lots.run_days - 1e-9) - lots.run_days
    late = np.ceil(lots.run_days[:, None] * (run[lots.open_lot] - 1) - spare[:, None] - 1e-9)
    delay = np.where(lots.run_days[:, None] > 0, np.maximum(0.0, late), 0.0)
    moved = lots.pick_spans[:, :1] * (pins[lot_of_pick] - 1) + lots.pick_spans[:, 1:] * (rests[lot_of_pick] - 1)
    day = lots.pick_day[:, None] + delay[lots.pick_open] + np.rint(moved)
    return factor, np.maximum(day, 0).astype(np.int64)
