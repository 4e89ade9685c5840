"""A plan is replayed before it is shown: a fault of every kind is planted, and seen by name."""

from __future__ import annotations

import ast
from dataclasses import replace
from pathlib import Path

import pytest
from houses import answer, cm3, day, outcomes
from replay_house import (
    BOOKINGS,
    FACTS,
    GOOD,
    IRON,
    PLAN,
    RARE,
    SALT,
    STOCK,
    TENTH,
    at_noon,
    check,
    drawn,
    first_of,
    make,
    need,
    order,
    short,
    sources,
    stock_for,
    with_bottle,
    with_line,
    with_method,
    with_pack,
)

import stockroom.planning.replaying.replay
from stockroom.measure.workdays import Calendar
from stockroom.planning.decisions import Outcome, Plan
from stockroom.planning.facts import Balance, Facts, Vessel
from stockroom.planning.replaying.replay import Broken, replay

SUNDAY = day("01-31")
CARBOY = Vessel("V1", cm3(5000), ((day("02-01"), day("02-01")),))
BEAKER = Vessel("V2", cm3(150))
# 8 g to 5 % wants steps of 0.4 g, and half of it of 0.2 g
COARSE, FINE = Balance("C1", 500_000), Balance("F1", 300_000)
AWAY = Balance("F2", 1_000, ((day("01-04"), day("03-26")),))
LONGER = replace(RARE.packs[0], lead=6)
# every rule has its faults here: a rule added without one fails the test below
PLANTED: dict[Broken, dict[str, Plan | tuple[Facts, Plan]]] = {
    Broken.ANSWERED: {
        "left out": replace(PLAN, needs=PLAN.needs[1:]),
        "twice": replace(PLAN, needs=(*PLAN.needs, PLAN.needs[0])),
        "nobody's": need("K1.1", ref="K9.1"),
    },
    Broken.ASKED: {
        "amount": need("K1.1", amount=cm3(499)),
        "line": need("K1.1", line=STOCK.key),
        "day": need("K1.1", booking=replace(BOOKINGS[0], on=day("01-13"))),
    },
    Broken.ADDS_UP: {
        "too little": drawn("K1.1", ("S2", 320), ("S3", 179)),
        "nothing": need("K1.1", draws=()),
        "no make": need("K4.1", make=""),
        "made and said to be had": need("K4.1", outcome=Outcome.HAVE),
        "drawn and short": need("K1.1", outcome=Outcome.SHORT),
        "bought and said to be made": need("K5.1", outcome=Outcome.MAKE),
        "made and said to be bought": need("K4.1", outcome=Outcome.BUY),
        "less than nothing": drawn("K1.1", ("S2", 501), ("S3", -1)),
    },
    Broken.LISTED: {
        "left out": replace(PLAN, short=()),
        "twice": replace(PLAN, short=PLAN.short * 2),
        "another": short(ref="K1.1"),
        "amount": short(amount=1),
    },
    Broken.NAMED: {
        "bottle": need("K1.2", draws=(replace(answer(PLAN, "K1.2").draws[0], bottle="E9"),)),
        "make": need("K4.1", make="M99"),
        "source": sources("tenth", make="M99"),
        "line": sources("stock", line="pepper", bottle=""),
        "no method": make("tenth", line=SALT.key),
    },
    Broken.KIND: {
        "bottle": drawn("K1.1", ("X-standing", 500)),
        "make": need("K4.1", make=first_of("stock").id),
        "source": sources("stock", line=RARE.key, bottle="B3"),
    },
    Broken.OUT_OF_USE: {
        "set aside": drawn("K1.1", ("X-aside", 500)),
        "undated": drawn("K1.1", ("X-undated", 500)),
        "not found": (with_bottle("S3", not_found=True), PLAN),
        "gone": (with_bottle("B1", gone=True), PLAN),
    },
    Broken.AGE: {
        "bottle": drawn("K1.1", ("X-past", 500)),
        "make": make("tenth", on=day("01-04")),
        "told": make("tenth", good_until=day("03-20")),
    },
    Broken.SAFETY: {"past": drawn("K1.2", ("X-ether", 50))},
    Broken.STOOD: {
        "that morning": stock_for("X-standing"),
        "as written": (with_bottle("E1", ready_on=day("01-13")), PLAN),
    },
    Broken.FRESH: {
        "bottle": drawn("K1.1", ("X-old", 500)),
        "the day before": make("foam", on=day("01-14"), ready=day("01-14")),
    },
    Broken.NEVER_KEPT: {
        "bottle": drawn("K2.2", ("X-foam", 100)),
        "heel": make("foam", heel_kept=True),
        "the day before": make("foam", on=day("01-14"), ready=day("01-14")),
    },
    Broken.ONE_SITTING: {
        "another day": need("K5.2", make=first_of("foam").id),
        "another hour": (at_noon("K5", "01-15"), need("K5.2", make=first_of("foam").id)),
    },
    Broken.MARKED: {"need": need("K4.1", fresh=True), "make": make("tenth", fresh=True)},
    Broken.STRENGTH: {
        "weak": drawn("K1.1", ("X-weak", 500)),
        "strong": drawn("K1.1", ("X-strong", 500)),
        "faded make": make("tenth", on=day("01-05")),
        "too weak to dilute": sources("foam", bottle="S2", line=TENTH.key, make="", strength=0.1),
    },
    Broken.TOLD: {
        "bottle": drawn("K1.1", ("S2", 320), ("S3", 180), told=0.1),
        "source": sources("foam", strength=0.99),
    },
    Broken.ONE_STRENGTH: {"two": drawn("K1.1", ("S2", 250), ("X-other", 250))},
    Broken.EXACT: {
        "make not titrated": replace(PLAN, checks=()),
        "too late": check(best=day("02-12")),
        "too soon": check(best=day("01-06")),
        "only if there is time": check(optional=True),
        "for another": check(bookings=("K2",)),
        "bottle not titrated": drawn("K2.1", ("X-vague", 200)),
        "not known so closely": drawn("K2.1", ("X-unsure", 200)),
    },
    Broken.BARRED: {
        "bottle": drawn("K4.1", ("X-iron", 400)),
        "source": sources("tenth", line=IRON.key, bottle="X-ore", make="", strength=None),
    },
    Broken.BALANCE: {
        "one": drawn("K1.1", ("S2", 500)),
        "two": drawn("K4.1", ("S3", 100), ("X-other", 300)),
    },
    Broken.GIVEN: {
        "made": make("stock", volume=cm3(79), needed=cm3(79)),
        "needed": make("stock", volume=cm3(80), needed=cm3(79), heel=cm3(1)),
        "heel": make("stock", heel=cm3(1)),
        "nothing": make("stock", volume=0),
    },
    Broken.SOLUTE: {
        "more": sources("tenth", amount=cm3(41)),
        "less": sources("tenth", amount=cm3(39.9)),
        "none": make("tenth", sources=()),
        "twice": make("tenth", sources=first_of("tenth").sources * 2),
    },
    Broken.VESSEL: {
        "larger": make("tenth", volume=cm3(2001)),
        "away": (replace(FACTS, vessels=(CARBOY,)), PLAN),
        "larger than all there are": (replace(FACTS, vessels=(BEAKER,)), PLAN),
        "larger, each of several": (replace(FACTS, vessels=(BEAKER,)), make("tenth", vessels=2)),
        "work for one of two": make("tenth", vessels=2),
    },
    Broken.WEIGHED: {
        "too little": (replace(FACTS, balances=(COARSE,)), PLAN),
        "with the finer away": (replace(FACTS, balances=(COARSE, AWAY)), PLAN),
        "in each of two": (replace(FACTS, balances=(FINE,)), make("stock", vessels=2, minutes=60)),
        "nothing to weigh on": (replace(FACTS, balances=(AWAY,)), PLAN),
    },
    Broken.OPEN: {
        "made": make("tenth", on=SUNDAY, ready=SUNDAY),
        "finished": make("checked", finish_on=day("02-07")),
    },
    Broken.HOURS: {
        "longer than a day": (with_method("tenth", minutes=511), make("tenth", minutes=511)),
        "longer to finish": (
            with_method("checked", finish_minutes=511),
            make("checked", minutes=521),
        ),
        "in a short day": (replace(FACTS, calendar=Calendar((), 985, 990)), PLAN),
    },
    Broken.NOT_YET: {
        "make": make("stock", on=day("01-01")),
        "check": check(best=day("01-03"), not_before=day("01-03")),
    },
    Broken.READY: {
        "for a need": make("tenth", on=day("02-03"), ready=day("02-03")),
        "for a make": make("stock", on=day("01-15"), ready=day("01-16")),
        "too soon": make("stock", ready=day("01-14")),
        "before it is begun": make("tenth", ready=day("01-29")),
        "not finished": make("checked", finish_on=None),
    },
    Broken.DAY_BEFORE: {"the day itself": make("tenth", on=day("02-02"), ready=day("02-02"))},
    Broken.SERVES: {
        "left out": make("stock", bookings=("K2", "K5")),
        "nobody": replace(PLAN, makes=(*PLAN.makes, replace(first_of("tenth"), id="M99"))),
        "one number": replace(PLAN, makes=(*PLAN.makes, first_of("tenth"))),
    },
    Broken.ORDERED: {
        "left out": replace(PLAN, orders=()),
        "another line": order(line=SALT.key),
        "too little": order(packs=0),
    },
    Broken.IN_TIME: {
        "for a need": order(arrives=day("01-28")),
        "for a make": order(arrives=day("02-11")),
    },
    Broken.ORDER_BY: {
        "a day late": order(order_by=day("01-19")),
        "within the lead": order(order_by=day("01-26"), arrives=day("02-02")),
        "for another day": order(need_by=day("01-28")),
        "with a longer lead": (with_pack(lead=6), order(sold_as=(LONGER,))),
        "with leave to ask for": (with_line(ask_days=1), PLAN),
        "with a wider margin": (replace(FACTS, house=replace(FACTS.house, margin_days=3)), PLAN),
    },
    Broken.ARRIVES: {
        "sooner": order(arrives=day("01-22")),
        "later": order(arrives=day("01-26")),
        "late": order(late=1),
    },
    Broken.PRICED: {
        "a penny more": order(pence=901, shares=(("CH", 901),)),
        "two for one": order(packs=2),
        "two told": order(mixture=(("pack", 2, 900),)),
        "amount": order(amount=1),
        "another price": order(mixture=(("pack", 1, 800),)),
        "nothing": order(sold_as=()),
        "not sold so": order(sold_as=(LONGER,)),
    },
    Broken.SHARES: {
        "a penny more": order(pence=901),
        "none": order(shares=()),
        "less than none": order(shares=(("BI", -100), ("CH", 1000))),
    },
    Broken.CHECK_DAY: {
        "closed": check(not_before=day("02-06"), best=day("02-07")),
        "outside": check(best=day("02-15")),
    },
}


def test_the_good_plan_has_something_of_everything() -> None:
    assert set(outcomes(PLAN).values()) >= {
        Outcome.HAVE, Outcome.MAKE, Outcome.BUY, Outcome.SHORT
    }  # fmt: skip
    assert (len(PLAN.orders), len(PLAN.checks), len(PLAN.short)) == (1, 1, 1)
    assert any(source.make for made in PLAN.makes for source in made.sources)


def test_the_good_plan_has_no_fault() -> None:
    assert replay(GOOD, PLAN) == ()
    assert replay(FACTS, PLAN) == ()


@pytest.mark.parametrize("rule", list(Broken), ids=lambda rule: rule.name)
def test_every_rule_has_a_planted_fault(rule: Broken) -> None:
    assert PLANTED.get(rule), f"plant a fault that breaks: {rule}"


@pytest.mark.parametrize(
    ("rule", "how"), [(rule, how) for rule, row in PLANTED.items() for how in row]
)
def test_a_planted_fault_is_seen_by_name(rule: Broken, how: str) -> None:
    case = PLANTED[rule][how]
    facts, made = case if isinstance(case, tuple) else (FACTS, case)
    faults = replay(facts, made)
    assert rule in {fault.rule for fault in faults}
    assert all(fault.where and fault.what and str(fault.rule) in str(fault) for fault in faults)


def test_the_replay_knows_nothing_of_how_the_plan_was_made() -> None:
    folder = Path(stockroom.planning.replaying.replay.__file__).parent
    known = ("stockroom.planning.decisions", "stockroom.planning.facts")
    for path in folder.glob("*.py"):
        for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
            if isinstance(node, ast.ImportFrom) and node.module:
                beside = node.module.startswith("stockroom.planning.replaying.")
                planning = node.module.startswith("stockroom.planning")
                assert not planning or beside or node.module in known, (path.name, node.module)
                assert not node.module.startswith("stockroom.lots"), path.name
