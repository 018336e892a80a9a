"""References and codes of farms made in memory, such as a what-if."""

from __future__ import annotations

from pathlib import Path

import pytest

from models.farm.plausible import plausibility
from models.farm.references import nearest_choice, reference_mismatches
from scheduler.folder import read_farm_folder

BASE = Path(__file__).parents[1] / "broken_farms" / "base"


@pytest.fixture(scope="module")
def farm():
    return read_farm_folder(BASE).farm


def test_a_sound_farm_has_neither(farm):
    assert reference_mismatches(farm) == []
    assert plausibility(farm) == []


def test_an_unknown_reference_and_a_code_that_stands_twice(farm):
    lost = farm.strain[0].model_copy(update={"recipe": "oak60"})
    twice = farm.model_copy(update={"strain": (lost, farm.strain[1]), "room": (*farm.room, farm.room[0])})
    found = reference_mismatches(twice)
    assert [(one.key, one.nearest) for one in found] == [("room.cool.code", ""), ("strain.OYS.recipe", "oak62")]
    assert found[0].expected == "each room code once"


@pytest.mark.parametrize(
    ("word", "choices", "nearest"),
    [
        ("oys", ["LIO", "OYS"], "OYS"),
        ("colonization", ["cooling", "colonisation"], "colonisation"),
        ("xyz", ["LIO", "OYS"], ""),
        ("anything", [], ""),
        ("a", ["A", "a"], "A"),  # alike but for case: the first of them
    ],
)
def test_nearest_choice(word, choices, nearest):
    assert nearest_choice(word, choices) == nearest
