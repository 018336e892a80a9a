"""The invented farms give what is recorded beside them.

Texts are compared letter by letter. A plan is one of many within its proven gap, and another processor may round a
last digit another way, so plans are compared by what every plan within the gap shares.
"""

from __future__ import annotations

import json

import pytest

from tests.scenarios.record import RECORDED, SCENARIOS, TEXTS, answer, plan_of


@pytest.mark.parametrize("scenario", RECORDED)
@pytest.mark.parametrize("name", TEXTS)
def test_text_is_as_recorded(scenario: str, name: str) -> None:
    command, *options = TEXTS[name]
    recorded = (SCENARIOS / scenario / "expected" / name).read_text(encoding="utf-8")
    assert answer(scenario, command, *options) == recorded


@pytest.mark.parametrize("scenario", RECORDED)
def test_plan_is_as_recorded(scenario: str) -> None:
    was = json.loads((SCENARIOS / scenario / "expected" / "plan.json").read_text(encoding="utf-8"))
    now = plan_of(scenario)
    scale = max(abs(was["bound"]), was["money"]["sales"])
    assert now["gap"] <= 0.005
    assert now["bound"] == pytest.approx(was["bound"], rel=1e-6)
    assert abs(now["objective"] - was["objective"]) <= 0.005 * scale
    fixed = ("week", "orders_kg", "unavoidable_kg")
    assert [[row[key] for key in fixed] for row in now["weeks"]] == [
        [row[key] for key in fixed] for row in was["weeks"]
    ]
    for line in ("sales", "materials", "labour", "energy"):
        assert now["money"][line] == pytest.approx(was["money"][line], rel=0.05), line
    bags = [sum(sum(row["bags"].values()) for row in plan["weeks"]) for plan in (now, was)]
    assert bags[0] == pytest.approx(bags[1], rel=0.05)
