"""What one row says of a bottle, and everything about it that must be asked or refused."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field, replace
from datetime import date

from stockroom.bringing.amounts import UNIT_OPTIONS, Held, read_held
from stockroom.bringing.answers import Answers
from stockroom.bringing.dates import DateOrder, read_day, read_printed, says_nothing
from stockroom.bringing.decimals import Decimals
from stockroom.bringing.doubts import Doubts
from stockroom.bringing.known import KnownLine
from stockroom.bringing.line_of_row import line_of_row
from stockroom.bringing.names import Matcher
from stockroom.bringing.places import NO_PLACE, NOT_FOUND, Places
from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.days import PrintedDate, spell_day
from stockroom.measure.reading import tidy

_CLOSED = frozenset(
    "no; n; unopened; sealed; new; not opened; closed; full; -; –; none; n/a".split("; ")
)
_OPEN = frozenset("yes; y; opened; open; x; ✓; ✔; true; part used; in use".split("; "))
_OPENED = "opened, on a day nobody wrote: the earliest it can have been"


@dataclass(frozen=True, slots=True)
class Incoming:
    """Bottles as a row tells of them: `count` alike, each with `left` in it.

    `line` and `left` are None while they must be asked about, `size` where nobody wrote it.
    `opened_sometime` is opened on a day nobody wrote; `about` an amount by eye; `assay` a
    fraction. `place` is a short name, "" for none.
    """

    line: KnownLine | None
    left: Amount | None
    size: Amount | None = None
    count: int = 1
    opened: date | None = None
    opened_sometime: bool = False
    received: date | None = None
    made: date | None = None
    printed: PrintedDate | None = None
    place: str = ""
    not_found: bool = False
    assay: float | None = None
    lot: str = ""
    note: str = ""
    about: bool = False

    @property
    def whole(self) -> bool:
        """Whether what it is and how much there is are both known."""
        return self.line is not None and self.left is not None


@dataclass(frozen=True, slots=True)
class Beside:
    """What every row of a file is read beside."""

    matcher: Matcher
    places: Places
    order: DateOrder
    decimals: Decimals
    today: date
    answers: Answers = field(default_factory=Answers)


def read_row(
    row: int,
    cells: dict[str, str],
    beside: Beside,
    doubts: Doubts,
    accepted: frozenset[str],
) -> Incoming:
    """The bottles a row tells of, as far as it can be had.

    `accepted` are the fields of which somebody said that what is offered is right.
    The doubts are added, all of them: a row is put right in one sitting.
    """
    held = read_held(cells, beside.decimals, doubts, beside.answers.whole.get("several", ""))
    found = line_of_row(cells, held.kind, beside, doubts, accepted)
    left = _left(cells, held, found.line, found.named, doubts)
    days = _begun(_days(cells, beside, doubts), held, found.line, doubts)
    printed = read_printed(cells.get("printed", ""), beside.order, doubts, today=beside.today)
    place, missing = _place(cells.get("place", ""), beside, doubts, accepted)
    of_the_house = found.line is not None and found.line.made
    known_part = bool(days.opened or days.opened_sometime or of_the_house)
    _note_undated(days, printed, doubts, of_the_house=of_the_house)
    return Incoming(
        line=found.line,
        left=left,
        # sealed, it holds what it held when it came
        size=held.size if held.size is not None else None if known_part else left,
        count=held.count,
        opened=days.opened,
        opened_sometime=days.opened_sometime,
        received=days.received,
        made=days.made,
        printed=printed,
        place=place,
        not_found=missing,
        assay=found.assay,
        lot=cells.get("lot", ""),
        note=cells.get("note", ""),
        about=held.about,
    )


def _note_undated(
    days: _Days, printed: PrintedDate | None, doubts: Doubts, *, of_the_house: bool
) -> None:
    # as the shelf judges it: any day that is known, or printed on it, dates a bottle
    if not (days.received or days.made or days.opened or (printed is not None and printed.day)):
        word = "made" if of_the_house else "it came"
        doubts.note("received", f"no day {word}: needs a look")


def _left(
    cells: Mapping[str, str],
    held: Held,
    line: KnownLine | None,
    named: tuple[KnownLine, ...],
    doubts: Doubts,
) -> Amount | None:
    if held.left is not None:
        return held.left
    if any(doubt.field in ("amount", "size") and doubt.key for doubt in doubts.all):
        return None
    if not cells.get("amount"):
        doubts.refuse("amount", "blank: how much is left?")
        return None
    kinds = {line.kind} if line else {each.kind for each in named} or set(Kind)
    options = [unit for kind in Kind if kind in kinds for unit in UNIT_OPTIONS[kind]]
    if line and line.kind is Kind.ITEMS:
        options = ["items"]
    doubts.ask("unit", f"{cells['amount']} of what? No unit is written", options=options)
    return None


@dataclass(frozen=True, slots=True)
class _Days:
    opened: date | None
    opened_sometime: bool
    received: date | None
    made: date | None
    said: bool
    """Whether the row says of itself if it is opened."""


def _days(cells: Mapping[str, str], beside: Beside, doubts: Doubts) -> _Days:
    opened, sometime = None, False
    written = cells.get("opened", "")
    plain = tidy(written).casefold()
    if plain in _OPEN:
        sometime = True
        doubts.note("opened", _OPENED)
    elif plain and plain not in _CLOSED:
        opened = read_day(written, "opened", beside.order, doubts, today=beside.today)
    received, made = (_day(cells, each, beside, doubts) for each in ("received", "made"))
    for name, begun in (("received", received), ("made", made)):
        if begun and opened and opened < begun:
            how = "it arrived" if name == "received" else "it was made"
            text = f"{spell_day(opened)} is before {how}, {spell_day(begun)}: one of these is wrong"
            doubts.refuse("opened", text)
    return _Days(opened, sometime, received, made, bool(plain))


def _begun(days: _Days, held: Held, line: KnownLine | None, doubts: Doubts) -> _Days:
    """The days as they count for that line: a reagent is not made here, part of it is opened."""
    dissolved = line is not None and line.form == "solution"
    made = days.made if dissolved else None
    received = days.received or (days.made if made is None else None)
    begun = replace(days, made=made, received=received)
    part = held.left is not None and held.size is not None and held.left.micro < held.size.micro
    if not part or days.said or (line is not None and line.made):
        return begun
    doubts.note("opened", f"{_OPENED}, since it is not full")
    return replace(begun, opened_sometime=True)


def _day(cells: Mapping[str, str], field: str, beside: Beside, doubts: Doubts) -> date | None:
    written = cells.get(field, "")
    if says_nothing(written):
        return None
    return read_day(written, field, beside.order, doubts, today=beside.today)


def _place(
    written: str, beside: Beside, doubts: Doubts, accepted: frozenset[str]
) -> tuple[str, bool]:
    """The place's short name and whether the bottle is missing; "" where there is none."""
    if not written:
        doubts.note("place", "no place is written")
        return "", False
    plain = tidy(written).casefold()
    if plain == NOT_FOUND:
        return "", True
    if plain == NO_PLACE:
        return "", False
    found = beside.places.find(written)
    if found.place is not None:
        return found.place.place, False
    if "place" in accepted and len(found.offered) == 1:
        return ("", True) if found.missing else (found.offered[0], False)
    if found.missing:
        text = "can nobody find it? It is then brought in as not found; else say where it is"
        doubts.ask("place", text, options=(NOT_FOUND,))
    else:
        add = f'to add it: stockroom add places place="{written}"'
        named = {each.place: each.name for each in beside.places.house.places}
        shown = "; ".join(f"{each} is {named[each]}" for each in found.offered if named.get(each))
        text = "; ".join(filter(None, ("no such place", shown, add)))
        doubts.ask("place", text, options=(*found.offered, NO_PLACE))
    return "", False
