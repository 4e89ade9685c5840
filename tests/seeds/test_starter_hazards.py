"""What is said of the starter house's stock holds together: labels, storage groups, neighbours."""

from __future__ import annotations

import csv
from typing import TYPE_CHECKING

import pytest

from stockroom.safety.neighbours import APART, kinds_of
from stockroom.service.database import new_store, seeds_folder, starter_folder
from stockroom.service.hazards import hazards_of

if TYPE_CHECKING:
    from pathlib import Path

    from stockroom.safety.hazards import Hazards

Row = dict[str, str]


def table(name: str) -> list[Row]:
    with (seeds_folder() / name).open(encoding="utf-8", newline="") as file:
        return list(csv.DictReader(file, strict=True))


SUBSTANCES = {row["substance"]: row for row in table("starter/substances.csv")}


@pytest.fixture(scope="module")
def starter(tmp_path_factory: pytest.TempPathFactory) -> Path:
    path = tmp_path_factory.mktemp("starter") / "starter.sqlite"
    new_store(path, tables=starter_folder())
    return path


def said(found: Hazards) -> str:
    return " ".join(found.statements + found.supplemental)


# limits as in the reference, F1 (marks there); ethanol in water by OIML R 22 (b), its flash
# points from memory (c); the rest by the general rules (c)
@pytest.mark.parametrize(
    ("line", "statements"),
    [
        ("hydrochloric acid 6.00 mol/dm3", "H315 H319 H335"),
        ("sulfuric acid 1.00 mol/dm3", "H315 H319"),
        ("nitric acid 0.400 mol/dm3", "H315 H319"),
        ("ethanoic acid 2.00 mol/dm3", "H315 H319"),
        ("ammonia 2.00 mol/dm3", "H315 H318"),
        ("ethanol 70 % v/v", "H225 H319"),
        ("sodium sulfite 0.500 mol/dm3", "EUH031"),
        ("potassium hydroxide in ethanol 0.500 mol/dm3", "H225 H314"),
        # 60 % v/v spirit is 52.1 % by mass, though 47 g in 100 cm³
        ("methyl red 0.10 % w/v", "H225 H319"),
        ("phenolphthalein 1.0 % w/v", "H225 H319 H341 H350"),
        ("universal indicator", "H225"),
        ("Fehling's solution B", "H314"),
        ("biuret reagent", "H314"),
        ("Benedict's reagent", "H319 H412"),
        ("lead(II) nitrate 0.100 mol/dm3", "H317 H318 H360Df H373 H411"),
        ("buffer pH 9.18 0.0100 mol/dm3", "H360FD"),
    ],
)
def test_a_made_line_is_labelled_for_what_is_in_it(
    starter: Path, line: str, statements: str
) -> None:
    assert said(hazards_of(starter, line)) == statements


def test_spirit_in_a_mixture_counts_by_mass_and_says_over_what(starter: Path) -> None:
    """60 % v/v ethanol: 52.1 % by mass and 0.909 g/cm³ by OIML R 22 (b)."""
    found = hazards_of(starter, "methyl red 0.10 % w/v")
    inside = {part.substance: part.percent for part in found.contents}
    assert inside["ethanol"] == pytest.approx(52.1, abs=0.2)
    assert inside["methyl red"] == pytest.approx(0.1 / 0.909, rel=2e-3)
    assert any("taken over 0.91 g/cm³" in note for note in found.notes)


def test_of_two_light_liquids_neither_is_counted_too_low(starter: Path) -> None:
    """Halves by volume, 0.900 and 0.779 g/cm³ (b): 53.6 and 46.4 % by mass."""
    found = hazards_of(starter, "thin-layer solvent, ethyl ethanoate and cyclohexane")
    assert [part.percent for part in found.contents] == pytest.approx([53.6, 46.4], abs=0.2)


def test_every_line_has_an_answer(starter: Path) -> None:
    for line in table("starter/lines.csv"):
        found = hazards_of(starter, f"{line['item']} {line['strength']}".strip())
        assert found.contents or not found.entered
        assert all(0 < part.percent <= 100 for part in found.contents)


@pytest.mark.parametrize(
    ("line", "told"),
    [
        ("hydrochloric acid 2.00 mol/dm3", True),
        ("sodium hydroxide 0.100 mol/dm3", True),
        ("sodium chloride 0.100 mol/dm3", False),
        # a trace of alkali brings the dye into solution
        ("bromothymol blue 0.040 % w/v", False),
    ],
)
def test_what_may_eat_metals_is_said_to_be_looked_up(starter: Path, line: str, told: bool) -> None:
    notes = hazards_of(starter, line).worked_out.notes
    assert any("H290" in note for note in notes) is told


# statements, the groups that go with them, and who stands elsewhere for a reason of its own:
# the college's groups, acids, what is violent with water, a detergent held by the gram
BELONGS = {
    ("H270", "H271", "H272"): (
        "oxidiser|peroxide|oxidising acid|hypochlorite",
        "nitric acid|oxygen",
    ),
    ("H224", "H225", "H226", "H228"): (
        "flammable|metal powder|water-reactive|organic acid",
        "sodium dodecyl sulfate",
    ),
    ("H260", "H261", "EUH014"): ("water-reactive|metal powder", ""),
    ("H220", "H280"): ("gas", "hydrogen sulfide"),
    ("H300", "H310", "H330"): (
        "toxic",
        "ammonium dichromate|potassium dichromate|sodium dichromate|bromine|hydrogen sulfide",
    ),
}  # fmt: skip


@pytest.mark.parametrize("codes", BELONGS, ids=lambda codes: codes[0])
def test_a_storage_group_fits_what_the_label_says(codes: tuple[str, ...]) -> None:
    groups, elsewhere = (set(words.split("|")) for words in BELONGS[codes])
    wrong = {
        row["substance"]
        for row in table("hazards.csv")
        if row["h_code"] in codes and SUBSTANCES[row["substance"]]["storage_group"] not in groups
    }
    assert wrong - elsewhere == set()
    assert elsewhere - {""} <= wrong


@pytest.mark.parametrize("kind", ["acid", "organic acid", "oxidising acid"])
def test_what_gives_toxic_gas_with_acids_is_parted_from_them(kind: str) -> None:
    """EUH031 and EUH032; hydrogen cyanide comes of hexacyanoferrates only with strong acids."""
    gassy = {r["substance"] for r in table("hazards.csv") if r["h_code"] in ("EUH031", "EUH032")}
    assert {"sodium sulfite", "sodium disulfite", "sodium hypochlorite"} <= gassy
    beside = {name: kinds_of(name, SUBSTANCES[name]["storage_group"]) for name in gassy}
    free = {n for n, k in beside.items() if not any(frozenset({one, kind}) in APART for one in k)}
    assert {name for name in free if "hexacyanoferrate" not in name} == set()
    assert kind == "organic acid" or not free


def test_nothing_is_its_own_wrong_neighbour() -> None:
    for name, row in SUBSTANCES.items():
        kinds = kinds_of(name, row["storage_group"])
        assert not [pair for pair in APART if pair <= set(kinds)], name
