"""Orders placed with a supplier: sent off, put off, cancelled. What comes is in `coming.py`.

An order is written once and never altered; what changes of it is written beside it.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from datetime import date
from pathlib import Path

from stockroom.errors import BadAmount, BadDate, BadInput, NotAllowed
from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.days import spell_day
from stockroom.measure.formats import format_amount
from stockroom.planning.buying.money import share_out
from stockroom.planning.buying.usage import BOUGHT
from stockroom.planning.decisions import Plan
from stockroom.planning.derive import with_derived
from stockroom.planning.facts import Placed as Order
from stockroom.planning.plan import plan
from stockroom.service.answers import Done
from stockroom.service.coming import say_of
from stockroom.service.work import Work, check_amount, working
from stockroom.store import names, orders
from stockroom.store.kinds import CANCELLED, EXPECTED
from stockroom.store.likeness import unknown
from stockroom.store.snapshot import facts_from
from stockroom.store.tables import Line, Pack, Placed

MOST_PACKS = 999
"""More packs than this in one order is a slip. Our choice."""

_PLANNED = re.compile(r"[Oo]\d+")


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


def is_planned(text: str) -> bool:
    """Whether a word is the number of an order in the plan, O01."""
    return _PLANNED.fullmatch(text.strip()) is not None


def order(path: Path, asked: Asked, *, on: date | None, today: date, by: str) -> Done:
    """Write that something was ordered; the plan counts it from the day it is expected.

    Where not said, the price and the lead time are those of the pack as entered, and the
    money is split as the term draws on it. Raises: BadInput, BadAmount, BadDate, UnknownName.
    """
    if not 1 <= asked.packs <= MOST_PACKS:
        raise BadAmount(
            f"{asked.packs} packs of {asked.line}?", f"Give a whole number, 1 to {MOST_PACKS}."
        )
    with working(path, on=on, today=today, by=by) as work:
        line = names.find_line(work.session, asked.line, kind=asked.size.kind)
        placed, details = _place(work, line, asked, ())
        return _done(work, [placed], details)


def order_planned(
    path: Path, number: str, *, expected: date | None, on: date | None, today: date, by: str
) -> Done:
    """Write that an order of today's plan was sent off as it stands, one for each pack size.

    Raises: UnknownName for a number the plan does not have; NotAllowed when no pack is entered.
    """
    with working(path, on=on, today=today, by=by) as work:
        whole = _plan(work, today)
        wanted = number.strip().upper()
        found = next((one for one in whole.orders if one.id == wanted), None)
        if found is None:
            raise unknown("order of the plan", number, [one.id for one in whole.orders])
        line = names.find_line(work.session, found.line)
        rows = {row.text: row for row in orders.packs_of(work.session, line)}
        if not all(text in rows for text, _, _ in found.mixture):
            raise NotAllowed(
                f"{wanted} {found.item}: no pack is entered.",
                f'Say what: stockroom order "{found.item}" 1 "100 g" --price 9.60',
            )
        placed: list[Placed] = []
        details: list[str] = []
        for text, count, pence in found.mixture:
            pack = rows[text]
            size = Amount(Kind(line.kind), pack.size)
            asked = Asked(line.key, count, size, pence, expected, pack.supplier)
            one, told = _place(work, line, asked, found.shares)
            placed.append(one)
            details += told
        return _done(work, placed, tuple(dict.fromkeys(details)))


def cancel_order(
    path: Path, number: str, *, why: str, on: date | None, today: date, by: str
) -> Done:
    """Write that the rest of an order will not come; what came of it stays.

    Raises: UnknownName; BadInput without a reason; NotAllowed when nothing is outstanding.
    """
    if not why.strip():
        raise BadInput(f"Why is {number} cancelled?", "One word is enough: --why …")
    with working(path, on=on, today=today, by=by) as work:
        row, stands = _outstanding(work, number)
        rest = say_of(work, stands, stands.outstanding)
        change = rest, ""
        orders.record_change(work.session, row, CANCELLED, change, why.strip(), work.stamp)
        text = f"Cancelled {row.number}: {rest} will not come."
        came = f"{say_of(work, stands, stands.came)} came, and stays."
        details = (came,) if stands.came else ()
        return Done(text, next="stockroom buying", practice=work.practice, details=details)


def put_off(
    path: Path,
    number: str,
    *,
    expected: date | None,
    why: str,
    on: date | None,
    today: date,
    by: str,
) -> Done:
    """Write that an order is expected on another day. Raises: as `cancel_order`; BadDate."""
    if expected is None:
        raise BadInput(f"{number}: expected when?", "Add --expected DATE.")
    with working(path, on=on, today=today, by=by) as work:
        row, stands = _outstanding(work, number)
        _check_expected(work, expected)
        if expected == stands.expected:
            raise BadInput(f"{row.number} is expected {spell_day(expected)} already.", "When then?")
        change = stands.expected.isoformat(), expected.isoformat()
        orders.record_change(work.session, row, EXPECTED, change, why.strip(), work.stamp)
        before = spell_day(stands.expected)
        text = f"{row.number} {stands.line}: expected {before} → {spell_day(expected)}."
        return Done(text, next="stockroom on-order", practice=work.practice)


def _outstanding(work: Work, number: str) -> tuple[Placed, Order]:
    row = orders.find_order(work.session, number)
    if row.ordered_on > work.on:
        raise BadDate(
            f"{row.number} was not ordered until {spell_day(row.ordered_on)}.",
            "One of these is wrong.",
        )
    stands = orders.as_it_stands(work.session, row, work.on)
    if stands.cancelled:
        raise NotAllowed(
            f"{row.number} was cancelled {spell_day(stands.cancelled)}.", "Order it again."
        )
    if not stands.outstanding:
        raise NotAllowed(f"{row.number} has all come.", "See stockroom on-order.")
    return row, stands


def _place(
    work: Work, line: Line, asked: Asked, shares: tuple[tuple[str, int], ...]
) -> tuple[Placed, tuple[str, ...]]:
    """Write one order; what was taken for granted is told."""
    size = _in_own_kind(line, asked.size)
    check_amount(line, size)
    pack = _pack(work, line, size, asked.supplier)
    price = asked.price if asked.price is not None else (pack.pence if pack else None)
    if price is None:
        raise BadInput(
            f"What does {format_amount(size)} of {line.key} cost?",
            "Add --price 9.60, for one pack.",
        )
    pence = price * asked.packs
    told = [] if asked.price is not None else [f"At £{price / 100:.2f} a pack, as entered."]
    if size != asked.size:
        told.append(
            f"{format_amount(asked.size)} is {format_amount(size)} at {line.density:g} g/cm³."
        )
    expected = asked.expected
    if expected is None:
        expected, lead = _expected(work, pack)
        told.append(f"Expected {spell_day(expected)}: {lead} open days assumed.")
    _check_expected(work, expected)
    sent = orders.Sent(
        size=size,
        text=format_amount(size),
        packs=asked.packs,
        pence=pence,
        expected=expected,
        supplier=asked.supplier or (pack.supplier if pack else ""),
        shares=_shares(work, line, asked.department, pence, shares),
        note=asked.note,
    )
    return orders.place(work.session, line, sent, work.stamp), tuple(told)


def _in_own_kind(line: Line, size: Amount) -> Amount:
    """A mass of a liquid as its volume to the cm³, where the line has a density."""
    if line.kind == Kind.VOLUME and size.kind is Kind.MASS and line.density:
        return Amount.cm3(round(size.number / line.density))
    return size


def _pack(work: Work, line: Line, size: Amount, supplier: str | None) -> Pack | None:
    rows = [row for row in orders.packs_of(work.session, line) if row.size == size.micro]
    if supplier is not None:
        rows = [row for row in rows if row.supplier == supplier.strip()] or rows
    return min(rows, key=lambda row: row.pence, default=None)


def _expected(work: Work, pack: Pack | None) -> tuple[date, int]:
    known = facts_from(work.reader, work.on)
    usual = known.house.default_lead
    lead = usual if pack is None or pack.lead is None else pack.lead
    return known.calendar.after(work.on, lead), lead


def _check_expected(work: Work, expected: date) -> None:
    if expected < work.on:
        raise BadDate(
            f"Expected {spell_day(expected)} is before {spell_day(work.on)}.", "Check the year."
        )


def _shares(
    work: Work, line: Line, department: str, pence: int, planned: tuple[tuple[str, int], ...]
) -> tuple[tuple[str, int], ...]:
    """Whose money it is: as said, else as the plan has it, else by what the term uses."""
    if department.strip():
        return ((names.find_department(work.session, department).department, pence),)
    parts = dict(planned)
    # an order of nothing in pence has shares of nothing, which split nothing
    if not any(parts.values()):
        parts = _parts(_plan(work, work.stamp.entered_on), line.key)
    shares = share_out(pence, parts)
    # money nobody is named for would be missing from every department's account
    if not shares:
        raise BadInput(f"Nothing booked draws on {line.key}: whose money is it?", "Add --dept CH.")
    return shares


def _parts(whole: Plan, key: str) -> dict[str, int]:
    found = next((one for one in whole.orders if one.line == key), None)
    if found is not None and found.pence:
        return dict(found.shares)
    parts: dict[str, int] = {}
    payers = {answer.booking.number: answer.booking.department for answer in whole.needs}
    for use in whole.usage:
        for number, amount in use.by_booking if (use.line, use.form) == (key, BOUGHT) else ():
            if number in payers:
                parts[payers[number]] = parts.get(payers[number], 0) + amount
    return parts


def _plan(work: Work, as_at: date) -> Plan:
    return plan(with_derived(facts_from(work.reader, as_at)))


def _done(work: Work, placed: list[Placed], details: tuple[str, ...]) -> Done:
    words = []
    for row in placed:
        line = work.session.get_one(Line, row.line_id).key
        words.append(
            f"{row.number}: {row.packs} × {row.pack} of {line}, £{row.pence / 100:.2f},"
            f" expected {spell_day(row.expected_on)}"
        )
    text = f"Ordered {'; '.join(words)}."
    return Done(text, next="stockroom on-order", practice=work.practice, details=details)
