"""Money, waste and near misses on the sheets: each sum is that of the plan, to the penny."""

from __future__ import annotations

import re
from collections import Counter
from dataclasses import dataclass, replace
from datetime import date, timedelta
from pathlib import Path

import houses
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from random_houses import random_house

from stockroom.keeping.verdict import Condition
from stockroom.measure.amounts import Kind
from stockroom.planning.decisions import Budget, Instead, Outcome, Plan
from stockroom.planning.facts import Facts, Firmness
from stockroom.planning.plan import plan
from stockroom.reports.paper.buying_sheet import SHOWN, buying_sheet_of, shared_by, ways_round
from stockroom.reports.paper.term_report import term_report_of
from stockroom.reports.paper.term_report_waste import poured_in_words, reason_of, wasted
from stockroom.reports.words import TIED, amount, money
from stockroom.service.sheets import known_and_planned

SEEDS = (6, 9, 13, 21, 29, 35, 36, 43)
POUNDS = re.compile(r"£(\d+)\.(\d\d)")

House = tuple[Facts, Plan]


@pytest.fixture(scope="module", params=["college", *SEEDS])
def house(request: pytest.FixtureRequest, college_file: Path) -> House:
    if request.param == "college":
        return known_and_planned(college_file, as_at=houses.MONDAY)
    known = random_house(request.param)
    return known, plan(known)


def pence_in(text: str) -> list[int]:
    return [100 * int(pounds) + int(pence) for pounds, pence in POUNDS.findall(text)]


@dataclass(frozen=True)
class Gone:
    """What left a bottle, in micro-units."""

    bottle: str
    amount: int
    how: str = "discarded"
    why: str = "past"
    item: str = "starch"
    strength: str = ""
    kind: Kind = Kind.VOLUME
    way: str = "sink"
    by: str = "T1"
    on: date = houses.MONDAY


# -- the buying list ------------------------------------------------------------------


def test_what_each_department_pays_adds_up_to_the_order_and_all_orders_to_the_list(
    house: House,
) -> None:
    made = house[1]
    sheet = buying_sheet_of(made)
    rows = {row.id: row for group in sheet.groups for row in group.rows}
    assert set(rows) == {order.id for order in made.orders}
    for order in made.orders:
        row = rows[order.id]
        assert pence_in(row.cost) == [order.pence]
        assert pence_in(row.paid) == [pence for _, pence in order.shares]
        assert sum(pence_in(row.paid)) == order.pence
        assert (row.order_by, row.need_by, row.arrives) == (
            order.order_by,
            order.need_by,
            order.arrives,
        )
        assert [int(n) for n in re.findall(r"late by (\d+)", row.late)] == [order.late] * (
            order.late > 0
        )
    for group in sheet.groups:
        assert sum(pence_in(row.cost)[0] for row in group.rows) == pence_in(group.total)[0]
        days = [row.order_by for row in group.rows]
        assert days == sorted(days)
    assert sum(pence_in(group.total)[0] for group in sheet.groups) == pence_in(sheet.total)[0]
    late = re.findall(r"; (\d+) late already", sheet.head.about)
    count = sum(order.late > 0 for order in made.orders)
    assert late == ([str(count)] if count else [])


def test_several_packs_are_paid_once() -> None:
    salt = houses.solid(packs=(houses.pack(houses.g(10), 4.05),))
    known = houses.house(
        [salt],
        recipes=[houses.recipe(houses.wants(salt, houses.g(45)))],
        bookings=[houses.booking("K01", "02-16")],
    )
    sheet = buying_sheet_of(plan(known))
    (row,) = sheet.groups[0].rows
    assert row.bought.startswith("5")
    assert (row.cost, sheet.groups[0].total, sheet.total) == ("£20.25",) * 3
    assert row.paid.replace(TIED, " ") == "CH £20.25"


def test_pence_below_ten_have_their_nought(house: House) -> None:
    for order in house[1].orders:
        odd = replace(order, shares=(("CH", 1805), ("OU", 7)))
        assert shared_by(odd).replace(TIED, " ") == "CH £18.05, OU £0.07"
        assert shared_by(odd, sign="").replace(TIED, " ") == "CH 18.05, OU 0.07"


@given(st.lists(st.sampled_from(["today", "swap", "borrow", "without", "day"]), max_size=9))
@settings(max_examples=30)
def test_ways_round_are_told_or_counted_every_one(sorts: list[str]) -> None:
    ways = tuple(Instead(what, houses.MONDAY, f"way {n}") for n, what in enumerate(sorts))
    order = replace(_ORDER, instead=ways)
    told = ways_round(order)
    shown = told.count("or way ")
    more = sum(map(int, re.findall(r"and (\d+) more", told)))
    assert shown + more == len(ways)
    assert shown == min(SHOWN, len(set(sorts)))


_SALT = houses.solid(packs=(houses.pack(houses.g(100), 4.05),))
_ORDER = houses.planned(
    [_SALT],
    recipes=[houses.recipe(houses.wants(_SALT, houses.g(45)))],
    bookings=[houses.booking("K01", "02-16")],
).orders[0]


# -- the term's report ----------------------------------------------------------------


def test_the_sentences_figures_are_the_tables(house: House) -> None:
    known, made = house
    report = term_report_of(known, made, ())
    use, _, surplus, purse, misses = (text.replace(TIED, " ") for text in report.sentences)
    held = [
        b
        for b in known.bookings
        if b.firmness is not Firmness.DROPPED and known.start <= b.on <= known.end
    ]
    if held:
        first, *_ = re.findall(r"\d+", use)
        assert int(first) == len(held)
        assert f"{len(report.used)} thing" in use
    assert pence_in(purse)[0] == sum(one.spent for one in made.budgets)
    assert sum(pence_in(one.promised)[0] for one in report.purses) == sum(
        order.pence for order in made.orders
    )
    if made.makes:
        whole = sum(make.volume for make in made.makes)
        over = sum(make.heel for make in made.makes if not make.heel_kept)
        assert surplus.startswith(f"Of {amount(whole, Kind.VOLUME)} ".replace(TIED, " "))
        assert f", {amount(over, Kind.VOLUME)} (".replace(TIED, " ") in surplus
        assert f"({100 * over / whole:.0f} %)" in surplus
    counts = [int(number) for number in re.findall(r"\d+", misses)]
    assert counts == [len(miss.told) for miss in report.misses]


def test_every_near_miss_of_the_plan_is_told_once(house: House) -> None:
    made = house[1]
    told = {miss.what: miss.told for miss in term_report_of(*house, ()).misses}
    refused = {need.ref for need in made.needs if need.outcome is Outcome.REFUSED}
    lacking = {short.ref for short in made.short} | refused
    assert {text.split(" ")[0] for text in told.get("short or refused", ())} == lacking
    assert len(told.get("short or refused", ())) == len(lacking)
    late = sum(o.late > 0 for o in made.orders) + sum(bool(one.overdue) for one in made.on_order)
    assert len(told.get("orders late or overdue", ())) == late
    aside = (Condition.SET_ASIDE, Condition.NOT_FOUND)
    bottles = Counter(
        "aside" if b.condition in aside else "check" if b.condition is Condition.WATCH else "past"
        for b in made.past
        if b.matters_for or b.condition in (*aside, Condition.WATCH)
    )
    names = {"set aside or not found": "aside", "checks overdue": "check"}
    names |= {"not good when needed": "past"}
    assert {names[what]: len(row) for what, row in told.items() if what in names} == bottles


def test_only_what_is_not_kept_of_a_heel_is_over(house: House) -> None:
    known, made = house
    if len(made.makes) < 2:
        return
    first, second, *_ = made.makes
    makes = (
        replace(first, volume=900_000, heel=90_000, heel_kept=True),
        replace(second, volume=100_000, heel=50_000, heel_kept=False),
    )
    said = term_report_of(known, replace(made, makes=makes), ()).sentences[2].replace(TIED, " ")
    assert said.startswith("Of 1 000 cm³ still to be made, 50 cm³ (5 %) is over")


def test_surplus_poured_away_is_the_surplus_row_alone(house: House) -> None:
    left = (Gone("S01", 70_000), Gone("S02", 5_000, why="surplus"), Gone("S03", 900, "spilled"))
    report = term_report_of(*house, left)
    assert report.sentences[2].replace(TIED, " ").endswith("poured away so far: 5 cm³.")
    assert {row.what: row.total.replace(TIED, " ") for row in report.waste} == {
        "poured away: past": "70 cm³",
        "poured away: surplus": "5 cm³",
        "spilled": "0.9 cm³",
    }


def test_money_ordered_and_still_to_be_ordered_are_not_each_other(house: House) -> None:
    def said(*budgets: Budget) -> str:
        return term_report_of(house[0], replace(house[1], budgets=budgets), ()).sentences[3]

    within = Budget("CH", "", 1000, 250, 2000), Budget("BI", "", 30, 4, None)
    told = said(*within)
    assert told.startswith(f"{money(1030)} is ordered and {money(254)} still to be ordered")
    # of what a limit is kept for
    assert told.endswith(f"{money(750)} is left in all.")
    over = said(Budget("CH", "", 1000, 250, 1100), Budget("BI", "", 30, 4, 50))
    assert over.startswith(f"{money(1030)} is ordered and {money(254)} still to be ordered")
    assert over.endswith("puts CH £1.50 over.")


def test_amounts_a_group_are_each_term_s_by_its_own_groups(house: House) -> None:
    bought = [use for use in house[1].usage if use.form == "bought"]
    if not bought:
        return
    use = replace(bought[0], amount=84_000_000, kind=Kind.MASS, groups=12)
    use = replace(use, before=60_000_000, groups_before=10)
    (row,) = term_report_of(house[0], replace(house[1], usage=(use,)), ()).used
    assert row.amount.replace(TIED, " ") == "84 g"
    assert row.before.replace(TIED, " ") == "60 g"
    assert row.by_group.replace(TIED, " ") == "7 g a group, 6 g the year before"


def test_the_first_and_the_last_day_of_a_term_belong_to_it() -> None:
    known = houses.house(
        [],
        recipes=[houses.recipe()],
        bookings=[houses.booking(f"K0{n}", on) for n, on in enumerate(("01-04", "03-26", "03-27"))],
    )
    said = term_report_of(known, plan(known), ()).sentences[0]
    assert said.startswith("2 bookings this term")


# -- what was wasted ------------------------------------------------------------------

ENTRIES = st.builds(
    Gone,
    st.sampled_from(["S01", "S02", "B01"]),
    st.integers(-900, 900).map(lambda cm3: 1000 * cm3),
    st.sampled_from(["discarded", "spilled", "lent", "counted"]),
    st.sampled_from(["past", "surplus", "weak, then past", "past and weak", "mould", ""]),
)


@given(st.lists(ENTRIES, max_size=12))
@settings(max_examples=60)
def test_every_entry_is_in_one_row_and_every_row_is_its_entries_sum(left: list[Gone]) -> None:
    owed: Counter[str] = Counter()
    for one in left:
        if one.how == "lent":
            owed[one.bottle] += one.amount
    meant: Counter[str] = Counter()
    for one in left:
        if one.how == "lent" and owed[one.bottle] > 0:
            meant["lent, not come back"] += one.amount
        elif one.how == "counted" and one.amount:
            meant[f"counted {'less' if one.amount > 0 else 'more'} than entered"] += one.amount
        elif one.how == "discarded":
            meant[f"poured away: {reason_of(one.why)}"] += one.amount
        elif one.how == "spilled":
            meant["spilled"] += one.amount
    told = {row.what: row.total for row in wasted(left)}
    assert told == {
        what: amount(abs(micro), Kind.VOLUME) if micro else "nothing"
        for what, micro in meant.items()
    }
    poured = [one for one in left if one.how == "discarded"]
    count = re.match(r"(\d+) bottles? w", poured_in_words(left))
    assert not count or int(count[1]) == len(poured)


@pytest.mark.parametrize(
    ("why", "reason"),
    [("weak, then past", "weak"), ("past and weak", "past"), ("surplus of a past term", "surplus")],
)
def test_of_two_reasons_the_one_said_first_counts(why: str, reason: str) -> None:
    assert reason_of(why) == reason


def test_what_left_on_the_last_day_is_told_and_what_left_after_is_not(own: Path) -> None:
    from stockroom.service.term_report import term_told
    from stockroom.store.reading import reading

    on = date(2027, 2, 3)
    before, after = on - timedelta(days=1), on + timedelta(days=1)
    _spilled(own, on)
    assert [one.on for one in term_told(own, as_at=before)[2]] == []
    for day in (on, after):
        _, _, left = term_told(own, as_at=day)
        assert [(one.on, one.how, one.amount) for one in left] == [(on, "spilled", 2_000)]
    # a term is begun on its own first day
    with reading(own) as reader:
        starts = [date.fromisoformat(row["starts_on"]) for row in reader.rows("term", "")]
    for first in starts:
        assert term_told(own, as_at=first)[0].start == first


def _spilled(store: Path, on: date) -> None:
    from stockroom.cli.main import run

    where = ["--store", str(store), "--as-at", on.isoformat()]
    with pytest.raises(SystemExit) as left:
        run([*where, "spill", "S13", "2cm3", "--by", "T1"])
    assert not left.value.code
