"""A bottle nobody knows: logged, labelled, left alone; named later by evidence, or discarded."""

from __future__ import annotations

from datetime import date

from stockroom.errors import BadAmount, BadInput, NotAllowed, UnknownName
from stockroom.keeping.unnamed import UNKNOWN, UNNAMED, is_unnamed
from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.formats import format_about, format_amount
from stockroom.service.answers import Done
from stockroom.service.standing import told_of_place
from stockroom.service.work import Work, check_at_hand, working
from stockroom.settings import StoreAt
from stockroom.store import names
from stockroom.store.changing import record_change
from stockroom.store.kinds import EntryKind
from stockroom.store.ledger import Event, next_bottle_number
from stockroom.store.tables import Bottle, Entry, Line, Substance
from stockroom.store.unnamed import NAMED

_NOTE = "never identify by trial; never use or move without asking"
_FORM = {Kind.MASS: "solid", Kind.VOLUME: "liquid"}


def log_unknown(
    path: StoreAt,
    look: str,
    size: Amount,
    *,
    place: str,
    on: date | None,
    today: date,
    by: str,
) -> Done:
    """Give a bottle that nobody can name a number, as it looks and where it stands.

    `size` is what it holds, as near as can be told: in g for a solid, in cm³ for a liquid.
    Raises: BadInput without a look, or for a bottle that has a number; BadAmount; UnknownName
    for the place.
    """
    with working(path, on=on, today=today, by=by) as work:
        bottle, entry = log_in(work, look, size, place)
        text = f"{bottle.number}: unknown, {look.strip()}, {format_about(size)}, at {place}."
        details = (f'Write on it: {bottle.number} "{UNKNOWN}".', *told_of_place(work, bottle))
        following = f"stockroom discard {bottle.number} --how … --why unknown"
        return work.done(text, bottle, entry, following=following, details=details)


def log_in(
    work: Work, look: str, size: Amount, place: str, *, note: str = "", walk_id: int | None = None
) -> tuple[Bottle, Entry]:
    """The unknown bottle and the entry it begins with; `note` is its look unless given.

    Raises: as `log_unknown`.
    """
    if not look.strip():
        raise BadInput("What does the unknown bottle look like?", 'Say it: "brown powder".')
    _check_new(work, look)
    line = _line(work, size)
    assert line.id is not None
    bottle = Bottle(
        number=next_bottle_number(work.session, made_here=False),
        line_id=line.id,
        size=size.micro,
        remark=look.strip(),
    )
    work.session.add(bottle)
    work.session.flush()
    came = Event(
        EntryKind.ARRIVED,
        change=size.micro,
        place_id=work.place_id(place),
        note=note or look.strip(),
        about=True,
        walk_id=walk_id,
    )
    return bottle, work.write(bottle, came)


def name_unknown(
    path: StoreAt,
    bottle: str,
    line: str,
    *,
    evidence: str,
    on: date | None,
    today: date,
    by: str,
) -> Done:
    """Say what an unknown is, by evidence; it stands apart until somebody has looked at it.

    Raises: BadInput without evidence; NotAllowed for a bottle that has a name, is gone or not
    found, and for something measured otherwise than it was logged; UnknownName.
    """
    if not evidence.strip():
        raise BadInput(
            f"By what evidence is {bottle} {line}?",
            'A bottle is never named by guess: --evidence "label found under the bench".',
        )
    with working(path, on=on, today=today, by=by) as work:
        found = work.bottle(bottle)
        was = work.line(found)
        if not is_unnamed(was.key):
            raise NotAllowed(
                f"{found.number} is no unknown: it is {was.key}.",
                "If it was named by a slip, put the entry that named it right:"
                f" stockroom diary {found.number}.",
            )
        check_at_hand(work, found)
        named = names.find_line(work.session, line, kind=was.kind)
        _check_fits(work, found, was, named)
        assert named.id is not None
        found.line_id = named.id
        work.session.add(found)
        change = (was.key, named.key)
        record_change(work.desk, "bottle", found.number, "line", change, evidence.strip())
        entry = work.write(found, Event(EntryKind.SET_ASIDE, reason=NAMED, note=evidence.strip()))
        text = f"{found.number} is {named.key}, by {evidence.strip()}."
        said = "It has no date, and needs a look before it is used: nobody knows how old it is."
        following = f"stockroom look {found.number}"
        details = (said, *told_of_place(work, found))
        return work.done(text, found, entry, following=following, details=details)


def name_taken_back(work: Work, bottle: Bottle, wrong: Entry, why: str) -> tuple[str, ...]:
    """Make a bottle an unknown again where the entry put right is the one that named it."""
    if wrong.kind != EntryKind.SET_ASIDE or wrong.reason != NAMED:
        return ()
    named = work.line(bottle)
    line = _line(work, Amount(Kind(named.kind), max(bottle.size, 1)))
    assert line.id is not None
    bottle.line_id = line.id
    work.session.add(bottle)
    record_change(work.desk, "bottle", bottle.number, "line", (named.key, line.key), why)
    return (f'{bottle.number} is unknown again. Write on it: "{UNKNOWN}".',)


def _check_new(work: Work, look: str) -> None:
    try:
        known = names.find_bottle(work.session, look)
    except UnknownName:
        return
    raise BadInput(
        f"{known.number} has a number already: is it known now?",
        f"stockroom unknown {known.number} --is LINE --evidence …",
    )


def _line(work: Work, size: Amount) -> Line:
    """The line an unknown is logged under, made on need."""
    key = UNNAMED.get(size.kind)
    if key is None or size.micro <= 0:
        raise BadAmount(
            f"{format_amount(size)} of an unknown?", "Give in g or cm³ about what it holds."
        )
    # by its key alone: part of a name would find the one for the other kind
    return names.line_keyed(work.session, key) or _new_line(work, key, size.kind)


def _new_line(work: Work, key: str, kind: Kind) -> Line:
    try:
        substance = names.find_substance(work.session, UNNAMED[Kind.MASS])
    except UnknownName:
        substance = Substance(substance=UNNAMED[Kind.MASS])
        work.desk.save(substance)
    line = Line(
        key=key,
        item=key,
        substance_id=substance.id,
        form=_FORM[kind],
        kind=kind.value,
        keep_note=_NOTE,
    )
    work.desk.save(line)
    return line


def _check_fits(work: Work, bottle: Bottle, was: Line, named: Line) -> None:
    if is_unnamed(named.key):
        raise BadInput(f"{bottle.number} is unknown already.", "Say what it is: --is LINE.")
    if named.kind != was.kind:
        held = work.say(bottle, bottle.size)
        raise NotAllowed(
            f"{bottle.number} was logged by {was.kind} ({held}), and {named.key} is measured by"
            f" {named.kind}.",
            f"Put its arrival right (stockroom diary {bottle.number}), then log it as what it is:"
            f' stockroom arrive "{named.key}" … --printed none.',
        )
