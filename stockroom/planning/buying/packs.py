"""Which packs: exactly the cheapest for what will be used of them before it lapses.

A pack is worth what is used of it: what the term still wants and the level, and
then what a year at this rate takes, or less where it lapses sooner unopened. Of
all mixtures of sizes that cover the want the one for least money is taken, unless
another costs a fifth less by what is used of it; 2.5 kg that would last for years
loses to 500 g.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from datetime import date, timedelta
from fractions import Fraction
from math import gcd

from stockroom.lots.packs import cover
from stockroom.planning.buying.on_way import lasts_unopened
from stockroom.planning.buying.usage import BOUGHT, usage
from stockroom.planning.explode import explode
from stockroom.planning.facts import Facts, Firmness, Line, Pack

YEAR = timedelta(days=365)
"""Nobody buys for longer than a year ahead: our choice."""

NO_PACK = Pack(0, "no pack entered", 0)

# a rate from a single week would foretell nothing of a year: our choice
_LEAST_DAYS = 28
# sizes with a common part coarser than this are counted exactly, others to a thousandth of the
# smallest, which is finer than packs are filled: our choice
_FINEST, _PARTS = 5000, 1000
# of a tiny pack a year may take thousands, and past the first few the price is the same
_MOST_TRIED = 40
# more money now must save a fifth by the gram, or it is better kept for the next term: our choice
_WORTH_IT = Fraction(4, 5)


@dataclass(frozen=True, slots=True)
class Rate:
    """What the bookings take of a line: so much (micro-units) in so many days."""

    amount: int
    days: int

    def lasts(self, amount: int) -> timedelta | None:
        """How long an amount lasts at this rate; None when nothing is taken."""
        # longer than anybody's working life says no more than that
        if not self.amount:
            return None
        return timedelta(days=min(amount * self.days // self.amount, 36_500))

    def taken_in(self, days: int) -> int:
        """What is taken in so many days."""
        return self.amount * max(0, days) // self.days


@dataclass(frozen=True, slots=True)
class Choice:
    """So many of each pack, the largest first. `dearer` is the pence over what would just do."""

    packs: tuple[tuple[Pack, int], ...]
    dearer: int = 0

    @property
    def size(self) -> int:
        """All of it, micro-units."""
        return sum(pack.size * count for pack, count in self.packs)

    @property
    def pence(self) -> int:
        """What all of it costs."""
        return sum(pack.pence * count for pack, count in self.packs)

    @property
    def text(self) -> str:
        """One size by its name; several as one set, "500 g + 2 × 100 g"."""
        if len(self.packs) == 1:
            return self.packs[0][0].text
        row = [pack.text if count == 1 else f"{count} × {pack.text}" for pack, count in self.packs]
        return " + ".join(row)

    @property
    def count(self) -> int:
        """How many of `text`: of one size so many, of a set one."""
        return self.packs[0][1] if len(self.packs) == 1 else 1

    def lead(self, usual: int) -> int:
        """Open days until the last of it comes."""
        return max(usual if pack.lead is None else pack.lead for pack, _ in self.packs)


def rates(facts: Facts) -> dict[str, Rate]:
    """How fast the bookings use each line in bought form, those done already counted.

    By the whole term and not by what is left of it, which would foretell nothing at its end.
    """
    wanted = [b for b in facts.bookings if b.firmness is not Firmness.DROPPED]
    if not wanted:
        return {}
    first = min([facts.as_at, *(booking.on for booking in wanted)])
    last = max([facts.horizon or facts.end, *(booking.on for booking in wanted)])
    days = max(_LEAST_DAYS, (last - first).days)
    used = usage(facts, explode(facts, wanted))
    return {use.line: Rate(use.amount, days) for use in used if use.form == BOUGHT}


def keeps_unopened(facts: Facts, line: Line, arrives: date) -> date | None:
    """The last good day of an unopened pack that comes on a day; None when nobody can say.

    By the line's own rules, and by what the maker gave the last bottle that came.
    """
    days = [lasts_unopened(line, arrives)]
    given = [
        (record.received, record.printed.day - record.received)
        for bottle in facts.bottles
        for record in [bottle.record]
        if bottle.line == line.key
        if record.received and record.printed and record.printed.day
        # a bottle that came past says nothing of the next one
        if record.printed.day > record.received
    ]
    if given:
        days.append(arrives + max(given)[1])
    return min((day for day in days if day is not None), default=None)


def most_used(
    facts: Facts, wanted: int, rate: Rate | None, arrives: date, keeps: date | None
) -> int:
    """What will be used of a delivery: what is wanted, then a year of use, or till it lapses."""
    if rate is None:
        return wanted
    end = min(arrives + YEAR, keeps or date.max)
    # the term's own use is in what is wanted already
    return wanted + rate.taken_in((end - max(arrives, facts.horizon or facts.end)).days)


def choose(packs: Iterable[Pack], wanted: int, used: int) -> Choice:
    """The mixture that covers `wanted` for least money, or far less by what is used of it.

    `used` is the most that will be used. Ties go to the least over, the fewest packs, then
    the larger sizes. No pack known: one of size 0 that says so.
    """
    # by size and price, so that the order of the table settles nothing
    row = sorted(packs, key=lambda p: (-p.size, p.pence, p.supplier, p.text))
    if not row:
        return Choice(((NO_PACK, 1),))
    wanted, used = max(1, wanted), max(1, wanted, used)
    tried = {_covering(row, target) for target in _targets(row, wanted, used)}
    least = min(tried, key=_least_money)
    best = min(tried, key=lambda choice: (_by_use(choice, used), *_least_money(choice)))
    if _by_use(best, used) > _WORTH_IT * _by_use(least, used):
        return least
    return Choice(best.packs, best.pence - least.pence)


def _by_use(choice: Choice, used: int) -> Fraction:
    # by fractions: two mixtures a millionth of a penny apart are told apart the same everywhere
    return Fraction(choice.pence, min(choice.size, used))


def _least_money(choice: Choice) -> tuple[object, ...]:
    return (
        choice.pence,
        choice.size,
        sum(count for _, count in choice.packs),
        [-pack.size for pack, _ in choice.packs],
        [pack.supplier for pack, _ in choice.packs],
    )


def _targets(row: list[Pack], wanted: int, used: int) -> set[int]:
    """The amounts worth covering: what is wanted, what will be used, and each pack's multiples."""
    found = {wanted, used}
    for pack in row:
        first = -(-wanted // pack.size)
        last = min(-(-used // pack.size), first + _MOST_TRIED)
        found |= {pack.size * count for count in range(first, last + 1)}
    return found


def _covering(row: list[Pack], target: int) -> Choice:
    unit = gcd(*(pack.size for pack in row))
    if max(pack.size for pack in row) > unit * _FINEST:
        # odd sizes together: rounded down, so that the mixture covers all the same
        unit = max(1, min(pack.size for pack in row) // _PARTS)
    counts = cover(-(-target // unit), [(pack.size // unit, pack.pence) for pack in row])
    return Choice(tuple((pack, count) for pack, count in zip(row, counts, strict=True) if count))


def choose_packs(packs: tuple[Pack, ...], wanted: int) -> tuple[Pack, int]:
    """The one size, and how many of it, that cover `wanted` (micro-units) for least money.

    Ties go to the fewest packs, then the smallest. No pack known: a pack of
    size 0 that says so, one of it.
    """
    choices = [(p.pence * n, n, p.size, p) for p in packs for n in [max(1, -(-wanted // p.size))]]
    if not choices:
        return NO_PACK, 1
    _, count, _, pack = min(choices, key=lambda choice: choice[:3])
    return pack, count


def years(span: timedelta) -> str:
    """A length of stock in words: "11 years", "2.3 years", "7 months"."""
    if span >= 10 * YEAR:
        return f"{span.days // 365} years"
    if span >= YEAR:
        figure = f"{span.days / 365:.2g}"
        return "1 year" if figure == "1" else f"{figure} years"
    months = max(1, span.days * 12 // 365)
    return "1 month" if months == 1 else f"{months} months"
