"""The page of one bottle: how it stands, its three strengths, who needs it, what happened to it."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass
from datetime import date

from stockroom.errors import NotAllowed
from stockroom.findings import Danger, DangerKind
from stockroom.keeping.course import Fading
from stockroom.keeping.record import Record
from stockroom.keeping.unnamed import is_unnamed
from stockroom.keeping.verdict import Condition
from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Facts, Form
from stockroom.planning.on_shelf import OnShelf
from stockroom.planning.whys.of_things import checks_of
from stockroom.reports.diary_text import DiaryRow, change_words, left_words, said_words
from stockroom.reports.fades_text import course_rows, strength_rows
from stockroom.reports.hazards_text import hazard_grounds, how_good
from stockroom.reports.pages.bottle_forms import Forms, forms_for
from stockroom.reports.pages.uses import NOTHING, Leaning, leaning_on, what_of
from stockroom.reports.paper.label import HazardText
from stockroom.reports.paper.label_of import hazard_text, keep_words, until_rows
from stockroom.reports.pictures.fade import Fade, fade_of
from stockroom.reports.pictures.fade_words import expected_rows, wanted_rows
from stockroom.reports.shelf_text import left_of, until_words
from stockroom.reports.words import day_heading, day_in_words, days_in_words, raised
from stockroom.safety.hazards import Hazards
from stockroom.safety.pictograms import PICTOGRAMS

ENTRIES = 200
"""Entries of the story on one page at most. Our choice: a bottle in daily use has fewer a year."""

Rows = tuple[tuple[str, str], ...]
"""A word and what is said of it, row by row."""

# the entry a story begins with, and how that came about
_CAME = {"made": "made from", "decanted in": "decanted from", "mixed": "mixed from"}


@dataclass(frozen=True, slots=True)
class EntryRow:
    """One entry as it is shown; `entered` is "" where that was the day it happened.

    `mends` and `mended_by` are the entries it puts right and is put right by; `may_mend`
    says that it can still be put right.
    """

    number: int
    happened: str
    entered: str
    by: str
    what: str
    change: str
    left: str
    said: str
    mends: int | None
    mended_by: int | None

    @property
    def may_mend(self) -> bool:
        """Whether it still counts and mends nothing itself."""
        return self.mends is None and self.mended_by is None


@dataclass(frozen=True, slots=True)
class FadePicture:
    """The picture in words: its title, what it shows in one line, and its rows."""

    title: str
    about: str
    expected: Rows
    wanted: Rows


@dataclass(frozen=True, slots=True)
class HazardPart:
    """The hazards at its strength: what a label says, the cautions, and what that rests on."""

    text: HazardText
    symbols: str
    cautions: tuple[str, ...]
    grounds: tuple[tuple[str, tuple[str, ...]], ...]
    last: str


@dataclass(frozen=True, slots=True)
class Story:
    """A page of what happened, the newest first: entries `first` to `last` of `of`.

    It is page number `sheet` of `sheets`.
    """

    entries: tuple[EntryRow, ...]
    first: int
    last: int
    of: int
    sheet: int
    sheets: int


@dataclass(frozen=True, slots=True)
class BottlePage:
    """Everything the page shows. What there is nothing to say of is empty, or None.

    `warning` has to be read before the bottle is touched, `dangers` are what can hurt somebody
    as it stands there. `came` is how it came from
    `made_from`, which like `made_into` are pairs of a number and what it holds.
    """

    number: str
    what: str
    left: str
    place: str
    condition: str
    until: str
    warning: str
    dangers: tuple[str, ...]
    gone: bool
    facts: Rows
    strengths: Rows
    course: Rows
    picture: FadePicture | None
    leaning: Leaning
    checks: tuple[str, ...]
    hazards: HazardPart | None
    came: str
    made_from: Rows
    made_into: Rows
    story: Story
    forms: Forms
    line: str
    of_stock: bool


def bottle_page(
    known: Facts,
    plan: Plan,
    seen: OnShelf,
    entries: Sequence[DiaryRow],
    fading: Fading | None,
    hazards: Hazards,
    made_from: Sequence[tuple[str, str]],
    made_into: Sequence[tuple[str, str]],
    sheet: int = 1,
) -> BottlePage:
    """The page of a bottle; `sheet` is which page of its story, or the last there is."""
    bottle, line, judged = seen.bottle, seen.line, seen.verdict
    gone = judged.condition is Condition.GONE
    return BottlePage(
        number=bottle.number,
        what=what_of(line),
        left=left_of(seen),
        place=bottle.place,
        condition=judged.condition.value,
        until=_said(until_words(seen)),
        warning=judged.warning,
        dangers=tuple(_dangers(plan, bottle.number)),
        gone=gone,
        facts=tuple(_facts(known, seen)),
        strengths=_rows(strength_rows(fading)) if fading else (),
        course=_rows(course_rows(fading)) if fading else (),
        picture=_picture(known, seen, fading) if fading else None,
        leaning=leaning_on(plan).get(bottle.number, NOTHING),
        checks=tuple(_begun(_said(text)) for text in checks_of(plan, bottle.number)),
        hazards=None if gone else _hazards(hazards, bottle.number),
        came=_came(entries),
        made_from=_rows(made_from),
        made_into=_rows(made_into),
        story=_story(entries, sheet),
        forms=forms_for(seen),
        line=line.key,
        of_stock=not line.never_kept and not is_unnamed(line.key),
    )


def _dangers(plan: Plan, number: str) -> Iterator[str]:
    """What can hurt somebody as it stands; its safety date is its condition, told already."""
    for note in plan.notes:
        told = isinstance(note, Danger) and note.kind is not DangerKind.SAFETY_DATE
        if told and note.subject == number:
            yield _begun(note.text)


def _story(entries: Sequence[DiaryRow], sheet: int) -> Story:
    sheets = max(1, -(-len(entries) // ENTRIES))
    sheet = min(sheet, sheets)
    newest = entries[::-1][(sheet - 1) * ENTRIES : sheet * ENTRIES]
    return Story(
        entries=tuple(_entry(told) for told in newest),
        first=(sheet - 1) * ENTRIES + 1 if newest else 0,
        last=(sheet - 1) * ENTRIES + len(newest),
        of=len(entries),
        sheet=sheet,
        sheets=sheets,
    )


def _said(text: str) -> str:
    return raised(days_in_words(text))


def _begun(text: str) -> str:
    """A sentence that stands alone: its first letter a capital."""
    return text[:1].upper() + text[1:]


def _rows(rows: Iterable[tuple[str, str]]) -> Rows:
    return tuple((word, _said(text)) for word, text in rows)


def _facts(known: Facts, seen: OnShelf) -> Iterable[tuple[str, str]]:
    """What is written on it or of it, and its days; what nobody wrote down is said to be so."""
    bottle, line, record = seen.bottle, seen.line, seen.bottle.record
    if bottle.remark:
        yield "remark", f'"{bottle.remark}"'
    if seen.verdict.condition is not Condition.GONE:
        yield "stands", keep_words(line, bottle.place, known.places) or "no place written down"
    yield from _days(record, made_here=bottle.made_here, nobody_knows=is_unnamed(line.key))
    if seen.verdict.condition is not Condition.GONE:
        yield from until_rows(seen.verdict)
    if bottle.cap:
        yield "cap", bottle.cap
    if line.vented_cap and bottle.cap != "vented":
        yield "cap wanted", "vented: it makes gas"
    if bottle.lot:
        yield "lot", bottle.lot
    if bottle.assay is not None or (line.form is Form.SOLID and line.assay < 1.0):
        own = bottle.assay is not None
        yield "assay", f"{100 * (bottle.assay or line.assay):.4g} %{'' if own else ', of its line'}"
    if bottle.meant_for:
        yield "made for", ", ".join(bottle.meant_for)
    if bottle.known_by:
        yield "known", _said(bottle.known_by)
    peroxide = [check for check in record.checks if check.peroxide_mg_kg is not None]
    if peroxide:
        last = max(peroxide, key=lambda check: check.on)
        yield "peroxide", f"{last.peroxide_mg_kg:g} mg/kg, {day_in_words(last.on)}"


def _days(record: Record, *, made_here: bool, nobody_knows: bool) -> Iterable[tuple[str, str]]:
    if made_here or record.made:
        yield "made", _day(record.made)
        if record.ready_on and record.ready_on != record.made:
            yield "ready from", day_in_words(record.ready_on)
    else:
        yield "received", _day(record.received)
    if record.opened or not (made_here or nobody_knows):
        guessed = " (guessed)" if record.opened_guessed else ""
        yield "opened", f"{day_in_words(record.opened)}{guessed}" if record.opened else "not yet"
    if record.printed:
        read = f", read as {_day(record.printed.day)}" if record.printed.day else ""
        unsure = " until somebody says" if record.printed.ambiguous else ""
        yield "printed on it", f'"{record.printed.text}"{read}{unsure}'


def _day(on: date | None) -> str:
    return day_in_words(on) if on else "day not written down"


def _picture(known: Facts, seen: OnShelf, fading: Fading) -> FadePicture | None:
    try:
        fade: Fade = fade_of(known, seen.bottle, fading)
    except NotAllowed:
        return None
    if not (fade.found or fade.wanted or fading.course.since):
        # a level line from a label tells no more than the label
        return None
    return FadePicture(
        title=fade.head.title,
        about=_said(fade.head.about),
        expected=_rows(expected_rows(fade)),
        wanted=_rows(wanted_rows(fade)),
    )


def _hazards(found: Hazards, number: str) -> HazardPart:
    text = hazard_text(found, number)
    return HazardPart(
        text=text,
        symbols=", ".join(PICTOGRAMS[code] for code in text.symbols),
        cautions=tuple(_begun(raised(caution)) for caution in found.cautions),
        grounds=tuple(
            (title, tuple(_said(line) for line in lines)) for title, lines in hazard_grounds(found)
        ),
        last=how_good(found),
    )


def _came(entries: Sequence[DiaryRow]) -> str:
    kinds = [told.kind for told in entries if told.undone_by is None]
    return next((_CAME[kind] for kind in kinds if kind in _CAME), "made from")


def _entry(told: DiaryRow) -> EntryRow:
    return EntryRow(
        number=told.entry,
        happened=day_heading(told.happened),
        entered="" if told.entered == told.happened else day_in_words(told.entered),
        by=told.by,
        what=told.kind,
        change=change_words(told),
        left=left_words(told),
        said=_said(said_words(told)),
        mends=told.puts_right,
        mended_by=told.undone_by,
    )
