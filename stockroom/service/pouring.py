"""From one bottle into another: decanted into a smaller one, or two mixed in a new one.

What leaves a bottle so is not used up: it stands in the other one. The new bottle keeps
what was known of its sources; `store/records.py` reads that through.
"""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

from stockroom.errors import BadAmount, BadDate, NotAllowed, NotEnough
from stockroom.keeping.rules import RuleKind
from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.days import spell_day
from stockroom.measure.formats import format_amount, format_strength
from stockroom.planning import facts
from stockroom.service.answers import Done
from stockroom.service.righting import check_nothing_later
from stockroom.service.standing import told_of_place
from stockroom.service.taking import open_if_sealed, remains, still_standing, take
from stockroom.service.touching import check_may_open
from stockroom.service.work import Work, check_amount, check_in_use, doubts, working
from stockroom.settings import StoreAt
from stockroom.store.kinds import EntryKind, made_note
from stockroom.store.ledger import Event, left, next_bottle_number, overfull
from stockroom.store.snapshot_lines import lines_of
from stockroom.store.tables import Bottle, Parent


@dataclass(frozen=True, slots=True)
class Poured:
    """What leaves one bottle for another: its row, as it was seen before, how much of it."""

    bottle: Bottle
    seen: facts.Bottle
    amount: int


def decant(
    path: StoreAt,
    bottle: str,
    amount: Amount,
    *,
    place: str | None,
    size: Amount | None = None,
    good_until: date | None = None,
    on: date | None,
    today: date,
    by: str,
) -> Done:
    """Pour so much into a bottle of `size` (the amount when None), which gets a number.

    It keeps its source's line, lot, strength and dates. `good_until`, on its own label,
    may be shorter and never longer; `place` None is beside its source.
    Raises: NotAllowed as `stock.draw`, for what is never kept and for a longer date;
    NotEnough; BadAmount; BadDate for a date past; UnknownName.
    """
    with working(path, on=on, today=today, by=by) as work:
        source = _source(work, bottle, amount)
        into = _new_bottle(
            work, [source], _size(work, source.bottle, amount, amount if size is None else size)
        )
        into.decanted_from = source.bottle.id
        _label(work, into, good_until)
        said = _pour(work, source, into)
        place_id = work.place_id(place or source.seen.place) if place or source.seen.place else None
        note = f"from {source.bottle.number}"
        event = Event(EntryKind.DECANTED_IN, change=amount.micro, place_id=place_id, note=note)
        entry = work.write(into, event)
        _check_not_longer(work, source.bottle, into, good_until)
        details = (*said, f"{source.bottle.number}: {remains(work, source.bottle)}.")
        text = f"Decanted {format_amount(amount)} of {work.called(source.bottle)}"
        text += f" into {into.number}{_until(work, into)}."
        told = told_of_place(work, into)
        return work.done(text, into, entry, details=(*details, *told))


def mix(
    path: StoreAt,
    first: str,
    second: str,
    amount: Amount | None = None,
    *,
    place: str | None,
    size: Amount | None = None,
    on: date | None,
    today: date,
    by: str,
) -> Done:
    """Pour all of one bottle and so much of another (all when None) together: a new number.

    Only of one line. Its strength is worked out from both, its life is that of the older,
    and it is in doubt with either. `size` None is that of the first bottle.
    Raises: as `decant`; NotAllowed for two lines, or a bottle emptied so that was there later.
    """
    with working(path, on=on, today=today, by=by) as work:
        one, other = _source(work, first, None), _source(work, second, amount)
        _check_alike(work, one.bottle, other.bottle)
        for source in (one, other):
            # nothing can have been drawn later from what is empty
            if source.amount == source.seen.left:
                check_nothing_later(work, source.bottle)
        total = Amount(Kind(work.line(one.bottle).kind), one.amount + other.amount)
        into = _new_bottle(work, [one, other], _size(work, one.bottle, total, size))
        said = (*_pour(work, one, into), *_pour(work, other, into))
        standing = place or one.seen.place
        event = Event(
            EntryKind.MIXED,
            change=total.micro,
            strength_text=_known_by(one, other),
            place_id=work.place_id(standing) if standing else None,
            note=f"from {one.bottle.number} and {other.bottle.number}",
        )
        entry = work.write(into, event)
        text = f"Mixed {one.bottle.number} and {other.bottle.number} in {work.called(into)}"
        text += f", {format_amount(total)}{_until(work, into)}."
        told = (*said, *_told_of_mix(work, one, other, into), *told_of_place(work, into))
        return work.done(text, into, entry, details=told)


def _source(work: Work, number: str, amount: Amount | None) -> Poured:
    """The bottle when it may be poured from, with how much of it; all of it for None."""
    row = work.bottle(number)
    line = work.line(row)
    if amount is not None:
        check_amount(line, amount)
    # in the order a draw asks, so that the first reason given is the same
    check_may_open(work, row)
    seen = check_in_use(work, row)
    kept = lines_of(work.reader, line.key)[line.key]
    if kept.never_kept or any(rule.kind is RuleKind.NEVER for rule in kept.rules):
        raise NotAllowed(
            f"{line.key} is never kept, and a bottle of it is no place for it.",
            "Use it, and destroy what is left.",
        )
    held = seen.left if amount is None else amount.micro
    if held <= 0:
        raise NotEnough(f"{row.number} is empty: nothing to pour.", "Use another, or count it.")
    return Poured(row, seen, held)


def _check_alike(work: Work, one: Bottle, other: Bottle) -> None:
    if one.id == other.id:
        raise NotAllowed(f"{one.number} with itself is no mixture.", "Name another bottle.")
    if one.line_id != other.line_id:
        same = work.line(one).substance_id == work.line(other).substance_id
        raise NotAllowed(
            f"{work.called(one)} and {work.called(other)} are two things: only bottles of one"
            " line are mixed.",
            "For another strength make it up: stockroom make LINE VOLUME --from BOTTLE"
            if same and work.line(one).substance_id
            else "Keep them apart.",
        )


def _size(work: Work, first: Bottle, amount: Amount, size: Amount | None) -> int:
    """How much the bottle poured into holds when full: as said, else as the first does."""
    full = Amount(amount.kind, first.size) if size is None else check_amount(work.line(first), size)
    if overfull(Bottle(number="", line_id=first.line_id, size=full.micro), amount.micro):
        raise BadAmount(
            f"{format_amount(amount)} does not go into {format_amount(full)}.",
            'Say how much the bottle holds: --into "1 dm3".',
        )
    # a size nobody wrote down is told by what went in
    return full.micro or amount.micro


def _new_bottle(work: Work, sources: list[Poured], size: int) -> Bottle:
    """The bottle poured into, saved but without entries; its dates are those of its sources."""
    rows = [source.bottle for source in sources]
    made_here = any(row.made_here for row in rows)
    bottle = Bottle(
        number=next_bottle_number(work.session, made_here=made_here),
        line_id=rows[0].line_id,
        size=size,
        made_here=made_here,
        lot=" + ".join(dict.fromkeys(row.lot for row in rows if row.lot)),
        assay=rows[0].assay if len({row.assay for row in rows}) == 1 else None,
    )
    work.session.add(bottle)
    work.session.flush()
    assert bottle.id is not None
    for row in rows:
        assert row.id is not None
        # the lineage is how a spoiled source finds what was poured from it
        work.session.add(Parent(bottle_id=bottle.id, parent_id=row.id))
    work.session.flush()
    return bottle


def _pour(work: Work, source: Poured, into: Bottle) -> tuple[str, ...]:
    """Take it from its bottle, which that opens; what is worth saying of it."""
    # judged before, as a draw is: the pouring may open a sealed bottle
    doubtful, stands = doubts(work, source.bottle), still_standing(work, source.seen)
    event = Event(EntryKind.DECANTED, change=-source.amount, note=made_note(into.number))
    entry = take(work, source.bottle, event)
    noted = (f"{source.bottle.number}: {stands}.",) if stands else ()
    return (*open_if_sealed(work, source.bottle, entry), *doubtful, *noted)


def _label(work: Work, into: Bottle, good_until: date | None) -> None:
    if good_until is None:
        return
    if good_until < work.on:
        raise BadDate(
            f"Good until {spell_day(good_until)} is over on {spell_day(work.on)} already.",
            "Give a later day, or leave --good-until out.",
        )
    into.printed_text = into.printed_readings = good_until.isoformat()
    work.session.add(into)
    work.session.flush()


def _check_not_longer(work: Work, source: Bottle, into: Bottle, good_until: date | None) -> None:
    # asked when all is written: the pouring may just have opened the source
    limit = work.verdict(source).usable_until
    if good_until is not None and limit is not None and good_until > limit:
        raise NotAllowed(
            f"Good until {spell_day(good_until)}: it cannot outlast the bottle it came from"
            f" ({spell_day(limit)}).",
            f"Leave --good-until out, and {into.number} goes with {source.number}.",
        )


def _until(work: Work, into: Bottle) -> str:
    judged = work.verdict(into)
    # past it already is told of its source
    if judged.good_until is None or judged.good_until < work.on:
        return ""
    return f"; {judged.until_word} {spell_day(judged.good_until)} ({judged.decided_by})"


def _known_by(one: Poured, other: Poured) -> str:
    return f"by mixing of {one.bottle.number} and {other.bottle.number}"


def _told_of_mix(work: Work, one: Poured, other: Poured, into: Bottle) -> tuple[str, ...]:
    told = []
    line = lines_of(work.reader, work.line(into).key)[work.line(into).key]
    expected = work.verdict(into).strengths.expected
    if expected is not None and line.kind is Kind.VOLUME:
        strength = format_strength(expected, line.unit)
        told.append(f"{strength} {_known_by(one, other)}: an exact line wants it found.")
    lots = {source.bottle.lot for source in (one, other)}
    if len(lots) > 1:
        told.append(f"Two lots in one bottle ({into.lot}): a fault of either is in all of it.")
    told += [
        f"{source.bottle.number} is empty: stockroom discard {source.bottle.number}."
        for source in (one, other)
        if not left(work.session, source.bottle)
    ]
    # common practice, no source: what is wrong with a remainder is then wrong with all of it
    told.append("Pour nothing back into a stock bottle: this one has a number of its own.")
    return tuple(told)
