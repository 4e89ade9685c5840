"""A peroxide-former's test: may it be written, did it pass, and what it means in words."""

from __future__ import annotations

from stockroom.errors import BadInput, NotAllowed
from stockroom.keeping.rules import RuleKind
from stockroom.safety.peroxide_formers import Outcome, outcome
from stockroom.service.touching import UNMOVED, former_of
from stockroom.service.work import Work
from stockroom.store.ledger import Event
from stockroom.store.snapshot_lines import lines_of
from stockroom.store.tables import Bottle


def has_passed(bottle: str, passed: bool | None, found: Outcome | None) -> bool:
    """What the number or the eye says, else what somebody says.

    Raises: BadInput for neither, and for a pass that the number denies.
    """
    if passed is None:
        if found is None:
            raise BadInput(
                f"{bottle}: did it pass or fail?",
                'Add --peroxide "12 mg/kg", --passed or --failed.',
            )
        return found.passed
    if passed and found is not None and not found.passed:
        raise BadInput(f"{bottle} cannot have passed: {found.words}.", "Leave --passed off.")
    return passed


def check_tested(work: Work, bottle: Bottle) -> None:
    """Pass for a line with a test of its own, and for every peroxide-former.

    Raises: NotAllowed for the rest: a test that no rule asks for would re-date nothing,
    and look as if it had.
    """
    if not _moves(work, bottle) and not former_of(work, bottle):
        raise NotAllowed(
            f"{work.line(bottle).key} has no test of its own that would re-date it.",
            f"Enter a look or a strength for {bottle.number}.",
        )


def result_words(work: Work, bottle: Bottle, event: Event) -> tuple[str, ...]:
    """What was measured or seen means, in words, and whether it moved the bottle's date."""
    former = former_of(work, bottle)
    if event.reason:
        return (_sentence(event.reason),)
    means = None
    if event.peroxide_mg_kg is not None:
        means = outcome(event.peroxide_mg_kg, former)
    if not event.passed:
        return (f"Failed, though {means.words}.",) if means else ()
    told = (means.words, *means.notes) if means else ()
    return (*map(_sentence, told), *_unmoved(work, bottle, former))


def _unmoved(work: Work, bottle: Bottle, former: str) -> tuple[str, ...]:
    if _moves(work, bottle):
        return ()
    if former == UNMOVED:
        return ("No test moves the discard date of class A.",)
    return ("It has no test date of its own that this would move.",)


def _moves(work: Work, bottle: Bottle) -> bool:
    key = work.line(bottle).key
    rules = lines_of(work.reader, key)[key].rules
    return any(rule.kind is RuleKind.TEST for rule in rules)


def _sentence(words: str) -> str:
    return f"{words[0].upper()}{words[1:]}."
