"""Before the day as a page: the sheet for the day, what is to do linked to where it is done."""

from __future__ import annotations

import re
from collections.abc import Container, Iterator, Mapping
from dataclasses import dataclass, field
from datetime import date

from stockroom.measure.amounts import PER_UNIT, Kind
from stockroom.planning.decisions import Make, Outcome, Plan
from stockroom.planning.facts import Facts, Firmness
from stockroom.planning.people import clock
from stockroom.planning.rooms import shared_rooms
from stockroom.reports.files.phone import Phone, phone_of
from stockroom.reports.pages.day_dangers import for_eyes, harm_of, mind_first
from stockroom.reports.paper.day import Day, Part, bookings_of
from stockroom.reports.paper.day_class import SET_OUT_STEP
from stockroom.reports.paper.day_strengths import Known, differs, how_words
from stockroom.reports.paper.day_times import LATEST
from stockroom.reports.words import TIED, named
from stockroom.safety.hazards import Hazards

_NO_HAZARDS: Mapping[str, Hazards] = {}

Given = tuple[tuple[str, str], ...]

_MAKE = re.compile(r"make (M\d+) ")
_ORDER = re.compile(r"order (O\d+):")
_WAIT = re.compile(r"wait for (P\d+):")
_CHECK = re.compile(r"(titrate|look) (\S+) \(")
_SHORT = "short: "
_BUY = "buy: "

_CHECKED = {
    "titrate": ("found", "enter the strength found"),
    "look": ("look", "enter how it looks"),
}


@dataclass(frozen=True, slots=True)
class Way:
    """A link beside something to do: its words, the page or form it leads to, and what is given.

    `given` are names with their values, for whoever writes the address.
    """

    words: str
    to: str
    given: Given = ()


@dataclass(frozen=True, slots=True)
class ToDo:
    """One thing to do in the words of the sheet, and the ways to do it or to ask why."""

    text: str
    ways: tuple[Way, ...]


@dataclass(frozen=True, slots=True)
class Strength:
    """A strength on the day with how it is known; `differs` from what the card says."""

    told: Known
    how: str
    differs: bool


@dataclass(frozen=True, slots=True)
class Stretch:
    """A part of the sheet with its things to do; `id` tells its headings from another part's.

    `harm` is what the things of a line of the list can do, by the key of that line.
    """

    id: str
    part: Part
    to_do: tuple[ToDo, ...]
    strengths: tuple[Strength, ...]
    harm: Mapping[str, tuple[str, ...]] = field(default_factory=dict)


@dataclass(frozen=True, slots=True)
class Booked:
    """A booking as it stands, for the forms that change it. `over` is done or dropped."""

    number: str
    recipe: str
    on: str
    time: str
    groups: int
    firmness: str
    over: bool


@dataclass(frozen=True, slots=True)
class DayPage:
    """The page. `about` names it in addresses; `earlier` and `later` are days with a booking.

    `waiting` are the numbers of bookings whose leftovers must be destroyed and ticked;
    `latest` says how the times of the list are meant; `mind` what must be known before all.
    """

    sheet: Day
    about: str
    stretches: tuple[Stretch, ...]
    booked: tuple[Booked, ...]
    waiting: tuple[str, ...]
    phone: Phone
    latest: str
    mind: tuple[str, ...]
    earlier: date | None
    later: date | None


def day_page(
    known: Facts, plan: Plan, sheet: Day, hazards: Mapping[str, Hazards] = _NO_HAZARDS
) -> DayPage:
    """The page of a day, or of the one booking the sheet is about.

    `hazards` are by bottle, or by line; what is not among them has none said of it.
    """
    days = sorted({b.on for b in known.bookings if b.firmness is not Firmness.DROPPED})
    mine = {each.booking for each in sheet.bookings}
    needs = [need for need in plan.needs if need.booking.number in mine]
    return DayPage(
        sheet=sheet,
        about=sheet.single or sheet.on.isoformat(),
        stretches=tuple(
            _stretch(plan, f"part-{number}", part, mine, hazards)
            for number, part in enumerate(sheet.parts, 1)
        ),
        booked=tuple(_booked(known, sheet)),
        waiting=tuple(w.booking for w in plan.watch if w.booking in mine and not w.ticked_by),
        phone=phone_of(known, plan, sheet.on, sheet.single),
        latest=LATEST,
        mind=(
            *mind_first(sheet.parts),
            *for_eyes(needs, hazards),
            *shared_rooms(bookings_of(known, sheet.on, sheet.single), known.bookings),
        ),
        earlier=max((day for day in days if day < sheet.on), default=None),
        later=min((day for day in days if day > sheet.on), default=None),
    )


def _stretch(
    plan: Plan, id: str, part: Part, bookings: Container[str], hazards: Mapping[str, Hazards]
) -> Stretch:
    return Stretch(
        id,
        part,
        tuple(to_do_of(plan, each, bookings) for each in part.to_do),
        tuple(Strength(each, how_words(each), differs(each)) for each in part.strengths),
        {
            row.key: harm_of((n for n in plan.needs if n.booking.number == row.booking), hazards)
            for row in part.rows
            if row.step == SET_OUT_STEP
        },
    )


def to_do_of(plan: Plan, text: str, bookings: Container[str] = ()) -> ToDo:
    """Something to do for these bookings, as the sheet has it, with the links to do it by."""
    return ToDo(text, tuple(_ways(plan, text, bookings)))


def make_given(make: Make) -> Given:
    """What the form of a make is filled with: what is planned, from the bottles planned."""
    volume = f"{make.volume / PER_UNIT[Kind.VOLUME]:.10g} cm3"
    told = (("line", make.line), ("volume", volume))
    bottles = dict.fromkeys(draw.bottle for draw in make.sources)
    # one that is still to be made or bought has no number: then the house chooses them all
    return (*told, ("sources", ", ".join(bottles))) if bottles and all(bottles) else told


def _ways(plan: Plan, text: str, bookings: Container[str]) -> Iterator[Way]:
    if found := _MAKE.match(text):
        make = next((each for each in plan.makes if each.id == found[1]), None)
        if make is not None:
            yield Way("enter it as made", "/do/make", make_given(make))
            yield Way("its card", "/paper/card.pdf", (("what", make.id), ("meant", make.wanted)))
        yield _why(found[1])
    elif found := _ORDER.match(text):
        order = next((each for each in plan.orders if each.id == found[1]), None)
        meant = (("meant", order.wanted),) if order else ()
        yield Way("enter it as ordered", "/do/order-planned", (("order", found[1]), *meant))
        yield _why(found[1])
    elif found := _WAIT.match(text):
        yield Way("enter it as arrived", "/do/arrive", (("order", found[1]),))
        yield _why(found[1])
    elif found := _CHECK.match(text):
        form, words = _CHECKED[found[1]]
        yield Way(words, f"/do/{form}", (("bottle", found[2]),))
        yield _why(found[2])
    elif text.startswith((_SHORT, _BUY)):
        yield Way("the term's buying", "/buying")
        yield from _why_wanting(plan, text, bookings)


def _why_wanting(plan: Plan, text: str, bookings: Container[str]) -> Iterator[Way]:
    """Why something is short or bought: the first of these bookings' needs that is said so."""
    wanting = (Outcome.BUY,) if text.startswith(_BUY) else (Outcome.SHORT, Outcome.REFUSED)
    for need in plan.needs:
        asked = need.booking.number in bookings and need.outcome in wanting
        if asked and f" of {named(need.item, '')}" in text.replace(TIED, " "):
            yield _why(need.ref)
            return


def _why(ref: str) -> Way:
    return Way(f"why {ref}", "/why", (("ref", ref),))


def _booked(known: Facts, sheet: Day) -> Iterator[Booked]:
    for booking in bookings_of(known, sheet.on, sheet.single):
        yield Booked(
            number=booking.number,
            recipe=booking.recipe,
            on=booking.on.isoformat(),
            time=clock(booking.minute),
            groups=booking.groups,
            firmness=booking.firmness.value,
            over=booking.firmness in (Firmness.DONE, Firmness.DROPPED),
        )
