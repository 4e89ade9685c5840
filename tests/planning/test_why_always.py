"""Five lines of two rows: whatever is asked about, on whatever day, of both houses that ship."""

from __future__ import annotations

import sys
import textwrap
from collections.abc import Iterator
from dataclasses import replace
from datetime import date
from pathlib import Path

import pytest
from houses import booking, bought_bottle, day, recipe, wants
from hypothesis import given
from hypothesis import strategies as some

from stockroom.measure.amounts import Amount
from stockroom.planning.decisions import Outcome, Plan
from stockroom.planning.derive import with_derived
from stockroom.planning.facts import Facts
from stockroom.planning.plan import plan
from stockroom.planning.whys.in_short import LINES, ROWS, fits, folded, in_two
from stockroom.planning.whys.planned_shelf import PlannedShelf
from stockroom.planning.whys.why import why
from stockroom.planning.whys.why_not import Other, why_not
from stockroom.service.database import new_store, seeds_folder
from stockroom.store.snapshot import facts

# the first day, a Sunday, between two classes, the middle, the last, and a day after the term
DAYS = ("2027-01-04", "2027-01-17", "2027-02-03", "2027-02-24", "2027-03-26", "2027-03-29")


def told(practice: Path, on: str) -> tuple[Facts, Plan]:
    known = with_derived(facts(practice, date.fromisoformat(on)))
    return known, plan(known)


def within(lines: tuple[str, ...], ref: str) -> None:
    """The law itself, measured with the standard library and not with our own count."""
    assert 1 <= len(lines) <= LINES, f"{ref}: {len(lines)} lines"
    for line in lines:
        assert len(textwrap.wrap(line, 100)) <= ROWS, f"{ref}: {line}"
        assert line.strip() == line != ""


def refs_of(known: Facts, made: Plan) -> Iterator[str]:
    yield from (answer.ref for answer in made.needs)
    yield from (booking.number for booking in known.bookings)
    yield from [make.id for make in made.makes] + [order.id for order in made.orders]
    yield from (bottle.number for bottle in known.bottles)
    yield from (check.subject for check in made.checks)
    yield from (finding.subject for finding in (*made.notes, *made.guesses))
    yield from (text for line in known.lines.values() for text in (line.key, line.item))
    yield from (one.code for one in known.recipes.values())
    yield from (one.code for one in known.departments)


@pytest.mark.parametrize("on", DAYS)
def test_every_reference_is_told_in_five_lines_of_two_rows(practice: Path, on: str) -> None:
    known, made = told(practice, on)
    for ref in dict.fromkeys(refs_of(known, made)):
        within(why(known, made, ref), ref)


def test_a_starter_house_is_told_in_five_lines_of_two_rows(tmp_path: Path) -> None:
    """Every line that ships, asked for by two classes, every third of them held."""
    store = tmp_path / "starter.sqlite"
    new_store(store, tables=seeds_folder() / "starter")
    bare = with_derived(facts(store, day("01-04"), day("01-04"), day("03-26")))
    lines = list(bare.lines.values())
    asks = [wants(line, 50_000_000) for line in lines if not line.never_kept]
    held = [bought_bottle(f"B{n}", line, 400_000_000) for n, line in enumerate(lines[::3], 1)]
    booked = (booking("K1", "01-20"), booking("K2", "02-10", groups=3, spare=100))
    known = replace(bare, recipes={("R01", 1): recipe(*asks)}, bottles=tuple(held), bookings=booked)
    made = plan(known)
    assert len(made.makes) > 20
    assert len(made.orders) > 5
    for ref in dict.fromkeys(refs_of(known, made)):
        within(why(known, made, ref), ref)


def test_on_the_safe_side_too(practice: Path) -> None:
    from stockroom.service.plan import term_plan
    from stockroom.service.plan import why as asked

    cautious = term_plan(practice, as_at=date(2027, 1, 4), cautious=True)
    for bottle in ("B01", "S01", "S10", cautious.needs[0].ref, cautious.makes[0].id):
        within(asked(practice, bottle, as_at=date(2027, 1, 4), cautious=True), bottle)


def others_for(known: Facts, made: Plan, ref: str, line: str) -> Iterator[Other]:
    """Every bottle of its line, a few of any other, days around, amounts, lines and makes."""
    yield from (bottle for bottle in known.bottles if bottle.line == line)
    yield from known.bottles[len(ref) :: 17]
    yield from (date(2027, 1, 16), date(2027, 1, 25), date(2027, 3, 1))
    yield from (Amount.cm3(1), Amount.cm3(500), Amount.grams(2500))
    yield from list(known.lines.values())[len(ref) :: 23]
    yield from made.makes[len(ref) :: 19]


def one_shelf(known: Facts, made: Plan, monkeypatch: pytest.MonkeyPatch) -> None:
    """Let all questions of one plan look at one shelf: nobody alters it, and it is slow to fill."""
    planned = PlannedShelf(known, made)
    module = sys.modules[why_not.__module__]
    monkeypatch.setattr(module, "PlannedShelf", lambda *_: planned)


@pytest.mark.parametrize("on", DAYS[::3])
def test_what_was_not_chosen_is_told_in_five_lines_of_two_rows(
    practice: Path, on: str, monkeypatch: pytest.MonkeyPatch
) -> None:
    known, made = told(practice, on)
    one_shelf(known, made, monkeypatch)
    asked = [(answer.ref, answer.line) for answer in made.needs]
    asked += [(make.id, make.line) for make in made.makes]
    asked += [(order.id, order.line) for order in made.orders]
    asked += [(b.number, b.line) for b in known.bottles[::7]]
    for ref, line in asked:
        for other in others_for(known, made, ref, line):
            within(why_not(known, made, ref, other), f"{ref} --instead {other}")


def test_a_day_is_too_early_or_late_where_the_plan_says_so(
    practice: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    """The verdict on every open day of a make agrees with the days the plan gives it."""
    known, made = told(practice, "2027-01-04")
    one_shelf(known, made, monkeypatch)
    for make in made.makes:
        other = known.calendar.on_or_after(known.as_at)
        while other <= known.calendar.after(make.latest, 4):
            words = " ".join(why_not(known, made, make.id, other))
            assert ("too early" in words) == (other < make.earliest), words
            assert ("too late" in words) == (other > make.latest), words
            other = known.calendar.after(other, 1)


def test_the_promises_of_the_shelf_are_those_of_the_plan(practice: Path) -> None:
    known, made = told(practice, "2027-01-04")
    planned = PlannedShelf(known, made)
    shelf = planned.without("")
    for bottle in known.bottles:
        promised = sum(claim.amount for claim in planned.claims.get(bottle.number, []))
        assert shelf.left[bottle.number] == bottle.left - promised >= 0
        uses = [d for a in made.needs for d in a.draws if d.bottle == bottle.number]
        uses += [s for m in made.makes for s in m.sources if s.bottle == bottle.number]
        assert promised == sum(draw.amount for draw in uses)


def test_what_is_called_unfit_is_not_taken_when_the_chosen_is_gone(practice: Path) -> None:
    """Planned again without the bottle chosen, a need never gets one said to be unfit."""
    known, made = told(practice, "2027-01-04")
    chosen = {a.draws[0].bottle for a in made.needs if a.outcome is Outcome.HAVE and a.draws}
    for gone in sorted(chosen)[:12]:
        left = tuple(b for b in known.bottles if b.number != gone)
        again = {a.ref: a for a in plan(replace(known, bottles=left)).needs}
        for answer in [a for a in made.needs if any(d.bottle == gone for d in a.draws)]:
            for other in [b for b in left if b.line == answer.line]:
                words = " ".join(why_not(known, made, answer.ref, other))
                unfit = any(w in words for w in ("past", "set aside", "not found", "too weak"))
                if unfit and "sooner" not in words:
                    now = {draw.bottle for draw in again[answer.ref].draws}
                    assert other.number not in now, words


# -- folding -----------------------------------------------------------------------------


@given(some.lists(some.text("ab ,;", min_size=1, max_size=300).map(str.strip), max_size=30))
def test_any_rows_fold_to_five_of_two(rows: list[str]) -> None:
    lines = folded(rows)
    assert len(lines) <= LINES
    assert all(len(textwrap.wrap(line, 100)) <= ROWS for line in lines)


@given(some.lists(some.text("abc", min_size=1, max_size=30), min_size=1, max_size=60))
def test_what_is_cut_is_counted(parts: list[str]) -> None:
    line = in_two("; ".join(parts))
    shown, _, more = line.partition(" and ")
    if more:
        assert len(shown.split("; ")) + int(more.split()[0]) == len(parts)
    else:
        assert line == "; ".join(parts)


def test_rows_that_fit_are_left_alone() -> None:
    rows = ["a" * 100, "b", "c", "d", "e"]
    assert folded(rows) == tuple(rows)
    assert fits("a" * 99 + " " + "b" * 100)
    assert not fits("a" * 99 + " " + "b" * 101)
