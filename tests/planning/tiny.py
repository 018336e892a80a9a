"""A farm small enough to plan on paper.

One drum of ten places is mixed and loaded on Mondays only, unloaded on Tuesday morning, and inoculated on Wednesdays
only. A bag is 2 kg with half of it water and gives all of its dry mass back as mushrooms: 1 kg, in one flush. It
colonises for 7 days and is picked 7 days after opening, both on Wednesdays; orders are for Fridays. So a bag loaded
on the Monday of week k can be sold on the Friday of week k + 2 and on no other Friday (shelf life 3 days).
"""

from __future__ import annotations

from typing import Any

from models.farm import Farm, Order

DAYS = ("mon", "tue", "wed", "thu", "fri", "sat", "sun")


def every_day(span: str = "08:00-16:00") -> dict[str, str]:
    """The same shift on all seven days."""
    return dict.fromkeys(DAYS, span)


def strain(code: str = "AAA", **changes: Any) -> dict[str, Any]:
    """A strain with a life of 7 days on the shelf and 7 days in the fruiting room."""
    card: dict[str, Any] = {
        "code": code, "recipe": "mix", "bag": "b2", "programme": "hot", "spawn_rate_pct": 5, "spawn_cost_per_kg": 0,
        "t_min_c": 5, "t_opt_c": 25, "t_max_c": 35, "colonise_days": 7, "colonise_at_c": 22,
        "colonise_at_spawn_pct": 5, "ready_wait_days": 0, "pin_days": 7, "rest_days": 7, "flush_share": [1.0],
        "be_pct": 100, "loss_pct": 0, "fruiting_temp_c": [10, 20], "shelf_life_days": 3,
    }  # fmt: skip
    return card | changes


def tiny(**changes: Any) -> Farm:
    """The tiny farm; ``changes`` replace whole sections."""
    sections: dict[str, Any] = {
        "site": {"name": "Paper Farm", "timezone": "Europe/Dublin", "ambient_c": 15},
        "recipe": [{"code": "mix", "water_pct": 50, "density_kg_m3": 500, "cost_per_kg": 0.5}],
        "bag": [{"code": "b2", "wet_kg": 2, "shape": "cylinder", "diameter_mm": 140, "height_mm": 260}],
        "programme": [{"code": "hot", "target_core_c": 90, "hold_h": 10}],
        "steriliser": [{
            "code": "drum", "places": 10, "element_kw": 4, "loads": [1.0], "unload_below_c": 70, "vent_min": 0,
            "generator_water_kg": 10, "loss_w_per_k": 2,
        }],
        "room": [
            {"code": "cool", "kind": "cooling", "places": 100, "temp_c": 15},
            {"code": "shelf", "kind": "colonisation", "places": 100, "temp_c": 22},
            {"code": "wet", "kind": "fruiting", "places": 100, "temp_c": 15},
        ],
        "strain": [strain()],
        "crew": [
            {"code": "mixers", "people": 1, "skills": ["mix"], "shift": {"mon": "08:00-16:00"}},
            {"code": "lab", "people": 1, "skills": ["inoculate"], "shift": {"wed": "08:00-10:00"}},
            {"code": "rest", "people": 1, "skills": ["steam", "open", "pick"], "shift": every_day()},
        ],
        "rates": {"mix_bags_h": 100, "inoculate_bags_h": 100},
        "limits": {"cooled_to_inoculate_h": 72},
        "tariff": {"default": 0},
        "market": {"shortage_per_kg": 0},
    }  # fmt: skip
    return Farm.model_validate(sections | changes)


def friday(kg: float, price: float = 10.0, code: str = "AAA", **changes: Any) -> Order:
    """A standing order for Fridays."""
    return Order(customer="Inn", strain=code, weekday="fri", kg=kg, price_per_kg=price, **changes)
