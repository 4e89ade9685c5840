"""Substances that must stand apart, each pair as it stands on a shelf under its storage group.

Source of the pairs: lists of incompatible chemicals in Prudent Practices and the CRC
Handbook, from memory (c); oxidisers and organics also on a university page (a).
"""

from __future__ import annotations

import csv

import pytest
from limits_held import SEEDS

from stockroom.safety.kinds import KINDS, also
from stockroom.safety.neighbours import RULINGS, Stands, kinds_of, wrong_neighbours

with (SEEDS / "starter" / "substances.csv").open(encoding="utf-8", newline="") as file:
    GROUP = {row["substance"]: row["storage_group"] for row in csv.DictReader(file)}


def told(one: str, other: str) -> str:
    """What is said of two bottles in one place, by the shipped storage groups."""
    kinds = [kinds_of(name, GROUP[name]) for name in (one, other)]
    shelf = [Stands(number, each, "A1") for number, each in zip(("B1", "B2"), kinds, strict=True)]
    return " ".join(found.text for found in wrong_neighbours(shelf))


@pytest.mark.parametrize(
    ("one", "other", "word"),
    [
        ("potassium permanganate", "glycerol", "unlit"),
        ("potassium permanganate", "ethane-1,2-diol", "unlit"),
        ("potassium permanganate", "benzaldehyde", "fire"),
        ("calcium hypochlorite", "glycerol", "by itself"),
        ("calcium hypochlorite", "carbon", "by itself"),
        ("perchloric acid", "cellulose", "explosion"),
        ("perchloric acid", "ethanol", "fire"),
        ("perchloric acid", "glucose", "explosion"),
        ("phenylamine", "nitric acid", "by itself"),
        ("phenylamine", "hydrogen peroxide", "fire"),
        ("nitric acid", "copper", "poisonous"),
        ("nitric acid", "zinc", "poisonous"),
        ("nitric acid", "tin", "poisonous"),
        ("nitric acid", "benzyl alcohol", "fire"),
        ("hydrogen peroxide", "copper", "gas"),
        ("hydrogen peroxide", "iron", "gas"),
        ("sodium nitrite", "ammonium chloride", "explosive"),
        ("sodium nitrite", "diammonium hydrogenphosphate", "explosive"),
        ("silver nitrate", "ammonia", "explodes"),
        ("sodium hypochlorite", "sodium disulfite", "poisonous"),
        ("trichloromethane", "sodium hydroxide", "violent"),
        ("trichloromethane", "propanone", "violent"),
        ("potassium chlorate", "sucrose", "explosive"),
    ],
)
def test_a_pair_is_parted_whichever_stands_there_first(one: str, other: str, word: str) -> None:
    assert word in told(one, other)
    assert word in told(other, one)


@pytest.mark.parametrize(
    ("one", "other"),
    [
        ("glycerol", "ethane-1,2-diol"),
        ("copper", "sodium chloride"),
        ("silver nitrate", "potassium nitrate"),
        ("potassium permanganate", "glucose"),
        ("trichloromethane", "dichloromethane"),
        ("hydroxylammonium chloride", "sodium nitrite"),
    ],
)
def test_what_may_stand_together_is_let_be(one: str, other: str) -> None:
    assert told(one, other) == ""


def test_every_kind_has_a_rule_and_every_name_is_in_the_tables() -> None:
    ruled = {kind for pair in RULINGS for kind in pair}
    assert {kind for kinds in KINDS.values() for kind in kinds} <= ruled
    # named for a house of one's own: none is in the starter's tables
    assert set(KINDS) - set(GROUP) <= {"potassium nitrite", "nickel", "manganese"}


@pytest.mark.parametrize("name", ["ammonium nitrate", "triammonium phosphate", "ammonium alum"])
def test_an_ammonium_salt_is_known_by_its_name(name: str) -> None:
    assert "ammonium salt" in also(name)
