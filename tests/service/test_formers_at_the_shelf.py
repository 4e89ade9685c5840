"""Peroxide-formers at the shelf: the published dates of each class, and its test, opened or not."""

from __future__ import annotations

import re
from datetime import date, timedelta
from typing import TYPE_CHECKING, Any

import pytest
from hypothesis import given
from hypothesis import strategies as st

from stockroom.errors import NotAllowed
from stockroom.keeping.record import Check, CheckKind, Record
from stockroom.keeping.rules import Origin, Rule, RuleKind
from stockroom.keeping.verdict import verdict
from stockroom.measure.days import parse_printed
from stockroom.measure.periods import Period
from stockroom.planning.facts import Form
from stockroom.service import checks, stock
from stockroom.service.touching import Known, condemning, past_safety
from stockroom.store.former_rules import with_former_rules

if TYPE_CHECKING:
    from pathlib import Path

    from conftest import Stockroom

# months by class as in the plan of Univ. of Southern California (a); class D six for all (a)
GOOD, BOUGHT, LATER = date(2027, 2, 10), date(2026, 1, 1), date(2026, 6, 1)


def who(today: date) -> dict[str, Any]:
    return {"on": None, "today": today, "by": "T1"}


def former(cls: str, *rules: Rule, neat: bool = True, **record: Any) -> Known:
    """A bottle of a peroxide-former with these dates, under the rules its line would have."""
    form = Form.LIQUID if neat else Form.SOLUTION
    return Known(Record(**record), with_former_rules(rules, cls, form), cls, neat)


@pytest.mark.parametrize(
    ("bottle", "last"),
    [
        (former("A", received=BOUGHT), date(2026, 7, 1)),
        (former("A", received=BOUGHT, opened=date(2026, 2, 1)), date(2026, 5, 1)),
        # opening it gives it no longer than it would have had closed
        (former("A", received=BOUGHT, opened=LATER), date(2026, 7, 1)),
        (former("A", opened=LATER), date(2026, 9, 1)),
        (former("B", received=BOUGHT), date(2027, 1, 1)),
        (former("B", received=BOUGHT, opened=LATER), date(2026, 12, 1)),
        (former("C", received=BOUGHT), date(2027, 1, 1)),
        (former("C", received=BOUGHT, opened=LATER), date(2027, 1, 1)),
        (former("C", opened=LATER), date(2027, 6, 1)),
        (former("D", received=BOUGHT), date(2026, 7, 1)),
        (former("D", opened=LATER), date(2026, 12, 1)),
    ],
)
def test_each_class_opened_or_closed_is_left_alone_after_its_day(bottle: Known, last: date) -> None:
    assert past_safety(bottle, last) == ""
    after = last + timedelta(days=1)
    assert past_safety(bottle, after).startswith("is past its safety date")


days = st.dates(date(2024, 1, 1), date(2030, 1, 1))


@given(st.sampled_from("ABCD"), days, st.none() | days, days, st.none() | days)
def test_the_shelf_and_the_verdict_never_disagree(
    cls: str, received: date, opened: date | None, on: date, tested: date | None
) -> None:
    checks = (Check(tested, CheckKind.TESTED),) if tested else ()
    bottle = former(cls, received=received, opened=opened, checks=checks)
    judged = verdict(bottle.record, bottle.rules, on)
    assert bool(past_safety(bottle, on)) is bool(judged.warning)


def test_the_houses_own_safety_date_comes_before_the_schedule() -> None:
    own = Rule(RuleKind.LIFE, Period(2, "years"), Origin.RECEIVED, safety=True)
    assert past_safety(former("A", own, received=BOUGHT), date(2027, 12, 31)) == ""
    assert past_safety(former("A", own, received=BOUGHT), date(2028, 1, 2))


@pytest.mark.parametrize(
    ("cls", "record", "left_alone"),
    [
        ("B", {}, True),
        ("B", {"opened": date(2026, 2, 1)}, False),
        ("B", {"checks": (Check(date(2026, 3, 10), CheckKind.TESTED),)}, False),
        ("B", {"checks": (Check(date(2026, 2, 20), CheckKind.TESTED),)}, True),
        # a test does not make class A any younger
        ("A", {"checks": (Check(date(2026, 3, 10), CheckKind.TESTED),)}, True),
    ],
)
def test_closed_and_past_the_date_its_maker_printed_it_is_left_alone(
    cls: str, record: dict[str, Any], left_alone: bool
) -> None:
    printed = parse_printed("2026-03-01")
    bottle = former(cls, received=BOUGHT, printed=printed, **record)
    assert past_safety(bottle, date(2026, 3, 1)) == ""
    assert ("maker printed" in past_safety(bottle, date(2026, 3, 11))) is left_alone


@pytest.mark.parametrize("cls", "ABCD")
def test_a_former_without_any_date_is_left_alone(cls: str) -> None:
    assert past_safety(former(cls), GOOD) == f"has no date on it and makes peroxides (class {cls})"
    tested = Check(BOUGHT, CheckKind.TESTED)
    assert past_safety(former(cls, checks=(tested,)), BOUGHT) == ""


@pytest.mark.parametrize(
    "bottle", [former("", received=BOUGHT), former(""), former("B", neat=False)]
)
def test_the_schedule_says_nothing_of_the_rest(bottle: Known) -> None:
    """No former, dated or not; a solution of one."""
    assert past_safety(bottle, date(2030, 1, 1)) == ""


def test_crystals_condemn_a_former_that_no_rule_tests() -> None:
    bad = Check(GOOD, CheckKind.LOOKED, passed=False)
    assert condemning(former("A", checks=(bad,)), GOOD) is bad
    assert condemning(former("", checks=(bad,)), GOOD) is None


def bought(stockroom: Stockroom, own: Path, name: str, form: str = "liquid") -> str:
    """The number of a bottle received on 4 January 2026, entered without a word of its class."""
    by = ("--by", "T1")
    stockroom("add", "substances", f"substance={name}", "storage_group=flammable", *by, store=own)
    stockroom("add", "lines", f"item={name}", f"substance={name}", f"form={form}", *by, store=own)
    day = ("--place", "F2", "--printed", "none", "--on", "2026-01-04")
    said = stockroom("arrive", name, "500cm3", *day, *by, store=own)
    found = re.search(r"\bB[0-9]+\b", said.out)
    assert found, said.err
    return found[0]


@pytest.mark.parametrize("name", ["diisopropyl ether", "isopropyl ether"])
def test_a_closed_bottle_of_class_a_is_not_opened_years_later(
    stockroom: Stockroom, own: Path, name: str
) -> None:
    said = stockroom("open", bought(stockroom, own, name), "--by", "T1", store=own)
    assert (said.code, "past its safety date, 4 July 2026" in said.err) == (1, True)


# -- its test, whatever its class --------------------------------------------------------


def test_a_passed_test_of_class_a_is_kept_and_moves_nothing(
    stockroom: Stockroom, own: Path
) -> None:
    number = bought(stockroom, own, "diisopropyl ether")
    done = checks.tested(own, number, peroxide="5 mg/kg", **who(date(2026, 6, 1)))
    assert "No test moves the discard date of class A." in done.details
    assert done.details[-1].startswith("Now sound, until 4 July 2026")


def test_a_failed_test_condemns_class_a(stockroom: Stockroom, own: Path) -> None:
    number, on = bought(stockroom, own, "diisopropyl ether"), who(date(2026, 6, 1))
    checks.tested(own, number, peroxide="40 mg/kg", **on)
    with pytest.raises(NotAllowed, match="40 mg/kg"):
        stock.open_bottle(own, number, **on)


@pytest.mark.parametrize(
    ("name", "until"),
    [
        ("THF", "1 December 2026"),
        ("ethyl vinyl ether", "1 December 2026"),
        ("vinylbenzene", "1 June 2027"),
        ("MTBE", "1 December 2026"),
    ],
)
@pytest.mark.parametrize("opened", [False, True])
def test_a_passed_test_moves_the_date_of_every_other_class(
    stockroom: Stockroom, own: Path, name: str, until: str, opened: bool
) -> None:
    """Closed too: it was opened for the test, and counts as opened from then on."""
    number, on = bought(stockroom, own, name), who(date(2026, 6, 1))
    if opened:
        stock.open_bottle(own, number, **on)
    done = checks.tested(own, number, peroxide="5 mg/kg", **on)
    assert f"until {until}" in done.details[-1]


def test_a_solution_of_a_former_may_fail_its_test_too(stockroom: Stockroom, own: Path) -> None:
    number, on = bought(stockroom, own, "isopropanol", "solution"), who(date(2026, 6, 1))
    passed = checks.tested(own, number, peroxide="5 mg/kg", **on)
    assert "It has no test date of its own that this would move." in passed.details
    checks.tested(own, number, peroxide="400 mg/kg", **on)
    with pytest.raises(NotAllowed, match="leave it in place"):
        stock.move(own, number, "X1", **on)


def test_what_makes_no_peroxide_has_no_such_test(own: Path) -> None:
    with pytest.raises(NotAllowed, match="no test of its own"):
        checks.tested(own, "B02", peroxide="5 mg/kg", **who(GOOD))
