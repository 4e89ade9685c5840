"""Making up: what went into it is drawn, what came of it is a new bottle with its parents."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

from stockroom.errors import BadAmount, NotAllowed, NotEnough, StockroomError
from stockroom.keeping.rules import RuleKind
from stockroom.keeping.verdict import USABLE, Condition, Verdict, verdict
from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.formats import format_amount, format_number, format_strength
from stockroom.planning.amounts import draw_for, per_gram
from stockroom.planning.derive import with_derived
from stockroom.planning.facts import Bottle, Facts, Form, Ingredient, Line, Method
from stockroom.planning.known import by_dilution
from stockroom.service.answers import Done
from stockroom.service.asking import check_make
from stockroom.service.heel import Meant, meant_for, reached, served_from, told_of_make
from stockroom.service.known import known_from
from stockroom.service.standing import told_of_place
from stockroom.service.taking import open_if_sealed, take
from stockroom.service.touching import check_may_open
from stockroom.service.work import Work, check_in_use, working
from stockroom.settings import StoreAt
from stockroom.store import names, tables
from stockroom.store.kinds import EntryKind, made_note
from stockroom.store.ledger import Event, next_bottle_number
from stockroom.store.snapshot import facts_from


@dataclass(frozen=True, slots=True)
class Source:
    """A bottle that gives one ingredient: how much of it, in micro-units, and its verdict."""

    bottle: Bottle
    line: Line
    amount: int
    verdict: Verdict

    @property
    def words(self) -> str:
        """The draw in words, with the strength it was worked out from."""
        amount = format_amount(Amount(self.line.kind, self.amount))
        expected = self.verdict.strengths.expected
        if self.line.form is Form.SOLID and self.bottle.assay is not None:
            assay = f"assay {format_number(self.bottle.assay * 100)} %, its own"
            return f"{amount} of {self.bottle.number} {self.line.key} ({assay})"
        if self.line.form is Form.SOLID or expected is None:
            return f"{amount} of {self.bottle.number} {self.line.key}"
        basis = f"from its {self.verdict.strengths.basis} strength"
        if self.verdict.strengths.found is None and self.bottle.known_by:
            basis = self.bottle.known_by
        strength = f"{format_strength(expected, self.line.unit)}, {basis}"
        return f"{amount} of {self.bottle.number} {self.line.key} ({strength})"


def make_up(
    path: StoreAt,
    line: str,
    volume: Amount,
    *,
    sources: list[str],
    place: str | None,
    sure: bool = False,
    on: date | None,
    today: date,
    by: str,
) -> Done:
    """Make so much of a line: draws, the new bottle and its parents in one piece, or nothing.

    `sources` are bottle numbers, one for each ingredient that is not to be
    chosen here; the choice is the good one going past soonest that is enough.
    Raises: NotAllowed for what is never kept, has no method, or a source that
    does not belong, and for what `asking` asks about unless `sure`; NotEnough,
    MissingFigure, UnknownName, BadAmount.
    """
    with working(path, on=on, today=today, by=by) as work:
        # as on the day of making: a draw entered late is made from what was there then
        known = with_derived(facts_from(work.reader, work.on))
        product = known.lines[names.find_line(work.session, line).key]
        method = _method(known, product)
        _check_volume(product, volume)
        given = [_given(work, known, number) for number in sources]
        _check_belong(method, given)
        meant = meant_for(known, product, volume.micro)
        if not sure:
            named = {bottle.number for bottle in given}
            check_make(work, product, method, volume, named, meant)
        chosen = [_source(known, product, part, given, volume.micro) for part in method.ingredients]
        bottle, made, details = _write(
            work, product, volume, chosen, place, meant.bookings, _carried(method, chosen)
        )
        told = _told(work, known, product, volume, bottle.number, meant)
        judged = work.verdict(bottle)
        until = f"; {judged.until_word} {judged.good_until}" if judged.good_until else ""
        text = f"Made {bottle.number}: {format_amount(volume)} of {product.key}{until}."
        # last where it stands: that is what there is still time to change
        details = (*details, *told, *told_of_place(work, bottle))
        # else it is counted and looked for at no place
        following = "" if place else f"stockroom move {bottle.number} PLACE"
        return work.done(text, bottle, made, following=following, details=details)


def _told(
    work: Work, known: Facts, product: Line, volume: Amount, bottle: str, meant: Meant
) -> list[str]:
    # whom the plan meant it for is one thing, whom it serves now that it stands here another
    if meant.bookings:
        meant = reached(meant, served_from(known_from(work.reader, work.on), bottle))
    return told_of_make(known, product, volume, bottle, meant)


def _method(known: Facts, product: Line) -> Method:
    never = next((rule for rule in product.rules if rule.kind is RuleKind.NEVER), None)
    if product.never_kept or never:
        reason = f": {product.never_kept}" if product.never_kept else ""
        raise NotAllowed(
            f"{product.item[:1].upper()}{product.item[1:]} is never kept{reason.rstrip('.')}."
            " There is no test that extends it.",
            "Mix it just before use and destroy it after.",
        )
    method = known.methods.get(product.key)
    if method is None or not method.ingredients:
        raise NotAllowed(
            f"{product.key} has no method: nothing says what it is made from.",
            f"stockroom add ingredients line='{product.key}' ingredient=…",
        )
    return method


def _check_volume(product: Line, volume: Amount) -> None:
    if volume.kind is not Kind.VOLUME or volume.micro <= 0:
        raise BadAmount(
            f"{format_amount(volume)} of {product.key} cannot be made up.", "Give a volume, in cm³."
        )


def _given(work: Work, known: Facts, number: str) -> Bottle:
    row = work.bottle(number)
    # first, since what is said of a bottle set aside is to look at it
    check_may_open(work, row)
    check_in_use(work, row)
    return next(bottle for bottle in known.bottles if bottle.number == row.number)


def _check_belong(method: Method, given: list[Bottle]) -> None:
    for place, bottle in enumerate(given):
        fits = [part for part in method.ingredients if bottle.line in part.lines]
        if bottle.line == method.line and not fits:
            raise NotAllowed(
                f"{bottle.number} is {bottle.line} already: a solution is not made from itself.",
                f"Draw from {bottle.number}, or name what it is made from with --from.",
            )
        if not fits:
            takes = " or ".join(line for part in method.ingredients for line in part.lines)
            raise NotAllowed(
                f"{bottle.number} holds {bottle.line}; {method.line} is made from {takes}.",
                "Name another bottle with --from.",
            )
        if any(other.line in fits[0].lines for other in given[:place]):
            raise NotAllowed(
                f"{bottle.number} is a second source of {bottle.line}; one bottle gives each"
                " ingredient.",
                "Make two batches, each from one bottle.",
            )


def _source(
    known: Facts, product: Line, part: Ingredient, given: list[Bottle], volume: int
) -> Source:
    # whoever names a bottle has it in hand: no other is preferred to it
    named = [bottle for bottle in given if bottle.line in part.lines]
    if named:
        return _judged(known, product, part, named[0], volume)
    for key in part.lines:
        found = _soonest(known, product, part, key, volume)
        if found is not None:
            return found
    raise NotEnough(
        f"No bottle of {' or '.join(part.lines)} is good and holds enough for"
        f" {format_amount(Amount(Kind.VOLUME, volume))} of {product.key}.",
        "Make less, or name a bottle with --from.",
    )


def _judged(known: Facts, product: Line, part: Ingredient, bottle: Bottle, volume: int) -> Source:
    line = known.lines[bottle.line]
    judged = verdict(bottle.record, line.rules, known.as_at)
    # a quality date is the person's to judge; a safety date is not
    if judged.safety and judged.condition not in USABLE:
        raise NotAllowed(
            f"{bottle.number} is {judged.condition}: {judged.decided_by}.",
            f"{judged.warning.capitalize()}.",
        )
    # a solid is weighed by this bottle's own assay, as the plan has it
    solid = line.form is Form.SOLID
    held = per_gram(line, bottle) if solid else judged.strengths.expected
    amount = draw_for(line, held, product, volume, part.per_dm3)
    return Source(bottle, line, amount, judged)


def _soonest(known: Facts, product: Line, part: Ingredient, key: str, volume: int) -> Source | None:
    """The good bottle of a line that holds enough and goes past first; ties by number."""
    fitting = []
    for bottle in known.bottles:
        if bottle.line != key:
            continue
        try:
            source = _judged(known, product, part, bottle, volume)
        except StockroomError:
            # too weak, of unknown strength or not safe to open: another may do
            continue
        if source.verdict.condition in USABLE and source.amount <= bottle.left:
            fitting.append(source)
    return min(fitting, key=_past_first, default=None)


def _past_first(source: Source) -> tuple[date, str]:
    return source.verdict.good_until or date.max, source.bottle.number


def _write(
    work: Work,
    product: Line,
    volume: Amount,
    chosen: list[Source],
    place: str | None,
    bookings: tuple[str, ...],
    carried: str,
) -> tuple[tables.Bottle, tables.Entry, tuple[str, ...]]:
    # first, since its number stands in the note of every draw
    bottle = _new_bottle(work, product, volume)
    details: list[str] = []
    for source in chosen:
        row = work.bottle(source.bottle.number)
        note = made_note(bottle.number)
        drawn = take(work, row, Event(EntryKind.DRAWN, change=-source.amount, note=note))
        details += open_if_sealed(work, row, drawn)
        details += [f"Took {source.words}.", *_doubt(source)]
        # the lineage is how a spoiled source finds what was made from it
        _link(work, bottle, row)
    place_id = work.place_id(place) if place else None
    if carried:
        details.append(f"Known {carried}: close enough; an exact line wants it titrated.")
    made = Event(
        EntryKind.MADE,
        change=volume.micro,
        # what the draw was worked out to give: the label's strength, whatever the source's was
        strength=product.strength if carried else None,
        strength_text=carried,
        place_id=place_id,
        booking=";".join(bookings),
    )
    entry = work.write(bottle, made)
    return bottle, entry, tuple(details)


def _carried(method: Method, chosen: list[Source]) -> str:
    """How the strength of the make is known, where what was found of its source gives it."""
    solutes = [
        source
        for part, source in zip(method.ingredients, chosen, strict=True)
        if part.per_dm3 is None and source.line.form is not Form.SOLID
    ]
    # of two solutes neither alone says how strong it is
    if len(solutes) != 1:
        return ""
    return by_dilution(solutes[0].bottle, solutes[0].verdict.strengths)


def _doubt(source: Source) -> tuple[str, ...]:
    # the person at the bench has the bottle in hand and decides; the record must show it
    if source.verdict.condition in (Condition.SOUND, Condition.WATCH):
        return ()
    number, judged = source.bottle.number, source.verdict
    return (f"{number} is {judged.condition} ({judged.decided_by}): used all the same.",)


def _new_bottle(work: Work, product: Line, volume: Amount) -> tables.Bottle:
    line = names.find_line(work.session, product.key)
    assert line.id is not None
    bottle = tables.Bottle(
        number=next_bottle_number(work.session, made_here=True),
        line_id=line.id,
        size=volume.micro,
        made_on=work.on,
        made_here=True,
    )
    work.session.add(bottle)
    work.session.flush()
    return bottle


def _link(work: Work, bottle: tables.Bottle, source: tables.Bottle) -> None:
    assert bottle.id is not None and source.id is not None
    work.session.add(tables.Parent(bottle_id=bottle.id, parent_id=source.id))
