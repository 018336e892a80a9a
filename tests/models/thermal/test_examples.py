"""The examples in the models' docstrings give what they say."""

from __future__ import annotations

import doctest
import importlib
import pkgutil

import pytest

import models

MODULES = sorted(module.name for module in pkgutil.walk_packages(models.__path__, "models."))


@pytest.mark.parametrize("name", MODULES)
def test_examples(name: str) -> None:
    assert doctest.testmod(importlib.import_module(name)).failed == 0


def test_thermal_models_have_examples() -> None:
    tried = [
        doctest.testmod(importlib.import_module(name)).attempted
        for name in MODULES
        if name.startswith("models.thermal.")
    ]
    assert sum(tried) >= 10
