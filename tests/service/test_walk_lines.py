"""A line of a count as people write it, and what is refused in it."""

from __future__ import annotations

from fractions import Fraction

import pytest

from stockroom.errors import BadAmount, BadInput
from stockroom.measure.amounts import Amount
from stockroom.service.walk_lines import Said, Typed, read_typed

SOLID = Amount.grams


@pytest.mark.parametrize(
    ("line", "typed"),
    [
        ("B06 640 g", Typed("B06", Said.AMOUNT, SOLID(640))),
        ("  B06:  640g ", Typed("B06", Said.AMOUNT, SOLID(640))),
        ("B18 7,8 g", Typed("B18", Said.AMOUNT, SOLID(7.8))),
        ("B06 640 g left", Typed("B06", Said.AMOUNT, SOLID(640))),
        ("B06 about 300 g", Typed("B06", Said.AMOUNT, SOLID(300), about=True)),
        ("S01 1 350 cm³ at D1", Typed("S01", Said.AMOUNT, Amount.cm3(1350), place="D1")),
        ("B06 640 g, A2", Typed("B06", Said.AMOUNT, SOLID(640), place="A2")),
        ("B06 640 g again", Typed("B06", Said.AMOUNT, SOLID(640), again=True)),
        ("B06 1.2 kg, A2 sure", Typed("B06", Said.AMOUNT, SOLID(1200), place="A2", sure=True)),
        ("B06;640 g", Typed("B06", Said.AMOUNT, SOLID(640))),
        ("B06 same", Typed("B06", Said.SAME)),
        ("B06 as listed", Typed("B06", Said.SAME)),
        ("B06 about half", Typed("B06", Said.PART, part=Fraction(1, 2), about=True)),
        ("B06 a third left", Typed("B06", Said.PART, part=Fraction(1, 3), about=True)),
        ("B06 1/3", Typed("B06", Said.PART, part=Fraction(1, 3), about=True)),
        ("B06 full", Typed("B06", Said.PART, part=Fraction(1), about=True)),
        # nothing is no estimate
        ("B06 empty", Typed("B06", Said.PART)),
        ("B28 missing", Typed("B28", Said.MISSING)),
        ("B28 Not found", Typed("B28", Said.MISSING)),
        ("B36 here", Typed("B36", Said.HERE)),
        ("B36 at X1", Typed("B36", Said.HERE, place="X1")),
        ("+ brown powder, A2, 100 g", Typed("brown powder", Said.UNLISTED, SOLID(100), place="A2")),
        (
            "+ white, label gone, A2, 1,5 kg again",
            Typed("white, label gone", Said.UNLISTED, SOLID(1500), place="A2", again=True),
        ),
    ],
)
def test_a_line_is_read_as_it_is_meant(line: str, typed: Typed) -> None:
    assert read_typed(line) == typed


@pytest.mark.parametrize(
    "line", ["", "  ", "# the lower shelf", "B06", "B06 ....", "B06 ____", "+ ___"]
)
def test_a_blank_is_not_yet(line: str) -> None:
    assert read_typed(line) is None


@pytest.mark.parametrize("line", ["B06 640", "B06 640 zz", "B06 -5 g", "B06 1,000 g", "B06 150 %"])
def test_an_amount_with_two_readings_or_none_is_refused(line: str) -> None:
    with pytest.raises(BadAmount):
        read_typed(line)


@pytest.mark.parametrize(
    ("line", "words"),
    [
        ("B06 blue", 'B06 "blue" is no amount.'),
        ("+ 100 g", '"+ 100 g": what does it look like?'),
    ],
)
def test_a_line_that_says_nothing_is_told_how_it_is_written(line: str, words: str) -> None:
    with pytest.raises(BadInput) as refused:
        read_typed(line)
    assert refused.value.message == words
    assert "Write " in refused.value.hint
