"""`why`, `why --instead` and `learn --spare` as they are typed: what they print and refuse."""

from __future__ import annotations

import hashlib
from pathlib import Path
from typing import TYPE_CHECKING

import pytest

if TYPE_CHECKING:
    from conftest import Stockroom

NOW = ("--as-at", "2027-01-04")
AFTER = ("--as-at", "2027-03-26")


def said(stockroom: Stockroom, store: Path, *words: str) -> str:
    result = stockroom("why", *words, *NOW, store=store)
    assert result.code == 0, result.err
    lines = result.out.splitlines()
    assert lines[0] == "PRACTICE"
    assert 1 <= len(lines) - 1 <= 5
    return " ".join(lines[1:])


# -- why -------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("ref", "words"),
    [
        # a check is asked about by its bottle, or by the need that waits for it
        ("S02", "check: titrate S02"),
        ("K21.4", "check: titrate S02"),
        ("R09", "booked: K18 2027-02-25"),
        ("r09", "copper(II) sulfate 0.500 mol/dm³ 100 cm³ per group"),
        ("CH", "orders come to £"),
        ("2027-01-25", "booked: K07"),
        ("25 January 2027", "booked: K07"),
        ("sodium chloride 0.500 mol/dm3", "no make: S24a covers it"),
        ("ethanol", "no order: 1 579.1 cm³ are left when all is served, its level is 500 cm³"),
        # hypo is no hypochlorite, though its name begins the other
        ("hypo", "sodium thiosulfate 1.00 mol/dm³"),
    ],
)
def test_anything_in_the_plan_can_be_asked_about(
    ref: str, words: str, practice: Path, stockroom: Stockroom
) -> None:
    assert words in said(stockroom, practice, ref)


@pytest.mark.parametrize("ref", ["K99", "M999", "S99", "moonshine", "R99"])
def test_an_unknown_name_gets_the_nearest(ref: str, practice: Path, stockroom: Stockroom) -> None:
    refused = stockroom("why", ref, *NOW, store=practice)
    assert (refused.code, refused.out) == (2, "")
    assert f'"{ref}"' in refused.err
    assert "Nearest: " in refused.err


# -- instead ------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("ref", "other", "words"),
    [
        ("K21.4", "S10", "S10 was not used for K21.4: it is iodine in iodide 0.0500 mol/dm³"),
        ("k21", "s02", "S02 is used for K21.4: 1 056 cm³ of it"),
        ("K21.4", "S01", "S02 serves it as it stands"),
        ("K01.1", "B28", "not found"),
        ("M14", "2027-01-25", "too early: K08.2 is made fresh on the morning of 2027-01-26"),
        ("M14", "24/01/2027", "a closed day (Sunday)"),
        ("M14", "500", "28 cm³ too little"),
        ("M14", "600 cm3", "72 cm³ over what is needed, poured away"),
        ("S02", "2027-01-20", "a result before 2027-02-04 does not count"),
        ("K21", "2027-03-05", "stockroom shift K21 --on 2027-03-05"),
        ("K21", "hypo", "K21.4 asks for sodium thiosulfate 0.100 mol/dm³"),
        ("K11", "hydrochloric acid", "refused: barred"),
        ("K01.1", "sodium chloride", "refused: barred: never a swap"),
        ("K21", "ethanol", "for anything in K21 in R15: refused: not written in the recipe"),
    ],
)
def test_what_was_not_chosen_says_why(
    ref: str, other: str, words: str, practice: Path, stockroom: Stockroom
) -> None:
    assert words in said(stockroom, practice, ref, "--instead", other)


def test_a_larger_pack_says_how_long_it_would_last(practice: Path, stockroom: Stockroom) -> None:
    orders = stockroom("buying", "--json", *NOW, store=practice).json["orders"]
    iron = next(n for n, o in enumerate(orders, 1) if o["item"].startswith("ammonium iron"))
    told = said(stockroom, practice, f"O{iron:02d}", "--instead", "2.5 kg")
    assert "2 500 g would last 3.8 years at this term's rate (144.934 g in 81 days)" in told


@pytest.mark.parametrize(
    ("ref", "other", "code", "words"),
    [
        ("K99", "S10", 2, 'No booking, need, make, order or bottle "K99"'),
        ("K21", "S99", 2, 'No bottle or make "S99"'),
        ("K21", "moonshine", 2, '"moonshine"'),
        ("M14", "31/02/2027", 2, "31/02/2027"),
        ("M14", " ", 2, "Instead of M14, what?"),
    ],
)
def test_what_cannot_be_read_is_refused(
    ref: str, other: str, code: int, words: str, practice: Path, stockroom: Stockroom
) -> None:
    refused = stockroom("why", ref, "--instead", other, *NOW, store=practice)
    assert (refused.code, refused.out) == (code, "")
    assert words in refused.err


def test_nothing_named_is_refused(practice: Path, stockroom: Stockroom) -> None:
    refused = stockroom("why", " ", *NOW, store=practice)
    assert (refused.code, "names nothing" in refused.err) == (2, True)


# -- spare -----------------------------------------------------------------------------------------

DRAWN = {"K05": "2000 cm3", "K06": "1850 cm3"}


@pytest.fixture
def taught(own: Path, stockroom: Stockroom) -> Path:
    """The practice store with 5 dm³ of thiosulfate made, and drawn for both classes of it."""
    made = ("make", "sodium thiosulfate 0.200 mol/dm3", "5 dm3", "--by", "T1")
    done = stockroom(*made, "--on", "2027-01-18", "--as-at", "2027-01-18", store=own)
    assert done.code == 0, done.err
    number = done.out.split("Made ")[1].split(":")[0]
    for booking, amount in DRAWN.items():
        draw(stockroom, own, number, amount, booking)
    return own


def draw(stockroom: Stockroom, store: Path, bottle: str, amount: str, booking: str) -> str:
    words = ("draw", bottle, amount, "--for", booking, "--on", "2027-01-19", "--by", "T1")
    done = stockroom(*words, "--as-at", "2027-01-19", store=store)
    assert done.code == 0, done.err
    return done.out.rsplit("Entry ", 1)[1].split(".")[0]


def recipe_of(stockroom: Stockroom, store: Path) -> str:
    told = stockroom("learn", "K05", "--spare", "--json", *AFTER, store=store).json
    return str(told["recipes"][0]["recipe"])


def test_a_recipe_tells_what_its_classes_drew(taught: Path, stockroom: Stockroom) -> None:
    code = recipe_of(stockroom, taught)
    told = stockroom("learn", code, *AFTER, store=taught)
    assert told.code == 0
    assert "in two classes: too few to tell, 3 classes are needed" in told.said


def test_put_right_and_spilled_are_no_draws(taught: Path, stockroom: Stockroom) -> None:
    before = stockroom("learn", "--spare", "--json", *AFTER, store=taught).json
    entry = draw(stockroom, taught, "S02", "100 cm3", "K21")
    more = stockroom("learn", "--spare", "--json", *AFTER, store=taught).json
    assert len(more["recipes"]) == len(before["recipes"]) + 1
    for words in (("put-right", entry, "--why", "wrong bottle"), ("spill", "S02", "20 cm3")):
        done = stockroom(*words, "--by", "T1", "--as-at", "2027-01-19", store=taught)
        assert done.code == 0, done.err
    assert stockroom("learn", "--spare", "--json", *AFTER, store=taught).json == before


@pytest.mark.parametrize("name", ["K05", "K06"])
def test_any_name_finds_the_recipe(name: str, taught: Path, stockroom: Stockroom) -> None:
    code = recipe_of(stockroom, taught)
    for asked in (name, code.lower(), "sodium thiosulfate 0.200 mol/dm3", ""):
        told = stockroom("learn", asked, "--spare", "--json", *AFTER, store=taught).json
        assert code in [one["recipe"] for one in told["recipes"]]


def test_learning_a_spare_writes_nothing(taught: Path, stockroom: Stockroom) -> None:
    before = hashlib.sha256(taught.read_bytes()).hexdigest()
    assert stockroom("learn", "--spare", *AFTER, store=taught).code == 0
    assert hashlib.sha256(taught.read_bytes()).hexdigest() == before


@pytest.mark.parametrize(
    ("words", "code", "told"),
    [
        (["learn", "R01"], 1, "Nothing was drawn for a class of R01 up to 2027-01-04"),
        (["learn", "--spare"], 1, "Nothing was drawn for any class"),
        (["learn", "moonshine", "--spare"], 2, 'No recipe, booking or stock line "moonshine"'),
        (["learn", "R01", "--to", "95"], 2, "--to is about strengths that fade"),
        (["learn", "--spare", "--use"], 2, "--use is about strengths that fade"),
        (["learn"], 2, "Nothing was named"),
    ],
)
def test_what_no_draw_can_teach_says_why(
    words: list[str], code: int, told: str, practice: Path, stockroom: Stockroom
) -> None:
    refused = stockroom(*words, *NOW, store=practice)
    assert (refused.code, refused.out) == (code, "")
    assert told in refused.err
