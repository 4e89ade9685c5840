"""No class is short where another choice of bottles or days would serve it, stocks included.

Small houses of a stock, sometimes a stronger one, and a dilution made from either, held
against every way there is to share the bottles out.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from datetime import date, timedelta
from random import Random

import pytest
from houses import (
    MONDAY,
    answer,
    booking,
    cm3,
    day,
    found,
    house,
    keeps,
    made_bottle,
    made_from,
    make_of,
    outcomes,
    planned,
    reasons,
    recipe,
    solution,
    wants,
)

from stockroom.measure.days import PrintedDate
from stockroom.planning.choosing.second_thoughts import (
    NEEDS_SETTLED,
    TRIES_A_FAMILY,
    SecondThoughts,
    Thought,
)
from stockroom.planning.decisions import Outcome, Plan
from stockroom.planning.facts import Bottle, Closeness, Facts, Ingredient, Line
from stockroom.planning.net import net
from stockroom.planning.plan import plan
from stockroom.planning.replaying.replay import replay
from stockroom.planning.settle import needs_of
from stockroom.planning.wants import Settled, Want

STOCK = solution(1.0, rules=(keeps(300),))
STRONGER = solution(2.0, rules=(keeps(300),))
KEEPING = solution(0.5, rules=(keeps(60),))


def on(offset: int) -> date:
    return MONDAY + timedelta(offset)


def printed(offset: int) -> PrintedDate:
    text = on(offset).strftime("%d/%m/%Y")
    return PrintedDate(text, (on(offset),))


# -- every way there is ------------------------------------------------------------------


@dataclass(frozen=True)
class Ask:
    """A class on a day wants so many cm³ of a line, as close as said."""

    line: str
    volume: int
    day: int
    closeness: Closeness


@dataclass(frozen=True)
class Stand:
    """A bottle with so many cm³ to give, good to a day, found at a strength."""

    line: str
    volume: int
    until: int
    strength: float


@dataclass(frozen=True)
class Small:
    """A small house: its classes in order, its bottles, and how long the dilution keeps."""

    asks: tuple[Ask, ...]
    stands: tuple[Stand, ...]
    life: int | None

    @property
    def dilution(self) -> Line:
        return solution(0.5, rules=(keeps(self.life),) if self.life else ())

    def facts(self) -> Facts:
        lines = {"S": STOCK, "X": STRONGER, "D": self.dilution}
        recipes = [
            recipe(wants(lines[a.line], cm3(a.volume), closeness=a.closeness), code=f"R{n}")
            for n, a in enumerate(self.asks)
        ]
        bookings = [
            booking(f"K{n}", on(a.day).isoformat(), recipe=f"R{n}") for n, a in enumerate(self.asks)
        ]
        # 8 cm³ more than may be given, so that nothing is too close to call
        bottles = [
            made_bottle(
                f"{s.line}{n}", lines[s.line], cm3(s.volume + 8),
                printed=printed(s.until), checks=(found("01-04", s.strength),),
            )
            for n, s in enumerate(self.stands)
        ]  # fmt: skip
        method = made_from(self.dilution, Ingredient((STOCK.key, STRONGER.key)))
        return house(
            lines.values(), methods=[method], recipes=recipes, bookings=bookings, bottles=bottles
        )

    def ways(self, ask: Ask) -> list[tuple[int, float]]:
        """Every bottle that might serve a class, and what it gives for it."""
        row: list[tuple[int, float]] = []
        for number, stand in enumerate(self.stands):
            if stand.line == ask.line:
                near = ask.closeness is Closeness.ROUGH or stand.strength != 0.9
                if near and ask.day <= self.good_until(stand):
                    row.append((number, float(ask.volume)))
            elif ask.line == "D" and self.made_by(ask.day, stand.until):
                row.append((number, ask.volume / 2 / stand.strength))
        return row

    def good_until(self, stand: Stand) -> int:
        """The last day of a bottle: a dilution, mixed on the first day, keeps no longer either."""
        return min(stand.until, self.life or 80) if stand.line == "D" else stand.until

    def made_by(self, day: int, until: int) -> bool:
        """True when some open day before the class has the bottle good and is not too early."""
        first = 0 if self.life is None else max(0, day - self.life)
        return any(on(d).weekday() < 5 for d in range(first, min(day - 1, until) + 1))

    def best(self) -> set[str]:
        """Who is served at best: each in order of day where that costs nobody before it."""
        served: list[Ask] = []
        refs: set[str] = set()
        for number, ask in sorted(enumerate(self.asks), key=lambda a: (a[1].day, a[0])):
            if self._all_served([*served, ask], [float(s.volume) for s in self.stands]):
                served.append(ask)
                refs.add(f"K{number}.1")
        return refs

    def _all_served(self, asks: list[Ask], left: list[float]) -> bool:
        if not asks:
            return True
        for number, amount in self.ways(asks[0]):
            if amount <= left[number] + 0.01:
                left[number] -= amount
                if self._all_served(asks[1:], left):
                    return True
                left[number] += amount
        return False


def small(seed: int) -> Small:
    """A house of one to five bottles and two to five classes."""
    r = Random(seed)
    lines = ["S", *r.choices("SSDX", k=r.randint(0, 4))]
    stands = [
        Stand(line, 50 * r.randint(1, 4), r.choice([2, 4, 9, 15, 80]), _found(line, r))
        for line in lines
    ]
    days = [2, 3, 4, 7, 8, 9, 10, 11, 14, 15]
    near = [Closeness.CLOSE, Closeness.ROUGH]
    asks = [
        Ask(r.choice("SD"), 50 * r.randint(1, 2), r.choice(days), r.choice(near))
        for _ in range(r.randint(2, 5))
    ]
    return Small(tuple(asks), tuple(stands), r.choice([60, 60, 8, None]))


def _found(line: str, r: Random) -> float:
    return {"S": r.choice([1.0, 1.0, 0.9]), "D": 0.5, "X": 2.0}[line]


def served(made: Plan) -> set[str]:
    return {a.ref for a in made.needs if a.outcome in (Outcome.HAVE, Outcome.MAKE)}


@pytest.mark.parametrize("start", range(0, 400, 50))
def test_nobody_is_short_whom_another_choice_on_some_line_would_serve(start: int) -> None:
    for seed in range(start, start + 50):
        one = small(seed)
        facts = one.facts()
        made = plan(facts)
        order = sorted(made.needs, key=lambda a: (a.booking.on, a.ref))
        best, got = one.best(), served(made)
        # equal bottles may be put together, so more may be served than is counted here
        assert [a.ref in got for a in order] >= [a.ref in best for a in order], (seed, best - got)
        assert replay(facts, made) == (), seed


@pytest.mark.parametrize("seed", [0, 20, 24, 58, 89, 213])
def test_the_order_of_the_rows_changes_nothing(seed: int) -> None:
    facts = small(seed).facts()
    other = replace(facts, bottles=facts.bottles[::-1], bookings=facts.bookings[::-1])
    assert plan(facts).needs == plan(other).needs


# -- one by one --------------------------------------------------------------------------


def s0(until: str = "01-08", volume: int = 208) -> Bottle:
    return made_bottle("S0", STOCK, cm3(volume), printed=PrintedDate("", (day(until),)))


def two_classes(dilution: Line, *bottles: Bottle) -> Plan:
    return planned(
        [STOCK, dilution],
        methods=[made_from(dilution, STOCK)],
        recipes=[recipe(wants(dilution, cm3(100)))],
        bookings=[booking("K0", "01-08"), booking("K1", "01-19")],
        bottles=bottles,
    )


def test_one_make_while_the_stock_is_good_serves_both() -> None:
    made = two_classes(KEEPING, s0())
    assert set(outcomes(made).values()) == {Outcome.MAKE}
    assert make_of(made, KEEPING).on == day("01-07")
    assert "made by 2027-01-08, while S0 is still good: or K1.1 would be short" in reasons(
        made, "K1.1"
    )


def test_without_a_rule_of_life_it_is_made_early_rather_than_short() -> None:
    assert set(outcomes(two_classes(solution(0.5), s0())).values()) == {Outcome.MAKE}


def test_what_would_not_keep_is_short_all_the_same() -> None:
    made = two_classes(solution(0.5, rules=(keeps(5),)), s0())
    assert outcomes(made) == {"K0.1": Outcome.MAKE, "K1.1": Outcome.SHORT}


def test_the_dilution_takes_the_stronger_stock_and_leaves_the_other_to_the_class() -> None:
    either = Ingredient((STOCK.key, STRONGER.key))
    made = planned(
        [STOCK, STRONGER, KEEPING],
        methods=[made_from(KEEPING, either)],
        recipes=[
            recipe(wants(KEEPING, cm3(200)), code="R1"),
            recipe(wants(STOCK, cm3(100)), code="R2"),
        ],
        bookings=[booking("K1", "01-06", recipe="R1"), booking("K2", "01-08", recipe="R2")],
        bottles=[
            made_bottle("S1", STOCK, cm3(110)),
            made_bottle("S2", STRONGER, cm3(110)),
        ],
    )
    assert outcomes(made) == {"K1.1": Outcome.MAKE, "K2.1": Outcome.HAVE}
    assert [draw.bottle for draw in make_of(made, KEEPING).sources] == ["S2"]
    assert [draw.bottle for draw in answer(made, "K2.1").draws] == ["S1"]


def test_the_dilutions_use_up_the_lapsing_bottle_for_who_needs_the_other() -> None:
    made = planned(
        [STOCK, KEEPING],
        methods=[made_from(KEEPING, STOCK)],
        recipes=[
            recipe(wants(line, cm3(volume)), code=f"R{n}")
            for n, (line, volume) in enumerate(
                [(KEEPING, 50), (STOCK, 50), (KEEPING, 100), (STOCK, 100)]
            )
        ],
        bookings=[
            booking(f"K{n}", text, recipe=f"R{n}")
            for n, text in enumerate(["01-15", "01-18", "01-12", "01-19"])
        ],
        bottles=[s0("03-25"), made_bottle("S1", STOCK, cm3(108), printed=printed(4))],
    )
    assert Outcome.SHORT not in outcomes(made).values()
    assert "while S1 is still good: or K3.1 would be short" in reasons(made, "K0.1")


def test_who_comes_first_by_rank_is_not_short_for_who_comes_later() -> None:
    made = two_classes(KEEPING, s0(volume=58))
    assert outcomes(made) == {"K0.1": Outcome.MAKE, "K1.1": Outcome.SHORT}


def test_the_loser_is_told_once_who_holds_the_bottle() -> None:
    made = planned(
        [STOCK],
        recipes=[recipe(wants(STOCK, cm3(80)))],
        bookings=[booking("K1", "01-06"), booking("K2", "01-08")],
        bottles=[made_bottle("S1", STOCK, cm3(100))],
    )
    assert made.short[0].reason == (
        f"no method and no supplier for {STOCK.key} (S1: 80 cm³ of 100 cm³ promised to K1.1)"
    )


# -- at what cost ------------------------------------------------------------------------


class _Refused:
    def __init__(self, *_: object) -> None:
        raise AssertionError("a search was begun")


def test_nothing_is_thought_over_where_no_bottle_or_day_could_help(
    monkeypatch: pytest.MonkeyPatch,
) -> None:
    monkeypatch.setattr("stockroom.planning.net.SecondThoughts", _Refused)
    assert Outcome.SHORT in outcomes(two_classes(KEEPING)).values()
    weak = made_bottle("S0", STOCK, cm3(208), checks=(found("01-04", 0.2),))
    assert Outcome.SHORT in outcomes(two_classes(KEEPING, weak)).values()
    with pytest.raises(AssertionError, match="a search was begun"):
        two_classes(KEEPING, s0())


def test_the_search_ends_however_many_are_short(monkeypatch: pytest.MonkeyPatch) -> None:
    tried: list[Thought] = []

    def counted(self: SecondThoughts, short: Want, so_far: Thought) -> Thought | None:
        before = self.left
        found = of(self, short, so_far)
        tried.extend([so_far] * (before - self.left))
        return found

    of = SecondThoughts.of
    monkeypatch.setattr(SecondThoughts, "of", counted)
    bookings = [booking(f"K{n:03}", on(7 + n % 5).isoformat(), 480 + n) for n in range(150)]
    facts = house(
        [STOCK, KEEPING],
        methods=[made_from(KEEPING, STOCK)],
        recipes=[recipe(wants(KEEPING, cm3(100)))],
        bookings=bookings,
        bottles=[s0("01-29", 1000), made_bottle("S1", STOCK, cm3(500), printed=printed(4))],
    )
    netted = net(facts, needs_of(facts))
    assert sum(want.settled is Settled.MAKE for want in netted.wants) == 30
    assert len(tried) <= min(TRIES_A_FAMILY, NEEDS_SETTLED // 150)
