"""A plan on the safe side: every strength at its lower limit, where there is one to go by."""

from __future__ import annotations

from dataclasses import replace
from datetime import date, timedelta

import pytest
from houses import (
    MONDAY,
    bought_bottle,
    cm3,
    day,
    found,
    g,
    house,
    made_bottle,
    made_from,
    reasons,
    recipe,
    solid,
    solution,
    wants,
)
from houses import booking as booked
from hypothesis import given
from hypothesis import strategies as st

from stockroom.keeping.caution import Basis, Caution, LowerLimits
from stockroom.keeping.laws import strength_after
from stockroom.keeping.record import Check, CheckKind
from stockroom.keeping.rules import Law, Origin, Rule, RuleKind
from stockroom.keeping.strength import strengths_on
from stockroom.keeping.verdict import verdict
from stockroom.measure.periods import Period
from stockroom.planning.cautious import with_caution
from stockroom.planning.choosing.fitness import wrong_strength
from stockroom.planning.decisions import Outcome
from stockroom.planning.facts import Bottle, Closeness, Facts
from stockroom.planning.plan import plan
from stockroom.planning.whys.why import why

LAW = Law(1, 0.0015)
FADES = Rule(RuleKind.FADES, law=LAW)
STOCK = solution(1.0, "stock", rules=(FADES,))
TENTH = solution(0.1, "tenth")


def titrated(on: str, strength: float, uncertainty: float) -> Check:
    return Check(day(on), CheckKind.FOUND, True, strength, uncertainty)


def checked(number: str, *results: tuple[str, float], line: object = STOCK) -> Bottle:
    """A bottle made on 1 October with these strengths found."""
    checks = tuple(found(on, strength) for on, strength in results)
    return made_bottle(number, line, cm3(500), "2026-10-01", checks=checks)  # type: ignore[arg-type]


OFTEN = checked(
    "S01", ("2026-10-05", 0.99), ("2026-11-05", 0.935), ("2026-12-05", 0.876), ("2027-01-02", 0.84)
)
AGAIN = checked(
    "S02", ("2026-10-06", 0.985), ("2026-11-06", 0.925), ("2026-12-06", 0.88), ("2027-01-02", 0.83)
)
ONCE = checked("S03", ("2026-12-20", 0.85))
NEVER = checked("S04")


def doubted(*bottles: Bottle, **more: object) -> Facts:
    facts = house([STOCK, TENTH], bottles=bottles, **more)  # type: ignore[arg-type]
    return with_caution(facts, facts.bottles)


def caution_of(facts: Facts, number: str) -> Caution | None:
    (one,) = (bottle for bottle in facts.bottles if bottle.number == number)
    return one.record.caution


def at_least(facts: Facts, number: str, on: date = MONDAY) -> tuple[float, float]:
    """What a bottle counts as on a day, and what it is usually expected to be."""
    (one,) = (bottle for bottle in facts.bottles if bottle.number == number)
    strengths = strengths_on(one.record, facts.lines[one.line].rules, on)
    assert strengths.expected is not None
    assert strengths.likely is not None
    return strengths.expected, strengths.likely


# -- what there is to go by ----------------------------------------------------------


def test_a_bottle_checked_on_three_days_is_doubted_by_its_own_checks() -> None:
    facts = doubted(OFTEN)
    caution = caution_of(facts, "S01")
    assert caution
    assert caution.basis is Basis.OWN
    low, usual = at_least(facts, "S01", day("02-15"))
    assert 0.6 < low < usual


def test_a_bottle_checked_once_starts_there_and_fades_as_fast_as_its_line_may() -> None:
    facts = doubted(OFTEN, AGAIN, ONCE)
    caution = caution_of(facts, "S03")
    assert caution
    assert caution.basis is Basis.LINE
    assert at_least(facts, "S03", day("2026-12-20"))[0] == 0.85
    low, usual = at_least(facts, "S03", day("02-15"))
    assert low < usual


def test_a_bottle_never_checked_is_as_weak_as_its_line_may_be() -> None:
    # the label says 1.0, and on Monday the others were found at 0.83 and 0.84
    low, usual = at_least(doubted(OFTEN, AGAIN, NEVER), "S04")
    assert usual == pytest.approx(strength_after(1.0, LAW, 95))
    assert 0.8 < low < 0.83


def test_a_line_that_starts_below_its_label_lowers_the_one_never_checked() -> None:
    weak = [
        replace(
            one, record=replace(one.record, checks=tuple(
                replace(each, strength=0.8 * (each.strength or 0)) for each in one.record.checks
            ))
        )
        for one in (OFTEN, AGAIN)
    ]  # fmt: skip
    # the others were found at 0.67 on Monday, whatever the label says
    assert 0.64 < at_least(doubted(*weak, NEVER), "S04")[0] < 0.67


def test_a_line_without_a_rule_fades_as_its_checks_say() -> None:
    bare = replace(STOCK, rules=())
    facts = house([bare], bottles=[OFTEN, AGAIN, ONCE])
    low, usual = at_least(with_caution(facts, facts.bottles), "S03", day("02-15"))
    assert usual == 0.85
    assert low < 0.80


def test_without_a_line_to_go_by_the_uncertainty_is_taken_off() -> None:
    one = made_bottle("S05", STOCK, cm3(9), "2026-12-01", checks=(titrated("01-04", 0.9, 0.01),))
    # 1.645 standard uncertainties, a normal distribution's one-sided 95 %, from memory
    assert at_least(doubted(one), "S05") == pytest.approx((0.9 - 0.01645, 0.9))


def test_without_anything_to_go_by_it_counts_as_usual() -> None:
    facts = doubted(ONCE)
    assert caution_of(facts, "S03") is None
    assert facts.lower_limits == LowerLimits(nothing=1)


def test_the_plan_says_how_many_bottles_are_doubted_by_what() -> None:
    told = made_bottle("S09", TENTH, cm3(99), checks=(titrated("01-04", 0.1, 0.001),))
    plain = made_bottle("S10", TENTH, cm3(99))
    empty = made_bottle("S11", TENTH, 0)
    facts = doubted(OFTEN, AGAIN, ONCE, NEVER, told, plain, empty)
    assert plan(facts).lower_limits == LowerLimits(own=2, line=2, doubt=1, nothing=1)


def test_solids_and_what_has_no_strength_are_not_counted() -> None:
    salt, soup = solid(), solution(None, "soup")
    shelf = [bought_bottle("B01", salt, g(9)), made_bottle("S01", soup, cm3(9))]
    facts = house([salt, soup], bottles=shelf)
    assert with_caution(facts, facts.bottles).lower_limits == LowerLimits()


def test_bottles_gone_since_still_teach() -> None:
    gone = replace(OFTEN, record=replace(OFTEN.record, gone=True))
    facts = house([STOCK], bottles=[ONCE])
    caution = caution_of(with_caution(facts, [gone, ONCE]), "S03")
    assert caution
    assert caution.basis is Basis.LINE


def test_a_bottle_set_aside_teaches_nothing_of_the_others() -> None:
    yellow = replace(OFTEN, record=replace(OFTEN.record, set_aside="yellow tinge"))
    assert caution_of(doubted(yellow, ONCE), "S03") is None


def test_what_was_found_before_a_top_up_is_left_out() -> None:
    facts = house([STOCK], bottles=[OFTEN])
    after = with_caution(facts, facts.bottles, {"S01": day("2026-12-01")})
    assert caution_of(after, "S01") is None


def test_checks_that_rise_teach_nothing() -> None:
    odd = checked("S01", ("2026-10-05", 0.9), ("2026-11-05", 0.92), ("2026-12-05", 0.93))
    assert caution_of(doubted(odd), "S01") is None


def test_a_sealed_bottle_under_a_law_from_opening_counts_as_fresh() -> None:
    opening = replace(STOCK, rules=(replace(FADES, origin=Origin.OPENED),))
    used = [replace(one, record=replace(one.record, opened=one.record.made)) for one in
            (OFTEN, AGAIN)]  # fmt: skip
    sealed = bought_bottle("B09", opening, cm3(99), "2026-10-01")
    facts = house([opening], bottles=[*used, sealed])
    known = with_caution(facts, facts.bottles)
    assert at_least(known, "B09", day("02-15")) == at_least(known, "B09")
    assert at_least(known, "B09")[0] > 0.95


def test_a_line_without_a_rule_of_fading_is_doubted_from_day_to_day() -> None:
    bare = replace(STOCK, rules=())
    later = booked("K02", "03-01")
    facts = house([bare], bottles=[OFTEN], recipes=[recipe(wants(bare, cm3(9)))],
                  bookings=[booked("K01", "01-05"), later])  # fmt: skip
    usual, known = plan(facts), plan(with_caution(facts, facts.bottles))
    assert [need.outcome for need in usual.needs] == [Outcome.SHORT, Outcome.SHORT]
    rough = replace(wants(bare, cm3(9)), closeness=Closeness.ROUGH)
    facts = replace(facts, recipes={("R01", 1): recipe(rough)})
    usual, known = plan(facts), plan(with_caution(facts, facts.bottles))
    assert [need.outcome for need in usual.needs] == [Outcome.HAVE, Outcome.HAVE]
    assert [need.outcome for need in known.needs] == [Outcome.HAVE, Outcome.SHORT]


# -- what the plan makes of it ----------------------------------------------------------


def needing(*bottles: Bottle, closeness: Closeness = Closeness.ROUGH, on: str = "02-01") -> Facts:
    row = recipe(wants(STOCK, cm3(50), closeness=closeness))
    return doubted(*bottles, recipes=[row], bookings=[booked("K01", on)])


def test_the_reason_says_at_least_and_not_expected() -> None:
    facts = needing(OFTEN, on="01-05")
    plain = replace(facts, bottles=(OFTEN,), lower_limits=None)
    assert "at least 0.82" in reasons(plan(facts), "K01.1")
    assert "expected 0.836" in reasons(plan(plain), "K01.1")


def test_what_is_past_tells_what_is_expected_and_not_the_limit() -> None:
    line = replace(STOCK, rules=(FADES, Rule(RuleKind.RECHECK, Period(14, "days"))))
    checked_ago = checked("S05", ("2026-12-10", 0.9), line=line)
    facts = house([line], bottles=[checked_ago, replace(OFTEN, left=0)])
    told = [plan(each).past[0].decided_by for each in (facts, with_caution(facts, facts.bottles))]
    assert "expected 0.867 mol/dm³" in told[0]
    assert told[1] == told[0]


def test_why_tells_all_four_strengths() -> None:
    facts = needing(OFTEN)
    lines = why(facts, plan(facts), "S01")
    told = next(line for line in lines if line.startswith("label"))
    assert "found 0.84" in told
    assert "expected 0.837" in told
    assert told.endswith("by its own checks")


def test_doubt_does_not_make_what_is_too_strong_look_right() -> None:
    strong = made_bottle(
        "S05", replace(TENTH, rules=()), cm3(99), checks=(titrated("01-04", 0.108, 0.004),)
    )
    row = recipe(wants(TENTH, cm3(9)))
    facts = doubted(strong, recipes=[row], bookings=[booked("K01", "01-05")])
    assert at_least(facts, "S05")[0] < 0.105
    assert "too strong: 0.108" in reasons(plan(facts), "K01.1")


def test_more_is_measured_of_a_source_that_may_be_weaker() -> None:
    often = checked("S01", ("2026-10-05", 0.99), ("2026-11-05", 0.94), ("2026-12-05", 0.88))
    facts = house([STOCK, TENTH], bottles=[often], methods=[made_from(TENTH, STOCK)],
                  recipes=[recipe(wants(TENTH, cm3(100)))],
                  bookings=[booked("K01", "01-05")])  # fmt: skip
    taken = [plan(each).makes[0].sources[0].amount
             for each in (facts, with_caution(facts, facts.bottles))]  # fmt: skip
    assert taken[1] > taken[0]


def test_what_is_still_to_be_made_may_be_made_later_only() -> None:
    facts = house(
        [solid(), STOCK],
        bottles=[checked("S01", ("2026-10-05", 0.99), ("2026-11-05", 0.93), ("2026-12-05", 0.80))],
        methods=[made_from(STOCK, solid())],
        recipes=[recipe(wants(STOCK, cm3(700)))],
        bookings=[booked("K01", "03-15")],
    )
    earliest = [
        plan(each).makes[0].earliest for each in (facts, with_caution(facts, facts.bottles))
    ]
    # five per cent are lost in 34 days at the usual rate, and sooner at the most there may be
    assert earliest[0] == day("02-09")
    assert earliest[1] > day("02-20")


def test_a_plain_plan_is_not_cautious() -> None:
    assert plan(house([STOCK], bottles=[OFTEN])).lower_limits is None


# -- always --------------------------------------------------------------------------------


@st.composite
def kept(draw: st.DrawFn, number: str) -> Bottle:
    """A stock solution some weeks old, checked up to five times about a law of its own."""
    made = MONDAY - timedelta(draw(st.integers(60, 150)))
    law = Law(draw(st.sampled_from([0, 1, 2])), draw(st.floats(0.0001, 0.004)))
    ages = sorted(draw(st.lists(st.integers(0, 60), max_size=5)))
    doubt = draw(st.sampled_from([None, 0.005]))
    checks = tuple(
        Check(
            made + timedelta(age),
            CheckKind.FOUND,
            True,
            strength_after(1.0, law, age) * (1 + draw(st.floats(-0.01, 0.01))),
            doubt,
        )
        for age in ages
    )
    return made_bottle(number, STOCK, cm3(draw(st.integers(1, 30)) * 20), made.isoformat(),
                       checks=checks)  # fmt: skip


@st.composite
def houses(draw: st.DrawFn) -> Facts:
    """A stock solution under some law or none, up to four bottles of it, and a dilution."""
    law = draw(st.sampled_from([None, Law(0, 0.001), LAW, Law(2, 0.002)]))
    stock = replace(STOCK, rules=(Rule(RuleKind.FADES, law=law),) if law else ())
    rows = [
        wants(
            stock, cm3(draw(st.integers(1, 10)) * 20), closeness=draw(st.sampled_from(Closeness))
        ),
        wants(TENTH, cm3(draw(st.integers(1, 10)) * 50)),
    ]
    days = sorted(draw(st.lists(st.integers(0, 60), min_size=1, max_size=4)))
    return house(
        [solid(), stock, TENTH],
        methods=[made_from(TENTH, stock)],
        recipes=[recipe(*rows)],
        bookings=[
            booked(f"K{n}", (MONDAY + timedelta(by)).isoformat()) for n, by in enumerate(days)
        ],
        bottles=[draw(kept(f"S{n}")) for n in range(draw(st.integers(1, 4)))],
    )


ahead = st.integers(0, 200)


@given(houses(), ahead)
def test_it_never_counts_more_than_is_usually_expected(facts: Facts, by: int) -> None:
    known = with_caution(facts, facts.bottles)
    for bottle in known.bottles:
        plain = replace(bottle.record, caution=None)
        rules, on = known.lines[bottle.line].rules, MONDAY + timedelta(by)
        low = strengths_on(bottle.record, rules, on)
        usual = strengths_on(plain, rules, on)
        assert low.likely == usual.expected
        assert (low.expected or 0) <= (usual.expected or 0)


@given(houses(), ahead, ahead)
def test_a_lower_limit_falls_with_the_days(facts: Facts, one: int, other: int) -> None:
    known = with_caution(facts, facts.bottles)
    for bottle in known.bottles:
        low, high = (
            at_least(known, bottle.number, MONDAY + timedelta(by))[0]
            for by in sorted((one, other), reverse=True)
        )
        assert 0 <= low <= high


@given(houses())
def test_it_promises_no_bottle_that_usually_would_not_do(facts: Facts) -> None:
    rows = {need.ref: need for need in plan(with_caution(facts, facts.bottles)).needs}
    held = {bottle.number: bottle for bottle in facts.bottles}
    (row,) = facts.recipes.values()
    for ref, need in rows.items():
        wanted = row.requirements[int(ref.rpartition(".")[2]) - 1]
        line = facts.lines[need.line]
        for draw in need.draws:
            if draw.bottle:
                usual = verdict(held[draw.bottle].record, line.rules, need.booking.on)
                assert wrong_strength(wanted, usual.strengths.expected, line) == ""


@given(houses())
def test_solute_is_conserved_at_the_lower_limits(facts: Facts) -> None:
    for make in plan(with_caution(facts, facts.bottles)).makes:
        wanted = (facts.lines[make.line].strength or 0) * make.volume
        taken = sum(one.amount * (one.strength or 0) for one in make.sources)
        # each source is measured to a whole microlitre
        assert taken == pytest.approx(wanted, rel=1e-4, abs=len(make.sources))


@given(houses())
def test_nothing_is_promised_twice_on_the_safe_side(facts: Facts) -> None:
    known = plan(with_caution(facts, facts.bottles))
    for bottle in facts.bottles:
        drawn = [d.amount for need in known.needs for d in need.draws if d.bottle == bottle.number]
        drawn += [s.amount for m in known.makes for s in m.sources if s.bottle == bottle.number]
        assert sum(drawn) <= bottle.left


@given(houses(), st.randoms(use_true_random=False))
def test_shuffling_the_shelf_changes_no_cautious_plan(facts: Facts, chance: object) -> None:
    shelf = list(facts.bottles)
    chance.shuffle(shelf)  # type: ignore[attr-defined]
    turned = replace(facts, bottles=tuple(shelf))
    one, other = (plan(with_caution(each, each.bottles)) for each in (facts, turned))
    assert one == other
