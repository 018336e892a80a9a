"""Invented farms by size, and farms of mixed shape, for benchmarks. The same size and seed give the same farm.

A farm is sized backwards from what its sterilisers can steam: so many bags a week, shared out over the strains, give
the kilograms that are ordered; rooms and crews are then as large as those bags need, times a slack. No value describes
a real farm; strains are of three invented tempers (quick, steady, slow) within the ranges that `bagweek strains` shows.
"""

from __future__ import annotations

from dataclasses import dataclass
from datetime import timedelta
from math import ceil
from random import Random
from typing import Any

from models.calendar import Week
from models.farm import Farm, Order, StockLot, Strain
from models.farm.plausible import plausibility
from models.growth.colonisation import days_to_ready
from models.growth.flush import flush_days, kg_per_bag

FIRST_WEEK = Week(2027, 2)
WORKDAYS = ("mon", "tue", "wed", "thu", "fri")
ORDER_DAYS = ("tue", "wed", "thu", "fri", "sat")
COOL, WARM = 16.0, 20.0
SHELF = 22.0
Content = tuple[Farm, tuple[Order, ...], tuple[StockLot, ...]]


@dataclass(frozen=True)
class Shape:
    """What a farm is made of.

    Attributes
    ----------
    sterilisers : tuple of (int, int)
        Count and places of each kind.
    loads : tuple of float
        Load steps of every kind [share of places].
    strains, weeks : int
        Strains grown; weeks to plan.
    demand : float
        Ordered bags a week over what the sterilisers can steam [-].
    slack : float
        Places of rooms and hours of crews over what the ordered bags need [-].
    runs_week : float
        Runs that one steriliser is taken to make in a week.
    """

    sterilisers: tuple[tuple[int, int], ...]
    loads: tuple[float, ...]
    strains: int
    weeks: int
    demand: float = 0.85
    slack: float = 1.25
    runs_week: float = 5.0
    supply_share: float | None = None
    cold_room: bool = False
    weekend: bool = True
    benches: int | None = None
    losses: tuple[float, float] = (2.0, 6.0)
    waits: tuple[int, int] = (5, 8)
    stock_lots: int = 0
    alone: bool = False

    @property
    def units(self) -> int:
        """Sterilisers in all."""
        return sum(count for count, _ in self.sterilisers)


SHAPES = {
    "small": Shape(((1, 100),), (0.5, 1.0), 3, 16, stock_lots=3),
    "medium": Shape(((2, 120), (1, 90)), (0.5, 1.0), 6, 26, stock_lots=4),
    "large": Shape(((6, 300), (4, 180)), (1.0,), 12, 52),
    "huge": Shape(((14, 300), (10, 240), (6, 180)), (1.0,), 20, 52),
}


def farm_of(size: str, seed: int = 1) -> Content:
    """Farm, orders and opening stock of a size: small, medium, large or huge."""
    return _Maker(SHAPES[size], Random(f"{size} {seed}")).make(f"{size} farm {seed}")  # noqa: S311  (no secret)


def weeks_of(size: str) -> int:
    """Weeks that a farm of a size is planned for."""
    return SHAPES[size].weeks


def random_shape(seed: int) -> Shape:
    """A shape of mixed make: one to four sterilisers, two to six strains, tight or slack."""
    rng = Random(f"shape {seed}")  # noqa: S311  (no secret)
    units = rng.randint(1, 4)
    places = rng.choice((24, 40, 60, 90, 120))
    kinds: tuple[tuple[int, int], ...] = ((units, places),)
    if units > 1 and rng.random() < 0.5:
        kinds = ((units - 1, places), (1, max(12, round(places * rng.choice((0.5, 0.75, 1.5))))))
    return Shape(
        sterilisers=kinds,
        loads=rng.choice(((1.0,), (0.5, 1.0), (0.5, 0.75, 1.0))),
        strains=rng.randint(2, 6),
        weeks=rng.randint(8, 12),
        demand=rng.choice((0.5, 0.7, 0.9, 1.1)),
        slack=rng.choice((0.75, 0.9, 1.0, 1.2, 1.6)),
        runs_week=rng.choice((4.0, 5.0)),
        supply_share=rng.choice((None, None, 0.6, 0.8)) if units > 1 else None,
        cold_room=rng.random() < 0.5,
        weekend=rng.random() < 0.6,
        benches=rng.choice((None, None, 1, 2)),
        losses=rng.choice(((0.0, 0.0), (2.0, 6.0), (3.0, 10.0))),
        waits=rng.choice(((2, 4), (4, 7), (7, 10))),
        stock_lots=rng.randint(0, 6),
        alone=rng.random() < 0.5,
    )


def random_farm(seed: int) -> Content:
    """Farm, orders and opening stock of a random shape; `random_shape` tells its weeks."""
    return _Maker(random_shape(seed), Random(f"farm {seed}")).make(f"random farm {seed}")  # noqa: S311  (no secret)


class _Maker:
    """Draws one farm of a shape."""

    def __init__(self, shape: Shape, rng: Random) -> None:
        self.shape = shape
        self.rng = rng
        self.capacity = sum(count * places for count, places in shape.sterilisers) * shape.runs_week

    def make(self, name: str) -> Content:
        shape = self.shape
        cards = [self._strain(k) for k in range(shape.strains)]
        strains = [Strain.model_validate(card) for card in cards]
        draws = [self.rng.uniform(0.6, 1.4) for _ in strains]
        bags = [shape.demand * self.capacity * draw / sum(draws) for draw in draws]
        sections: dict[str, Any] = {
            "site": self._site(name),
            "recipe": [
                {"code": "light", "water_pct": 63, "density_kg_m3": 570, "conductivity_w_m_k": 0.42,
                 "cost_per_kg": 0.11},
                {"code": "dense", "water_pct": 58, "density_kg_m3": 570, "conductivity_w_m_k": 0.40,
                 "cost_per_kg": 0.13},
            ],
            "bag": [
                {"code": "2k2", "wet_kg": 2.2, "shape": "cylinder", "diameter_mm": 125, "height_mm": 310, "cost": 0.3},
                {"code": "2k8", "wet_kg": 2.8, "shape": "cylinder", "diameter_mm": 140, "height_mm": 320, "cost": 0.35},
            ],
            "programme": [
                {"code": "night", "target_core_c": 95, "hold_h": 9},
                {"code": "long", "target_core_c": 95, "hold_h": 12},
            ],
            "steriliser": [self._steriliser(k, *kind) for k, kind in enumerate(shape.sterilisers)],
            "room": self._rooms(strains, bags),
            "strain": cards,
            "crew": self._crews(strains, bags),
            "limits": {"cooled_to_inoculate_h": 72, "inoculation_benches": None},
            "tariff": {"default": 0.30, "periods": [{"from": "23:00", "to": "08:00", "price": 0.17}]},
            "market": {"shortage_per_kg": 5, "spot_price_share": 0.5,
                       "spot_kg_week": max(5, round(0.05 * self.capacity * 0.7))},
        }  # fmt: skip
        if shape.benches is not None:
            needed = sum(bags) / 40 / 5 / 7.5
            sections["limits"]["inoculation_benches"] = max(shape.benches, ceil(needed * max(1.0, shape.slack)))
        farm = Farm.model_validate(sections)
        wrong = [fault for fault in plausibility(farm) if fault.severity == "error"]
        if wrong:
            raise ValueError(f"{name} is not plausible: {wrong}")
        return farm, self._orders(farm, bags), self._stock(farm, bags)

    def _strain(self, index: int) -> dict[str, Any]:
        rng, shape = self.rng, self.shape
        temper = ("quick", "steady", "slow")[index % 3]
        days = {"quick": (13, 18), "steady": (18, 25), "slow": (20, 30)}[temper]
        warm = rng.random() < 0.35
        slow = temper == "slow" and not shape.alone
        flushes = {"quick": [0.55, 0.30, 0.15], "steady": [0.65, 0.35], "slow": rng.choice([[0.6, 0.4], [1.0]])}[temper]
        return {
            "code": f"S{index + 1:02d}", "name": f"{temper} strain {index + 1}",
            "recipe": "dense" if slow else "light", "bag": "2k8" if slow else "2k2",
            "programme": "long" if slow and index % 2 else "night",
            "spawn_rate_pct": rng.choice((4, 5)), "spawn_cost_per_kg": rng.choice((5.5, 6, 6.5)),
            "t_min_c": 5, "t_opt_c": rng.choice((25, 26, 27)), "t_max_c": 36,
            "colonise_days": rng.randint(*days), "colonise_at_c": 22, "colonise_at_spawn_pct": 5,
            "mature_days": rng.choice((14, 21)) if temper == "slow" else 0,
            "ready_wait_days": rng.randint(*shape.waits),
            "cold_hold_days": rng.choice((0, 21, 30)) if shape.cold_room else 0,
            "pin_days": rng.randint(7, 10) if temper == "quick" else rng.randint(9, 15),
            "rest_days": rng.randint(10, 14), "flush_share": flushes, "be_pct": rng.randint(60, 90),
            "loss_pct": round(rng.uniform(*shape.losses)),
            "fruiting_temp_c": [18, 26] if warm else [10, 18],
            "shelf_life_days": rng.randint(4, 9),
        }  # fmt: skip

    def _site(self, name: str) -> dict[str, Any]:
        site: dict[str, Any] = {"name": name, "timezone": "Europe/Dublin", "altitude_m": 60, "feed_water_c": 11}
        site["ambient_c"] = [6, 6, 8, 10, 13, 15, 17, 17, 15, 12, 8, 6]
        if self.shape.supply_share is not None:
            elements = [(count, _element_kw(places)) for count, places in self.shape.sterilisers]
            full = sum(count * kw for count, kw in elements)
            site["base_load_kw"] = 2.0
            site["supply_kw"] = round(2.0 + max(self.shape.supply_share * full, *(kw for _, kw in elements)), 1)
        return site

    def _steriliser(self, index: int, count: int, places: int) -> dict[str, Any]:
        return {
            "code": f"st{index + 1}", "count": count, "places": places, "element_kw": _element_kw(places),
            "generator_water_kg": 20 + round(places / 5), "generator_metal_kg": 10 + round(places / 6),
            "metal_kg": 20 + round(1.3 * places), "loss_w_per_k": 2 + round(places / 18),
            "generator_loss_w_per_k": 2.0, "loads": list(self.shape.loads), "unload_below_c": 70, "vent_min": 30,
        }  # fmt: skip

    def _rooms(self, strains: list[Strain], bags: list[float]) -> list[dict[str, Any]]:
        slack = self.shape.slack
        biggest = max(places for _, places in self.shape.sterilisers)
        shelf = sum(n * (days_to_ready(s, SHELF) + 3) / 7 for s, n in zip(strains, bags, strict=True))
        rooms = [
            {"code": "cool", "kind": "cooling", "temp_c": 16, "places": max(2 * biggest, ceil(0.6 * self.capacity))},
            {"code": "shelf1", "kind": "colonisation", "temp_c": SHELF, "places": ceil(0.6 * slack * shelf)},
            {"code": "shelf2", "kind": "colonisation", "temp_c": SHELF, "places": ceil(0.4 * slack * shelf)},
        ]
        for code, temp in (("wet", COOL), ("warm", WARM)):
            need = sum(
                n * (flush_days(s, temp)[min(1, len(s.flush_share) - 1)] + 3) / 7
                for s, n in zip(strains, bags, strict=True)
                if s.fruiting_temp_c[0] <= temp <= s.fruiting_temp_c[1]
            )
            if need:
                room = {"code": code, "kind": "fruiting", "temp_c": temp, "clean_days": 1}
                rooms.append(room | {"places": ceil(slack * need)})
        if self.shape.cold_room:
            rooms.append({"code": "cold", "kind": "cold-hold", "temp_c": 3, "places": ceil(0.5 * self.capacity)})
        return rooms

    def _crews(self, strains: list[Strain], bags: list[float]) -> list[dict[str, Any]]:
        """Three crews, each as large as the week's bags need at the default rates."""
        slack, week = max(1.0, self.shape.slack), sum(bags)
        kg = week * max(0.7, 0.01 * max(s.be_pct for s in strains))
        five, six = 5 * 8.0, 5 * 8.0 + 4
        biggest = max(places for _, places in self.shape.sterilisers)
        mixers = max(ceil(biggest / (30 * 4.5)), ceil(slack * week * (1 / 30 + 1 / 250 + 1 / 230) / five))
        lab = max(1, ceil(slack * week / 40 / five))
        hall = max(1, ceil(slack * (week * (1 / 120 + 1 / 150) + kg / 12) / six))
        work = dict.fromkeys(WORKDAYS, "07:30-15:30")
        end = {"sat": "08:00-12:00"} if self.shape.weekend else {}
        picking = work | {"sat": "08:00-12:00"} | ({"sun": "08:00-10:00"} if self.shape.weekend else {})
        if self.shape.units == 1 and self.rng.random() < 0.5:
            both = {"code": "yard", "people": mixers + lab, "skills": ["mix", "steam", "inoculate", "open"]}
            return [
                both | {"cost_per_h": 15, "shift": work | end},
                {"code": "hall", "people": hall, "skills": ["open", "pick"], "cost_per_h": 14, "shift": picking},
            ]
        return [
            {"code": "yard", "people": mixers, "skills": ["mix", "steam"], "cost_per_h": 15, "shift": work | end},
            {"code": "lab", "people": lab, "skills": ["inoculate"], "cost_per_h": 16, "shift": dict(work)},
            {"code": "hall", "people": hall, "skills": ["open", "pick"], "cost_per_h": 14, "shift": picking},
        ]

    def _orders(self, farm: Farm, bags: list[float]) -> tuple[Order, ...]:
        rng = self.rng
        orders = []
        for strain, week_bags in zip(farm.strain, bags, strict=True):
            whole = kg_per_bag(strain, farm.recipe_of(strain), farm.bag_of(strain))
            week_kg = week_bags * whole * (1 - strain.loss_pct / 100)
            price = round(rng.uniform(8.5, 12.5) + (4 if len(strain.flush_share) < 3 else 0), 1)
            first = ceil((days_to_ready(strain, SHELF) + flush_days(strain)[0] + 5) / 7)
            parts = rng.randint(1, 3)
            for part, weekday in enumerate(rng.sample(ORDER_DAYS, parts)):
                orders.append(
                    Order(
                        customer=f"Customer {part + 1}",
                        strain=strain.code,
                        weekday=weekday,
                        kg=max(1.0, round(week_kg / parts * rng.uniform(0.85, 1.15))),
                        price_per_kg=round(price * rng.uniform(0.95, 1.05), 1),
                        first_week=FIRST_WEEK.plus(first + part),
                        priority=rng.randint(1, 3),
                    )
                )
        return tuple(orders)

    def _stock(self, farm: Farm, bags: list[float]) -> tuple[StockLot, ...]:
        rng, monday = self.rng, FIRST_WEEK.monday
        lots = []
        for number in range(self.shape.stock_lots):
            index = rng.randrange(len(farm.strain))
            strain = farm.strain[index]
            stages = ["cooled", "colonising", "colonising", "ready", "fruiting"]
            stage = rng.choice(stages + (["cold-held"] if strain.cold_hold_days else []))
            back = {
                "cooled": 1,
                "colonising": rng.randint(2, days_to_ready(strain, SHELF)),
                "ready": rng.randint(0, min(2, strain.ready_wait_days)),
                "cold-held": rng.randint(2, 12),
                "fruiting": rng.randint(2, strain.pin_days + 6),
            }[stage]
            since = monday - timedelta(days=back)
            code = f"{Week.of(since).short}-{strain.code}-9{number}"
            count = max(2, round(bags[index] * rng.uniform(0.15, 0.4)))
            lots.append(StockLot(lot=code, strain=strain.code, stage=stage, bags=count, since=since))
        return tuple(lots)


def _element_kw(places: int) -> float:
    return round(2.0 + places / 14, 1)
