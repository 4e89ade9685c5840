"""Step 9: notes for whoever reads the plan: hours, money, neighbours, heavy days, shops."""

from __future__ import annotations

from collections.abc import Iterable

from stockroom.findings import DO_NOT_TOUCH, Finding
from stockroom.keeping.laws import warmth
from stockroom.keeping.strength import law_of, temperature_on
from stockroom.keeping.verdict import Condition, verdict
from stockroom.measure.days import format_time
from stockroom.planning.amounts import say
from stockroom.planning.decisions import Level, Make, Order
from stockroom.planning.explode import Need
from stockroom.planning.facts import Booking, Facts, Form, Recipe
from stockroom.planning.shelf import Shelf
from stockroom.planning.standing import standing_there, where_things_stand

# five hours of hands-on work fill a day, since classes take the rest: ours, no source
HEAVY_DAY_MINUTES = 300
# common practice, no source
_MIX_BEFORE, _DESTROY_AFTER = 30, 30
_DAY_MINUTES = 24 * 60


def notes(
    facts: Facts,
    needs: tuple[Need, ...],
    makes: list[Make],
    orders: list[Order],
    levels: list[Level],
    shelf: Shelf,
) -> list[Finding]:
    """Everything worth saying that is neither a need nor a guess, in a fixed order."""
    bookings = list({need.booking.number: (need.booking, need.recipe) for need in needs}.values())
    return [
        *_hours(facts, [booking for booking, _ in bookings]),
        *_never_kept(bookings),
        *_heavy_days(makes),
        *_full_mornings(facts, makes),
        *_money(facts, orders),
        *_levels(levels),
        *_shelf(facts),
        *_remarks(shelf),
        *_shops(facts, needs),
    ]


def _hours(facts: Facts, bookings: list[Booking]) -> Iterable[Finding]:
    calendar = facts.calendar
    for booking in bookings:
        if not calendar.is_open(booking.on):
            yield Finding(booking.number, f"{booking.on} is a closed day: keep it?")
        elif booking.minute < calendar.open_from or (
            booking.minute + booking.lasts_minutes > calendar.open_to
        ):
            end = _clock(booking.minute + booking.lasts_minutes)
            yield Finding(
                booking.number,
                f"{_clock(booking.minute)} to {end} is outside staffed hours "
                f"({_clock(calendar.open_from)} to {_clock(calendar.open_to)}): "
                f"someone must be here from {_clock(booking.minute - _MIX_BEFORE)}",
            )


def _never_kept(bookings: list[tuple[Booking, Recipe]]) -> Iterable[Finding]:
    for booking, recipe in bookings:
        if recipe.never_kept:
            ends = booking.minute + booking.lasts_minutes
            mix = _clock(booking.minute - _MIX_BEFORE)
            destroy = _clock(ends + _DESTROY_AFTER)
            yield Finding(
                booking.number,
                f"{booking.on}: mix not before {mix}, destroy by {destroy} and tick it with "
                f"initials. {recipe.never_kept}",
            )


def _heavy_days(makes: list[Make]) -> Iterable[Finding]:
    minutes: dict[str, int] = {}
    movable: dict[str, list[str]] = {}
    for make in makes:
        day, finished = make.on.isoformat(), (make.finish_on or make.on).isoformat()
        # filtering on Monday what was started on Friday is Monday's work
        minutes[day] = minutes.get(day, 0) + make.minutes - make.finishing
        minutes[finished] = minutes.get(finished, 0) + make.finishing
        if make.earliest < make.on:
            movable.setdefault(make.on.isoformat(), []).append(make.id)
    for day_text, total in sorted(minutes.items()):
        if total > HEAVY_DAY_MINUTES:
            earlier = ", ".join(movable.get(day_text, [])) or "none"
            yield Finding(day_text, f"{total} min hands-on; could be made earlier: {earlier}")


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
                f"{len(due)} fresh makes take {minutes} min before {_clock(first)}, "
                f"and {first - opens} min are staffed: somebody earlier, or two at once",
            )


def _money(facts: Facts, orders: list[Order]) -> Iterable[Finding]:
    spent: dict[str, int] = {}
    for order in orders:
        for code, pence in order.shares:
            spent[code] = spent.get(code, 0) + pence
    for department in sorted(facts.departments, key=lambda one: one.code):
        total, left = spent.get(department.code, 0), department.left_pence
        if left is not None and total > left:
            yield Finding(
                department.code,
                f"orders come to £{total / 100:.2f} of £{left / 100:.2f} left: "
                f"£{(total - left) / 100:.2f} over",
            )


def _levels(levels: list[Level]) -> Iterable[Finding]:
    for level in levels:
        yield Finding(
            level.line,
            f"below {say(level.level, level.kind)} from {level.on} "
            f"({say(level.left, level.kind)} then left): see to more",
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
            yield Finding(bottle.number, text)
        # at the end of the term, so that it is dealt with before and not after
        judged = verdict(bottle.record, rules, facts.end)
        if judged.safety and judged.condition is Condition.PAST:
            text = f"safety date {judged.good_until} ({judged.decided_by}): past it, {DO_NOT_TOUCH}"
            yield Finding(bottle.number, text)


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


def _clock(minute: int) -> str:
    """A time of day; past midnight it says which day."""
    days, rest = divmod(minute, _DAY_MINUTES)
    which = {0: "", 1: " the day after", -1: " the day before"}.get(days, f" {days} days on")
    return format_time(rest) + which
