"""Why? The reasons behind a need, make, order, bottle or booking, in five lines or fewer."""

from __future__ import annotations

from collections.abc import Iterable
from datetime import date

from stockroom.keeping.verdict import Verdict, verdict
from stockroom.measure.amounts import Kind
from stockroom.planning.amounts import say, say_strength
from stockroom.planning.decisions import Answer, Make, Order, Outcome, Plan
from stockroom.planning.facts import Bottle, Facts, Form
from stockroom.planning.tell import inherited_doubt
from stockroom.safety.bars import offer

# what fits on a phone beside a bench, and what a person reads at all
LINES = 5


def why(facts: Facts, plan: Plan, ref: str) -> tuple[str, ...]:
    """Explain one reference: "K08", "K08.2", "M14", "O02", "B01", or an item by name.

    Empty when nothing of that name is known.
    """
    wanted = ref.strip().lower()
    for lines in (
        _needs(plan, wanted),
        _makes(plan, wanted),
        _orders(plan, wanted),
        _bottles(facts, plan, wanted),
        _standing(facts, plan, wanted),
        _by_name(plan, wanted),
    ):
        # numbers before names: nobody names a substance "M14"
        if lines:
            return folded(lines)
    return ()


def folded(lines: Iterable[str]) -> tuple[str, ...]:
    """At most five lines: what is over is joined to the fifth."""
    row = list(lines)
    return tuple(row if len(row) <= LINES else [*row[: LINES - 1], "; ".join(row[LINES - 1 :])])


def instead(facts: Facts, plan: Plan, ref: str, other: str) -> tuple[str, ...]:
    """May `other` (a line's key) stand in for a need, or for any need of a booking?

    One line per need it is allowed for; where it is allowed for none, the refusal.
    """
    wanted = ref.strip().lower()
    answers = [a for a in plan.needs if wanted in (a.ref.lower(), a.booking.number.lower())]
    if not answers:
        return ()
    rulings = [_ruling(facts, answer, other) for answer in answers]
    # a booking may want a line twice: a swap allowed for one of them is the news
    allowed = [words for good, words in rulings if good]
    return folded(allowed or dict.fromkeys(words for _, words in rulings))


def _ruling(facts: Facts, answer: Answer, other: str) -> tuple[bool, str]:
    recipe = facts.recipes[answer.booking.recipe, answer.booking.version]
    line, offered = facts.lines[answer.line], facts.lines[other]
    good, reason = offer(recipe, line.key, offered.key, (line.substance, offered.substance))
    barred = reason.startswith("barred")
    what = "" if barred else f" for {line.item} in {answer.ref}"
    verb = "allowed" if good else "refused"
    return good, f"{offered.item}{what} in {recipe.code}: {verb}: {reason}".replace(
        f"{verb}: {verb}", verb
    )


def _needs(plan: Plan, wanted: str) -> list[str]:
    for answer in plan.needs:
        if answer.ref.lower() == wanted:
            return [_head(answer), *answer.reasons]
    of_booking = [a for a in plan.needs if a.booking.number.lower() == wanted]
    if not of_booking:
        return []
    booking = of_booking[0].booking
    head = f"{booking.number} {of_booking[0].recipe_title}, {booking.on}, {booking.groups} groups"
    return [head, *_by_outcome(of_booking, plan)]


def _by_outcome(answers: list[Answer], plan: Plan) -> Iterable[str]:
    # the worst first, since the fifth line swallows the rest
    for outcome in (Outcome.REFUSED, Outcome.SHORT, Outcome.BUY, Outcome.MAKE, Outcome.HAVE):
        row = [a for a in answers if a.outcome is outcome]
        if not row:
            continue
        words = "; ".join(_briefly(answer, plan) for answer in row)
        yield f"{outcome}: {words}"


def _briefly(answer: Answer, plan: Plan) -> str:
    where = [draw.bottle for draw in answer.draws if draw.bottle]
    where += [made for made in (answer.make, answer.order) if made]
    words = f"{answer.ref} {answer.item} {answer.strength}".rstrip()
    if answer.outcome in (Outcome.SHORT, Outcome.REFUSED):
        reason = next((s.reason for s in plan.short if s.ref == answer.ref), "")
        return f"{words}: {reason}"
    return f"{words} ({', '.join(where)})" if where else words


def _head(answer: Answer) -> str:
    amount = say(answer.amount, answer.kind)
    words = f"{answer.ref} {amount} of {answer.item} {answer.strength}".rstrip()
    return f"{words} for {answer.booking.on}: {answer.outcome}"


def _makes(plan: Plan, wanted: str) -> list[str]:
    for make in plan.makes:
        if make.id.lower() == wanted:
            return [_make_head(make), *make.reasons]
    return []


def _make_head(make: Make) -> str:
    volume = say(make.volume, Kind.VOLUME)
    words = f"{make.id} {volume} of {make.item} {make.strength}".rstrip()
    return f"{words}, started {make.on}, ready {make.ready} (from {make.earliest} to {make.latest})"


def _orders(plan: Plan, wanted: str) -> list[str]:
    for order in plan.orders:
        if order.id.lower() == wanted:
            return _order_lines(order)
    return []


def _order_lines(order: Order) -> list[str]:
    shares = ", ".join(f"{code} £{pence / 100:.2f}" for code, pence in order.shares)
    return [
        f"{order.id} {order.packs} × {order.pack} of {order.line}: order by {order.order_by}, "
        f"needed {order.need_by}, £{order.pence / 100:.2f} ({shares})",
        *order.reasons,
    ]


def _bottles(facts: Facts, plan: Plan, wanted: str) -> list[str]:
    for bottle in facts.bottles:
        if bottle.number.lower() == wanted:
            return list(_bottle_lines(facts, plan, bottle))
    return []


def _bottle_lines(facts: Facts, plan: Plan, bottle: Bottle) -> Iterable[str]:
    line = facts.lines[bottle.line]
    judged = verdict(bottle.record, line.rules, plan.as_at)
    left = say(bottle.left, line.kind)
    until = f", good until {judged.good_until}" if judged.good_until else ""
    yield (
        f"{bottle.number} {line.key}, {left} left in {bottle.place or 'no place'}: "
        f"{judged.condition}{until}"
    )
    warned = f"; {judged.warning}" if judged.warning else ""
    yield f"decided by: {judged.decided_by}{warned}"
    if line.form is not Form.SOLID and line.strength:
        yield _three_strengths(facts, bottle, judged, plan.as_at)
    doubt = inherited_doubt(facts, bottle)
    if doubt or bottle.remark:
        yield "; ".join(filter(None, (doubt, bottle.remark and f'remark: "{bottle.remark}"')))
    yield _promised(plan, bottle)


def _three_strengths(facts: Facts, bottle: Bottle, judged: Verdict, as_at: date) -> str:
    line, strengths = facts.lines[bottle.line], judged.strengths
    found = f"found {say_strength(line, strengths.found)} on {strengths.found_on}"
    known = found if strengths.found else bottle.known_by or "never found"
    words = (
        f"label {line.strength_text}; {known}; "
        f"expected {say_strength(line, strengths.likely)} on {as_at}"
    )
    caution = bottle.record.caution
    if caution is None:
        return words
    return f"{words}; at least {say_strength(line, strengths.expected)}, by {caution.basis}"


def _promised(plan: Plan, bottle: Bottle) -> str:
    uses = [
        (answer.ref, draw.amount, draw.kind)
        for answer in plan.needs
        for draw in answer.draws
        if draw.bottle == bottle.number
    ]
    uses += [
        (make.id, source.amount, source.kind)
        for make in plan.makes
        for source in make.sources
        if source.bottle == bottle.number
    ]
    if not uses:
        return "nothing in this plan draws on it"
    total = say(sum(amount for _, amount, _ in uses), uses[0][2])
    row = ", ".join(f"{ref} {say(amount, kind)}" for ref, amount, kind in uses)
    return f"promised {total}: {row}"


def _standing(facts: Facts, plan: Plan, wanted: str) -> list[str]:
    """What there is to say of a booking the plan leaves out: dropped, done, over, outside."""
    for booking in facts.bookings:
        if booking.number.lower() == wanted:
            title = facts.recipes[booking.recipe, booking.version].title
            over = f", over as at {plan.as_at}" if booking.on < plan.as_at else ""
            return [f"{booking.number} {title}, {booking.on}: {booking.firmness}{over}"]
    return []


def _by_name(plan: Plan, wanted: str) -> list[str]:
    lines = [
        line
        for order in plan.orders
        if wanted in order.line.lower()
        for line in _order_lines(order)
    ]
    lines += [_head(answer) for answer in plan.needs if wanted in answer.line.lower()]
    return lines
