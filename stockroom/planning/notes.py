"""Step 9: notes for whoever reads the plan: hours, money, neighbours, heavy days, shops."""

from __future__ import annotations

from collections.abc import Iterable

from stockroom.findings import Danger, DangerKind, Finding
from stockroom.keeping.laws import warmth
from stockroom.keeping.strength import law_of, temperature_on
from stockroom.keeping.verdict import USABLE, Condition, verdict
from stockroom.planning.amounts import say
from stockroom.planning.buying.money import budgets
from stockroom.planning.choosing.shelf import Shelf
from stockroom.planning.decisions import DayLoad, Level, Make, Order, Watch
from stockroom.planning.explode import Need
from stockroom.planning.facts import Facts, Form
from stockroom.planning.making.batch import Batch
from stockroom.planning.making.equipment import equipment_notes
from stockroom.planning.people import clock, hour_notes, load_notes, watch_note
from stockroom.planning.standing import past_safety_date, standing_there, where_things_stand


def notes(
    facts: Facts,
    needs: tuple[Need, ...],
    makes: list[Make],
    batches: list[Batch],
    orders: list[Order],
    levels: list[Level],
    shelf: Shelf,
    loads: list[DayLoad],
    watch: list[Watch],
) -> list[Finding]:
    """Everything worth saying that is neither a need nor a guess, in a fixed order."""
    bookings = list({need.booking.number: (need.booking, need.recipe) for need in needs}.values())
    return [
        *hour_notes(facts, bookings),
        *(watch_note(each) for each in watch if not each.ticked_by),
        *load_notes(facts, loads, makes),
        *_full_mornings(facts, makes),
        *equipment_notes(facts, batches, orders),
        *_money(facts, orders),
        *_levels(facts, levels, shelf),
        *_shelf(facts),
        *_remarks(shelf),
        *_shops(facts, needs),
    ]


def _full_mornings(facts: Facts, makes: list[Make]) -> Iterable[Finding]:
    """Mornings whose fresh makes do not fit before the first class they are for."""
    begins = {booking.number: booking.minute for booking in facts.bookings}
    opens = facts.calendar.open_from
    for day in sorted({make.on for make in makes if make.fresh}):
        row = [make for make in makes if make.fresh and make.on == day]
        # later classes are left out: while the first is in, there is time for theirs
        first = min(begins[number] for make in row for number in make.bookings)
        due = [m for m in row if min(begins[number] for number in m.bookings) == first]
        minutes = sum(make.minutes for make in due)
        if minutes > first - opens:
            yield Finding(
                day.isoformat(),
                f"{len(due)} fresh makes take {minutes} min before {clock(first)}, "
                f"and {first - opens} min are staffed: somebody earlier, or two at once",
            )


def _money(facts: Facts, orders: list[Order]) -> Iterable[Finding]:
    for budget in budgets(facts, orders):
        had, left = budget.had, budget.left
        if had is not None and left is not None and left < 0:
            total = budget.spent + budget.promised
            already = f", £{budget.spent / 100:.2f} of it ordered already" if budget.spent else ""
            yield Finding(
                budget.department,
                f"orders come to £{total / 100:.2f} of £{had / 100:.2f} left: "
                f"£{-left / 100:.2f} over{already}",
            )


def _levels(facts: Facts, levels: list[Level], shelf: Shelf) -> Iterable[Finding]:
    for level in levels:
        stands = standing_there(shelf.of_line(level.line))
        # a full jar on the shelf would make the level look wrong
        out = [
            f"{say(bottle.left, level.kind)} in {bottle.number} not counted: {judged.condition}"
            for bottle in stands
            for judged in [shelf.verdict(bottle.number, facts.as_at)]
            if judged.condition not in USABLE
        ]
        none = f", none from {level.runs_out}" if level.runs_out else ""
        yield Finding(
            level.line,
            f"below {say(level.level, level.kind)} from {level.on} "
            f"({'; '.join([f'{say(level.left, level.kind)} then left{none}', *out])}): see to more",
        )


def _shelf(facts: Facts) -> Iterable[Finding]:
    yield from where_things_stand(facts.bottles, facts.lines, facts.places)
    for bottle in standing_there(facts.bottles):
        rules = facts.lines[bottle.line].rules
        rule = law_of(bottle.record, rules, facts.as_at)
        place = temperature_on(bottle.record, facts.as_at)
        if rule and rule.law and warmth(rule.law, place) > 1.5:
            times = warmth(rule.law, place)
            text = f"stands at {place:g} °C and fades {times:.1f} times as fast there: move it"
            yield Danger(bottle.number, text, DangerKind.WARM)
        # at the end of the term, so that it is dealt with before and not after
        judged = verdict(bottle.record, rules, facts.end)
        if judged.safety and judged.condition is Condition.PAST:
            yield past_safety_date(bottle.number, judged)


def _remarks(shelf: Shelf) -> Iterable[Finding]:
    """What somebody wrote on a bottle the plan draws on."""
    for number in sorted(number for number, made in shelf.promises.items() if made):
        remark = shelf.bottle[number].remark
        if remark:
            yield Finding(number, f'remark on the bottle: "{remark}"')


def _shops(facts: Facts, needs: tuple[Need, ...]) -> Iterable[Finding]:
    for need in needs:
        if need.line.form is Form.SUNDRY:
            by = facts.calendar.before(need.on, 1)
            amount = say(need.amount, need.line.kind)
            yield Finding(need.booking.number, f"{amount} of {need.line.item} from a shop by {by}")
