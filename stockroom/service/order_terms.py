"""What an order is placed at: which pack it is of, its price, its day and whose money it is."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date, timedelta

from stockroom.errors import BadDate, BadInput, BrokenPlan, UnknownName
from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.days import spell_day
from stockroom.measure.formats import format_amount
from stockroom.planning.buying.money import share_out
from stockroom.planning.buying.usage import BOUGHT
from stockroom.planning.decisions import Order, Use
from stockroom.planning.facts import Facts, Pack
from stockroom.planning.plan import usage_of_period
from stockroom.service.known import known_from
from stockroom.service.replayed import replayed_plan
from stockroom.service.work import Work
from stockroom.store import names
from stockroom.store.likeness import nearest, plain
from stockroom.store.snapshot_lines import lines_of
from stockroom.store.tables import Line

MOST_PENCE = 1_000_000
"""A pack that costs more, £10 000, is a slip: a college spends less in a year. Our choice."""

QUERIED_AFTER, REFUSED_AFTER = timedelta(days=366), timedelta(days=2 * 366)
"""Expected further ahead than a year is asked about, than two is refused. Our choice."""


@dataclass(frozen=True, slots=True)
class Asked:
    """What to order: `packs` of `size`; `price` is pence for one pack. None: not said."""

    line: str
    packs: int
    size: Amount
    price: int | None = None
    expected: date | None = None
    supplier: str | None = None
    department: str = ""
    note: str = ""


def in_own_kind(line: Line, size: Amount) -> Amount:
    """A mass of a liquid as its volume to the cm³, where the line has a density."""
    if line.kind == Kind.VOLUME and size.kind is Kind.MASS and line.density:
        return Amount.cm3(round(size.number / line.density))
    return size


def sold_pack(work: Work, line: Line, size: Amount, asked: Asked) -> Pack | None:
    """The pack as entered that is ordered, the cheapest where nothing tells; None: none is it.

    Raises: UnknownName for a supplier who is not entered for that size, unless a price is given.
    """
    packs = [pack for pack in lines_of(work.reader)[line.key].packs if pack.size == size.micro]
    if asked.supplier is not None:
        found = [one for one in packs if plain(one.supplier) == plain(asked.supplier)]
        # a pack entered for nobody in particular is anybody's
        found = found or [one for one in packs if not one.supplier]
        # another's price and lead time would be written down as theirs
        if packs and not found and asked.price is None:
            raise _does_not_sell(line, size, asked.supplier, [one.supplier for one in packs])
        packs = found
    elif asked.price is not None and len({one.supplier for one in packs}) > 1:
        # the price tells of which supplier it is; one that is nobody's tells nothing
        packs = [one for one in packs if one.pence == asked.price]
    return min(packs, key=lambda one: (one.pence, one.supplier), default=None)


def _does_not_sell(line: Line, size: Amount, supplier: str, sellers: list[str]) -> UnknownName:
    named = nearest(supplier, [seller for seller in sellers if seller])
    hint = f"Nearest: {'; '.join(named)}. " if named else ""
    return UnknownName(
        f"No {format_amount(size)} of {line.key} from {supplier.strip()!r} is entered.",
        f"{hint}Give the right name, or what one pack costs: --price 9.60",
    )


def price_of(line: Line, asked: Asked, size: Amount, pack: Pack | None) -> int:
    """Pence for one pack, as said or as entered. Raises: BadInput where neither says."""
    price = asked.price if asked.price is not None else (pack.pence if pack else None)
    if price is None:
        raise BadInput(
            f"What does {format_amount(size)} of {line.key} cost?",
            "Add --price 9.60, for one pack.",
        )
    return price


def usual_day(work: Work, pack: Pack | None) -> tuple[date, int]:
    """The day a pack ordered now comes, by its lead time or the house's, and that in open days."""
    known = known_from(work.reader, work.on)
    usual = known.house.default_lead
    lead = usual if pack is None or pack.lead is None else pack.lead
    return known.calendar.after(work.on, lead), lead


def check_expected(work: Work, expected: date) -> list[str]:
    """What is odd about a day, if it may be right all the same. Raises: BadDate."""
    if expected < work.on:
        raise BadDate(
            f"Expected {spell_day(expected)} is before {spell_day(work.on)}.", "Check the year."
        )
    ahead = expected - work.on
    if ahead > REFUSED_AFTER:
        raise BadDate(
            f"Expected {spell_day(expected)} is more than two years after {spell_day(work.on)}.",
            "Check the year.",
        )
    if ahead > QUERIED_AFTER:
        return [f"{spell_day(expected)} is more than a year ahead: is the year right?"]
    return []


def shares_of(
    work: Work, line: Line, department: str, pence: int, planned: tuple[tuple[str, int], ...]
) -> tuple[tuple[str, int], ...]:
    """Whose money it is: as said, else as the plan has it, else by what the term uses."""
    if department.strip():
        return ((names.find_department(work.session, department).department, pence),)
    parts = dict(planned)
    # an order of nothing in pence has shares of nothing, which split nothing
    if not any(parts.values()):
        parts = _parts(known_from(work.reader, work.stamp.entered_on), line.key)
    shares = share_out(pence, parts)
    # money nobody is named for would be missing from every department's account
    if not shares:
        raise BadInput(f"Nothing booked draws on {line.key}: whose money is it?", "Add --dept CH.")
    return shares


def _parts(known: Facts, key: str) -> dict[str, int]:
    try:
        planned: tuple[Order, ...] = replayed_plan(known).orders
    except BrokenPlan:
        # what was ordered must be written down all the same, and the bookings tell whose it is
        planned = ()
    found = next((one for one in planned if one.line == key), None)
    if found is not None and found.pence:
        return dict(found.shares)
    return _by_bookings(known, usage_of_period(known), key)


def _by_bookings(known: Facts, uses: list[Use], key: str) -> dict[str, int]:
    """How much of a bought line the bookings to come of each department use."""
    parts: dict[str, int] = {}
    payers = {one.number: one.department for one in known.bookings if one.on >= known.as_at}
    for use in uses:
        for number, amount in use.by_booking if (use.line, use.form) == (key, BOUGHT) else ():
            if number in payers:
                parts[payers[number]] = parts.get(payers[number], 0) + amount
    return parts
