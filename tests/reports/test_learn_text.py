"""What the checks of several bottles teach, as it is told."""

from __future__ import annotations

import math
from dataclasses import replace
from datetime import timedelta

import pytest
from houses import day, solution
from stability_examples import TABLE_IV, TABLE_VI, TABLE_VIII

from stockroom.keeping.pooling import Batch
from stockroom.keeping.record import Check, CheckKind, Record, Stay
from stockroom.keeping.rules import Law, Rule, RuleKind
from stockroom.keeping.safe_side import Witness
from stockroom.planning.learn import Lesson, Question, lesson
from stockroom.reports.learn_text import commands, learn_json, learn_text

MADE = day("2025-01-06")
AS_AT = day("01-04")
# a label of 100, so that the published per cents are the strengths themselves
LINE = solution(100.0, "salt solution", rules=(Rule(RuleKind.FADES, law=Law(0, 0.01)),))


def witness(batch: Batch, **more: object) -> Witness:
    """A published batch as a bottle: its months read as days."""
    checks = tuple(
        Check(MADE + timedelta(int(t)), CheckKind.FOUND, True, y)
        for t, y in zip(batch.times, batch.values, strict=True)
    )
    kept = Record(made=MADE, nominal=100.0, checks=checks, **more)  # type: ignore[arg-type]
    return Witness(batch.name, kept)


def taught(table: list[Batch], part: float = 0.95, **more: object) -> Lesson:
    every = [witness(batch, **more) for batch in table]
    return lesson(LINE, every, Question(AS_AT, part=part))


def told(found: Lesson) -> str:
    return learn_text(found, 1000)


def test_bottles_alike_are_told_as_one_line_with_the_published_life() -> None:
    text = told(taught(TABLE_IV))
    # LeBlond 2011 table V: 26 months, to the last whole one 25 (a+b)
    assert "salt solution 100 mol/dm³: 31 checks of b2, b5, b7" in text
    assert "Keep it 25 days" in text
    assert "one line for all: slopes F 0.229 with 2 and 25, p 0.797" in text


def test_of_one_line_no_bottle_is_named_the_worst() -> None:
    assert "decides" not in told(taught(TABLE_IV))
    assert "; b5, which falls below it first, decides." in told(taught(TABLE_VI))


def test_separate_lines_say_whose_scatter_and_what_the_other_gives() -> None:
    text = told(taught(TABLE_VIII))
    # LeBlond 2011 table IX 15.6, JMP 12.0.1 15.84 (a+b)
    assert "Keep it 15 days (2.1 weeks)" in text
    assert "own lines, one scatter" in text
    assert "15.6 days with one scatter for all; with each bottle's own 15.8 days, and b8" in text


def test_as_data_both_lives_are_exact() -> None:
    data = learn_json(taught(TABLE_VIII))
    assert data["life_days"] == pytest.approx(15.606131, abs=1e-5)
    assert data["life_days_own_scatter"] == pytest.approx(15.844878, abs=1e-5)
    assert (data["decides"], data["slopes"]["df2"]) == ("b8", 18)


def test_a_bottle_gone_teaches_and_is_not_foretold() -> None:
    found = taught(TABLE_VI, gone=True)
    assert (len(found.learnt.series), found.bottles) == (3, ())


def test_bottles_under_another_rule_are_left_out_and_named() -> None:
    cold = Rule(RuleKind.FADES, law=Law(0, 0.001), colder_than=8.0)
    line = replace(LINE, rules=(cold, *LINE.rules))
    shelf = [witness(batch, stays=(Stay(MADE, "A1", 20.0),)) for batch in TABLE_VI[:2]]
    fridge = witness(TABLE_VI[2], stays=(Stay(MADE, "F1", 5.0),))
    text = told(lesson(line, [*shelf, fridge], Question(AS_AT)))
    assert "b5: kept under another rule of fading" in text


def test_the_temperature_is_that_of_the_one_place_it_stood_in() -> None:
    here = (Stay(MADE, "A1", 18.0),)
    assert taught(TABLE_VI, stays=here).at_c == 18.0
    assert "at 18 °C" in told(taught(TABLE_VI, stays=here))


def test_two_places_give_the_rate_no_temperature() -> None:
    both = (Stay(MADE, "A1", 18.0), Stay(MADE + timedelta(3), "F1", 5.0))
    found = taught(TABLE_VI, stays=both)
    assert found.at_c is None
    assert "not of one known temperature" in told(found)


def test_a_life_beyond_the_last_check_says_so() -> None:
    far, near = taught(TABLE_IV, part=0.8), taught(TABLE_IV, part=0.97)
    assert "nothing was checked older than 24 days" in told(far)
    assert "nothing was checked older" not in told(near)


def test_a_second_order_rate_is_typed_with_its_unit() -> None:
    second = replace(LINE, rules=(Rule(RuleKind.FADES, law=Law(2, 0.0001)),))
    found = lesson(second, [witness(batch) for batch in TABLE_VI], Question(AS_AT))
    assert "order=2 rate=0.0000" in commands(found)[0]
    assert "rate_of=mol/dm3 rate_per=day counted_from=made" in commands(found)[0]


def test_a_rule_for_a_band_of_strength_is_named_by_its_band() -> None:
    band = Rule(RuleKind.FADES, law=Law(1, 0.01), above=50.0)
    found = lesson(replace(LINE, rules=(band,)), [witness(TABLE_VI[0])], Question(AS_AT))
    assert 'stronger_than="50 mol/dm3"' in commands(found)[0]


def test_without_a_label_strength_the_loss_is_a_part_of_what_it_began_at() -> None:
    bare = replace(LINE, strength=None)
    found = lesson(bare, [witness(TABLE_VIII[0])], Question(AS_AT))
    # batch b4 begins at 104.070646 (a+b)
    assert found.start == pytest.approx(104.070646, abs=1e-5)
    assert found.lowest == pytest.approx(0.9 * 104.070646, abs=1e-5)


def test_no_line_is_longer_than_the_page_but_what_is_to_be_typed() -> None:
    found = taught(TABLE_VIII)
    for line in learn_text(found, 80).splitlines():
        assert len(line) <= 80 or line.strip() in commands(found)


def test_practice_is_said_first() -> None:
    assert learn_text(taught(TABLE_VI), 80, practice=True).startswith("PRACTICE\n")


def test_a_keeping_time_without_end_is_no_number_in_json() -> None:
    found = replace(taught(TABLE_VI), life=math.inf)
    assert learn_json(found)["life_days"] is None
    assert "It never falls below" in told(found)
