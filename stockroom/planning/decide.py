"""Step 5: freeze what was worked out into answers and makes, with their reasons."""

from __future__ import annotations

from collections.abc import Iterable
from datetime import date

from stockroom.planning.amounts import say, say_strength
from stockroom.planning.choosing.shelf import Promise, Shelf
from stockroom.planning.decisions import Answer, Draw, Make, Outcome, Short
from stockroom.planning.explode import Need
from stockroom.planning.facts import Drawn, Facts, Form
from stockroom.planning.known import how_known
from stockroom.planning.making.batch import Batch, Source, keeps
from stockroom.planning.making.day_chosen import Load, load_of
from stockroom.planning.making.make_card import cautions_of, reasons_of
from stockroom.planning.making.measuring import measured
from stockroom.planning.making.weighed import too_little_to_weigh
from stockroom.planning.numbers import Natural, natural
from stockroom.planning.timing import ready_at
from stockroom.planning.wants import Settled, Want
from stockroom.planning.windows import good_until

_OUTCOMES = {
    Settled.HELD: Outcome.HAVE,
    Settled.BUY: Outcome.BUY,
    Settled.SHOP: Outcome.BUY,
    Settled.SHORT: Outcome.SHORT,
    Settled.REFUSED: Outcome.REFUSED,
}


def outcome_of(want: Want, batch: Batch | None = None) -> Outcome:
    """What becomes of a need: a make that waits for something to be bought is a buy."""
    if want.settled is Settled.MAKE:
        return Outcome.BUY if batch is not None and lines_to_buy(batch) else Outcome.MAKE
    return _OUTCOMES[want.settled]


def lines_to_buy(batch: Batch) -> list[str]:
    """The lines a batch, or one it is made from, still has to be bought of, in order."""
    lines: list[str] = []
    for source in batch.sources:
        if source.batch:
            lines += lines_to_buy(source.batch)
        elif not source.bottle:
            lines.append(source.line.key)
    return lines


def answers(
    facts: Facts, wants: Iterable[Want], batches: list[Batch], shelf: Shelf
) -> list[Answer]:
    """One answer per need, in the order of the bookings."""
    # by identity: a want is changed while it is settled, so it cannot be a key itself
    made_in = {id(want): batch for batch in batches for want in batch.wants}
    row = [_answer(facts, want, made_in.get(id(want)), shelf) for want in wants]
    return sorted(row, key=lambda a: (a.booking.on, a.booking.minute, *_number(a.ref)))


def _number(ref: str) -> tuple[Natural, int]:
    booking, _, number = ref.rpartition(".")
    return natural(booking), int(number)


def _answer(facts: Facts, want: Want, batch: Batch | None, shelf: Shelf) -> Answer:
    need = want.need
    outcome = outcome_of(want, batch)
    draws = [Draw(d.amount, need.line.kind, bottle=d.bottle, line=d.line) for d in need.drawn]
    if outcome in (Outcome.SHORT, Outcome.REFUSED):
        batch = None
    else:
        draws += [_draw(facts, promise, shelf) for promise in want.promises]
    return Answer(
        ref=need.ref,
        booking=need.booking,
        recipe_title=need.recipe.title,
        line=need.line.key,
        item=need.line.item,
        strength=need.requirement.strength_text or need.line.strength_text,
        amount=need.amount,
        kind=need.line.kind,
        outcome=outcome,
        draws=tuple(draws),
        make=batch.id if batch else "",
        closeness=need.requirement.closeness,
        fresh=need.requirement.fresh,
        reasons=tuple(_reasons(facts, want, batch, shelf)),
        waits_for=tuple(dict.fromkeys(part.line for part in want.tree() if part.to_buy)),
    )


def _draw(facts: Facts, promise: Promise, shelf: Shelf) -> Draw:
    bottle = shelf.bottle[promise.bottle]
    line = facts.lines[bottle.line]
    strength = shelf.verdict_planned(promise.bottle, promise.on).strengths.expected
    return Draw(
        promise.amount, line.kind, bottle=promise.bottle, line=line.key,
        strength=None if line.form is Form.SOLID else strength,
    )  # fmt: skip


def _reasons(facts: Facts, want: Want, batch: Batch | None, shelf: Shelf) -> list[str]:
    words = [want.need.sum_in_words]
    words += [_already(want.need, drawn) for drawn in want.need.drawn]
    held = want.promises if want.settled is Settled.HELD else []
    words += [_why_this_bottle(facts, want.need, promise, shelf) for promise in held]
    if batch:
        # whoever takes a bottle away should know whose else it is
        with_whom = [need.booking.number for need in batch.needs]
        shared = [
            number for number in dict.fromkeys(with_whom) if number != want.need.booking.number
        ]
        together = f", together with {', '.join(shared)}" if shared else ""
        words.append(f"made as {batch.id} on {batch.start[0]}{together}")
    if want.settled is Settled.SHOP:
        words.append(f"bought at a shop by {facts.calendar.before(want.need.on, 1)}")
    if outcome_of(want, batch) in (Outcome.SHORT, Outcome.REFUSED):
        allowed = sorted(want.need.recipe.swaps, key=lambda swap: swap.instead)
        swaps = [swap for swap in allowed if swap.line == want.need.line.key]
        words += [f"{swap.instead} is allowed instead: {swap.note}" for swap in swaps]
    for part in want.tree()[1:] if outcome_of(want, batch) is Outcome.BUY else ():
        words += part.reasons
        words += [f"{number} not used: {why}" for number, why in dict.fromkeys(part.passed_over)]
    said = " ".join(want.reasons)
    words += list(dict.fromkeys(want.reasons))
    passed = [(number, why) for number, why in want.passed_over if why not in said]
    words += [f"{number} not used: {why}" for number, why in dict.fromkeys(passed)]
    return words


def _already(need: Need, drawn: Drawn) -> str:
    return f"{say(drawn.amount, need.line.kind)} of {drawn.bottle} already drawn for it {drawn.on}"


def _why_this_bottle(facts: Facts, need: Need, promise: Promise, shelf: Shelf) -> str:
    judged = shelf.verdict_planned(promise.bottle, promise.on, promise.purpose)
    strengths = judged.strengths
    words = f"{say(promise.amount, need.line.kind)} from {promise.bottle}"
    if strengths.expected is not None and need.line.form is not Form.SOLID:
        basis = how_known(shelf.bottle[promise.bottle], strengths)
        expected = say_strength(need.line, strengths.expected)
        sure = "expected" if strengths.usual is None else "at least"
        words += f", {sure} {expected} on the day ({basis})"
    until = judged.usable_until
    return words + (f", good until {until}" if until else "")


def makes(facts: Facts, batches: list[Batch]) -> list[Make]:
    """Every batch as a make, in order of the day work starts."""
    load = load_of(facts, batches)
    return [_make(facts, batch, load) for batch in batches]


def _make(facts: Facts, batch: Batch, load: Load) -> Make:
    line, run = batch.line, batch.run
    kept = keeps(facts, line, batch.heel, run.on)
    until = good_until(line, run.on)
    good, poor = measured(facts, batch)
    poor = [*poor, *too_little_to_weigh(facts, batch)]
    return Make(
        id=batch.id,
        line=line.key,
        item=line.item,
        strength=line.strength_text,
        volume=batch.volume,
        needed=run.needed,
        earliest=max(item.earliest for item in run.items),
        latest=min(item.latest for item in run.items),
        on=run.on,
        ready=_ready_day(facts, batch),
        bookings=tuple(dict.fromkeys(need.booking.number for need in batch.needs)),
        sources=tuple(_source(source) for source in batch.sources),
        fresh=batch.fresh,
        minutes=(batch.method.minutes + batch.method.finish_minutes) * batch.vessels,
        vessels=batch.vessels,
        finish_on=batch.ready[0] if batch.method.finish_minutes else None,
        finishing=batch.method.finish_minutes * batch.vessels,
        heel=batch.heel,
        heel_kept=kept,
        good_until=until,
        steps=batch.method.steps,
        cautions=cautions_of(batch),
        too_little=tuple(poor),
        reasons=tuple(reasons_of(facts, batch, load, kept=kept, drawn=[*good, *poor])),
    )


def _ready_day(facts: Facts, batch: Batch) -> date:
    return ready_at(batch.start, batch.method, facts.calendar)[0]


def _source(source: Source) -> Draw:
    kind = source.line.kind
    strength = None if source.line.form is Form.SOLID else source.strength
    if source.bottle:
        return Draw(
            source.amount, kind, bottle=source.bottle, line=source.line.key, item=source.line.item,
            strength=strength,
        )  # fmt: skip
    made = source.batch.id if source.batch else ""
    return Draw(
        source.amount, kind, item=source.line.key, line=source.line.key, make=made,
        strength=strength,
    )  # fmt: skip


def shorts(wants: Iterable[Want]) -> list[Short]:
    """What cannot be had, in the order of the bookings."""
    row = []
    for want in sorted(wants, key=lambda w: w.need.rank):
        if outcome_of(want) in (Outcome.SHORT, Outcome.REFUSED):
            need = want.need
            reason = "; ".join(dict.fromkeys(want.reasons))
            strength = need.requirement.strength_text or need.line.strength_text
            row.append(
                Short(
                    need.ref,
                    need.booking.number,
                    need.line.item,
                    strength,
                    need.missing,
                    need.line.kind,
                    reason,
                )
            )
    return row
