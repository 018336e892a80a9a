"""A strain, recipe and bag that the examples in docstrings and pages share."""

from __future__ import annotations

from models.farm import Bag, Recipe, Strain

OAK = Recipe(code="oak62", water_pct=62)
BAG = Bag(code="2k3", wet_kg=2.3, shape="cylinder", diameter_mm=130, height_mm=310)
GREY_OYSTER = Strain(
    code="OYS",
    name="grey oyster",
    recipe="oak62",
    bag="2k3",
    programme="overnight",
    spawn_rate_pct=4,
    t_min_c=4,
    t_opt_c=27,
    t_max_c=36,
    colonise_days=16,
    colonise_at_c=22,
    colonise_at_spawn_pct=5,
    pin_days=7,
    rest_days=12,
    flush_share=(0.55, 0.30, 0.15),
    be_pct=85,
    loss_pct=4,
    fruiting_temp_c=(10, 20),
    shelf_life_days=6,
)
