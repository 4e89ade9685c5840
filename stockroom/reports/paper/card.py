"""The make card: one page a make, big amounts on the left, the steps in order on the right."""

from __future__ import annotations

import re
import shlex
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from typing import Any

from stockroom.keeping.record import Check, CheckKind, Record
from stockroom.keeping.verdict import verdict
from stockroom.measure.amounts import Kind
from stockroom.planning.decisions import Make, Plan
from stockroom.planning.facts import Facts, Line, Method
from stockroom.reports.paper.card_hazards import Danger, dangers_of, wants_gloves
from stockroom.reports.paper.card_sources import Taken, amounts_of, taken_of
from stockroom.reports.paper.card_steps import Care, Step, steps_of
from stockroom.reports.paper.head import Head, head_of
from stockroom.reports.paper.left_over import over_words
from stockroom.reports.paper.make_number import number_line
from stockroom.reports.words import (
    amount,
    counted,
    day,
    day_heading,
    listed,
    named,
    raised,
)
from stockroom.safety.hazards import Hazards


@dataclass(frozen=True, slots=True)
class Card:
    """One make. `key` is its line and bookings: its number may be another's in tomorrow's plan."""

    key: str
    number: str
    name: str
    volume: str
    when: str
    fresh: bool
    served: tuple[str, ...]
    takes: tuple[Taken, ...]
    vessels: str
    steps: tuple[Step, ...]
    warnings: tuple[str, ...]
    over: str
    good_until: str
    dangers: tuple[Danger, ...]
    blanks: tuple[str, ...]
    type_back: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class Cards:
    """The cards asked for, in the order of their days."""

    head: Head
    cards: tuple[Card, ...]

    @property
    def about(self) -> str:
        """What tells these cards from others when a copy is held against the last."""
        return "; ".join(card.key for card in self.cards)


def cards_of(
    known: Facts,
    plan: Plan,
    makes: Sequence[Make],
    hazards: Mapping[str, Hazards],
    asked: str = "",
) -> Cards:
    """The cards of these makes.

    `hazards` are by bottle number and by line key, of what goes in and what comes out.
    `asked` says what was asked for, where no make answers it.
    """
    keys: dict[str, int] = {}
    cards = []
    for make in makes:
        key = " for ".join(filter(None, (make.line, listed(make.bookings))))
        keys[key] = keys.get(key, 0) + 1
        again = f" ({keys[key]})" if keys[key] > 1 else ""
        cards.append(_card(known, plan, make, hazards, key + again))
    if len(cards) == 1:
        title, about = cards[0].name, ""
    else:
        title, about = "Make cards", counted(len(cards), "make") if cards else asked
    return Cards(head_of(plan, title, about), tuple(cards))


def _card(known: Facts, plan: Plan, make: Make, hazards: Mapping[str, Hazards], key: str) -> Card:
    takes = tuple(taken_of(known, plan, make, draw) for draw in make.sources)
    line = known.lines[make.line]
    dangers = dangers_of(make, hazards)
    care = Care(vented=line.vented_cap, gloves=any(map(wants_gloves, dangers)))
    steps = steps_of(make, known.methods.get(make.line), amounts_of(make, takes), care)
    return Card(
        key=key,
        number=make.id,
        name=named(make.item, make.strength),
        volume=amount(make.volume, Kind.VOLUME),
        when=_when(make),
        fresh=make.fresh,
        served=_served(known, make),
        takes=takes,
        vessels=_vessels(make),
        steps=tuple(steps),
        warnings=tuple(raised(each) for each in make.too_little),
        over=over_words(make, line),
        good_until=_good_until(make, line, known.methods.get(make.line)),
        dangers=dangers,
        blanks=_blanks(known, make),
        type_back=_type_back(make),
    )


def _when(make: Make) -> str:
    later = make.finish_on or make.ready
    if later > make.on:
        verb = "finish" if make.finish_on else "ready"
        return f"start {day_heading(make.on)}, {verb} {day_heading(later)}"
    return f"make {day_heading(make.on)}"


def _served(known: Facts, make: Make) -> tuple[str, ...]:
    bookings = {each.number: each for each in known.bookings}
    found = [bookings[number] for number in make.bookings if number in bookings]
    titles = {key: recipe.title for key, recipe in known.recipes.items()}
    return tuple(
        f"{one.number} {day_heading(one.on)}, {titles.get((one.recipe, one.version), one.recipe)}"
        for one in found
    )


def _vessels(make: Make) -> str:
    if make.vessels < 2:
        return ""
    each = amount(round(make.volume / make.vessels), Kind.VOLUME)
    return f"in {make.vessels} vessels, {each} in each; then mixed"


def _good_until(make: Make, line: Line, method: Method | None) -> str:
    record = Record(made=make.on, nominal=line.strength, ready_on=make.ready)
    if method is not None and method.titrated:
        # what is titrated on finishing is known from that day, whatever comes of it
        on = make.finish_on or make.ready
        record = replace(record, checks=(Check(on, CheckKind.FOUND, strength=line.strength),))
    recheck = verdict(record, line.rules, make.ready).recheck_by
    if make.good_until == make.on:
        return "good that day only"
    last = f"good until {day(make.good_until)}" if make.good_until else ""
    if recheck is None or (make.good_until and recheck >= make.good_until):
        return last
    return "; ".join(filter(None, (f"recheck by {day(recheck)}", last)))


def _blanks(known: Facts, make: Make) -> tuple[str, ...]:
    weighed = any(draw.kind is Kind.MASS for draw in make.sources)
    poured = any(draw.kind is Kind.VOLUME for draw in make.sources)
    method = known.methods.get(make.line)
    told = ["weighed"] if weighed else []
    told += ["measured"] if poured else []
    told += ["made by", "day and time"]
    told += ["found, and day"] if method and method.titrated else ["found (if titrated)"]
    return (*told, "bottle number given", "good until")


def _type_back(make: Make) -> tuple[str, ...]:
    """What is typed when it is made; what is not known yet is left blank, as on the card."""
    volume = amount(make.volume, Kind.VOLUME).replace("\u00a0", "").replace("cm³", " cm3")
    volume = volume.replace("dm³", " dm3")
    bottles = dict.fromkeys(draw.bottle for draw in make.sources if draw.bottle)
    # a blank for each that has no number yet
    blanks = ["____" for draw in make.sources if not draw.bottle]
    given = "".join(f" --from {bottle}" for bottle in [*bottles, *blanks])
    what = f"{shlex.quote(make.line)} {shlex.quote(volume)}"
    return (f"stockroom make {what}{given} --on ____ --place ____ --by ____",)


def cards_lines(sheet: Cards) -> dict[str, str]:
    """Each card: its number, days, how much of it from what, for whom; each step, each hazard."""
    told: dict[str, str] = {}
    for card in sheet.cards:
        told |= number_line(card.number, card.name)
        told[card.key] = _said(card)
        for number, step in enumerate(card.steps, 1):
            told[step_key(card, number)] = f"{card.name}, step {number}: {_step_said(step)}"
        told |= {
            danger_key(card, each): f"{card.name}, {_danger_said(each)}" for each in card.dangers
        }
    return told


def step_key(card: Card, number: int) -> str:
    """The key of a step; `card.typ` puts it together likewise."""
    return f"{card.key}, step {number}"


def danger_key(card: Card, danger: Danger) -> str:
    """The key of one thing's hazards; `card.typ` puts it together likewise."""
    return f"{card.key}, hazards of {'what is made' if danger.product else danger.whose}"


def _step_said(step: Step) -> str:
    # a source made first goes by its number in the plan, which says nothing of the work
    details = [re.sub(r"\(M\d+, made first", "(made first", each) for each in step.details]
    words = re.sub(r"\(M\d+, made first", "(made first", step.words)
    return " | ".join(filter(None, (step.day, words, *details, *step.cautions)))


def _danger_said(danger: Danger) -> str:
    marks = " ".join(filter(None, (danger.signal, *danger.symbols)))
    said = [f"{code} {words}".strip() for code, words in danger.statements]
    way = "comes out" if danger.product else "goes in"
    return "; ".join(filter(None, (f"{way}: {danger.whose}", marks, *said, danger.basis)))


def _said(card: Card) -> str:
    taken = " + ".join(f"{each.amount} of {each.bottle or each.what}" for each in card.takes)
    told = f"{card.when}: {card.volume} of {card.name} from {taken}"
    also = [card.vessels, *(f"for {one}" for one in card.served), card.over, *card.warnings]
    return "; ".join([told, *filter(None, also)])


def more_data(sheet: Cards) -> dict[str, Any]:
    """The codes of the bottles drawn from, and the hazard symbols, as SVG."""
    from stockroom.reports.paper.codes import code_svg
    from stockroom.reports.shipped import symbol

    bottles = {each.bottle for card in sheet.cards for each in card.takes if each.bottle}
    marks = {mark for card in sheet.cards for one in card.dangers for mark in one.symbols}
    return {
        "codes": {number: code_svg(number) for number in sorted(bottles)},
        "symbols": {mark: symbol(mark) for mark in sorted(marks)},
    }
