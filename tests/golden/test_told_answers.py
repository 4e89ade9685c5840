"""The college's planted traps whose right answers are written down.

Each test says in its docstring what the shelf and bookings say, what is asked,
and what must come out.
"""

from __future__ import annotations

from datetime import date
from pathlib import Path

import pytest
from scenario import (
    FIRST_DAY,
    amount,
    check,
    drawn_from,
    make_for,
    makes_of,
    need,
    order,
    past,
    sources,
)

from stockroom.keeping.verdict import Condition
from stockroom.planning.decisions import Outcome, Plan
from stockroom.service.plan import past_on, term_plan, why


def told(plan: Plan, condition: Condition) -> set[str]:
    return {p.bottle for p in plan.past if p.condition is condition}


# -- dates ---------------------------------------------------------------------------


def test_t01_what_is_past_on_the_first_day(term: Plan) -> None:
    """Every bottle's dates and rules; asked on 4 January; four kinds of trouble, no more."""
    assert told(term, Condition.PAST) == {"B03", "B22", "S03", "S09", "S14", "S19", "S22", "S23"}
    assert told(term, Condition.WATCH) == {"S08", "B04", "B16", "B27"}
    assert told(term, Condition.NO_DATE) == {"S12", "B35"}
    assert told(term, Condition.SET_ASIDE) == {"B36"}
    assert told(term, Condition.NOT_FOUND) == {"B28"}
    assert told(term, Condition.WEAK) == set()


@pytest.mark.parametrize(
    ("bottle", "until"),
    [
        ("B03", "2026-10-31"),
        ("B22", "2026-12-31"),
        ("S03", "2027-01-03"),
        ("S08", "2026-12-20"),
        ("S09", "2026-12-21"),
        ("S14", "2026-11-26"),
        ("S19", "2026-12-14"),
        ("S22", "2026-12-29"),
        ("S23", "2026-12-23"),
    ],
)
def test_t01_good_until(term: Plan, bottle: str, until: str) -> None:
    assert past(term, bottle).good_until == date.fromisoformat(until)


def test_t03_a_date_with_two_readings_is_planned_on_the_earlier_and_asked_once(
    term: Plan, practice: Path
) -> None:
    """B21 prints 04/05/27; K14 is in February; nothing else changes, but it is asked."""
    asked = [g.text for g in term.guesses if g.subject == "B21"]
    assert len(asked) == 1
    assert "5 April 2027" in asked[0]
    assert "4 May 2027" in asked[0]
    april = past_on(practice, as_at=FIRST_DAY, on=date(2027, 4, 6))
    assert past(april, "B21").good_until == date(2027, 4, 5)


def test_t04_month_only_and_a_recheck_on_a_closed_day(term: Plan) -> None:
    """B01 prints 03/2027, found 8 December; K28 is on 23 March; it serves, rechecked by 5 March."""
    assert "B01" in sources(make_for(term, "hydrogen peroxide 0.100 mol/dm3", "K28"))
    assert check(term, "B01").by == date(2027, 3, 5)
    assert "2027-03-08" in check(term, "B01").reason


def test_t04_the_last_day_of_the_printed_month_is_good(practice: Path) -> None:
    last, first = date(2027, 3, 31), date(2027, 4, 1)
    on_last = past_on(practice, as_at=FIRST_DAY, on=last)
    on_first = past_on(practice, as_at=FIRST_DAY, on=first)
    assert past(on_last, "B01").condition is Condition.WATCH
    assert past(on_first, "B01").condition is Condition.PAST


# -- strength ------------------------------------------------------------------------


def test_t07_never_below_ninety_vol(term: Plan) -> None:
    """B01 will be 89.1 vol on 10 February; K15 wants 90 at least; B02 is opened, and serves K26."""
    evening, discovery = need(term, "K15", "hydrogen peroxide"), need(term, "K26", "hydrogen")
    assert drawn_from(evening) == {"B02": 180}
    assert drawn_from(discovery) == {"B02": 120}
    assert "B01 not used: too weak: 89.1 vol on the day, limit 90 vol" in evening.reasons
    assert "expected 98.7 vol on the day" in " ".join(discovery.reasons)


@pytest.mark.parametrize(
    ("booking", "day", "taken"), [("K08", "2027-01-26", 6.61), ("K09", "2027-01-28", 6.61)]
)
def test_t09_dilute_peroxide_from_expected_strength_and_never_shared(
    term: Plan, booking: str, day: str, taken: float
) -> None:
    """528 cm³ of 0.100 from B01, 89.5 vol by then: 6.61 cm³ each morning (the label says 5.92)."""
    make = make_for(term, "hydrogen peroxide 0.100 mol/dm3", booking)
    assert (make.bookings, make.on, make.fresh) == ((booking,), date.fromisoformat(day), True)
    assert make.volume == 528_000
    assert sources(make)["B01"] == pytest.approx(taken, abs=0.01)


def test_t09_the_reason_quotes_what_the_label_would_have_said(term: Plan) -> None:
    make = make_for(term, "hydrogen peroxide 0.100 mol/dm3", "K08")
    assert any("89.5 vol" in r and "5.917 cm³" in r for r in make.reasons), make.reasons


def test_t10_the_weak_permanganate_serves_nobody(term: Plan) -> None:
    """S08 holds 950 cm³ at 0.0193, overdue; the classes want 1 650 and 1 320: it is left out."""
    used = {d.bottle for a in term.needs for d in a.draws}
    used |= {s.bottle for m in term.makes for s in m.sources}
    assert "S08" not in used
    [batch] = makes_of(term, "potassium permanganate 0.0200 mol/dm3")
    assert batch.bookings == ("K11", "K13", "K25")
    assert sources(batch)["B10"] == pytest.approx(14.6, abs=0.05)


def test_t10_one_batch_for_all_three_wants_one_retitration(term: Plan) -> None:
    [batch] = makes_of(term, "potassium permanganate 0.0200 mol/dm3")
    again = check(term, batch.id)
    assert (again.not_before, again.by) == (date(2027, 2, 16), date(2027, 3, 18))
    assert again.bookings == ("K25",)


def test_t12_one_titration_of_s02_and_no_nagging(term: Plan) -> None:
    """S02's recheck falls due 7 January, but only K21 uses it: titrate once, 4 Feb to 4 March."""
    once = check(term, "S02")
    assert (once.not_before, once.by) == (date(2027, 2, 4), date(2027, 3, 4))
    assert once.best in (date(2027, 3, 2), date(2027, 3, 3))
    assert once.bookings == ("K21",)


# -- amounts -------------------------------------------------------------------------


def test_t08_the_iodide_order_hangs_on_a_look(term: Plan) -> None:
    """S03 went past yesterday for want of a look; all iodide comes from B08; 250 g are ordered."""
    assert order(term, "potassium iodide") is not None
    look = check(term, "S03")
    assert look.what == "look"
    assert "order of potassium iodide" in look.reason


def test_t18_iron_falls_below_its_level_and_then_short(term: Plan) -> None:
    """B11 holds 130 g, level 100; K11, K13, K25 take 51.8, 51.8, 41.4; 14.9 g are missing."""
    iron = order(term, "ammonium iron(II) sulfate hexahydrate")
    assert iron is not None
    assert (iron.need_by, iron.order_by) == (date(2027, 2, 2), date(2027, 1, 15))
    assert "below 100 g on 2027-02-02 (K11; 78.238 g then left)" in iron.reasons
    assert any("14.93" in r and "K25" in r and "2027-03-01" in r for r in iron.reasons)
    batch = make_for(term, "ammonium iron(II) sulfate 0.100 mol/dm3", "K25")
    assert sources(batch)["B11"] == pytest.approx(26.5, abs=0.05)


# -- planning ------------------------------------------------------------------------


def test_t26_lithium_is_late_by_six_open_days(term: Plan) -> None:
    """B28 is not found; K01 is on 12 January: ordered now, it comes on the 18th."""
    lithium = order(term, "lithium chloride")
    assert lithium is not None
    assert lithium.order_by == date(2026, 12, 11)
    assert (lithium.late, lithium.arrives) == (6, date(2027, 1, 18))
    outcomes = {b: need(term, b, "lithium chloride").outcome for b in ("K01", "K03", "K29")}
    assert outcomes == {"K01": Outcome.SHORT, "K03": Outcome.SHORT, "K29": Outcome.BUY}
    assert {s.booking for s in term.short} == {"K01", "K03"}


def test_t26_sodium_in_its_place_is_refused(practice: Path) -> None:
    [answer] = why(practice, "K01.1", as_at=FIRST_DAY, instead="sodium chloride")
    assert "refused" in answer
    allowed = why(practice, "K01.1", as_at=FIRST_DAY, instead="lithium sulfate")
    assert "allowed" in allowed[0]


def test_t27_permanganate_starts_on_friday(term: Plan) -> None:
    """It stands 48 h and is filtered and titrated; K11 is on Tuesday: Friday, finished Monday."""
    batch = make_for(term, "potassium permanganate 0.0200 mol/dm3", "K11")
    assert (batch.on, batch.ready) == (date(2027, 1, 29), date(2027, 2, 1))


def test_t27_started_on_monday_it_cannot(practice: Path) -> None:
    monday = term_plan(practice, as_at=date(2027, 2, 1))
    answer = need(monday, "K11", "potassium permanganate")
    assert answer.outcome is Outcome.SHORT
    assert any("cannot" in r and "48 h" in r and "2027-01-29" in r for r in answer.reasons)


def test_t30_two_classes_share_one_batch_of_thiosulfate(term: Plan) -> None:
    """2 112 + 1 936 cm³ on Tuesday and Wednesday: one 4 048 cm³ batch, 810 cm³ of S01."""
    [batch] = makes_of(term, "sodium thiosulfate 0.200 mol/dm3")
    assert (batch.bookings, batch.volume) == (("K05", "K06"), 4_048_000)
    assert sources(batch) == {"S01": pytest.approx(809.6)}
    rest = sum(sources(m).get("S01", 0) for m in term.makes) - 809.6
    assert rest == pytest.approx(165, abs=0.5)


def test_t32_hydrochloric_acid_for_permanganate_is_refused(practice: Path) -> None:
    [answer] = why(practice, "K11", as_at=FIRST_DAY, instead="hydrochloric acid")
    assert "refused" in answer
    assert "chlor" in answer


def test_t33_iron_is_made_twice(term: Plan) -> None:
    """It keeps 2 days; K11 is on Tuesday, K13 on Thursday: Monday and Wednesday."""
    iron = makes_of(term, "ammonium iron(II) sulfate 0.100 mol/dm3")
    days = {m.bookings: m.on for m in iron}
    assert days[("K11",)] == date(2027, 2, 1)
    assert days[("K13",)] == date(2027, 2, 3)


def test_every_make_is_as_big_as_what_it_serves(term: Plan) -> None:
    for make in term.makes:
        assert make.volume >= make.needed
    assert amount(need(term, "K05", "sodium thiosulfate")) == 2112
