"""The needs of a finished plan: each answered once, in full, and what is short listed."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator

from stockroom.planning.decisions import Answer, Outcome
from stockroom.planning.facts import Closeness, Form
from stockroom.planning.replaying.rules import Broken, Fault
from stockroom.planning.replaying.walk import UNMET, Asked, Walk, planned_draws

_SAME_STRENGTH = 1e-3
"""How nearly the bottles that serve one class must agree, as a fraction. A house choice."""


def faults_of_needs(laid: Walk) -> Iterator[Fault]:
    """What is wrong with the answers, the list of shorts and the bookings makes name."""
    yield from _each_once(laid)
    for answer in laid.plan.needs:
        asked = laid.asked.get(answer.ref)
        if asked is not None:
            yield from _as_asked(answer, asked)
            yield from _adds_up(answer, asked)
            yield from _source(laid, answer)
            yield from _one_strength(answer, asked)
    yield from _shorts(laid)
    yield from _makes_serve(laid)


def _each_once(laid: Walk) -> Iterator[Fault]:
    told = Counter(answer.ref for answer in laid.plan.needs)
    for ref in laid.asked:
        if told[ref] != 1:
            yield Fault(Broken.ANSWERED, ref, f"answered {told[ref]} times")
    for ref in told:
        if ref not in laid.asked:
            yield Fault(Broken.ANSWERED, ref, "answered, and no standing booking asks for it")


def _as_asked(answer: Answer, asked: Asked) -> Iterator[Fault]:
    if answer.amount != asked.amount or answer.kind is not asked.line.kind:
        words = f"answers {answer.amount} where {asked.amount} is asked for"
        yield Fault(Broken.ASKED, answer.ref, words)
    if answer.line != asked.line.key or answer.booking != asked.booking:
        words = f"answers {answer.line!r} for {asked.line.key!r} on {asked.booking.on}"
        yield Fault(Broken.ASKED, answer.ref, words)
    if answer.fresh and not asked.fresh:
        yield Fault(Broken.MARKED, answer.ref, f"{answer.item} marked fresh, and it need not be")


def _adds_up(answer: Answer, asked: Asked) -> Iterator[Fault]:
    draws = planned_draws(answer, asked)
    had = tuple((draw.bottle, draw.amount) for draw in answer.draws[: len(asked.had)])
    if had != asked.had:
        yield Fault(Broken.ADDS_UP, answer.ref, f"had {had}, and the ledger says {asked.had}")
    drawn = sum(draw.amount for draw in draws)
    if any(draw.amount <= 0 for draw in draws):
        yield Fault(Broken.ADDS_UP, answer.ref, "takes nothing, or less, from a bottle")
    bought = answer.outcome is Outcome.BUY and not answer.make
    # a make gives all of it, a shop or an order what the jars leave open
    right = drawn == asked.missing if answer.outcome is Outcome.HAVE else drawn == 0
    if bought:
        right = 0 <= drawn < asked.missing
    if not right:
        words = f"{drawn} drawn of {asked.missing} missing, and it comes out {answer.outcome}"
        yield Fault(Broken.ADDS_UP, answer.ref, words)


def _source(laid: Walk, answer: Answer) -> Iterator[Fault]:
    """A make where the outcome says so and none elsewhere, of the line asked for."""
    wants_make = answer.outcome is Outcome.MAKE
    may_make = wants_make or answer.outcome is Outcome.BUY
    if (wants_make and not answer.make) or (answer.make and not may_make):
        words = f"comes out {answer.outcome} with make {answer.make!r}"
        yield Fault(Broken.ADDS_UP, answer.ref, words)
    make = laid.makes.get(answer.make)
    if make is None:
        return
    if make.line != answer.line:
        yield Fault(Broken.KIND, answer.ref, f"{make.id} makes {make.line!r}")
    waits = _waits(laid, make.id, frozenset())
    if waits is wants_make:
        words = "waits for something to be bought" if waits else "waits for nothing to be bought"
        yield Fault(
            Broken.ADDS_UP, answer.ref, f"comes out {answer.outcome}, and {make.id} {words}"
        )


def _waits(laid: Walk, make: str, seen: frozenset[str]) -> bool:
    """True when a make, or one it is made from, still has something to be bought."""
    if make in seen or make not in laid.makes:
        return False
    return any(
        _waits(laid, source.make, seen | {make}) if source.make else not source.bottle
        for source in laid.makes[make].sources
    )


def _one_strength(answer: Answer, asked: Asked) -> Iterator[Fault]:
    draws = planned_draws(answer, asked)
    loose = asked.requirement.closeness is Closeness.PRESENT or asked.line.form is Form.SOLID
    if loose or len(draws) < 2:
        return
    known = [draw.strength for draw in draws if draw.strength is not None]
    # unknown together with unknown may pass: nobody can tell them apart
    mixed = known and len(known) < len(draws)
    if mixed or (known and max(known) - min(known) > _SAME_STRENGTH * max(known) * (1 + 1e-6)):
        yield Fault(Broken.ONE_STRENGTH, answer.ref, f"gets strengths {known}")


def _shorts(laid: Walk) -> Iterator[Fault]:
    listed = {short.ref: short for short in laid.plan.short}
    unmet = {answer.ref for answer in laid.plan.needs if answer.outcome in UNMET}
    for ref in sorted(unmet ^ listed.keys()):
        words = "listed as short, and it is not" if ref in listed else "short, and not listed"
        yield Fault(Broken.LISTED, ref, words)
    if len(listed) < len(laid.plan.short):
        yield Fault(Broken.LISTED, "the plan", "a need is listed as short more than once")
    for ref in sorted(unmet & listed.keys() & laid.asked.keys()):
        if listed[ref].amount != laid.asked[ref].missing:
            words = f"short by {laid.asked[ref].missing}, listed as {listed[ref].amount}"
            yield Fault(Broken.LISTED, ref, words)


def _makes_serve(laid: Walk) -> Iterator[Fault]:
    told = Counter(make.id for make in laid.plan.makes)
    for make in laid.plan.makes:
        served = {asked.booking.number for asked in laid.served[make.id]}
        if told[make.id] > 1:
            yield Fault(Broken.SERVES, make.id, "two makes have this number")
        if not served:
            yield Fault(Broken.SERVES, make.id, "serves nothing")
        for number in sorted(served - set(make.bookings)):
            yield Fault(Broken.SERVES, make.id, f"serves {number} and does not say so")
