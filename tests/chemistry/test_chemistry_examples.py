"""The examples in the docstrings hold."""

from __future__ import annotations

import doctest
import importlib

import pytest


@pytest.mark.parametrize(
    "name",
    [
        "densities.lookup",
        "densities.oiml",
        "ethanol",
        "formula",
        "glassware",
        "making",
        "mixing",
        "strength",
        "titration",
        "uncertainty",
        "weighing",
    ],
)
def test_the_examples_in_the_docstrings_hold(name: str) -> None:
    tried = doctest.testmod(importlib.import_module(f"stockroom.chemistry.{name}"))
    assert tried.attempted > 0
    assert tried.failed == 0
