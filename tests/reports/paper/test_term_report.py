"""The term's report: each sentence follows its figures, and the paper holds whatever is written."""

from __future__ import annotations

from dataclasses import dataclass, replace
from datetime import date
from typing import TYPE_CHECKING

import paper_reading
import pytest

from stockroom.keeping.verdict import Condition
from stockroom.measure.amounts import Kind
from stockroom.planning.decisions import Budget, PastBottle
from stockroom.reports.paper.term_report import REPORT, TermReport, term_report_of, term_report_text
from stockroom.reports.paper.term_report_misses import ASIDE, CHECK, LATE, PAST, SHORT, misses_of
from stockroom.reports.paper.term_report_waste import (
    OTHER,
    poured_in_words,
    reason_of,
    total_of,
    wasted,
)
from stockroom.reports.typesetting import typeset
from stockroom.reports.words import TIED

if TYPE_CHECKING:
    from pathlib import Path

    from stockroom.planning.decisions import Plan
    from stockroom.planning.facts import Facts
    from stockroom.reports.pictures.load import Load

CM3 = 1000
LONG = "an acid of uncommon length and a name that nobody could say in one breath " * 3


@dataclass(frozen=True)
class Gone:
    """What left a bottle, in cm³ unless said otherwise."""

    bottle: str
    cm3: float
    how: str = "discarded"
    why: str = "past"
    item: str = "starch"
    strength: str = "1.0 % w/v"
    kind: Kind = Kind.VOLUME
    way: str = "sink"
    by: str = "T1"
    on: date = date(2027, 2, 1)

    @property
    def amount(self) -> int:
        return round(self.cm3 * CM3)


@pytest.fixture(scope="module")
def known(practice: Path) -> Facts:
    from stockroom.service.sheets import known_and_planned

    return known_and_planned(practice, as_at=date(2027, 1, 4))[0]


@pytest.fixture(scope="module")
def told(known: Facts, term: Plan) -> TermReport:
    return term_report_of(known, term, ())


def _plain(text: str) -> str:
    return text.replace(TIED, " ")


# -- the sentences --------------------------------------------------------------------


def test_the_college_is_told_in_five_sentences(told: TermReport) -> None:
    use, waste, surplus, money, misses = map(_plain, told.sentences)
    assert use.startswith("29 bookings this term use 40 things as bought")
    assert "potassium iodide: 84.5 g, 61 g the year before, 38 % more" in use
    assert waste == "Nothing is entered as poured away, spilled or lent this term."
    assert surplus.startswith("Of 36 482 cm³ still to be made, 649.2 cm³ (2 %) is over")
    assert "puts BI £1.80 over and OU £8.60 over" in money
    assert misses.startswith("Near misses: 2 needs short or refused, 1 order late or overdue")


def test_use_follows_the_bookings_and_the_year_before(known: Facts, term: Plan) -> None:
    fewer = replace(known, bookings=known.bookings[:3])
    plain = replace(term, differences=())
    said = term_report_of(fewer, plain, ()).sentences[0]
    assert said.startswith("3 bookings this term use")
    one = replace(known, bookings=known.bookings[:1])
    assert term_report_of(one, plain, ()).sentences[0].startswith("1 booking this term uses")
    none = term_report_of(replace(known, bookings=()), plain, ()).sentences[0]
    assert none == "Nothing is booked this term, and so nothing is used."
    assert "a year before nothing is known to differ" in said


def test_bookings_of_another_term_and_dropped_ones_are_not_counted(
    known: Facts, term: Plan
) -> None:
    from stockroom.planning.facts import Firmness

    first, *rest = known.bookings
    dropped = replace(first, firmness=Firmness.DROPPED)
    later = replace(rest[0], on=date(2027, 9, 1))
    few = replace(known, bookings=(dropped, later, *rest[1:]))
    assert term_report_of(few, term, ()).sentences[0].startswith("27 bookings")


def test_what_was_poured_away_is_told_by_reason_and_amount() -> None:
    left = [
        Gone("S01", 100),
        Gone("S02", 50, why="surplus, far too much made"),
        Gone("S03", 7, "spilled"),
        Gone("S04", 30, "lent"),
        Gone("S04", -30, "lent"),
        Gone("S05", 20, "lent"),
    ]
    said = _plain(poured_in_words(left))
    assert said == (
        "2 bottles were poured away (1 past, 1 surplus), 150 cm³ in all; "
        "7 cm³ was spilled, and 20 cm³ is lent and not back."
    )
    rows = {
        row.what: (row.bottles, _plain(row.total))
        for row in wasted([*left, Gone("S06", -3, "counted")])
    }
    assert rows == {
        "poured away: past": (1, "100 cm³"),
        "poured away: surplus": (1, "50 cm³"),
        "spilled": (1, "7 cm³"),
        "lent, not come back": (1, "20 cm³"),
        "counted more than entered": (1, "3 cm³"),
    }


def test_every_bottle_poured_away_stands_under_one_reason() -> None:
    whys = ("past", "Weak, past its day", "CONTAMINATED", "a surplus", "mould", "")
    left = [Gone(f"S{n}", 1, why=why) for n, why in enumerate(whys)]
    assert [reason_of(why) for why in whys] == [
        "past",
        "weak",
        "contaminated",
        "surplus",
        OTHER,
        OTHER,
    ]
    assert sum(row.bottles for row in wasted(left)) == len(left)


def test_grams_and_cubic_centimetres_are_never_added() -> None:
    solid = replace(Gone("B01", 0), kind=Kind.MASS, cm3=5000)
    assert _plain(total_of([Gone("S01", 12), solid])) == "5 g and 12 cm³"


def test_surplus_counts_what_is_planned_over_and_what_was_poured_away(
    known: Facts, term: Plan
) -> None:
    make = replace(term.makes[0], volume=1000 * CM3, heel=250 * CM3, heel_kept=False)
    kept = replace(make, heel_kept=True)
    plan = replace(term, makes=(make, kept))
    left = [Gone("S01", 40, why="surplus"), Gone("S02", 9)]
    said = _plain(term_report_of(known, plan, left).sentences[2])
    assert "Of 2 000 cm³ still to be made, 250 cm³ (12 %) is over" in said
    assert said.endswith("surplus poured away so far: 40 cm³.")
    none = term_report_of(known, replace(term, makes=()), ()).sentences[2]
    assert none == "Nothing is still to be made; surplus poured away so far: nothing."


def test_money_is_told_to_the_penny(known: Facts, term: Plan) -> None:
    def said(*budgets: Budget) -> str:
        return term_report_of(known, replace(term, budgets=budgets), ()).sentences[3]

    assert said(Budget("CH", "", 101, 202, 304)) == (
        "£1.01 is ordered and £2.02 still to be ordered, and no department goes over: "
        "£0.01 is left in all."
    )
    assert said(Budget("CH", "", 101, 202, 302)).endswith("which puts CH £0.01 over.")
    assert said(Budget("CH", "", 5, 0, None)).endswith("no department has a limit.")


def test_near_misses_follow_the_plan_and_count_no_bottle_twice(term: Plan) -> None:
    counts = {miss.what: len(miss.told) for miss in misses_of(term)}
    assert counts == {SHORT: 2, LATE: 1, PAST: 6, CHECK: 4, ASIDE: 2}
    bottles = [text.split()[0] for miss in misses_of(term)[2:] for text in miss.told]
    assert len(bottles) == len(set(bottles))
    unneeded = PastBottle("Z9", "x", Condition.PAST, None, "old")
    alone = replace(term, short=(), needs=(), orders=(), on_order=(), past=(unneeded,))
    assert misses_of(alone) == ()


# -- the paper ------------------------------------------------------------------------


@pytest.mark.parametrize("paper", ["A4", "Letter"])
def test_long_names_and_reasons_stay_on_the_paper(known: Facts, term: Plan, paper: str) -> None:
    left = [Gone(f"S{n:02}", n, item=LONG, why=("weak", "other")[n % 2]) for n in range(1, 30)]
    uses = tuple(replace(use, item=LONG) for use in term.usage[-9:])
    budgets = (*term.budgets, Budget("WWWWWWWW", LONG, 10**9, 10**9, 1))
    past = tuple(replace(one, item=LONG, decided_by=LONG) for one in term.past)
    plan = replace(term, usage=uses, budgets=budgets, past=past, differences=(LONG,) * 5)
    sheet = replace(term_report_of(known, plan, left), load=_no_load(known, plan))
    pdf = typeset("report", REPORT.data(sheet), paper=paper)[0]
    assert paper_reading.outside(pdf, margin=8) == []
    assert paper_reading.overlapping(pdf) == []
    wide = [line for line in term_report_text(sheet, 80).splitlines() if len(line) > 80]
    assert wide == []


def test_the_page_says_what_the_text_says_and_draws_the_load(told: TermReport) -> None:
    data = REPORT.data(told)
    assert data["load_svg"].count("<svg") == 1
    pdf = typeset("report", data)[0]
    said = paper_reading.words(pdf)
    for sentence in told.sentences:
        assert _plain(sentence) in _plain(said)
    assert "PRACTICE" in said
    assert "year before" in said
    assert paper_reading.greys_only(pdf)


def test_the_year_before_is_left_out_where_nobody_knows(known: Facts, term: Plan) -> None:
    unknown = tuple(replace(use, before=None, groups_before=None, basis="") for use in term.usage)
    plan = replace(term, usage=unknown, differences=())
    sheet = term_report_of(known, plan, ())
    sheet = replace(sheet, load=_no_load(known, plan))
    said = paper_reading.words(typeset("report", REPORT.data(sheet))[0])
    assert not sheet.compared
    assert "year before" not in said.replace("a year before nothing", "")
    assert sheet.used_heading == "Used in bought form, as the bookings work out"


def _no_load(known: Facts, plan: Plan) -> Load:
    from stockroom.reports.pictures.load import load_of

    # drawn once, in the test of the page: it takes longer than all the rest
    return load_of(known, replace(plan, loads=()))
