"""A whole house in words, to be read without this program: shelves, recipes, bookings, ledger.

Given a piece at a time, since a ledger may be longer than memory. No line is longer than 100
columns, but for a single word that is: this is for any editor and any printer, years from now.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping, Sequence
from datetime import date
from textwrap import wrap

from stockroom.keeping.record import CheckKind, Record
from stockroom.keeping.rule_words import rule_in_words
from stockroom.keeping.verdict import USABLE, Condition, verdict
from stockroom.measure.amounts import Amount
from stockroom.measure.days import format_time, spell_day
from stockroom.measure.formats import format_about, format_amount, format_strength
from stockroom.planning.facts import Booking, Bottle, Facts, Line, Recipe, Requirement
from stockroom.reports.diary_text import DiaryRow, entry_line
from stockroom.reports.sheet import CAUTION, PRACTICE
from stockroom.reports.words import TIED, day, money, raised

WIDE = 100

Story = tuple[str, str, Iterable[DiaryRow]]
"""A bottle's number, what it holds, and its entries."""

Term = tuple[str, date, date]
"""A term's name, its first day and its last."""


def house_text(
    known: Facts,
    bottles: Sequence[Bottle],
    stories: Iterable[Story],
    *,
    terms: Sequence[Term] = (),
    lists: Mapping[str, str] | None = None,
) -> Iterator[str]:
    """The house as at a day, section by section. `bottles` are all there ever were by then.

    `lists` says which list and row a bottle was brought in from, by its number.
    """
    yield _head(known)
    yield _section("THE HOUSE", _house(known, terms))
    yield _section(f"THE SHELVES, AS AT {day(known.as_at)}", _shelves(known, bottles, lists or {}))
    lines = sorted(known.lines.values(), key=lambda line: line.key)
    yield _section(
        "STOCK LINES, AND HOW THEY KEEP", (told for each in lines for told in _line(each))
    )
    recipes = (known.recipes[key] for key in sorted(known.recipes))
    yield _section("RECIPES", (told for each in recipes for told in _recipe(known, each)))
    yield _section("BOOKINGS", (_booking(known, each) for each in known.bookings))
    yield "\nTHE LEDGER, BOTTLE BY BOTTLE\n"
    yield "entry, happened, entered, by, what, change, left\n"
    for number, item, entries in stories:
        yield _section(f"{number} {item}", map(entry_line, entries))


def _head(known: Facts) -> str:
    about = f"Everything that was written down, as at {day(known.as_at)}"
    lines = [known.house.name, about, CAUTION, ""]
    return _plain("\n".join([PRACTICE, *lines] if known.house.practice else lines))


def _section(title: str, lines: Iterable[str]) -> str:
    told = [part for line in lines for part in _within(line)] or ["  none"]
    return _plain("\n".join(["", *_within(title, indent=""), *told, ""]))


def _within(text: str, indent: str = "  ") -> list[str]:
    # somebody's note may hold line breaks, and its second line must not read as one of ours
    parts = text.splitlines()
    if len(parts) > 1:
        text = " / ".join(part.strip() for part in parts if part.strip())
    line = f"{indent}{text.rstrip()}"
    # wrapping takes longer than all the rest, and few lines of a ledger need it
    if len(line) <= WIDE:
        return [line]
    hang = " " * (len(line) - len(line.lstrip()) + 4)
    return wrap(
        line,
        WIDE,
        subsequent_indent=hang,
        break_long_words=False,
        break_on_hyphens=False,
        replace_whitespace=False,
    )


def _plain(text: str) -> str:
    return raised(text.replace(TIED, " "))


def _house(known: Facts, terms: Sequence[Term]) -> Iterator[str]:
    for name, first, last in terms:
        yield f"term {name}, {day(first)} to {day(last)}"
    for first, last in known.calendar.closed:
        yield f"closed {day(first)} to {day(last)}"
    for place in known.places:
        warm = "" if place.temperature_c is None else f", {place.temperature_c:g} °C"
        yield f"place {place.name}, {place.title}{warm}"
    for payer in known.departments:
        left = "" if payer.left_pence is None else f", {money(payer.left_pence)} left"
        yield f"department {payer.code}, {payer.name}{left}"


def _shelves(known: Facts, bottles: Sequence[Bottle], lists: Mapping[str, str]) -> Iterator[str]:
    for bottle in sorted(bottles, key=lambda each: (each.place, each.number)):
        kind = known.lines[bottle.line].kind
        left = Amount(kind, bottle.left)
        told = format_about(left) if bottle.about and bottle.left else format_amount(left)
        size = f" of {format_amount(Amount(kind, bottle.size))}" if bottle.size else ""
        parts = [f"{bottle.place or '-'}: {bottle.number} {bottle.line}", f"{told} left{size}"]
        parts += [*_dates(bottle.record), _condition(known, bottle), *_state(known, bottle)]
        came = lists.get(bottle.number)
        yield "; ".join([*parts, came] if came else parts)


def _dates(record: Record) -> Iterator[str]:
    told = {"received": record.received, "made": record.made, "opened": record.opened}
    yield from (f"{word} {when}" for word, when in told.items() if when is not None)
    if record.printed is not None:
        yield f'printed date "{record.printed.text}"'


def _condition(known: Facts, bottle: Bottle) -> str:
    judged = verdict(bottle.record, known.lines[bottle.line].rules, known.as_at)
    condition = str(judged.condition)
    if judged.condition is Condition.SET_ASIDE:
        return f"{condition}: {bottle.record.set_aside}"
    if judged.good_until is None:
        return f"{condition}, no last good day" if judged.condition in USABLE else condition
    was = "was good until" if judged.good_until < known.as_at else judged.until_word
    if judged.condition is Condition.WATCH:
        was = "strength known until"
    return f"{condition}, {was} {judged.good_until}"


def _state(known: Facts, bottle: Bottle) -> Iterator[str]:
    unit = known.lines[bottle.line].unit
    for check in bottle.record.checks:
        if check.kind is CheckKind.FOUND and check.strength is not None:
            yield f"found {format_strength(check.strength, unit)} {check.on}"
    yield from (f"from {each}" for each in bottle.lineage)
    if bottle.remark:
        yield f'"{bottle.remark}"'


def _line(line: Line) -> Iterator[str]:
    yield ", ".join(part for part in (line.key, str(line.form), line.keep_note) if part)
    for rule in line.rules:
        yield f"    {rule_in_words(rule, line.unit)}"
    if line.never_kept:
        yield f"    never kept: {line.never_kept}"


def _recipe(known: Facts, recipe: Recipe) -> Iterator[str]:
    yield f"{recipe.code} version {recipe.version}: {recipe.title}"
    for each in recipe.requirements:
        yield f"    {each.number}. {_requirement(known, each)}"
    for bar in recipe.bars:
        yield f"    never {bar.substance}: {bar.reason}"
    for swap in recipe.swaps:
        factor = "" if swap.factor is None else f", mass × {swap.factor:g}"
        yield f"    {swap.instead} may stand in for {swap.line}{factor}. {swap.note}".rstrip()
    told = {"never kept": recipe.never_kept, "waste": recipe.waste, "handling": recipe.handling}
    for word, text in (told | {"risk assessment": recipe.assessment}).items():
        if text:
            yield f"    {word}: {text}"


def _requirement(known: Facts, each: Requirement) -> str:
    size = format_amount(Amount(known.lines[each.line].kind, each.amount))
    fresh = "made the same morning" if each.fresh else ""
    parts = (f"{each.line}, {size} per {each.per}", str(each.closeness), fresh, each.note)
    return ", ".join(part for part in parts if part)


def _booking(known: Facts, booking: Booking) -> str:
    recipe = known.recipes[booking.recipe, booking.version]
    parts = [
        f"{booking.number}  {spell_day(booking.on)} {format_time(booking.minute)}",
        f"{booking.recipe} version {booking.version} {recipe.title}",
        f"{booking.groups} groups + {booking.spare / 10:g} %",
        booking.department,
        str(booking.firmness),
        booking.room,
    ]
    return ", ".join(part for part in parts if part)
