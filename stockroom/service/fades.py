"""How a bottle's strength runs: today, by which law, and until when it is strong enough."""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from datetime import date

from stockroom import clock
from stockroom.chemistry.strength import canonical
from stockroom.errors import BadAmount, MissingFigure, NotAllowed, StockroomError, UnknownName
from stockroom.keeping import hypochlorite
from stockroom.keeping.course import Fading, Mark, course
from stockroom.keeping.record import Record
from stockroom.keeping.rule_words import rule_in_words
from stockroom.keeping.rules import Rule
from stockroom.keeping.typed_law import FadingSum
from stockroom.keeping.typed_law import Typed as Typed
from stockroom.keeping.typed_law import fading_sum as sum_of
from stockroom.measure.amounts import BASE_UNIT, Kind
from stockroom.measure.parsing import parse_strength
from stockroom.measure.strengths import Strength, StrengthUnit
from stockroom.planning.choosing.fitness import bounds
from stockroom.planning.facts import Facts, Firmness, Line
from stockroom.service.database import seeds_folder
from stockroom.settings import StoreAt
from stockroom.store.likeness import plain, unknown
from stockroom.store.reading import Reader, reading
from stockroom.store.rule_changes import RuleChange, changes_of
from stockroom.store.snapshot import facts_from
from stockroom.store.snapshot_bottles import bottle_of
from stockroom.store.sources import citations

# units a line's own unit turns into by a fixed factor; % w/w takes a density that changes
_LINEAR = frozenset(
    {
        StrengthUnit.MOLAR,
        StrengthUnit.GRAMS,
        StrengthUnit.WV,
        StrengthUnit.VOL,
        StrengthUnit.PPM_MV,
        StrengthUnit.CHLORINE,
    }
)
_TENTH_GONE, _WEAK = 0.9, 0.8


def fading(path: StoreAt, number: str, *, as_at: date, below: tuple[str, ...] = ()) -> Fading:
    """How a bottle fades, as at a day; `below` are strengths to date, as typed.

    Raises: UnknownName with the nearest numbers; NotAllowed for what has no strength;
    BadAmount and MissingFigure for a strength that cannot be set beside its label.
    """
    with reading(path) as reader:
        return fading_among(reader, facts_from(reader, as_at), number, below=below)


def fading_among(
    reader: Reader, known: Facts, number: str, *, below: tuple[str, ...] = ()
) -> Fading:
    """The same among facts read before, as at their day. Raises: as `fading`."""
    as_at, found = known.as_at, _number(reader, number, known)
    bottle = bottle_of(reader, found, as_at, every_log=True)
    changes = changes_of(reader, bottle.line) if bottle else ()
    if bottle is None:
        raise UnknownName(f"{found} was not there yet on {as_at}.", "Give a later day.")
    line = known.lines[bottle.line]
    if bottle.record.gone:
        raise NotAllowed(f"{found} {line.key} is gone: discarded.", f"stockroom diary {found}")
    if line.kind is not Kind.VOLUME:
        raise NotAllowed(
            f"{found} {line.key} is no solution: it is counted in {BASE_UNIT[line.kind]}.",
            f"What is known of it: stockroom diary {found}",
        )
    marks = [*_typed(below, line), *_of_label(bottle.record), *_booked(known, line)]
    runs = course(bottle.record, line.rules, as_at, marks)
    return Fading(
        bottle=found,
        line=line.key,
        unit=line.unit,
        shown=label_unit(line),
        on=as_at,
        course=runs,
        label=line.strength_text,
        cited=_cited(runs.rule, line, changes),
        practice=known.house.practice,
    )


def fading_sum(
    text: str, typed: Typed, *, below: str = "", after: str = "", today: date | None = None
) -> FadingSum:
    """How a typed strength fades by a typed law, with no store; dated from `today`.

    Raises: BadInput and BadAmount for what cannot be read or makes no law.
    """
    return sum_of(text, typed, below=below, after=after, today=today or clock.today())


def _number(reader: Reader, text: str, known: Facts) -> str:
    numbers = [str(row[0]) for row in reader.ask("SELECT number FROM bottle ORDER BY id")]
    for number in numbers:
        if plain(number) == plain(text):
            return number
    line = _line_named(known, text)
    held = [bottle.number for bottle in known.bottles if line and bottle.line == line]
    if line:
        here = f"Bottles of it: {', '.join(held)}." if held else "No bottle of it is here."
        raise UnknownName(f"{line} is a line, and a bottle is asked for.", here)
    raise unknown("bottle", text, numbers)


def _line_named(known: Facts, text: str) -> str:
    """The line a text names in full, "" where it names none."""
    names = {plain(line.key): line.key for line in known.lines.values()}
    return names.get(plain(text), "") if text.strip() else ""


def _cited(rule: Rule | None, line: Line, changes: Iterable[RuleChange]) -> str:
    if rule is None:
        return ""
    if rule.house:
        words = rule_in_words(rule, line.unit)
        said = [one for one in changes if one.rule == rule.kind and one.after == words]
        if said:
            return f"house rule of {said[-1].on}, {said[-1].by}: {said[-1].why}"
    # a house may say which law it goes by, and the law still has its own source
    if rule.law is not None and rule.law.named == hypochlorite.NAME:
        return hypochlorite.SOURCE
    return citations(seeds_folder()).get(rule.source, rule.source)


def label_unit(line: Line) -> tuple[str, float]:
    """The unit of the label where it is a fixed multiple of the line's own, else that."""
    try:
        label = parse_strength(line.strength_text)
    except StockroomError:
        return line.unit, 1.0
    if not line.strength or label.unit not in _LINEAR:
        return line.unit, 1.0
    return str(label.unit), label.value / line.strength


def _typed(below: tuple[str, ...], line: Line) -> Iterator[Mark]:
    for text in below:
        strength = parse_strength(text, where="--below")
        yield Mark(strength.text, _beside(strength, line))


def _beside(strength: Strength, line: Line) -> float:
    if line.strength is None and not line.unit:
        raise NotAllowed(f"{line.key} has no strength.", "Name a bottle of a solution.")
    found = canonical(strength, molar_mass=line.molar_mass, density=line.density, of=line.substance)
    if found.unit != line.unit:
        raise BadAmount(
            f'"{strength.text}" cannot be set beside {line.key}, which is counted in {line.unit}.',
            f"Give it in {line.unit}.",
        )
    if found.value <= 0:
        raise MissingFigure(f'--below "{strength.text}" is nothing.', "Give a strength above 0.")
    return found.value


def _of_label(record: Record) -> Iterator[Mark]:
    if record.nominal:
        for part in (_TENTH_GONE, _WEAK):
            yield Mark(f"{100 * part:.0f} % of its label", part * record.nominal)


def _booked(known: Facts, line: Line) -> Iterator[Mark]:
    """The lowest strength of each booking still to come that takes this very line, by day."""
    rows = []
    for booking in known.bookings:
        if booking.on < known.as_at or booking.firmness in (Firmness.DONE, Firmness.DROPPED):
            continue
        for requirement in known.recipes[booking.recipe, booking.version].requirements:
            limits = bounds(requirement) if requirement.line == line.key else None
            if limits:
                rows.append((booking.on, booking.number, limits[0]))
    for on, number, lowest in sorted(rows):
        yield Mark(number, lowest, by=on)
