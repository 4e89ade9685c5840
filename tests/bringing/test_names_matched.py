"""Which stock line a name in a list means; what is only likely is offered and never taken."""

from __future__ import annotations

from pathlib import Path

import pytest
from old_spreadsheet import Read, house_of, reader_of

from stockroom.bringing.name_words import name_words, spelt
from stockroom.bringing.names import MOST_LOOKED_UP, Asked, Match, Matcher
from stockroom.bringing.outcome import Status
from stockroom.measure.amounts import Kind

G, CM3 = Kind.MASS, Kind.VOLUME


@pytest.fixture
def read(practice: Path) -> Read:
    return reader_of(practice)


@pytest.fixture
def find(practice: Path) -> Matcher:
    return Matcher(house_of(practice))


def match(find: Matcher, name: str, kind: Kind | None, strength: str = "", **more: str) -> Match:
    return find.find(Asked(name, kind, strength, **more))


CERTAIN = [
    ("Sod thiosulphate 5H2O", G, "", "sodium thiosulfate pentahydrate"),
    ("Na2S2O3.5H2O", G, "", "sodium thiosulfate pentahydrate"),
    ("hypo, anhydrous", G, "", "sodium thiosulfate, anhydrous"),
    ("sodium thiosulphate pentahydrate AR", G, "", "sodium thiosulfate pentahydrate"),
    ("Na2S2O3", CM3, "0.1 M", "sodium thiosulfate 0.100 mol/dm3"),
    ("Peroxide 20V", CM3, "", "hydrogen peroxide 20 vol"),
    ("H2O2 100vol", CM3, "", "hydrogen peroxide 100 vol"),
    ("KMnO4 soln", CM3, "M/50", "potassium permanganate 0.0200 mol/dm3"),
    ("DCPIP", G, "", "DCPIP sodium salt"),
    ("NH3 .880", CM3, "", "ammonia 35 % w/w"),
    ("Benedicts", None, "", "Benedict's reagent"),
    ("COPPER II SULPHATE 5H2O", G, "", "copper(II) sulfate pentahydrate"),
    ("copper (II) sulphate, anhydrous", G, "", "copper(II) sulfate, anhydrous"),
    ("sodium chloride (NaCl)", G, "", "sodium chloride"),
    ("7647-14-5", G, "", "sodium chloride"),
    ("Vitamin C", G, "", "ascorbic acid"),
    ("limewater", CM3, "", "limewater saturated"),
    ("HCl conc", CM3, "", "hydrochloric acid 36 % w/w"),
    ("glacial acetic acid", CM3, "", "ethanoic acid, glacial 100 % w/w"),
    ("NaOH pellets", G, "", "sodium hydroxide pellets"),
    ("soluble starch powder", G, "", "starch, soluble"),
    ("sulphuric acid 98% w/w", CM3, "", "sulfuric acid 98 % w/w"),
    ("hydrogen peroxide 100 vol", CM3, "100 vol", "hydrogen peroxide 100 vol"),
]


@pytest.mark.parametrize(("name", "kind", "strength", "key"), CERTAIN, ids=[c[0] for c in CERTAIN])
def test_what_is_certain_is_taken(
    find: Matcher, name: str, kind: Kind, strength: str, key: str
) -> None:
    found = match(find, name, kind, strength)
    assert (found.line and found.line.key, found.doubt) == (key, "")


OFFERED = [
    # the form is hinted at, not said: weighed for the other it makes half as strong again
    ("hypo anhyd", G, "", "sodium thiosulfate, anhydrous"),
    ("Silver nit.", G, "", "silver nitrate"),
    ("pot permang", G, "", "potassium permanganate"),
    ("Sodum chlorde", G, "", "sodium chloride"),
    # only a hydrate is held, and the name does not say that it is one
    ("barium chloride", G, "", "barium chloride dihydrate"),
]


@pytest.mark.parametrize(("name", "kind", "strength", "key"), OFFERED, ids=[c[0] for c in OFFERED])
def test_what_is_likely_is_offered(
    find: Matcher, name: str, kind: Kind, strength: str, key: str
) -> None:
    found = match(find, name, kind, strength)
    assert found.line is not None
    assert (found.line.key, bool(found.doubt)) == (key, True)


def test_two_forms_on_the_shelf_are_told_apart(find: Matcher) -> None:
    found = match(find, "copper sulphate", G)
    assert found.line is None
    assert {line.key for line in found.offered} == {
        "copper(II) sulfate pentahydrate",
        "copper(II) sulfate, anhydrous",
    }


def test_a_form_nobody_holds_is_not_taken_for_another(find: Matcher) -> None:
    found = match(find, "copper sulphate monohydrate", G)
    assert (found.line, found.doubt) == (None, "no stock line of it is with 1 H2O")


def test_a_solution_is_no_solid_of_the_same_name(find: Matcher) -> None:
    found = match(find, "KI", CM3)
    assert found.line is None
    assert {line.form for line in found.offered} == {"solution"}
    assert found.doubt == "which strength"


def test_a_number_nobody_explains_is_asked_about(find: Matcher) -> None:
    found = match(find, "H2SO4 1.84", CM3)
    assert (found.line, found.doubt) == (None, "which strength")


def test_an_unknown_name_gets_the_three_nearest_and_no_line(find: Matcher) -> None:
    found = match(find, "sodium thing", G)
    assert (found.line, found.likely, found.named) == (None, False, ())
    assert 1 <= len(found.offered) <= 3


def test_a_formula_or_registry_number_beside_it_names_it(find: Matcher) -> None:
    for more in ({"formula": "AgNO3"}, {"cas": "7761-88-8"}):
        found = match(find, "lunar caustic", G, **more)
        assert found.line is not None
        assert found.line.key == "silver nitrate"


def test_so_many_unknown_names_are_not_looked_up_for_ever(find: Matcher) -> None:
    for number in range(MOST_LOOKED_UP):
        match(find, f"zq{number}xw", G)
    assert "there are so many" in match(find, "zqxw", G).doubt


# -- in a row -------------------------------------------------------------------------


def said(read: Read, cells: str, *answers: str) -> tuple[Status, str, str]:
    found = read(f"name,amount,unit,strength\n{cells}\n", *answers).rows[0]
    key = found.incoming.line.key if found.incoming and found.incoming.line else ""
    told = "; ".join(doubt.text for doubt in found.doubts if doubt.key)
    return found.status, key, told


def test_a_strength_nobody_holds_is_refused_with_the_command_that_adds_it(read: Read) -> None:
    status, key, told = said(read, "KMnO4,500,ml,0.5 M")
    assert (status, key) == (Status.REFUSED, "")
    assert 'no stock line of it at "0.5 M"' in told
    assert (
        'stockroom add lines item="potassium permanganate" strength="0.5 M"'
        ' substance="potassium permanganate" form=solution' in told
    )


def test_a_strength_in_the_name_and_another_beside_it_is_asked(read: Read) -> None:
    status, _, told = said(read, "Peroxide 20V,500,ml,100 vol")
    assert (status, told) == (Status.ASKED, '"20 vol" in the name and "100 vol" here: which is it?')


def test_a_per_cent_beside_a_mass_is_how_pure_it_is(read: Read) -> None:
    found = read("name,amount,strength\nNaCl,500 g,99.5 %\n").rows[0]
    assert found.incoming is not None
    assert found.incoming.assay == pytest.approx(0.995)
    assert said(read, "NaCl,500,g,0.1 M")[0] is Status.REFUSED


def test_what_is_never_kept_is_refused(read: Read) -> None:
    status, _, told = said(read, "ammoniacal silver,20,ml,")
    assert status is Status.REFUSED
    assert "never kept" in told


@pytest.mark.parametrize("answer", ["1.name=yes", "names=yes", "1.name=silver nitrate"])
def test_what_is_offered_is_taken_when_somebody_says_so(read: Read, answer: str) -> None:
    assert said(read, "Silver nit.,25,g,", answer)[:2] == (Status.ACCEPTED, "silver nitrate")


def test_yes_takes_nothing_where_several_are_offered(read: Read) -> None:
    assert said(read, "copper sulphate,25,g,", "names=yes", "1.name=yes")[0] is Status.ASKED


# -- the parts of a name --------------------------------------------------------------


@pytest.mark.parametrize(
    ("text", "core", "water", "strength"),
    [
        ("CuSO4.5H2O", "CuSO4", 5, ""),
        ("Na2CO3·10H2O", "Na2CO3", 10, ""),
        ("H2O2 30% w/w", "H2O2", None, "30% w/w"),
        ("2 M HCl", "HCl", None, "2 M"),
        ("conc. sulphuric acid", "sulphuric acid", None, ""),
        ("2,4-dinitrophenylhydrazine", "2,4-dinitrophenylhydrazine", None, ""),
        ("1,10-phenanthroline", "1,10-phenanthroline", None, ""),
        ("cyclohexane", "cyclohexane", None, ""),
        ("tap water H2O", "tap water H2O", None, ""),
    ],
)
def test_a_name_is_taken_apart(text: str, core: str, water: float | None, strength: str) -> None:
    words = name_words(text)
    assert (words.core, words.water, words.strength) == (core, water, strength)


def test_names_are_compared_in_one_spelling() -> None:
    same = ("Copper(II) sulphate", "copper (II) SULFATE", "copper II  sulfate")
    assert len({spelt(each) for each in same}) == 1
    assert spelt("Benedict's") == spelt("Benedict’s") == "benedicts"
