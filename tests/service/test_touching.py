"""Past its safety date or condemned by its test, a bottle is not opened, drawn from or moved."""

from __future__ import annotations

from datetime import date
from pathlib import Path
from typing import TYPE_CHECKING, Any

import pytest

from stockroom.errors import BadAmount, BadInput, NotAllowed
from stockroom.findings import DO_NOT_TOUCH
from stockroom.measure.amounts import Amount
from stockroom.planning.decisions import Outcome
from stockroom.service import checks, stock
from stockroom.service.plan import past_on, term_plan, why
from stockroom.service.work import working

if TYPE_CHECKING:
    from collections.abc import Callable


# B29 was opened on 2026-09-02: test or discard by 2027-03-02 (scenario, class B, 6 months)
GOOD, PAST = date(2027, 2, 10), date(2027, 3, 10)
SAID = DO_NOT_TOUCH.capitalize()


def who(today: date) -> dict[str, Any]:
    return {"on": None, "today": today, "by": "T1"}


def touch(path: Path, today: date) -> dict[str, Callable[[], object]]:
    """Everything that would open B29, take from it or move it."""
    some, on = Amount.cm3(1), who(today)
    return {
        "open": lambda: stock.open_bottle(path, "B29", **on),
        "draw": lambda: stock.draw(path, "B29", some, **on),
        "lend": lambda: stock.lend(path, "B29", some, to="physics", **on),
        "move": lambda: stock.move(path, "B29", "A2", **on),
    }


@pytest.mark.parametrize("act", ["open", "draw", "lend", "move"])
def test_past_its_safety_date_nobody_touches_it(own: Path, act: str) -> None:
    with pytest.raises(NotAllowed, match=r"B29 is past its safety date, 2 March 2027") as refused:
        touch(own, PAST)[act]()
    assert refused.value.hint.startswith(SAID)


@pytest.mark.parametrize("act", ["draw", "lend", "move"])
def test_before_that_it_is_used_as_any_other(own: Path, act: str) -> None:
    touch(own, GOOD)[act]()


def test_a_draw_of_before_may_still_be_written_up(own: Path) -> None:
    done = stock.draw(own, "B29", Amount.cm3(1), on=GOOD, today=PAST, by="T1")
    assert "Drew" in done.text


def test_throwing_it_away_can_be_written(own: Path) -> None:
    done = stock.discard(own, "B29", how="taken away", why="past", **who(PAST))
    assert "Discarded B29" in done.text


def test_every_message_about_it_says_so(own: Path) -> None:
    past = next(b for b in past_on(own, as_at=PAST, on=PAST).past if b.bottle == "B29")
    assert DO_NOT_TOUCH in past.decided_by
    assert any(DO_NOT_TOUCH in line for line in why(own, "B29", as_at=PAST))
    look = checks.look(own, "B29", passed=True, **who(PAST))
    assert any(SAID in line for line in look.details)


def test_set_aside_it_is_no_safer(own: Path) -> None:
    checks.spoil(own, "B29", "label torn", **who(GOOD))
    with working(own, **who(PAST)) as work:
        assert work.verdict(work.bottle("B29")).warning == DO_NOT_TOUCH
    with pytest.raises(NotAllowed, match="past its safety date"):
        stock.move(own, "B29", "A2", **who(PAST))


def test_no_plan_draws_on_it(own: Path) -> None:
    plan = term_plan(own, as_at=PAST)
    assert not [a for a in plan.needs if any(d.bottle == "B29" for d in a.draws)]


# -- its test ---------------------------------------------------------------------------


def test_a_low_result_starts_the_interval_again(own: Path) -> None:
    done = checks.tested(own, "B29", peroxide="12 mg/kg", **who(PAST))
    assert done.details[0] == "12 mg/kg, below 25: it may go on being used."
    assert done.details[-1].startswith("Now sound, until 10 September 2027")
    stock.move(own, "B29", "A2", **who(PAST))


def test_a_result_from_25_condemns_and_it_leaves_the_plan(own: Path) -> None:
    before = term_plan(own, as_at=date(2027, 1, 4))
    assert any(d.bottle == "B29" for a in before.needs for d in a.draws)
    checks.tested(own, "B29", peroxide="40 mg/kg", **who(date(2027, 1, 4)))
    after = term_plan(own, as_at=date(2027, 1, 4))
    assert not any(d.bottle == "B29" for a in after.needs for d in a.draws)
    assert {a.outcome for a in after.needs if a.item.startswith("cyclohexene")} <= {
        Outcome.SHORT, Outcome.BUY,
    }  # fmt: skip


@pytest.mark.parametrize("act", ["open", "draw", "lend"])
def test_what_is_waste_is_not_opened(own: Path, act: str) -> None:
    checks.tested(own, "B29", peroxide="40 mg/kg", **who(GOOD))
    with pytest.raises(NotAllowed, match="40 mg/kg, from 25 to 100"):
        touch(own, GOOD)[act]()


def test_what_is_waste_may_be_carried_to_the_waste(own: Path) -> None:
    checks.tested(own, "B29", peroxide="40 mg/kg", **who(GOOD))
    assert "Moved" in stock.move(own, "B29", "X1", **who(GOOD)).text


@pytest.mark.parametrize(
    "result", [{"peroxide": "140 mg/kg"}, {"seen": "crystals"}, {"passed": False}]
)
def test_what_is_worse_is_left_where_it_stands(own: Path, result: dict[str, Any]) -> None:
    checks.tested(own, "B29", **result, **who(GOOD))
    with pytest.raises(NotAllowed) as refused:
        stock.move(own, "B29", "X1", **who(GOOD))
    assert refused.value.hint == f"{SAID}."


def test_a_bad_look_leaves_it_where_it_stands(own: Path) -> None:
    checks.look(own, "B29", passed=False, note="crystals round the cap", **who(GOOD))
    with pytest.raises(NotAllowed, match="did not pass when looked at"):
        stock.move(own, "B29", "X1", **who(GOOD))


@pytest.mark.parametrize("again", ["look", "test"])
def test_nothing_takes_a_bad_test_back(own: Path, again: str) -> None:
    checks.tested(own, "B29", peroxide="40 mg/kg", **who(GOOD))
    check = checks.look if again == "look" else checks.tested
    with pytest.raises(NotAllowed, match="40 mg/kg") as refused:
        check(own, "B29", passed=True, **who(GOOD))
    assert "put-right" in refused.value.hint


def test_a_slip_is_put_right(own: Path) -> None:
    done = checks.tested(own, "B29", peroxide="40 mg/kg", **who(GOOD))
    assert done.entry is not None
    stock.put_right(own, done.entry, "read 4 as 40", **who(GOOD))
    assert "passed" in checks.tested(own, "B29", peroxide="4 mg/kg", **who(GOOD)).text


def test_crystals_overrule_the_number(own: Path) -> None:
    done = checks.tested(own, "B29", peroxide="1 mg/kg", seen="crystals", **who(GOOD))
    assert "did not pass" in done.text
    assert done.details[0].startswith("Crystals seen")


def test_the_number_is_kept_in_the_ledger(own: Path) -> None:
    checks.tested(own, "B29", peroxide="12.5 ppm", **who(GOOD))
    with working(own, **who(GOOD)) as work:
        check = work.seen(work.bottle("B29")).record.checks[-1]
    assert (check.peroxide_mg_kg, check.passed) == (12.5, True)


@pytest.mark.parametrize(
    ("result", "error", "words"),
    [
        ({}, BadInput, "pass or fail"),
        ({"peroxide": "12"}, BadAmount, "in what"),
        ({"peroxide": "much"}, BadAmount, "much"),
        ({"peroxide": "40 mg/kg", "passed": True}, BadInput, "cannot have passed"),
        ({"seen": "crystals", "passed": True}, BadInput, "cannot have passed"),
    ],
)
def test_a_test_that_does_not_say_is_asked_about(
    own: Path, result: dict[str, Any], error: type[Exception], words: str
) -> None:
    with pytest.raises(error, match=words):
        checks.tested(own, "B29", **result, **who(GOOD))
