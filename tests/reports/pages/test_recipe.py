"""A recipe as a value: closeness and freshness in words, and what a new version changed."""

from __future__ import annotations

from dataclasses import replace
from datetime import date
from pathlib import Path

import pytest

from stockroom.planning.facts import Bar, Closeness, Facts, Recipe, Requirement, Swap
from stockroom.reports.pages.recipe import recipes_page
from stockroom.reports.pages.recipe_lines import changes_between, lines_of
from stockroom.store.snapshot import facts


@pytest.fixture(scope="module")
def known(college_file: Path) -> Facts:
    return facts(college_file, date(2027, 1, 4))


@pytest.fixture
def clock(known: Facts) -> Recipe:
    return known.recipes["R01", 1]


def with_first(recipe: Recipe, **changed: object) -> Recipe:
    """The recipe with its first line changed."""
    first, *rest = recipe.requirements
    changed_first: Requirement = replace(first, **changed)  # type: ignore[arg-type]
    return replace(recipe, requirements=(changed_first, *rest))


@pytest.mark.parametrize(
    ("changed", "words"),
    [
        ({}, "close: within 5 %"),
        ({"closeness": Closeness.EXACT}, "exact: within 0.5 %"),
        ({"closeness": Closeness.PRESENT}, "present: any strength will do"),
        ({"closeness_guessed": True}, "close, as nobody said: within 5 %"),
        ({"tolerance": 0.1}, "close: within 10 %"),
        ({"lowest": 0.05, "strength_text": "0.05 to 0.1 mol/dm3"}, "from 0.05 to 0.1 mol/dm³"),
        ({"may_differ": 0.05}, "may differ by 5 % if the strength found is printed"),
        ({"found_within_days": 1}, "found within 1 day"),
    ],
)
def test_how_close_a_line_must_be_is_said_in_words(
    known: Facts, clock: Recipe, changed: dict[str, object], words: str
) -> None:
    assert words in lines_of(known, with_first(clock, **changed))[0].closeness


def test_what_has_no_strength_has_none_to_be_near(known: Facts) -> None:
    lines = [line for one in known.recipes.values() for line in lines_of(known, one)]
    assert {line.closeness for line in lines if line.what == "marble chips"} == {""}


@pytest.mark.parametrize(
    ("changed", "words"),
    [
        ({"fresh": True}, "made the same morning"),
        ({"freshest_days": 1}, "at most 1 day old"),
        ({}, ""),
    ],
)
def test_how_fresh_a_line_must_be_is_said_in_words(
    known: Facts, clock: Recipe, changed: dict[str, object], words: str
) -> None:
    assert lines_of(known, with_first(clock, **changed))[0].fresh == words


def test_a_stand_by_is_told_from_what_gets_spare(known: Facts, clock: Recipe) -> None:
    assert lines_of(known, with_first(clock, spare=False))[0].size.endswith("no spare")


def test_the_first_version_changed_nothing(known: Facts, clock: Recipe) -> None:
    assert changes_between(known, None, clock) == ()


def test_the_same_again_changed_nothing(known: Facts, clock: Recipe) -> None:
    assert changes_between(known, clock, replace(clock, version=2)) == ()


def test_a_new_version_says_each_thing_that_it_changed(known: Facts, clock: Recipe) -> None:
    after = replace(
        with_first(clock, amount=100_000),
        bars=(*clock.bars, Bar("silver nitrate", "it clouds")),
        swaps=(*clock.swaps, Swap("starch 0.5 % w/v", "potato", None, "grated")),
        waste="",
    )
    told = changes_between(known, clock, after)
    was, now = "80\u00a0cm³ per group", "100\u00a0cm³ per group"
    assert told == (
        "clean-up and waste: no longer there (was: Decolourise iodine with thiosulfate.)",
        f"potassium iodide 0.100 mol/dm³: {was}, close: within 5 % → {now}, close: within 5 %",
        "never with silver nitrate: new: it clouds",
        "potato in place of starch 0.5 % w/v: new: grated",
    )


def test_a_line_left_out_is_told(known: Facts, clock: Recipe) -> None:
    after = replace(clock, requirements=clock.requirements[1:])
    assert changes_between(known, clock, after)[0].startswith(
        "potassium iodide 0.100 mol/dm³: no longer there (was: 80"
    )


def test_the_list_has_the_newest_version_alone(known: Facts, clock: Recipe) -> None:
    newer = replace(clock, version=2, title="Clock, shortened")
    page = recipes_page(replace(known, recipes=known.recipes | {("R01", 2): newer}))
    assert [row.title for row in page.rows if row.code == "R01"] == ["Clock, shortened"]


def test_every_word_must_be_found(known: Facts) -> None:
    assert [row.code for row in recipes_page(known, "silver MIRROR").rows] == ["R10"]
    assert recipes_page(known, "silver unicorn").rows == ()
