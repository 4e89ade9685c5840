"""May this bottle be opened, drawn from or moved at all? Past its safety date, nobody touches it.

The dates are those of the verdict: a line's own, else the published ones of its class. Beside
them a peroxide-former is left where it stands when it has no date at all, when it is closed
and past the date its maker printed, and when a test or a look went badly, until somebody who
knows has been asked. Testing it, and writing that it was thrown away, stay possible: those
are how it gets out of that state.
"""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

from stockroom.errors import NotAllowed
from stockroom.findings import DO_NOT_TOUCH
from stockroom.keeping.record import Check, CheckKind, Record
from stockroom.keeping.rules import Rule, RuleKind
from stockroom.keeping.strength import last_check
from stockroom.keeping.unnamed import UNKNOWN, is_unnamed
from stockroom.keeping.verdict import limits_of
from stockroom.measure.days import spell_day
from stockroom.planning.facts import Form
from stockroom.safety.peroxide_formers import Outcome, outcome
from stockroom.service.work import Work
from stockroom.store.former_rules import formers_of
from stockroom.store.tables import Bottle

UNMOVED = "A"
"""The class that is discarded on its day, whatever a test says."""


@dataclass(frozen=True, slots=True)
class Known:
    """What decides whether a bottle may be touched: its record, its rules, its class.

    `former` is the class of peroxide-former it belongs to, "" for none; `neat` is False
    for a solution, which needs no date for that.
    """

    record: Record
    rules: tuple[Rule, ...]
    former: str = ""
    neat: bool = True


def check_named(work: Work, bottle: Bottle) -> None:
    """Pass unless nobody can name what is in it. Raises: NotAllowed, saying how it is named."""
    if is_unnamed(work.line(bottle).key):
        number = bottle.number
        raise NotAllowed(
            f"{number} is set aside: {work.seen(bottle).record.set_aside}. {UNKNOWN}.",
            f"Named by evidence: stockroom unknown {number} --is LINE --evidence …;"
            f" thrown away: stockroom discard {number}.",
        )


def check_may_open(work: Work, bottle: Bottle) -> None:
    """Pass unless it is past a safety date, condemned by its test, or has no name.

    Raises: NotAllowed.
    """
    check_named(work, bottle)
    known = _known(work, bottle)
    _refuse(bottle, past_safety(known, work.on))
    check = condemning(known, work.on)
    if check is not None:
        _refuse(bottle, _condemned(check), _after(check))


def check_may_move(work: Work, bottle: Bottle) -> None:
    """Pass unless it must be left standing; what is only waste may be carried to the waste.

    Raises: NotAllowed.
    """
    check_named(work, bottle)
    known = _known(work, bottle)
    _refuse(bottle, past_safety(known, work.on))
    check = condemning(known, work.on)
    if check is not None and not _may_be_moved(check):
        _refuse(bottle, _condemned(check))


def check_not_condemned(work: Work, bottle: Bottle) -> None:
    """Pass unless a bad test stands against it: no later look or test takes that back.

    Raises: NotAllowed.
    """
    check_named(work, bottle)
    check = condemning(_known(work, bottle), work.on)
    # to test it again somebody would have to open it; a slip is put right and not tested away
    if check is not None and check.kind is CheckKind.TESTED:
        raise NotAllowed(
            f"{bottle.number} {_condemned(check)}.",
            "It does not come back into use. If that result was a slip: stockroom put-right.",
        )


def former_of(work: Work, bottle: Bottle) -> str:
    """The class of peroxide-former in a bottle, by any name of its substance; "" for none."""
    key = work.line(bottle).key
    return formers_of(work.reader, key).get(key, "")


def _known(work: Work, bottle: Bottle) -> Known:
    line = work.line(bottle)
    rules = work.rules(bottle)
    neat = line.form != Form.SOLUTION
    return Known(work.seen(bottle).record, rules, former_of(work, bottle), neat)


def past_safety(known: Known, on: date) -> str:
    """Why it is past its safety date that day, in words; "" when it is not."""
    former = known.former if known.neat else ""
    if former and _undated(known.record, on):
        return f"has no date on it and makes peroxides (class {former})"
    over = (x for x in limits_of(known.record, known.rules, on) if x.safety and x.until < on)
    first = min(over, key=lambda limit: (limit.until, limit.because), default=None)
    if first is not None:
        return f"is past its safety date, {spell_day(first.until)} ({first.because})"
    return _past_the_makers(known.record, former, on) if former else ""


def _undated(record: Record, on: date) -> bool:
    """No day of it is known, and nobody has tested it since: a test gives it one."""
    known = record.opened or record.received or record.made
    return not ((known and not record.from_undated) or _passed(record, on))


def _past_the_makers(record: Record, former: str, on: date) -> str:
    printed = record.printed.day if record.printed else None
    # once opened the house's dates count, and the maker's says how long it lasts closed
    if printed is None or record.opened is not None or printed >= on:
        return ""
    tested = _passed(record, on)
    if tested and tested > printed and former != UNMOVED:
        return ""
    return f"is past the date its maker printed, {spell_day(printed)}, and makes peroxides"


def _passed(record: Record, on: date) -> date | None:
    found = last_check(record, on, CheckKind.TESTED)
    return found.on if found else None


def condemning(known: Known, on: date) -> Check | None:
    """The bad test or look that a peroxide-former has not come back from; None for others."""
    record = known.record
    if not known.former and not any(rule.kind is RuleKind.TEST for rule in known.rules):
        return None
    kinds = (CheckKind.TESTED, CheckKind.LOOKED)
    checks = [check for check in record.checks if check.kind in kinds and check.on <= on]
    # a good look says nothing of what a test measured
    tests = [check for check in checks if check.kind is CheckKind.TESTED]
    for row in (tests, checks):
        if row and not row[-1].passed:
            return row[-1]
    return None


def _condemned(check: Check) -> str:
    measured = _measured(check)
    if measured is None:
        how = "tested" if check.kind is CheckKind.TESTED else "looked at"
        return f"did not pass when {how} on {spell_day(check.on)}"
    return f"was tested on {spell_day(check.on)}: {measured.words}"


def _measured(check: Check) -> Outcome | None:
    """What its number says, where it is the number that condemned it and not what was seen."""
    found = None if check.peroxide_mg_kg is None else outcome(check.peroxide_mg_kg)
    return None if found is None or found.passed else found


def _may_be_moved(check: Check) -> bool:
    # failed for what was seen, nobody knows how bad it is
    measured = _measured(check)
    return measured is not None and measured.may_be_moved


def _after(check: Check) -> str:
    if _may_be_moved(check):
        return "Do not open it. When it has been taken away: stockroom discard."
    return f"{DO_NOT_TOUCH.capitalize()}."


def _refuse(bottle: Bottle, why: str, hint: str = "") -> None:
    if why:
        untouched = f"{DO_NOT_TOUCH.capitalize()}."
        raise NotAllowed(f"{bottle.number} {why}.", hint or untouched)
