from __future__ import annotations

import re
import unicodedata
from collections import Counter

import pytest
from hypothesis import given
from hypothesis import strategies as st

from stockroom.chemistry.equivalents import REACTIONS, Reaction
from stockroom.chemistry.normality import equivalents, readings
from stockroom.errors import BadAmount

SIGNS = str.maketrans("⁺⁻²³⁴", "+-234")
CHARGE = re.compile(r"[²³⁴]?[⁺⁻]$")


@pytest.mark.parametrize(
    ("reaction", "substance", "per_mole"),
    [
        # equivalents as any analytical text has them, from memory (c)
        ("acid-base", "sulfuric acid", 2),
        ("acid–base", "NaOH", 1),
        ("as an acid", "ethanoic acid", 1),
        ("neutralisation", "calcium hydroxide", 2),
        ("acid-base, to HPO4 2-", "H3PO4", 2),
        ("complete neutralisation", "phosphoric acid", 3),
        ("acid-base, methyl orange", "Na2CO3", 2),
        ("acid-base", "oxalic acid dihydrate", 2),
        ("with permanganate", "H2C2O4.2H2O", 2),
        ("KMnO4 to Mn2+", "potassium permanganate", 5),
        ("KMnO4 → Mn²⁺", "KMnO4", 5),
        ("MnO4- + 8H+ + 5e- -> Mn2+ + 4H2O", "KMnO4", 5),
        ("in acid solution", "potassium manganate(VII)", 5),
        ("iron(II) to iron(III)", "KMnO4", 5),
        ("to MnO2, in neutral solution", "KMnO4", 3),
        ("redox", "potassium dichromate", 6),
        ("iron(II) to iron(III)", "ammonium iron(II) sulfate hexahydrate", 1),
        ("with iodine", "sodium thiosulfate pentahydrate", 1),
        ("iodometric", "iodine", 2),
        ("with thiosulfate", "potassium iodate", 6),
        ("to iodine", "potassium iodate", 5),
        ("Andrews", "KIO3", 4),
        ("iodometric", "KBrO3", 6),
        ("oxidising", "hydrogen peroxide", 2),
        ("with permanganate", "hydrogen peroxide", 2),
        ("precipitation", "silver nitrate", 1),
        ("by charge", "calcium chloride", 2),
    ],
)
def test_a_stated_reaction_gives_its_equivalents(
    reaction: str, substance: str, per_mole: int
) -> None:
    assert equivalents(reaction, substance).per_mole == per_mole


@pytest.mark.parametrize(
    "reaction",
    ["5 equivalents per mol", "5 eq/mol", "n = 5", "5 electrons", "5 e-", "1/5 KMnO4", "z=5"],
)
def test_a_stated_number_needs_no_table(reaction: str) -> None:
    assert equivalents(reaction, "something nobody holds").per_mole == 5


@pytest.mark.parametrize(
    ("reaction", "substance", "offered"),
    [
        ("", "potassium permanganate", "5 to Mn2+; 3 to MnO2; 1 to MnO4 2-"),
        ("redox", "potassium permanganate", '"redox" does not say which'),
        ("acid-base", "phosphoric acid", "1 acid-base, to H2PO4-; 2 acid-base, to HPO4 2-; 3"),
        ("acid-base", "sodium carbonate", "2 acid-base, to CO2; 1 acid-base, to HCO3-"),
        ("", "sodium hydroxide", '"N for acid-base"'),
        ("to iodine, with thiosulfate", "potassium iodate", "5 to iodine; 6 to iodide"),
        ("acid-base", "sucrose", "2 equivalents per mol"),
    ],
)
def test_what_is_not_said_is_asked_with_the_readings_it_may_have(
    reaction: str, substance: str, offered: str
) -> None:
    with pytest.raises(BadAmount) as caught:
        equivalents(reaction, substance, shown="the label")
    assert offered in str(caught.value)
    assert caught.value.message.startswith("the label: ")


def test_a_number_against_its_words_is_refused() -> None:
    with pytest.raises(BadAmount, match="3 equivalents per mol, and MnO4"):
        equivalents("KMnO4 to Mn2+, 3 equivalents per mol", "KMnO4")


@pytest.mark.parametrize("number", ["0", "50"])
def test_a_number_nothing_has_is_refused(number: str) -> None:
    with pytest.raises(BadAmount, match=f"{number} equivalents per mol cannot be"):
        equivalents(f"{number} equivalents per mol", "KMnO4")


@pytest.mark.parametrize("row", REACTIONS, ids=lambda row: f"{row.names[0]} {row.said}")
def test_the_words_offered_are_understood(row: Reaction) -> None:
    for name in row.names:
        assert equivalents(row.said, name).per_mole == row.per_mole


@given(st.text(max_size=30), st.sampled_from(REACTIONS))
def test_any_words_give_a_held_number_or_a_question(words: str, row: Reaction) -> None:
    try:
        found = equivalents(words, row.names[0])
    except BadAmount:
        return
    stated = re.search(r"\d", unicodedata.normalize("NFKC", words))
    assert stated or found.per_mole in {each.per_mole for each in readings(row.names[0])}


# The table checked against itself: every half-equation balances and counts its equivalents


def sides(row: Reaction) -> list[list[tuple[int, str]]]:
    found = []
    for side in row.change.split(" → "):
        terms = (re.fullmatch(r"(?:(\d+) )?(\S+)", term) for term in side.split(" + "))
        found.append([(int(term[1] or 1), term[2]) for term in terms if term])
    return found


def charge(species: str) -> int:
    mark = CHARGE.search(species)
    if mark is None:
        return 0
    written = mark[0].translate(SIGNS)
    return int(f"{written[-1]}{written[:-1] or 1}")


def atoms(species: str) -> Counter[str]:
    bare = CHARGE.sub("", species)
    count: Counter[str] = Counter()
    inner = re.sub(r"\(([^()]*)\)(\d+)", lambda m: m[1] * int(m[2]), bare)
    for element, number in re.findall(r"([A-Z][a-z]?)(\d*)", inner):
        count[element] += int(number or 1)
    return count


def balance(row: Reaction) -> tuple[Counter[str], int]:
    total: Counter[str] = Counter()
    over = 0
    for sign, side in zip((1, -1), sides(row), strict=True):
        for times, species in side:
            over += sign * times * charge(species)
            for element, number in atoms(species).items():
                total[element] += sign * times * number
    return Counter({element: number for element, number in total.items() if number}), over


def counted(row: Reaction) -> float:
    """Electrons on either side; else protons or hydroxide taken; else the ion's charge."""
    left, right = sides(row)
    both = [*left, *right]
    electrons = sum(times for times, species in both if species == "e⁻")
    if electrons:
        return electrons / left[0][0]
    taken = [times for times, species in left[1:] if species in ("H⁺", "OH⁻")]
    return taken[0] / left[0][0] if taken else abs(charge(left[0][1]))


@pytest.mark.parametrize("row", REACTIONS, ids=lambda row: f"{row.names[0]} {row.said}")
def test_every_reaction_balances_and_counts_its_equivalents(row: Reaction) -> None:
    if " → " not in row.change:
        ((times, cation),) = sides(row)[0]
        assert times * charge(cation) == row.per_mole
        return
    assert balance(row) == (Counter(), 0)
    assert counted(row) == row.per_mole


def test_a_reaction_out_of_balance_is_told() -> None:
    planted = Reaction(
        ("x",), "MnO4⁻ + 8 H⁺ + 4 e⁻ → Mn²⁺ + 3 H2O", 5, "", frozenset(), frozenset()
    )
    assert balance(planted) == (Counter({"O": 1, "H": 2}), 1)
    assert counted(planted) == 4
