"""What goes into the mixer: masses add up, water is what is missing, and mixes that cannot be made are refused."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st
from pydantic import ValidationError

from models.farm import Ingredient, Recipe
from models.mix import mix_for

SAWDUST = {"name": "sawdust", "dry_pct": 80, "dry_cp_kj_kg_k": 1.4, "water_pct": 20, "cost_per_kg": 0.10}
BRAN = {"name": "bran", "dry_pct": 20, "dry_cp_kj_kg_k": 1.8, "water_pct": 12, "cost_per_kg": 0.40}


def recipe(*ingredients: dict[str, object], **changes: object) -> Recipe:
    parts = tuple(Ingredient.model_validate(one) for one in ingredients)
    return Recipe.model_validate({"code": "mix", "water_pct": 60, "ingredient": parts} | changes)


def test_a_batch_by_hand() -> None:
    """200 kg at 60 %: 80 kg dry, 64 of sawdust (80 kg bought) and 16 of bran (18.18 kg bought); 101.8 kg of water."""
    found = mix_for(recipe(SAWDUST, BRAN), 200)
    assert found.dry_kg == pytest.approx(80)
    assert dict(found.ingredients) == pytest.approx({"sawdust": 80.0, "bran": 16 / 0.88})
    assert found.add_water_kg == pytest.approx(200 - 80 - 16 / 0.88)
    assert found.cost == pytest.approx(80 * 0.10 + 16 / 0.88 * 0.40)


def test_heat_capacity_and_price_follow_from_the_ingredients() -> None:
    found = recipe(SAWDUST, BRAN)
    assert found.dry_heat_capacity == pytest.approx(0.8 * 1.4 + 0.2 * 1.8)
    assert found.price_per_kg == pytest.approx(mix_for(found, 200).cost / 200)
    plain = Recipe(code="plain", water_pct=60, dry_cp_kj_kg_k=1.5, cost_per_kg=0.2)
    assert (plain.dry_heat_capacity, plain.price_per_kg) == (1.5, 0.2)
    assert mix_for(plain, 50).cost == pytest.approx(10)


@given(
    share=st.floats(1, 99), wet=st.floats(0.1, 5000), first=st.floats(0, 40), second=st.floats(0, 40),
    water=st.floats(45, 80),
)  # fmt: skip
def test_masses_are_conserved(share: float, wet: float, first: float, second: float, water: float) -> None:
    made = recipe(
        SAWDUST | {"dry_pct": share, "water_pct": first}, BRAN | {"dry_pct": 100 - share, "water_pct": second},
        water_pct=water,
    )  # fmt: skip
    found = mix_for(made, wet)
    assert sum(kg for _, kg in found.ingredients) + found.add_water_kg == pytest.approx(wet)
    dry = sum(kg * (1 - own / 100) for (_, kg), own in zip(found.ingredients, (first, second), strict=True))
    assert dry == pytest.approx(found.dry_kg) == pytest.approx(wet * (1 - water / 100))
    wetter = mix_for(made, wet, water_pct=water + 5)
    assert wetter.add_water_kg > found.add_water_kg


@pytest.mark.parametrize(
    ("ingredients", "changes", "words"),
    [
        ((SAWDUST,), {}, "add up to 100"),
        ((SAWDUST, BRAN), {"dry_cp_kj_kg_k": 1.4}, "dry_cp_kj_kg_k of each ingredient"),
        ((SAWDUST, BRAN), {"cost_per_kg": 0.1}, "cost_per_kg of each ingredient"),
        ((SAWDUST | {"water_pct": 75}, BRAN), {}, "ingredients drier than the mix"),
    ],
)
def test_recipes_that_cannot_be_are_refused(
    ingredients: tuple[dict[str, object], ...], changes: dict[str, object], words: str
) -> None:
    with pytest.raises(ValidationError, match=words):
        recipe(*ingredients, **changes)


@pytest.mark.parametrize(
    ("wet", "water", "words"),
    [(0, 60, "above 0 kg"), (10, 0, "between 0 and 100"), (10, 100, "between"), (10, 12, "alone")],
)
def test_batches_that_cannot_be_are_refused(wet: float, water: float, words: str) -> None:
    with pytest.raises(ValueError, match=words):
        mix_for(recipe(SAWDUST, BRAN), wet, water)
