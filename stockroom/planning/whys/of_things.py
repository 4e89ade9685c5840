"""The reasons behind a make, an order, a bottle, a day, a department's money, a recipe."""

from __future__ import annotations

from collections.abc import Iterable
from datetime import date

from stockroom.keeping.verdict import Verdict, verdict
from stockroom.measure.amounts import Kind
from stockroom.planning.amounts import say, say_left, say_strength
from stockroom.planning.decisions import CheckToDo, Coming, Make, Order, Plan
from stockroom.planning.facts import Bottle, Facts, Firmness, Form
from stockroom.planning.tell import inherited_doubt


def makes(plan: Plan, wanted: str) -> list[str]:
    """A make by its number: what, when and between which days, and its reasons."""
    for make in plan.makes:
        if make.id.lower() == wanted:
            return [make_head(make), *make.reasons, *checks_of(plan, make.id)]
    return []


def make_head(make: Make) -> str:
    """A make in one line: "M14 528 cm³ of ..., started DAY, ready DAY (from DAY to DAY)"."""
    volume = say(make.volume, Kind.VOLUME)
    words = f"{make.id} {volume} of {make.item} {make.strength}".rstrip()
    return f"{words}, started {make.on}, ready {make.ready} (from {make.earliest} to {make.latest})"


def orders(plan: Plan, wanted: str) -> list[str]:
    """An order by its number: packs, days, money and whose, and its reasons."""
    for order in plan.orders:
        if order.id.lower() == wanted:
            return order_rows(order)
    return []


def order_rows(order: Order) -> list[str]:
    """An order in one line, then why it is made."""
    shares = ", ".join(f"{code} £{pence / 100:.2f}" for code, pence in order.shares)
    bookings = f"for {', '.join(order.for_bookings)}" if order.for_bookings else ""
    # the days already name the bookings that wait; the others are told where there is room
    named = " ".join(order.reasons)
    told = all(number in named for number in order.for_bookings)
    return [
        f"{order.id} {order.packs} × {order.pack} of {order.line}: order by {order.order_by}, "
        f"needed {order.need_by}, £{order.pence / 100:.2f} ({shares})",
        *order.reasons,
        "" if told else bookings,
    ]


def placed(plan: Plan, wanted: str) -> list[str]:
    """An order already placed, by its number: what is still to come, when, and for whom."""
    return [row for one in plan.on_order if one.number.lower() == wanted for row in _coming(one)]


def coming_of(plan: Plan, line: str) -> list[str]:
    """What is on order of a line, in one line each."""
    return [_coming(one)[0] for one in plan.on_order if one.line == line]


def _coming(one: Coming) -> list[str]:
    late = f", {one.overdue} open days overdue" if one.overdue else ""
    of = f" from {one.supplier}" if one.supplier else ""
    bookings = f"for {', '.join(one.bookings)}" if one.bookings else "no booking waits for it"
    return [
        f"{one.number} {say(one.amount, one.kind)} of {one.line} to come{of}, placed "
        f"{one.placed_on}, expected {one.expected}{late}, counted on from {one.counts}",
        bookings,
        *(each.text for each in one.instead),
    ]


def bottles(facts: Facts, plan: Plan, wanted: str) -> list[str]:
    """A bottle by its number: how it stands, its strengths, what it is promised to."""
    for bottle in facts.bottles:
        if bottle.number.lower() == wanted:
            return [
                *_bottle_rows(facts, plan, bottle),
                *checks_of(plan, bottle.number),
                *noted(plan, bottle.number),
            ]
    return []


def _bottle_rows(facts: Facts, plan: Plan, bottle: Bottle) -> Iterable[str]:
    line = facts.lines[bottle.line]
    judged = verdict(bottle.record, line.rules, plan.as_at)
    left = say_left(bottle, line)
    until = f", {judged.until_word} {judged.good_until}" if judged.good_until else ""
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


def checks_of(plan: Plan, subject: str, booking: str = "") -> list[str]:
    """The checks of a bottle or a make, in words; only those for a booking, where one is given."""
    return [
        _check(check)
        for check in plan.checks
        if check.subject == subject and (not booking or booking in check.bookings)
    ]


def _check(check: CheckToDo) -> str:
    window = f"from {check.not_before} to {check.by}" if check.not_before < check.by else ""
    days = ", ".join(filter(None, (f"best {check.best}", window)))
    hangs = f", for {', '.join(check.bookings)}" if check.bookings else ""
    mild = " (nothing waits for it)" if check.optional else ""
    return f"check: {check.what} {check.subject}, {days}{hangs}: {check.reason}{mild}"


def noted(plan: Plan, *subjects: str) -> list[str]:
    """The notes and guesses of the plan about any of these subjects."""
    # the remark on a bottle is told with the bottle itself
    notes = [note for note in plan.notes if note.subject in subjects]
    told = [f"note: {note.text}" for note in notes if "remark on the bottle" not in note.text]
    return [*told, *(f"guess: {g.text}" for g in plan.guesses if g.subject in subjects)]


def day_rows(facts: Facts, plan: Plan, wanted: str) -> list[str]:
    """A day, ISO: what is booked, worked on, checked and to be ordered by then."""
    try:
        day = date.fromisoformat(wanted)
    except ValueError:
        return []
    booked = [b for b in facts.bookings if b.on == day and b.firmness is not Firmness.DROPPED]
    making = [make for make in plan.makes if day in (make.on, make.finish_on)]
    minutes = minutes_on(plan, day)
    checks = [f"{check.what} {check.subject}" for check in plan.checks if check.best == day]
    buying = [f"{order.id} {order.line}" for order in plan.orders if order.order_by == day]
    closed = "" if facts.calendar.is_open(day) else ", a closed day"
    return [
        f"{day}{closed}: {_listed([b.number for b in booked], 'booked', 'nothing booked')}",
        _listed([f"{m.id} {m.line}" for m in making], f"{minutes} min of work", "no make"),
        _listed(checks, "checks", ""),
        _listed(buying, "order by today" if day == plan.as_at else "order by then", ""),
        *noted(plan, day.isoformat()),
    ]


def minutes_on(plan: Plan, day: date) -> int:
    """Hands-on minutes on a day, checks and finishing work counted on their own days."""
    load = next((load for load in plan.loads if load.day == day), None)
    return load.minutes if load else sum(_minutes_on(make, day) for make in plan.makes)


def _minutes_on(make: Make, day: date) -> int:
    begun = make.minutes - make.finishing if make.on == day else 0
    return begun + (make.finishing if (make.finish_on or make.on) == day else 0)


def departments(facts: Facts, plan: Plan, wanted: str) -> list[str]:
    """A department by its code: what its orders come to, of what it has left."""
    for one in facts.departments:
        if one.code.lower() != wanted:
            continue
        shares = [(o, pence) for o in plan.orders for code, pence in o.shares if code == one.code]
        total = sum(pence for _, pence in shares)
        left = "" if one.left_pence is None else f" of £{one.left_pence / 100:.2f} left"
        row = [f"{order.id} £{pence / 100:.2f} {order.item}" for order, pence in shares]
        booked = [b.number for b in facts.bookings if b.department == one.code]
        return [
            f"{one.code} {one.name}: orders come to £{total / 100:.2f}{left}",
            _listed(row, "its shares", "no order of this plan is for it"),
            _listed(booked, "its bookings", "no booking of this term is its own"),
            *noted(plan, one.code),
        ]
    return []


def recipes(facts: Facts, plan: Plan, wanted: str) -> list[str]:
    """A recipe by its code or title: where it is booked, what it asks for, bars and swaps."""
    known = [
        recipe
        for recipe in facts.recipes.values()
        if wanted in (recipe.code.lower(), recipe.title.lower())
    ]
    if not known:
        return []
    recipe = max(known, key=lambda one: one.version)
    booked = [f"{b.number} {b.on}" for b in facts.bookings if b.recipe == recipe.code]
    asks = [
        f"{one.number} {one.line} {say(one.amount, facts.lines[one.line].kind)} per {one.per}"
        for one in recipe.requirements
        if one.line in facts.lines
    ]
    barred = [f"{bar.substance} ({bar.reason})" for bar in recipe.bars]
    swaps = [f"{swap.instead} for {swap.line}" for swap in recipe.swaps]
    return [
        f"{recipe.code} {recipe.title}, version {recipe.version}",
        _listed(booked, "booked", "not booked this term"),
        _listed(asks, "asks for", "asks for nothing"),
        _listed(barred, "bars", ""),
        _listed(swaps, "allows", ""),
    ]


def _listed(things: list[str], what: str, none: str) -> str:
    return f"{what}: {', '.join(things)}" if things else none
