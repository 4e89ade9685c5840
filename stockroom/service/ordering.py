"""Orders placed with a supplier: sent off, put off, cancelled. What comes is in `coming.py`.

An order is written once and never altered; what changes of it is written beside it.
"""

from __future__ import annotations

import re
from datetime import date

from stockroom.errors import BadAmount, BadDate, BadInput, NotAllowed
from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.days import spell_day
from stockroom.measure.formats import format_amount
from stockroom.planning.facts import Pack
from stockroom.planning.facts import Placed as Order
from stockroom.service.answers import Done
from stockroom.service.coming import say_of
from stockroom.service.order_numbers import numbered
from stockroom.service.order_terms import (
    MOST_PENCE,
    Asked,
    check_expected,
    in_own_kind,
    price_of,
    shares_of,
    sold_pack,
    usual_day,
)
from stockroom.service.work import Work, check_amount, working
from stockroom.settings import StoreAt
from stockroom.store import names, orders
from stockroom.store.kinds import CANCELLED, EXPECTED
from stockroom.store.tables import Line, Placed

MOST_PACKS = 999
"""More packs than this in one order is a slip. Our choice."""

_PLANNED = re.compile(r"[Oo]\d+")


def is_planned(text: str) -> bool:
    """Whether a word is the number of an order in the plan, O01."""
    return _PLANNED.fullmatch(text.strip()) is not None


def order(path: StoreAt, asked: Asked, *, on: date | None, today: date, by: str) -> Done:
    """Write that something was ordered; the plan counts it from the day it is expected.

    Where not said, the price and the lead time are those of the pack as entered, and the
    money is split as the term draws on it. Raises: BadInput, BadAmount, BadDate, UnknownName.
    """
    if not 1 <= asked.packs <= MOST_PACKS:
        raise BadAmount(
            f"{asked.packs} packs of {asked.line}?", f"Give a whole number, 1 to {MOST_PACKS}."
        )
    if asked.price is not None and asked.price > MOST_PENCE:
        raise BadAmount(
            f"£{asked.price / 100:.2f} for one pack of {asked.line} is more than"
            f" £{MOST_PENCE / 100:.0f}: a slip?",
            "Give the price of one pack in pounds.",
        )
    with working(path, on=on, today=today, by=by) as work:
        line = names.find_line(work.session, asked.line, kind=asked.size.kind)
        size = in_own_kind(line, asked.size)
        check_amount(line, size)
        pack = sold_pack(work, line, size, asked)
        placed, details = _place(work, line, asked, pack, ())
        return _done(work, [placed], details)


def order_planned(
    path: StoreAt,
    number: str,
    *,
    expected: date | None,
    on: date | None,
    today: date,
    by: str,
    note: str = "",
    meant: str = "",
) -> Done:
    """Write that an order of the plan was sent off as it now stands, one for each pack size.

    `meant` is what stood beside its number, as `numbered` takes it. Raises: as `numbered`;
    NotAllowed when no pack is entered.
    """
    with working(path, on=on, today=today, by=by) as work:
        found = numbered(work, number, today, meant)
        order, told = found.order, list(found.told)
        if not all(pack.size for pack in order.sold_as):
            raise NotAllowed(
                f"{number.strip().upper()} {order.item}: no pack is entered.",
                f'Say what: stockroom order "{order.item}" 1 "100 g" --price 9.60',
            )
        line = names.find_line(work.session, order.line)
        placed: list[Placed] = []
        for pack, (_, count, pence) in zip(order.sold_as, order.mixture, strict=True):
            size = Amount(Kind(line.kind), pack.size)
            asked = Asked(line.key, count, size, pence, expected, pack.supplier, note=note)
            one, words = _place(work, line, asked, pack, order.shares)
            placed.append(one)
            told += words
        return _done(work, placed, tuple(dict.fromkeys(told)))


def cancel_order(
    path: StoreAt, number: str, *, why: str, on: date | None, today: date, by: str
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
    path: StoreAt,
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
        odd = tuple(check_expected(work, expected))
        if expected == stands.expected:
            raise BadInput(f"{row.number} is expected {spell_day(expected)} already.", "When then?")
        change = stands.expected.isoformat(), expected.isoformat()
        orders.record_change(work.session, row, EXPECTED, change, why.strip(), work.stamp)
        before = spell_day(stands.expected)
        text = f"{row.number} {stands.line}: expected {before} → {spell_day(expected)}."
        return Done(text, next="stockroom on-order", practice=work.practice, details=odd)


def _outstanding(work: Work, number: str) -> tuple[Placed, Order]:
    """An order with something still to come, as known at entry: what came since counts too."""
    row = orders.find_order(work.session, number)
    if row.ordered_on > work.on:
        raise BadDate(
            f"{row.number} was not ordered until {spell_day(row.ordered_on)}.",
            "One of these is wrong.",
        )
    stands = orders.as_it_stands(work.session, row, work.stamp.entered_on)
    if stands.cancelled:
        raise NotAllowed(
            f"{row.number} was cancelled {spell_day(stands.cancelled)}.", "Order it again."
        )
    if not stands.outstanding:
        raise NotAllowed(f"{row.number} has all come.", "See stockroom on-order.")
    return row, stands


def _place(
    work: Work, line: Line, asked: Asked, pack: Pack | None, shares: tuple[tuple[str, int], ...]
) -> tuple[Placed, tuple[str, ...]]:
    """Write one order of a pack as entered, or of one that is not; what was assumed is told."""
    size = in_own_kind(line, asked.size)
    price = price_of(line, asked, size, pack)
    pence, told = price * asked.packs, []
    if asked.price is None:
        seller = f" from {pack.supplier}" if pack and pack.supplier else ""
        told.append(f"At £{price / 100:.2f} a pack{seller}, as entered.")
    if size != asked.size:
        told.append(
            f"{format_amount(asked.size)} is {format_amount(size)} at {line.density:g} g/cm³."
        )
    expected = asked.expected
    if expected is None:
        expected, lead = usual_day(work, pack)
        told.append(f"Expected {spell_day(expected)}: {lead} open days assumed.")
    told += check_expected(work, expected)
    sent = orders.Sent(
        size=size,
        text=format_amount(size),
        packs=asked.packs,
        pence=pence,
        expected=expected,
        supplier=(pack.supplier if pack else "") or (asked.supplier or "").strip(),
        shares=shares_of(work, line, asked.department, pence, shares),
        note=asked.note,
    )
    return orders.place(work.session, line, sent, work.stamp), tuple(told)


def _done(work: Work, placed: list[Placed], details: tuple[str, ...]) -> Done:
    words = []
    for row in placed:
        line = work.session.get_one(Line, row.line_id).key
        words.append(
            f"{row.number}: {row.packs} × {row.pack} of {line}, £{row.pence / 100:.2f}"
            f"{f' from {row.supplier}' if row.supplier else ''}, expected"
            f" {spell_day(row.expected_on)}"
        )
    text = f"Ordered {'; '.join(words)}."
    undo = f"stockroom order --cancel {placed[0].number}" if len(placed) == 1 else ""
    following = "stockroom on-order"
    return Done(text, next=following, practice=work.practice, details=details, undo=undo)
