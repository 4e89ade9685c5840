"""What is away changes what is made; the work of each day, evenings and what is never kept."""

from __future__ import annotations

import random
from dataclasses import replace
from datetime import date
from typing import Any

import pytest
from houses import (
    MONDAY,
    booking,
    bought_bottle,
    cm3,
    day,
    g,
    house,
    keeps,
    made_bottle,
    made_from,
    pack,
    planned,
    recipe,
    solid,
    solution,
    wants,
)

from stockroom.measure.amounts import Kind
from stockroom.planning.decisions import DayLoad, Draw, Make, Plan
from stockroom.planning.facts import Balance, Facts, House, Line, Vessel
from stockroom.planning.making.equipment import largest_vessel_on
from stockroom.planning.people import day_loads, unstaffed
from stockroom.planning.plan import plan

SALT = solid(keep_note="dry, stoppered")
TENTH = solution(0.1)
COARSE, FINE = Balance("BAL1", g(0.01)), Balance("BAL2", g(0.001))
FEBRUARY = (day("02-01"), day("02-12"))
FINE_AWAY = replace(FINE, away=(FEBRUARY,))


# -- vessels away ---------------------------------------------------------------------

FLASK, CARBOY = Vessel("2 L flask", cm3(2000)), Vessel("5 L carboy", cm3(5000))


def with_vessels(*vessels: Vessel, **more: Any) -> Facts:
    usual = House(batch_step=cm3(1), largest_vessel=max((v.size for v in vessels), default=None))
    return house([TENTH], house=usual, vessels=vessels, **more)


@pytest.mark.parametrize(
    ("on", "held"), [("01-31", 5000), ("02-01", 2000), ("02-12", 2000), ("02-13", 5000)]
)
def test_the_largest_vessel_is_the_largest_that_is_in(on: str, held: float) -> None:
    facts = with_vessels(FLASK, replace(CARBOY, away=(FEBRUARY,)))
    assert largest_vessel_on(facts, day(on)) == cm3(held)


def test_with_all_of_them_away_there_is_nothing_to_make_up_in() -> None:
    facts = with_vessels(replace(FLASK, away=(FEBRUARY,)))
    assert largest_vessel_on(facts, day("02-02")) == 0


def test_where_no_vessel_is_written_down_none_bounds_a_batch() -> None:
    assert largest_vessel_on(with_vessels(), day("02-02")) is None


def test_a_house_that_says_only_its_largest_vessel_keeps_to_it() -> None:
    facts = replace(with_vessels(), house=House(largest_vessel=cm3(800)))
    assert largest_vessel_on(facts, day("02-02")) == cm3(800)


def big_batch(*vessels: Vessel) -> str:
    """What is said of 4 dm³ for Tuesday 2 February: all reasons and notes in one text."""
    facts = house(
        [SALT, TENTH], methods=[made_from(TENTH, SALT)], recipes=[recipe(wants(TENTH, cm3(4000)))],
        bookings=[booking("K1", "02-02")], bottles=[bought_bottle("B1", SALT, g(500))],
        house=House(batch_step=cm3(1), largest_vessel=max(v.size for v in vessels)),
        vessels=vessels,
    )  # fmt: skip
    made = plan(facts)
    return "; ".join([*made.makes[0].reasons, *(note.text for note in made.notes)])


def test_a_batch_for_which_the_vessel_is_away_is_made_in_smaller_ones() -> None:
    told = big_batch(FLASK, replace(CARBOY, away=((day("02-01"), day("02-01")),)))
    assert "2 vessels of 2 000 cm³" in told or "in 2 of 2 000 cm³ at most" in told
    assert "5 L carboy is away on 2027-02-01" in told


def test_nothing_is_said_of_a_vessel_that_comes_back_in_time() -> None:
    assert "away" not in big_batch(FLASK, replace(CARBOY, away=((day("01-04"), day("01-31")),)))


# -- weighed before the balance goes --------------------------------------------------


def weighed(line: Line = SALT, **more: Any) -> list[tuple[str, str]]:
    """The notes on 100 cm³ of 0.1 mol/dm³, 1 g to 0.5 %, for Wednesday 3 February, fresh."""
    usual: dict[str, Any] = {
        "balances": (COARSE, FINE_AWAY), "bottles": [bought_bottle("B1", line, g(500))]
    }  # fmt: skip
    made = planned(
        [line, TENTH], methods=[made_from(TENTH, line)],
        recipes=[recipe(wants(TENTH, cm3(100), fresh=True, tolerance=0.005))],
        bookings=[booking("K1", "02-03")], **{**usual, **more},
    )  # fmt: skip
    return [(note.subject, note.text) for note in made.notes]


BEFORE = "BAL2 is away 2027-02-01 to 2027-02-12: weigh 1 g of salt by 2027-01-29 and keep it dry"
LESS = ", labelled: 100 cm³ is then enough, where 200 cm³ is planned"


def test_what_the_balance_that_is_in_cannot_weigh_is_weighed_dry_before() -> None:
    # 0.01 g ÷ 0.5 % is 2 g: 200 cm³; the finer balance weighs 0.2 g well enough
    assert weighed() == [("M01", BEFORE + LESS)]


def test_the_day_is_one_on_which_the_balance_is_in_and_somebody_is_there() -> None:
    away = replace(FINE, away=((day("01-28"), day("02-12")),))
    ((_, told),) = weighed(balances=(COARSE, away))
    assert "by 2027-01-27 and" in told


def test_a_day_that_is_past_is_no_way_out() -> None:
    away = replace(FINE, away=((day("01-04"), day("02-12")),))
    assert weighed(balances=(COARSE, away)) == []


def test_with_no_balance_in_at_all_everything_is_weighed_before() -> None:
    ((subject, told),) = weighed(balances=(FINE_AWAY,))
    assert (subject, told) == ("M01", BEFORE + ", labelled")


@pytest.mark.parametrize("balances", [(FINE,), (COARSE, FINE), (COARSE,), ()])
def test_with_the_finest_balance_in_nothing_is_said(balances: tuple[Balance, ...]) -> None:
    assert weighed(balances=balances) == []


def test_a_balance_as_fine_that_is_in_does_as_well() -> None:
    assert weighed(balances=(FINE_AWAY, replace(FINE, name="BAL3"))) == []


def test_what_can_be_weighed_that_day_is_not_weighed_before() -> None:
    made = planned(
        [SALT, TENTH], methods=[made_from(TENTH, SALT)], balances=(COARSE, FINE_AWAY),
        recipes=[recipe(wants(TENTH, cm3(100), fresh=True, tolerance=0.02))],
        bookings=[booking("K1", "02-03")], bottles=[bought_bottle("B1", SALT, g(500))],
    )  # fmt: skip
    assert made.notes == ()


@pytest.mark.parametrize(
    "words",
    ["stoppered: takes up water", "Hygroscopic", "deliquescent", "air turns it to chalk"],
)
def test_what_does_not_keep_dry_is_not_weighed_before(words: str) -> None:
    assert weighed(replace(SALT, keep_note=words)) == []


@pytest.mark.parametrize("words", ["", "dark"])
def test_where_nobody_wrote_how_it_keeps_that_is_to_be_checked(words: str) -> None:
    ((_, told),) = weighed(replace(SALT, keep_note=words))
    assert told.endswith("; check first that it keeps dry, which its storage words do not say")


def test_a_solid_still_to_be_bought_is_ordered_in_time_for_it() -> None:
    # 10 open days before Friday 29 January
    bought = replace(SALT, packs=(pack(g(100), 5),))
    ((_, told),) = [n for n in weighed(bought, bottles=[]) if n[0] == "M01"]
    assert "labelled (order it by 2027-01-15 for that): 100 cm³" in told


def test_a_solid_that_cannot_come_in_time_is_not_spoken_of() -> None:
    # ordered on 11 January it comes on 1 February: in time for the class, and too late for that
    bought = replace(SALT, packs=(pack(g(100), 5, lead=15),))
    assert [n for n in weighed(bought, bottles=[], as_at=day("01-11")) if n[0] == "M01"] == []


# -- the work of each day -------------------------------------------------------------


def loads(limit: int, *asked: tuple[str, str, int], **more: Any) -> tuple[DayLoad, ...]:
    """The loads of makes: (booking, day of it, minutes) each of a line that keeps 30 days."""
    return several(limit, *asked, **more).loads


def several(limit: int, *asked: tuple[str, str, int], **more: Any) -> Plan:
    lines = {number: solution(0.1, number, rules=(keeps(30),)) for number, _, _ in asked}
    fresh = more.pop("fresh", False)
    return planned(
        [SALT, *lines.values()],
        methods=[made_from(lines[n], SALT, minutes=m, **more) for n, _, m in asked],
        recipes=[recipe(wants(lines[n], cm3(100), fresh=fresh), code=n) for n, _, _ in asked],
        bookings=[booking(n, on, recipe=n) for n, on, _ in asked],
        bottles=[bought_bottle("B1", SALT, g(500))],
        house=House(batch_step=cm3(1), day_minutes=limit),
    )  # fmt: skip


def test_every_day_with_work_has_its_minutes_and_its_limit() -> None:
    row = loads(300, ("K1", "01-12", 30), ("K2", "01-14", 45))
    assert [(load.day, load.minutes, load.limit, load.over) for load in row] == [
        (day("01-11"), 30, 300, 0), (day("01-13"), 45, 300, 0)
    ]  # fmt: skip


def test_finishing_is_the_work_of_the_day_it_is_done_on() -> None:
    row = loads(300, ("K1", "01-19", 25), finish_minutes=30, stands_hours=48.0)
    # Friday; it stands 48 h; filtered on Monday
    assert [(load.day, load.minutes) for load in row] == [(day("01-15"), 25), (day("01-18"), 30)]


def test_no_limit_is_kept_where_it_is_0() -> None:
    (load,) = loads(0, ("K1", "01-12", 400))
    assert (load.minutes, load.limit, load.over, load.movable) == (400, 0, 0, ())


def test_what_is_fresh_does_not_move() -> None:
    (load,) = loads(60, ("K1", "01-12", 40), ("K2", "01-12", 40), fresh=True)
    assert (load.over, load.movable) == (20, ())


def unmovable(**more: Any) -> list[DayLoad]:
    """Two makes of 40 min for one day, held there by a life of one day; 60 min is the limit."""
    lines = [solution(0.1, n, rules=(keeps(1),)) for n in ("one", "two")]
    made = planned(
        [SALT, *lines], methods=[made_from(line, SALT, minutes=40) for line in lines],
        recipes=[recipe(*(wants(line, cm3(100)) for line in lines))],
        bookings=[booking("K1", "01-12")], bottles=[bought_bottle("B1", SALT, g(500))],
        house=House(batch_step=cm3(1), day_minutes=60), **more,
    )  # fmt: skip
    return [load for load in made.loads if load.over]


def test_what_would_not_keep_does_not_move() -> None:
    (load,) = unmovable()
    assert (load.minutes, load.over, load.movable) == (80, 20, ())


# by hand: the planner levels its own days, and leaves little to move

KEEPS = solution(0.1, "keeps")
STANDS = solution(0.1, "stands")
BOUNDED = house(
    [SALT, KEEPS, STANDS],
    methods=[
        made_from(KEEPS, SALT),
        made_from(STANDS, SALT, finish_minutes=30, stands_hours=48.0, minutes=25),
    ],
    house=House(day_minutes=100),
)


def by_hand(number: str, on: str, minutes: int, **more: Any) -> Make:
    """A make of 100 cm³ that may be started from 4 January on."""
    usual = Make(
        number, KEEPS.key, "keeps", "0.1 mol/dm3", cm3(100), cm3(100), MONDAY, day(on), day(on),
        day(on), ("K1",), (), fresh=False, minutes=minutes,
    )  # fmt: skip
    return replace(usual, **more)


def moves(*makes: Make, facts: Facts = BOUNDED) -> dict[str, tuple[tuple[str, date], ...]]:
    """What could go earlier from each day that is over its limit."""
    row = day_loads(facts, list(makes), [])
    return {load.day.isoformat()[5:]: load.movable for load in row if load.over}


def test_a_make_moves_to_the_latest_earlier_day_with_room_for_it() -> None:
    heavy = by_hand("M1", "01-12", 80), by_hand("M2", "01-12", 60)
    # Monday holds 70 of 100 min: 60 do not fit there, and Friday is free
    row = moves(by_hand("M0", "01-11", 70), *heavy)
    assert row == {"01-12": (("M1", day("01-08")), ("M2", day("01-07")))}


def test_nothing_moves_out_of_a_day_within_its_limit() -> None:
    assert moves(by_hand("M1", "01-12", 60), by_hand("M2", "01-12", 40)) == {}


@pytest.mark.parametrize(
    "more",
    [{"fresh": True}, {"earliest": day("01-12")}],
    ids=["fresh", "earliest"],
)
def test_what_must_be_made_that_day_stays(more: dict[str, Any]) -> None:
    rows = by_hand("M1", "01-12", 80, **more), by_hand("M2", "01-12", 60, **more)
    assert moves(*rows) == {"01-12": ()}


def test_a_make_stays_behind_what_goes_into_it() -> None:
    source = (Draw(cm3(10), Kind.VOLUME, make="M1"),)
    rows = by_hand("M2", "01-12", 80, sources=source), by_hand("M3", "01-12", 60, fresh=True)
    # of a stock ready on Friday it may be made on Monday; of one ready on Monday only as planned
    assert moves(by_hand("M1", "01-08", 10), *rows) == {"01-12": (("M2", day("01-11")),)}
    assert moves(by_hand("M1", "01-11", 10), *rows) == {"01-12": ()}


def test_finishing_moves_with_what_is_finished() -> None:
    stands = by_hand(
        "M1", "01-15", 55, line=STANDS.key, finish_on=day("01-18"), finishing=30,
        ready=day("01-18"),
    )  # fmt: skip
    busy = by_hand("M2", "01-15", 90, fresh=True)
    # begun on Thursday it is filtered on Monday still
    assert moves(stands, busy)["01-15"] == (("M1", day("01-14")),)
    # with Monday full it is not; Wednesday would mean filtering on Friday, which is full
    room = by_hand("M3", "01-18", 60, fresh=True)
    assert moves(stands, busy, room)["01-15"] == (("M1", day("01-14")),)
    full = by_hand("M3", "01-18", 90, fresh=True)
    assert moves(stands, busy, full)["01-15"] == (("M1", day("01-12")),)


def test_a_move_changes_no_day_that_is_told() -> None:
    stands = by_hand(
        "M1", "01-15", 55, line=STANDS.key, finish_on=day("01-18"), finishing=30,
        ready=day("01-18"),
    )  # fmt: skip
    row = day_loads(BOUNDED, [stands, by_hand("M2", "01-15", 90, fresh=True)], [])
    assert [(load.day, load.minutes) for load in row] == [(day("01-15"), 115), (day("01-18"), 30)]


def test_what_is_titrated_when_finished_stays_where_it_is() -> None:
    titrated = replace(BOUNDED.methods[KEEPS.key], titrated=True)
    facts = replace(BOUNDED, methods={KEEPS.key: titrated})
    rows = by_hand("M1", "01-12", 80), by_hand("M2", "01-12", 60)
    assert moves(*rows, facts=facts) == {"01-12": ()}


def test_nothing_moves_to_a_day_on_which_the_balance_or_the_vessel_is_away() -> None:
    rows = by_hand("M1", "01-12", 80), by_hand("M2", "01-12", 60, fresh=True)
    gone = ((day("01-08"), day("01-11")),)
    facts = replace(BOUNDED, balances=(COARSE, replace(FINE, away=gone)))
    assert moves(*rows, facts=facts) == {"01-12": (("M1", day("01-07")),)}
    facts = replace(BOUNDED, vessels=(FLASK, replace(CARBOY, away=gone)))
    assert moves(*rows, facts=facts) == {"01-12": (("M1", day("01-07")),)}


def random_makes(seed: int) -> list[Make]:
    draw = random.Random(seed)
    open_days = ["01-06", "01-07", "01-08", "01-11", "01-12", "01-13"]
    row = []
    for n in range(draw.randint(2, 14)):
        on = draw.choice(open_days)
        first = min(day(draw.choice(["01-04", *open_days])), day(on))
        fresh = draw.random() < 0.2
        row.append(by_hand(f"M{n}", on, draw.choice((10, 25, 40, 60)), earliest=first, fresh=fresh))
    return row


def test_all_moves_together_overfill_no_day() -> None:
    moved = 0
    for seed in range(400):
        makes = random_makes(seed)
        by_id = {make.id: make for make in makes}
        row = day_loads(BOUNDED, makes, [])
        after = {load.day: load.minutes for load in row}
        assert sum(after.values()) == sum(make.minutes for make in makes)
        for name, to in [move for load in row for move in load.movable]:
            make = by_id[name]
            assert make.earliest <= to < make.on
            assert not make.fresh
            assert to.weekday() < 5
            after[make.on] -= make.minutes
            after[to] = after.get(to, 0) + make.minutes
            moved += 1
        assert all(load.over for load in row if load.movable)
        taken = {to for load in row for _, to in load.movable}
        assert all(after[to] <= 100 for to in taken)
    # a search that found nothing would pass all of the above
    assert moved > 200


# -- evenings -------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("minute", "lasts", "never_kept", "gaps"),
    [
        (480, 510, False, []),
        (1110, 100, False, [(1080, 1210)]),
        (1110, 100, True, [(1080, 1240)]),
        (450, 600, False, [(420, 480), (990, 1050)]),
        # inside the hours; what it leaves must be destroyed after them
        (880, 100, True, [(990, 1010)]),
        (480, 100, True, []),
        (1400, 60, True, [(1370, 1490)]),
    ],
)
def test_the_unstaffed_stretches_of_a_session(
    minute: int, lasts: int, never_kept: bool, gaps: list[tuple[int, int]]
) -> None:
    session = booking("K1", "01-12", minute, lasts_minutes=lasts)
    assert unstaffed(house([TENTH]), session, never_kept=never_kept) == gaps


def evening(minute: int, never_kept: str = "Can turn explosive.", **more: Any) -> Plan:
    return planned(
        [TENTH], recipes=[recipe(wants(TENTH, cm3(10)), never_kept=never_kept)],
        bookings=[booking("K1", "01-12", minute)], bottles=[made_bottle("S1", TENTH, cm3(500))],
        **more,
    )  # fmt: skip


def test_an_evening_names_the_gap_with_both_its_times() -> None:
    texts = [note.text for note in evening(1110, "").notes]
    assert texts == [
        "18:30 to 20:10 is outside staffed hours (08:00 to 16:30): "
        "someone must be here from 18:00 (18:00 to 20:10 is not staffed)"
    ]


def test_who_destroys_after_hours_must_stay() -> None:
    texts = [note.text for note in evening(885).notes]
    assert texts[0] == (
        "ends 16:25, and staffed hours at 16:30: someone must stay to destroy what is never "
        "kept (16:30 to 16:55 is not staffed)"
    )


# -- never kept -----------------------------------------------------------------------


def test_what_is_never_kept_is_watched_from_mixing_to_destroying() -> None:
    (watch,) = evening(1110).watch
    assert (watch.booking, watch.on, watch.how) == ("K1", day("01-12"), "Can turn explosive.")
    assert (watch.not_before, watch.destroy_by, watch.ticked_by) == (1080, 1240, "")


def test_what_may_be_kept_is_not_watched() -> None:
    assert evening(1110, "").watch == ()


def silver(**more: Any) -> Plan:
    line = solution(0.1, "silver mirror", never_kept="can turn explosive")
    return planned(
        [SALT, line], methods=[made_from(line, SALT)], recipes=[recipe(wants(line, cm3(10)))],
        bookings=[booking("K1", "01-12", 600)], **more,
    )  # fmt: skip


def test_a_line_that_is_never_kept_is_watched_where_it_is_really_made() -> None:
    assert [w.how for w in silver(bottles=[bought_bottle("B1", SALT, g(500))]).watch] == [
        "can turn explosive"
    ]
    assert silver().watch == ()


def test_a_week_shows_its_own_loads_and_watches() -> None:
    facts = house(
        [SALT, TENTH], methods=[made_from(TENTH, SALT)],
        recipes=[recipe(wants(TENTH, cm3(100), fresh=True), never_kept="destroy it")],
        bookings=[booking("K1", "01-12"), booking("K2", "01-19")],
        bottles=[bought_bottle("B1", SALT, g(500))],
    )  # fmt: skip
    part = plan(replace(facts, start=day("01-18"), end=day("01-22"), horizon=facts.end))
    assert [load.day for load in part.loads] == [date(2027, 1, 19)]
    assert [watch.booking for watch in part.watch] == ["K2"]


# -- the college ----------------------------------------------------------------------


def test_the_college_weighs_its_ascorbic_acid_before_the_balance_goes(term: Plan) -> None:
    told = [
        note.text for note in term.notes if "BAL2 is away 2027-02-01 to 2027-02-12" in note.text
    ]
    assert len(told) == 2
    assert all("weigh 0.176 g of ascorbic acid by 2027-01-29 and keep it dry" in t for t in told)


def test_the_college_tends_its_silver_on_both_days(term: Plan) -> None:
    assert [(watch.booking, watch.not_before, watch.destroy_by) for watch in term.watch] == [
        ("K16", 18 * 60, 20 * 60 + 40), ("K27", 13 * 60, 15 * 60 + 40)
    ]  # fmt: skip


def test_the_loads_of_the_college_are_its_makes_and_its_titrations(term: Plan) -> None:
    titrated = sum(check.minutes for check in term.checks if not check.optional)
    made = sum(make.minutes for make in term.makes)
    assert sum(load.minutes for load in term.loads) == made + titrated
    assert titrated == 30
