"""May this bottle be opened, drawn from or moved at all? Past its safety date, nobody touches it.

A peroxide-former past its test date, and one whose test or look went badly, is left
where it stands until somebody who knows has been asked. Testing it, and writing that
it was thrown away, stay possible: those are how it gets out of that state.
"""

from __future__ import annotations

from datetime import date

from stockroom.errors import NotAllowed
from stockroom.keeping.record import Check, CheckKind, Record
from stockroom.keeping.rules import Rule, RuleKind
from stockroom.keeping.verdict import limits_of
from stockroom.measure.days import spell_day
from stockroom.safety.peroxide_formers import DO_NOT_TOUCH, Outcome, outcome
from stockroom.service.work import Work
from stockroom.store.snapshot_lines import lines_of
from stockroom.store.tables import Bottle


def check_may_open(work: Work, bottle: Bottle) -> None:
    """Pass unless it is past a safety date or its test condemned it. Raises: NotAllowed."""
    record, rules = _known(work, bottle)
    _refuse(bottle, past_safety(record, rules, work.on))
    check = condemning(record, rules, work.on)
    if check is not None:
        _refuse(bottle, _condemned(check), _after(check))


def check_may_move(work: Work, bottle: Bottle) -> None:
    """Pass unless it must be left standing; what is only waste may be carried to the waste.

    Raises: NotAllowed.
    """
    record, rules = _known(work, bottle)
    _refuse(bottle, past_safety(record, rules, work.on))
    check = condemning(record, rules, work.on)
    if check is not None and not _may_be_moved(check):
        _refuse(bottle, _condemned(check))


def check_not_condemned(work: Work, bottle: Bottle) -> None:
    """Pass unless a bad test stands against it: no later look or test takes that back.

    Raises: NotAllowed.
    """
    record, rules = _known(work, bottle)
    check = condemning(record, rules, work.on)
    # to test it again somebody would have to open it; a slip is put right and not tested away
    if check is not None and check.kind is CheckKind.TESTED:
        raise NotAllowed(
            f"{bottle.number} {_condemned(check)}.",
            "It does not come back into use. If that result was a slip: stockroom put-right.",
        )


def _known(work: Work, bottle: Bottle) -> tuple[Record, tuple[Rule, ...]]:
    return work.seen(bottle).record, lines_of(work.reader)[work.line(bottle).key].rules


def past_safety(record: Record, rules: tuple[Rule, ...], on: date) -> str:
    """Why it is past its safety date that day, in words; "" when it is not."""
    over = [x for x in limits_of(record, rules, on) if x.safety and x.until < on]
    first = min(over, key=lambda limit: (limit.until, limit.because), default=None)
    if first is None:
        return ""
    return f"is past its safety date, {spell_day(first.until)} ({first.because})"


def condemning(record: Record, rules: tuple[Rule, ...], on: date) -> Check | None:
    """The bad test or look that a peroxide-former has not come back from; None for others."""
    if not any(rule.kind is RuleKind.TEST for rule in rules):
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
    return f"{DO_NOT_TOUCH[0].upper()}{DO_NOT_TOUCH[1:]}."


def _refuse(bottle: Bottle, why: str, hint: str = "") -> None:
    if why:
        untouched = f"{DO_NOT_TOUCH[0].upper()}{DO_NOT_TOUCH[1:]}."
        raise NotAllowed(f"{bottle.number} {why}.", hint or untouched)
