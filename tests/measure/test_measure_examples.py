"""The examples in the docstrings hold, and reading a page of dates loads no heavy library."""

from __future__ import annotations

import doctest
import importlib
import subprocess
import sys

import pytest

MODULES = ["amounts", "formats", "units"]


@pytest.mark.parametrize("name", MODULES)
def test_the_examples_in_the_docstrings_hold(name: str) -> None:
    tried = doctest.testmod(importlib.import_module(f"stockroom.measure.{name}"))
    assert tried.attempted > 0
    assert tried.failed == 0


EVERYDAY = """
import sys
from stockroom.measure import amounts, days, formats, parsing, periods, units, workdays
parsing.parse_amount("5 cm3"), days.parse_day("12 Jan 2027"), periods.parse_period("28 d")
print(*(name for name in ("pint", "dateutil") if name in sys.modules))
"""


def test_everyday_reading_loads_neither_pint_nor_dateutil() -> None:
    ran = subprocess.run([sys.executable, "-c", EVERYDAY], capture_output=True, text=True)
    assert (ran.stdout.strip(), ran.stderr) == ("", "")
