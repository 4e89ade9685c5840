"""What is learnt of a bottle: strengths found, looks, tests, losses, doubts."""

from __future__ import annotations

from datetime import date

from stockroom.errors import BadAmount, NotAllowed
from stockroom.keeping.rules import RuleKind
from stockroom.measure.days import spell_day
from stockroom.measure.strengths import Strength
from stockroom.safety.peroxide_formers import outcome, read_result
from stockroom.service.answers import Done
from stockroom.service.hit import drawn_on_for, made_from
from stockroom.service.peroxide_tests import check_tested, has_passed, result_words
from stockroom.service.righting import check_nothing_later
from stockroom.service.spoiling import spoil as spoil
from stockroom.service.taking import last_use, made_from_doubtful, still_standing
from stockroom.service.touching import check_may_open, check_not_condemned
from stockroom.service.work import Work, check_at_hand, last_said, unsettled, working
from stockroom.settings import StoreAt
from stockroom.store.history import is_poured, parents
from stockroom.store.kinds import EntryKind
from stockroom.store.ledger import Event
from stockroom.store.names import substance_of
from stockroom.store.printed import check_reading
from stockroom.store.rows_lines import check_has_strength, number_beside
from stockroom.store.snapshot_lines import lines_of
from stockroom.store.tables import Bottle, Line

UNUSUAL = 0.25
"""Further than this part from the label, a found strength is asked about. A house choice."""


def found(
    path: StoreAt,
    bottle: str,
    strength: Strength,
    *,
    spread: Strength | None = None,
    note: str = "",
    sure: bool = False,
    on: date | None,
    today: date,
    by: str,
) -> Done:
    """Write a strength that was measured; its recheck counts from that day.

    `spread` is its standard uncertainty, `note` how it was found.
    Raises: NotAllowed when it is more than 25 % from the label, or the bottle has still to
    stand, unless `sure`; BadAmount for a strength without a number; MissingFigure.
    """
    with working(path, on=on, today=today, by=by) as work:
        checked = work.bottle(bottle)
        check_at_hand(work, checked)
        line = work.line(checked)
        check_has_strength(line, checked.number)
        substance = substance_of(work.session, line)
        value = number_beside(strength, substance, line)
        _check_usual(line, strength, value, sure=sure)
        if not sure:
            _check_stood(work, checked)
        known = None if spread is None else number_beside(spread, substance, line)
        _check_spread(strength, value, spread, known)
        event = Event(
            EntryKind.FOUND,
            strength=value,
            strength_text=strength.text,
            uncertainty=known,
            note=note,
        )
        entry = work.write(checked, event)
        within = f" (standard uncertainty {spread.text})" if spread else ""
        text = f"{work.called(checked)} found {strength.text}{within}, {spell_day(work.on)}."
        return work.done(
            text,
            checked,
            entry,
            following="stockroom plan",
            details=_until(work, checked),
        )


def _check_usual(line: Line, strength: Strength, value: float, *, sure: bool) -> None:
    # nothing to compare with, or the person has compared already
    if sure or not line.strength:
        return
    if abs(value - line.strength) > UNUSUAL * line.strength:
        raise NotAllowed(
            f"Unusual: {strength.text} against {line.strength_text}.",
            "Check the units, or confirm with --sure.",
        )


def _check_stood(work: Work, bottle: Bottle) -> None:
    # what still settles is weaker once it has: found now, it is wrong by its first day of use
    stands = still_standing(work, work.seen(bottle))
    if stands:
        raise NotAllowed(
            f"{bottle.number} is {stands}: a strength found before then does not last.",
            "Find it once it has stood, or confirm with --sure.",
        )


def _check_spread(
    strength: Strength, value: float, spread: Strength | None, known: float | None
) -> None:
    # as wide as the strength itself says that nothing was found
    if spread is not None and known is not None and not 0 < known < value:
        raise BadAmount(
            f"An uncertainty of {spread.text} on {strength.text} cannot be.",
            "Give the standard uncertainty, in the strength's own unit.",
        )


def look(
    path: StoreAt,
    bottle: str,
    *,
    passed: bool,
    note: str = "",
    on: date | None,
    today: date,
    by: str,
) -> Done:
    """Write a look by eye: a good one re-dates the bottle, a bad one sets it aside.

    Raises: NotAllowed for what is never kept, gone or not found.
    """
    event = Event(EntryKind.LOOKED, passed=passed, note=note)
    return _check(path, bottle, event, on=on, today=today, by=by)


def tested(
    path: StoreAt,
    bottle: str,
    *,
    passed: bool | None = None,
    peroxide: str = "",
    seen: str = "",
    note: str = "",
    on: date | None,
    today: date,
    by: str,
) -> Done:
    """Write a peroxide-former's named test, the only check that moves a safety date.

    `peroxide` as written, "12 mg/kg" as H2O2, decides by itself: below 25 its interval
    starts again, from 25 it is condemned. What was `seen` (crystals, a stuck cap)
    overrules the number. `passed` is needed without either, and cannot say otherwise than they do.
    Raises: NotAllowed when it is no peroxide-former and has no such rule, is not at hand,
    or was condemned before; BadInput for neither, or a number that says otherwise; BadAmount for
    one that cannot be read.
    """
    result = read_result(peroxide) if peroxide else None
    found = outcome(result or 0.0, seen=seen) if seen.strip() or result is not None else None
    good = has_passed(bottle, passed, found)
    words = found.words if found and not found.passed else ""
    event = Event(EntryKind.TESTED, passed=good, note=note, reason=words, peroxide_mg_kg=result)
    return _check(path, bottle, event, on=on, today=today, by=by)


def _check(
    path: StoreAt, bottle: str, event: Event, *, on: date | None, today: date, by: str
) -> Done:
    with working(path, on=on, today=today, by=by) as work:
        checked = work.bottle(bottle)
        check_at_hand(work, checked)
        _check_keeps(work, checked, event.kind)
        looked, passed = event.kind is EntryKind.LOOKED, bool(event.passed)
        if passed:
            check_not_condemned(work, checked)
        entry = work.write(checked, event)
        # one body for both, since a look and a test differ in what they may re-date only
        verb = "looked at" if looked else "tested"
        said = "passed" if passed else "did not pass: set aside"
        # a bad look throws doubt on whatever was made from the bottle
        inherited = made_from_doubtful(work, checked)
        details = (*_until(work, checked), *inherited) if passed else made_from(work, checked)
        text = f"{work.called(checked)} {verb} {spell_day(work.on)}, {said}."
        means = () if looked else result_words(work, checked, event)
        return work.done(text, checked, entry, details=(*means, *details))


def _check_keeps(work: Work, bottle: Bottle, kind: EntryKind) -> None:
    line = work.line(bottle)
    # as the plan sees them: with the published test of a peroxide-former nobody wrote one for
    kinds = {rule.kind for rule in lines_of(work.reader, line.key)[line.key].rules}
    if line.never_kept or RuleKind.NEVER in kinds:
        raise NotAllowed(
            f"{line.key} is never kept. There is no test that extends it.",
            "Destroy it, and say so.",
        )
    if kind is EntryKind.TESTED:
        check_tested(work, bottle)


def _until(work: Work, bottle: Bottle) -> tuple[str, ...]:
    after = work.verdict(bottle)
    if after.good_until is None:
        return ()
    until, past = spell_day(after.good_until), after.good_until < work.on
    said = f"Still {after.condition}: good until" if past else f"Now {after.condition}, until"
    # where the printed date decides, whoever looked has the label in hand
    settle = unsettled(work, bottle) if after.decided_by.startswith("printed") else ()
    warned = (f"{after.warning.capitalize()}.",) if after.warning else ()
    return (f"{said} {until}: {after.decided_by}.", *warned, *settle)


def printed(
    path: StoreAt, bottle: str, reading: date, *, on: date | None, today: date, by: str
) -> Done:
    """Write which reading of a printed date is right; a later word takes the place of an earlier.

    Raises: BadDate for a day the printed date cannot mean; NotAllowed when there
    is nothing to settle, or the bottle is gone or not found.
    """
    with working(path, on=on, today=today, by=by) as work:
        read = work.bottle(bottle)
        check_at_hand(work, read)
        _check_own_date(work, read)
        entry = work.write(read, Event(EntryKind.DATE_READ, note=check_reading(read, reading)))
        text = f'{work.called(read)}: printed "{read.printed_text}" is {spell_day(reading)}.'
        details = _until(work, read)
        return work.done(text, read, entry, following="stockroom plan", details=details)


def _check_own_date(work: Work, bottle: Bottle) -> None:
    # the maker's date stands on the bottle it was poured from, and is read for both there
    if is_poured(work.session, bottle):
        sources = ", ".join(source.number for source in parents(work.session, bottle))
        raise NotAllowed(
            f"{bottle.number} was poured from {sources}: a printed date is on that one.",
            f"stockroom printed {sources.split(', ')[0]} DATE",
        )


def lost(
    path: StoreAt, bottle: str, *, note: str = "", on: date | None, today: date, by: str
) -> Done:
    """Say that a bottle cannot be found: it leaves the plan, and its last place is shown.

    The bookings the plan would have drawn on it for are named.
    Raises: NotAllowed when it is missing already, or gone, or has an entry of a later day,
    which is named.
    """
    with working(path, on=on, today=today, by=by) as work:
        missed = work.bottle(bottle)
        if work.seen(missed).record.not_found:
            raise NotAllowed(
                f"{missed.number} is not found already, since"
                f" {last_said(work, missed, EntryKind.LOST)}; nothing entered.",
                f"Once it is found: stockroom turned-up {missed.number} --place …",
            )
        # asked before the entry: afterwards the bottle is no longer at hand
        place = check_at_hand(work, missed).place
        check_nothing_later(work, missed)
        hit = (*last_use(work, missed), *drawn_on_for(work, missed))
        entry = work.write(missed, Event(EntryKind.LOST, reason=note))
        last = f"; it last stood at {place}" if place else ""
        text = f"Not found: {work.called(missed)}{last}."
        following = f"stockroom turned-up {missed.number} --place …"
        return work.done(text, missed, entry, following=following, details=hit)


def turned_up(
    path: StoreAt, bottle: str, place: str | None, *, on: date | None, today: date, by: str
) -> Done:
    """Say where a bottle turned up (its last place when None); it wants a look.

    Raises: NotAllowed when nobody missed it, or it is gone; UnknownName for the place.
    """
    with working(path, on=on, today=today, by=by) as work:
        found_again = work.bottle(bottle)
        # not check_at_hand, which refuses just the bottles that can turn up
        seen = work.seen(found_again)
        if seen.record.gone or not seen.record.not_found:
            where = f", at {seen.place or 'no place'}"
            apart = seen.record.set_aside
            state = f"set aside ({apart}){where}" if apart else f"in use{where}"
            state = "gone" if seen.record.gone else state
            raise NotAllowed(
                f"{found_again.number} was not missing: it is {state}.",
                f"To stand it elsewhere: stockroom move {found_again.number} PLACE.",
            )
        where = place or seen.place
        place_id = work.place_id(where) if where else None
        entry = work.write(found_again, Event(EntryKind.TURNED_UP, place_id=place_id))
        text = f"{work.called(found_again)} turned up{f' at {where}' if where else ''}."
        following, said = _to_be_looked_at(work, found_again)
        return work.done(text, found_again, entry, following=following, details=(said,))


def _to_be_looked_at(work: Work, bottle: Bottle) -> tuple[str, str]:
    """The look a bottle wants that turned up, and the words; no look at what is left alone."""
    try:
        check_may_open(work, bottle)
    except NotAllowed as refused:
        return "", f"Set aside. {refused.message} {refused.hint}"
    return f"stockroom look {bottle.number}", "Set aside until somebody has looked at it."
