"""A slip of the pen is offered; another chemical never is, however like its name."""

from __future__ import annotations

from functools import lru_cache

import pytest

from stockroom.bringing.known import House, KnownLine
from stockroom.bringing.name_slips import another_thing
from stockroom.bringing.names import Asked, Match, Matcher
from stockroom.measure.amounts import Kind
from stockroom.store.likeness import nearest

HELD = (
    "sodium sulfite", "sodium sulfate", "sodium nitrate", "sodium chloride", "sodium carbonate",
    "sodium hypochlorite", "sodium chlorate(I)", "potassium chloride", "potassium chlorate",
    "potassium nitrate", "iron(II) sulfate", "iron(II) chloride", "copper(II) chloride",
    "copper(II) sulfate", "magnesium sulfate", "calcium chloride", "potassium iodide",
    "sodium thiosulfate", "phenolphthalein", "iodine", "methanol", "silver nitrate",
)  # fmt: skip


@lru_cache(maxsize=1)
def matcher() -> Matcher:
    lines = tuple(KnownLine(name, name, "solid", Kind.MASS, substance=name) for name in HELD)
    return Matcher(House(lines, (), nearest))


def find(name: str) -> Match:
    return matcher().find(Asked(name, Kind.MASS))


OTHERS = [
    ("sodium sulphide", "sodium sulfite"),
    ("sodium nitrite", "sodium nitrate"),
    ("potassium nitrite", "potassium nitrate"),
    ("sodium chlorate", "sodium chloride"),
    ("sodium chlorate", "sodium chlorate(I)"),
    ("sodium perchlorate", "sodium hypochlorite"),
    ("calcium hypochlorite", "calcium chloride"),
    ("potassium perchlorate", "potassium chlorate"),
    ("potassium iodate", "potassium iodide"),
    ("iron(III) sulphate", "iron(II) sulfate"),
    ("iron(III) chloride", "iron(II) chloride"),
    ("copper(II) oxide", "copper(II) chloride"),
    ("copper(I) chloride", "copper(II) chloride"),
    ("sodium hydrogencarbonate", "sodium carbonate"),
    ("sodium hydrogensulfate", "sodium sulfate"),
    ("manganese sulfate", "magnesium sulfate"),
    ("ethanol", "methanol"),
    ("Sodium sulphte", "sodium sulfite"),
    ("Sodium sulphte", "sodium sulfate"),
]


@pytest.mark.parametrize(("written", "held"), OTHERS)
def test_another_chemical_is_never_offered(written: str, held: str) -> None:
    found = find(written)
    assert another_thing(written, held)
    assert (found.line, found.named) == (None, ())


SLIPS = [
    ("Coper(II) sulphate", "copper(II) sulfate"),
    ("Phenolpthalein", "phenolphthalein"),
    ("Iodene", "iodine"),
    ("Sodum chlorde", "sodium chloride"),
    ("Potasium iodide", "potassium iodide"),
    ("Silver nitrat", "silver nitrate"),
    ("Magnesum sulphate", "magnesium sulfate"),
]


@pytest.mark.parametrize(("written", "meant"), SLIPS)
def test_a_slip_is_offered_and_not_taken(written: str, meant: str) -> None:
    found = find(written)
    assert found.line is not None
    assert (found.line.key, found.likely, bool(found.doubt)) == (meant, True, True)
