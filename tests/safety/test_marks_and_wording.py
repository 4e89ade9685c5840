"""Symbols, signal words and wordings follow the precedence rules; wordings carry their mark.

Source: the reference, F3 to F5; precedence seen (a), Art. 20 and 27 from memory (c).
"""

from __future__ import annotations

import pytest

from stockroom.errors import BadInput
from stockroom.safety.classes import CLASSES, class_of
from stockroom.safety.pictograms import (
    class_behind,
    pictograms_for,
    pictograms_of,
    signal_word,
)
from stockroom.safety.precautions import CALLED_FOR, PRECAUTIONS, precautions_for
from stockroom.safety.statements import HAZARD, SUPPLEMENTAL, codes_in, statement


@pytest.mark.parametrize(
    ("names", "symbols"),
    [
        ("Expl. 1.1|Flam. Liq. 2|Ox. Sol. 2", "GHS01"),
        ("Org. Perox. B", "GHS01 GHS02"),
        ("Acute Tox. 3|STOT SE 3", "GHS06"),
        ("Skin Corr. 1B|Skin Irrit. 2", "GHS05"),
        ("Eye Dam. 1|Skin Irrit. 2", "GHS05"),
        ("Resp. Sens. 1|Skin Sens. 1|Eye Irrit. 2", "GHS08"),
        ("Skin Sens. 1|Carc. 2", "GHS07 GHS08"),
        ("Press. Gas|Flam. Gas 1", "GHS02"),
        ("Press. Gas|Acute Tox. 3", "GHS06"),
        ("Press. Gas", "GHS04"),
        # a bottle of ammonia carries both: H314 and H335, seen (a)
        ("Skin Corr. 1B|STOT SE 3", "GHS05 GHS07"),
        ("Skin Corr. 1B|Acute Tox. 4", "GHS05 GHS07"),
        ("Skin Corr. 1B|Skin Sens. 1", "GHS05 GHS07"),
        ("Aquatic Chronic 1|Aquatic Chronic 3", "GHS09"),
        ("Aquatic Chronic 3", ""),
    ],
)
def test_symbols_follow_the_rules_of_precedence(names: str, symbols: str) -> None:
    assert " ".join(pictograms_of(CLASSES[name] for name in names.split("|"))) == symbols


@pytest.mark.parametrize(
    ("names", "word"),
    [
        ("Skin Irrit. 2|Eye Dam. 1", "Danger"),
        ("Skin Irrit. 2", "Warning"),
        ("Aquatic Chronic 2", ""),
        ("Ox. Liq. 3", "Warning"),
        ("Ox. Liq. 2", "Danger"),
    ],
)
def test_danger_displaces_warning(names: str, word: str) -> None:
    assert signal_word(CLASSES[name] for name in names.split("|")) == word


@pytest.mark.parametrize(
    ("codes", "symbols"),
    [
        ("H314 H335", "GHS05 GHS07"), ("H301 H315", "GHS06"), ("H410", "GHS09"),
        ("H360FD", "GHS08"), ("EUH031", ""), ("H225 H319", "GHS02 GHS07"), ("H412", ""),
    ],
)  # fmt: skip
def test_a_sheets_codes_call_for_their_symbols(codes: str, symbols: str) -> None:
    assert " ".join(pictograms_for(codes.split())) == symbols


def test_a_code_that_marks_nothing_is_refused() -> None:
    with pytest.raises(BadInput, match="'H999'"):
        class_behind("H999")


def test_a_class_nobody_knows_is_refused() -> None:
    with pytest.raises(BadInput, match=r"'Skin Corr\. 9'"):
        class_of("Skin Corr. 9")


# wording seen on English sheets (a) and from memory (c); marks as in F3
@pytest.mark.parametrize(
    ("code", "how", "words"),
    [
        ("H314", "a", "Causes severe skin burns and eye damage"),
        ("H272", "a", "May intensify fire; oxidiser"),
        ("H225", "c", "Highly flammable liquid and vapour"),
        ("H411", "c", "Toxic to aquatic life with long lasting effects"),
        ("EUH031", "a", "Contact with acids liberates toxic gas"),
    ],
)
def test_a_wording_is_held_with_its_mark(code: str, how: str, words: str) -> None:
    assert (statement(code).text, statement(code).how) == (words, how)


def test_every_wording_says_how_it_was_come_by() -> None:
    held = [*HAZARD.values(), *SUPPLEMENTAL.values(), *PRECAUTIONS.values()]
    assert {each.how for each in held} == {"a", "c"}


def test_every_class_has_a_wording_for_its_statement() -> None:
    assert all(each.statement in HAZARD for each in CLASSES.values() if each.statement)


def test_codes_are_read_out_of_what_somebody_typed() -> None:
    assert codes_in("H314: burns. EUH031 and H360FD; H314") == ("H314", "EUH031", "H360FD")
    assert codes_in("not classified") == ()


def test_a_code_that_is_none_is_refused() -> None:
    with pytest.raises(BadInput, match="'H999'"):
        codes_in("H314 H999")


# sets seen on sheets (a), in the newer numbering: P310 there is P316 here
def test_a_corrosive_calls_for_its_six() -> None:
    assert precautions_for(["H314"]) == (
        "P280", "P305+P351+P338", "P303+P361+P353", "P301+P330+P331", "P316", "P260",
    )  # fmt: skip


def test_an_oxidiser_is_kept_from_what_burns() -> None:
    assert {"P220", "P280"} <= set(precautions_for(["H272"]))


def test_water_life_calls_for_keeping_it_out_of_the_drain() -> None:
    assert precautions_for(["H410"])[:2] == ("P273", "P391")


def test_no_precaution_is_called_for_that_has_no_wording() -> None:
    assert {code for row in CALLED_FOR.values() for code in row.split()} <= set(PRECAUTIONS)
