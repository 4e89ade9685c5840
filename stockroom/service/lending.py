"""What was lent out of a bottle, and what of it came back: never part of what is used."""

from __future__ import annotations

from datetime import date

from stockroom.errors import BadInput, NotAllowed
from stockroom.measure.amounts import Amount
from stockroom.measure.days import spell_day
from stockroom.measure.formats import format_amount
from stockroom.planning.facts import Form
from stockroom.service.answers import Done
from stockroom.service.estimates import of_its_kind
from stockroom.service.taking import remains, write_off
from stockroom.service.touching import check_may_open
from stockroom.service.work import Work, check_at_hand, check_in_use, working
from stockroom.settings import StoreAt
from stockroom.store.kinds import EntryKind
from stockroom.store.ledger import Event, entries_of, overfull
from stockroom.store.likeness import plain
from stockroom.store.tables import Bottle

_TO, _FROM = "to ", "from "


def lend(
    path: StoreAt, bottle: str, amount: Amount, *, to: str, on: date | None, today: date, by: str
) -> Done:
    """Write off what was lent, and to whom; a sealed bottle is opened by lending a part of it.

    Raises: BadInput when nobody is named; as `draw`.
    """
    if not to.strip():
        raise BadInput(
            f"{format_amount(amount)} of {bottle} lent to whom?", 'Add --to "the physics store".'
        )
    event = Event(EntryKind.LENT, change=-amount.micro, reason=f"{_TO}{to.strip()}")
    with working(path, on=on, today=today, by=by) as work:
        found = work.bottle(bottle)
        # what was spilled has happened; lending can still be left undone
        check_at_hand(work, found)
        check_may_open(work, found)
        check_in_use(work, found)
        return write_off(work, found.number, amount, event, "Lent")


def lend_back(
    path: StoreAt, bottle: str, amount: Amount, *, whom: str, on: date | None, today: date, by: str
) -> Done:
    """Put back what came home of a loan: in the bottle again, and no longer lent.

    `whom` is who had it, "" where only one has. Raises: BadInput where several have, or nobody
    of that name; NotAllowed for more than was lent by that day, for more than the bottle
    holds when full, and for a bottle gone or not found.
    """
    with working(path, on=on, today=today, by=by) as work:
        found = work.bottle(bottle)
        held = check_at_hand(work, found).left
        check_may_open(work, found)
        came = of_its_kind(work.line(found), amount)
        name, out = _who_has_it(work, found, whom)
        if came.amount.micro > out:
            raise NotAllowed(
                f"{name} has {work.say(found, out)} of {found.number}; {came.words} came back?",
                f"Enter what was lent of it; what else is in it, count: stockroom count"
                f" {found.number} …",
            )
        _check_fits(work, found, held, came.amount)
        event = Event(
            EntryKind.LENT, change=came.amount.micro, reason=f"{_FROM}{name}", note=came.note
        )
        entry = work.write(found, event)
        text = f"Back from {name}: {came.words} of {work.called(found)}; {remains(work, found)}."
        return work.done(text, found, entry, details=(*came.told, *_poured_back(work, found)))


def _check_fits(work: Work, bottle: Bottle, held: int, came: Amount) -> None:
    if overfull(bottle, held + came.micro):
        raise NotAllowed(
            f"{bottle.number} holds {work.say(bottle, bottle.size)} when full; with"
            f" {format_amount(came)} back it would hold {work.say(bottle, held + came.micro)}.",
            f"What is in it by now, count: stockroom count {bottle.number} …",
        )


def _poured_back(work: Work, bottle: Bottle) -> tuple[str, ...]:
    # common practice, no source: what has been elsewhere may bring something with it
    if work.line(bottle).form == Form.SOLID:
        return ()
    return ("Nothing is poured back into a stock bottle: a vessel of its own is an arrival.",)


def _who_has_it(work: Work, bottle: Bottle, whom: str) -> tuple[str, int]:
    """Who has some of a bottle on loan, as first written, and how much (micro-units)."""
    lent = _lent_out(work, bottle)
    if not lent:
        late = work.on < work.stamp.entered_on
        is_lent = f"was lent out on {spell_day(work.on)}" if late else "is lent out"
        raise NotAllowed(
            f"Nothing of {bottle.number} {is_lent}.",
            f"What else is in it, count: stockroom count {bottle.number} …",
        )
    if not whom.strip() and len(lent) == 1:
        return next(iter(lent.items()))
    for name, out in lent.items():
        if plain(name) == plain(whom):
            return name, out
    listed = "; ".join(f"{name} has {work.say(bottle, out)}" for name, out in lent.items())
    asked = f'"{whom.strip()}" has none of it.' if whom.strip() else "back from whom?"
    listed = listed[:1].upper() + listed[1:]
    raise BadInput(f"{bottle.number}: {asked} {listed}.", "Say which with --from.")


def _lent_out(work: Work, bottle: Bottle) -> dict[str, int]:
    """What each borrower has that day and may bring back, micro-units, by the name first written.

    What came back later is not there to come back twice. The earliest first.
    """
    spelt: dict[str, str] = {}
    out: dict[str, int] = {}
    least: dict[str, int] = {}
    for entry in entries_of(work.session, bottle, EntryKind.LENT):
        written = entry.reason.removeprefix(_TO).removeprefix(_FROM)
        name = spelt.setdefault(plain(written), written)
        out[name] = out.get(name, 0) - entry.change
        before = out[name] if entry.happened_on <= work.on else least.get(name, 0)
        least[name] = min(before, out[name])
    return {name: micro for name, micro in least.items() if micro > 0}
