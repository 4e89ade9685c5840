"""Step 8: what is past on a day and before whom it matters, and the guesses leaned on."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import replace
from datetime import date

from stockroom.findings import Finding, Lasting
from stockroom.keeping.rules import Purpose, RuleKind
from stockroom.keeping.verdict import Condition, Verdict, verdict
from stockroom.planning.amounts import say_strength
from stockroom.planning.choosing.fitness import found_valid_from
from stockroom.planning.choosing.shelf import Shelf
from stockroom.planning.decisions import PastBottle
from stockroom.planning.facts import Bottle, Closeness, Facts, Form, Line
from stockroom.planning.numbers import natural
from stockroom.planning.on_shelf import set_aside_above
from stockroom.planning.wants import Settled, Want
from stockroom.safety.peroxide_formers import class_of

_TOLD = frozenset(Condition) - {Condition.SOUND, Condition.GONE}


def past_on(facts: Facts, wants: Iterable[Want], on: date) -> list[PastBottle]:
    """Every bottle that is not sound on a day, by number, with the bookings it matters for.

    Those are the bookings from that day on that draw on it, or would have if
    it were sound.
    """
    concerned = _concerned(wants, on)
    row = []
    for bottle in sorted(facts.bottles, key=lambda b: natural(b.number)):
        line = facts.lines[bottle.line]
        judged = verdict(bottle.record, line.rules, on)
        if judged.condition in _TOLD:
            told = _past(facts, bottle, judged, concerned.get(bottle.number, ()))
            row.append(replace(told, look_would_do=_look_would_do(line, judged)))
    return row


def _concerned(wants: Iterable[Want], on: date) -> dict[str, tuple[str, ...]]:
    concerned: dict[str, list[str]] = {}
    for want in [part for root in wants if root.need.on >= on for part in root.tree()]:
        # also where it was not taken: that is where its being past hurts
        touched = [number for number, _ in want.passed_over]
        for number in [*touched, *(promise.bottle for promise in want.promises)]:
            bookings = concerned.setdefault(number, [])
            if want.need.booking.number not in bookings:
                bookings.append(want.need.booking.number)
    return {number: tuple(bookings) for number, bookings in concerned.items()}


def _past(facts: Facts, bottle: Bottle, judged: Verdict, bookings: tuple[str, ...]) -> PastBottle:
    line = facts.lines[bottle.line]
    words = judged.decided_by
    # what it is expected to be, in a plan on its lower limits too
    expected = judged.strengths.likely
    known = expected is not None and line.strength
    if judged.condition is Condition.WATCH and known and _apart(expected, line.strength):
        words += f"; expected {say_strength(line, expected)} (label {line.strength_text})"
    words += f"; {judged.warning}" if judged.warning else ""
    item = " ".join(filter(None, (line.item, line.strength_text)))
    return PastBottle(bottle.number, item, judged.condition, judged.good_until, words, bookings)


def _look_would_do(line: Line, judged: Verdict) -> bool:
    """Whether to suggest a look: never at what must not be opened, or has a test instead."""
    tested = class_of(line.substance) or any(rule.kind is RuleKind.TEST for rule in line.rules)
    # what nobody can name does not come back into use by being looked at
    aside = judged.condition is Condition.SET_ASIDE and line.substance not in ("", "unknown")
    return not (judged.warning or tested) and (judged.look_would_do or aside)


def _apart(one: float | None, other: float | None) -> bool:
    # a hundredth is about what a burette and an indicator leave open: common practice, no source
    return bool(one and other) and abs((one or 0) / (other or 1) - 1) > 0.01


# -- guesses ------------------------------------------------------------------------


def guesses(facts: Facts, wants: Sequence[Want], shelf: Shelf) -> list[Finding]:
    """What the plan leaned on without knowing it, each once, by subject."""
    told = (
        *_of_bottles(facts, wants, shelf),
        *_of_dates(wants, shelf),
        *_of_needs(facts, wants, shelf),
    )
    return sorted(dict.fromkeys(told), key=lambda f: (natural(f.subject), f.text))


def _of_bottles(facts: Facts, wants: Sequence[Want], shelf: Shelf) -> Iterable[Finding]:
    closest = _closest_use(wants)
    for number, promises in shelf.promises.items():
        if promises:
            bottle = shelf.bottle[number]
            for text in _about(facts, shelf, bottle, closest.get(number, Closeness.PRESENT)):
                yield Finding(number, text)


def _of_dates(wants: Sequence[Want], shelf: Shelf) -> Iterable[Finding]:
    for want in [part for root in wants for part in root.tree()]:
        # a date read too early is what may have kept it out
        for number, _ in want.passed_over:
            for text in _two_readings(shelf.bottle[number]):
                yield Finding(number, text)


def _of_needs(facts: Facts, wants: Sequence[Want], shelf: Shelf) -> Iterable[Lasting]:
    for want in wants:
        for number in _taken_at_its_word(facts, want, shelf):
            text = "its found strength has no uncertainty: taken as exact enough"
            yield Lasting(number, text)
        if want.need.requirement.closeness_guessed:
            recipe = want.need.recipe.code
            yield Lasting(want.need.line.key, f"no closeness written in {recipe}: close assumed")
        for part in want.tree():
            if part.method and part.method.minutes_guessed:
                minutes = part.method.minutes
                yield Lasting(part.line, f"no hands-on time written: {minutes} min assumed")


def _taken_at_its_word(facts: Facts, want: Want, shelf: Shelf) -> Iterable[str]:
    """The bottles that serve an exact need by a result nobody said the uncertainty of."""
    if want.purpose is not Purpose.EXACT or want.settled is not Settled.HELD:
        return
    for promise in want.promises:
        known = shelf.verdict_planned(promise.bottle, promise.on, promise.purpose).strengths
        line = facts.lines[shelf.bottle[promise.bottle].line]
        oldest = found_valid_from(want.need.requirement, line, want.need.on)
        # one too old is titrated again before it serves, and is not leaned on
        if known.uncertainty is None and known.found_on and known.found_on >= oldest:
            yield promise.bottle


def _closest_use(wants: Iterable[Want]) -> dict[str, Closeness]:
    # a bottle may serve a titration and a rinse: it is doubted for the stricter
    order = list(Closeness)
    closest: dict[str, Closeness] = {}
    for root in wants:
        closeness = root.need.requirement.closeness
        for want in root.tree():
            for promise in want.promises:
                known = closest.get(promise.bottle, Closeness.PRESENT)
                closest[promise.bottle] = min(known, closeness, key=order.index)
    return closest


def _about(facts: Facts, shelf: Shelf, bottle: Bottle, closest: Closeness) -> Iterable[str]:
    last = max(promise.on for promise in shelf.promises[bottle.number])
    return leant_on(facts, bottle, shelf.verdict_planned(bottle.number, last), closest)


def leant_on(facts: Facts, bottle: Bottle, judged: Verdict, closest: Closeness) -> Iterable[str]:
    """What is not known of a bottle that is used as it was judged for a day, a sentence each.

    `closest` is the strictest use of it: an exact one is doubted by its own rules.
    """
    line = facts.lines[bottle.line]
    yield from _two_readings(bottle)
    if bottle.about:
        yield "what is left was judged by eye, and not counted since"
    if bottle.record.opened_guessed:
        yield "opened, day not written: counted from the day it was received"
    if judged.condition is Condition.WATCH and closest is not Closeness.EXACT:
        yield f"its check falls due before it is used ({judged.decided_by})"
    yield from _about_strength(line, judged, closest, bottle.known_by)
    doubt = inherited_doubt(facts, bottle)
    if doubt:
        yield doubt


def _two_readings(bottle: Bottle) -> Iterable[str]:
    printed = bottle.record.printed
    if printed and printed.ambiguous:
        readings = " or ".join(_spelt(day) for day in printed.readings)
        yield f'printed "{printed.text}" may be {readings}: planned on the earlier; which is it?'


def _about_strength(
    line: Line, judged: Verdict, closest: Closeness, known_by: str
) -> Iterable[str]:
    strengths, likely = judged.strengths, judged.strengths.likely
    if line.form is Form.SOLID or likely is None or strengths.nominal is None:
        return
    expected = say_strength(line, likely)
    # under a thousandth the figures print alike, and a guess of nothing is noise
    if abs(likely / strengths.nominal - 1) > 1e-3 and strengths.found is None:
        start = f", {known_by}" if known_by else " from the label"
        yield f"expected {expected} by its rule of fading{start}: never titrated"
    elif strengths.found is None and known_by:
        # the factor is carried, and close enough; an exact line wants a result of its own
        if closest is Closeness.EXACT:
            yield f"{line.strength_text} {known_by}: never titrated itself"
    elif strengths.found is None and closest in (Closeness.CLOSE, Closeness.EXACT):
        yield f"label strength {line.strength_text} taken as it stands: never titrated"
    elif strengths.found is not None and abs(likely / strengths.found - 1) > 1e-3:
        found = say_strength(line, strengths.found)
        yield f"expected {expected}, carried forward from {found} found {strengths.found_on}"


def inherited_doubt(facts: Facts, bottle: Bottle) -> str:
    """The doubt a made bottle has from a parent overdue or set aside; "" if none.

    A parent overdue its recheck on the day the child was made, or set aside
    since, marks the child; a parent's date does not.
    """
    # one is enough: either sends the same person to the same bottle
    return _parent_overdue(facts, bottle) or parent_set_aside(facts, bottle)


def _parents(facts: Facts, bottle: Bottle) -> list[Bottle]:
    # most are made from nothing here, and then the bottles need not be gone through
    if not bottle.lineage:
        return []
    by_number = {b.number: b for b in facts.bottles if b.number in bottle.lineage}
    return [by_number[number] for number in bottle.lineage if number in by_number]


def _parent_overdue(facts: Facts, bottle: Bottle) -> str:
    made = bottle.record.made
    for parent in _parents(facts, bottle) if made else ():
        assert made is not None
        judged = verdict(parent.record, facts.lines[parent.line].rules, made)
        if judged.condition is Condition.WATCH and judged.good_until:
            days = (made - judged.good_until).days
            return (
                f"made from {parent.number} {days} d after its recheck fell due: in doubt with it"
            )
    return ""


def parent_set_aside(facts: Facts, bottle: Bottle) -> str:
    """Which bottle it was made from has been set aside since, and why; "" if none."""
    return set_aside_above(bottle, facts.bottles)


def _spelt(day: date) -> str:
    return f"{day.day} {day:%B %Y}"
