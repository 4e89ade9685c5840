"""From a bottle, what it is like and what it could do, to its label."""

from __future__ import annotations

import re
from collections.abc import Iterable
from dataclasses import replace
from datetime import date

from stockroom.chemistry.formula import molar_mass
from stockroom.errors import BadAmount, NotAllowed
from stockroom.keeping.record import Record
from stockroom.keeping.rules import Origin, Rule, RuleKind
from stockroom.keeping.unnamed import UNKNOWN
from stockroom.keeping.verdict import Condition, Verdict, verdict
from stockroom.measure.formats import format_strength
from stockroom.measure.periods import format_period
from stockroom.planning.amounts import say_strength
from stockroom.planning.decisions import Make
from stockroom.planning.facts import Bottle, Form, Line, Place
from stockroom.reports.paper.label import HazardText, Label, Sort
from stockroom.reports.words import MARKS, day_in_words, raised
from stockroom.safety.clp import NOT_ENTERED, PH_RULE
from stockroom.safety.hazards import Hazards
from stockroom.safety.statements import statement

NO_STATEMENT = (
    "No hazard statement by the limits held: not proof of none; see the supplier's sheet."
)
PH_NOT_HELD = "pH not held: look it up"
LOOK_IT_UP = f"Hazard text {NOT_ENTERED}."
VENTED = "VENTED CAP"

_TEST = "test or discard"

Dates = list[tuple[str, str]]

# one word that begins as an element does, without three small letters on end: not "Iodine"
_LIKE_FORMULA = re.compile(r"(?!.*[a-z]{3})[A-Z(\[][A-Za-z0-9().·*+\-\[\]]*")


def full_label(
    bottle: Bottle,
    line: Line,
    found: Verdict,
    hazards: Hazards,
    places: Iterable[Place],
    doubt: str = "",
) -> Label:
    """The label of a bottle that is there; `doubt` is what it has from what it was made from.

    Raises: NotAllowed for a formula instead of a name.
    """
    check_name(bottle.number, line.item)
    strength, known = strength_words(bottle, line, found)
    return Label(
        sort=Sort.FULL,
        number=bottle.number,
        name=raised(line.item),
        strength=strength,
        known=known,
        dates=tuple(_dates(bottle, line, found)),
        keep=keep_words(line, bottle.place, places),
        vented=_cap(line, bottle),
        warning="; ".join(filter(None, (_warning(found), doubt))),
        hazards=hazard_text(hazards, bottle.number),
    )


def short_label(bottle: Bottle, line: Line, found: Verdict, hazards: Hazards) -> Label:
    """The short label of a small bottle; that it may have one is checked before."""
    check_name(bottle.number, line.item)
    strength, known = strength_words(bottle, line, found)
    text = hazard_text(hazards, bottle.number)
    return Label(
        sort=Sort.SHORT,
        number=bottle.number,
        name=raised(line.item),
        strength=strength,
        known=known,
        dates=tuple(_dates(bottle, line, found)),
        vented=_cap(line, bottle),
        warning=_warning(found),
        hazards=HazardText(text.signal, text.symbols, (), text.basis, text.ask),
    )


def opened_strip(bottle: Bottle, line: Line, found: Verdict) -> Label:
    """The strip of an opened bottle: what is known is printed, the rest is a blank to pen in."""
    record = bottle.record
    check_name(bottle.number, line.item)
    came, first = ("made", record.made) if bottle.made_here else ("received", record.received)
    opened, lasts = record.opened, _from_opening(line.rules)
    guess = " (guessed)" if record.opened_guessed else ""
    dates = (
        (came, day_in_words(first) if first else ""),
        ("opened", f"{day_in_words(opened)}{guess}" if opened else ""),
        *(_use_by(found) if opened or not lasts else [("use by", "")]),
    )
    note = f"use by: opened + {lasts}" if lasts and not opened else ""
    return Label(
        sort=Sort.OPENED,
        number=bottle.number,
        name=raised(line.item),
        strength=raised(line.strength_text),
        dates=dates,
        keep=note,
        vented=_cap(line, bottle),
        warning=_warning(found),
    )


def _use_by(found: Verdict) -> Dates:
    """The day that ends its use, and before it the one that ends the knowledge of it.

    A blank where neither is set.
    """
    last = day_in_words(found.usable_until) if found.usable_until else ""
    rows: Dates = [(_until_word(found, "use by"), last)]
    if found.recheck_by and (found.usable_until or date.max) > found.recheck_by:
        recheck = ("recheck by", day_in_words(found.recheck_by))
        rows = [recheck, *rows] if last else [recheck]
    return rows


def _until_word(found: Verdict, usual: str) -> str:
    """What that day is: a peroxide-former is not merely past then, it has to be dealt with."""
    tested = found.safety and _TEST in found.decided_by
    return f"{_TEST} by" if tested else usual


def unknown_label(bottle: Bottle) -> Label:
    """The label of what nobody can name: a number, its looks, and to leave it alone."""
    return Label(
        sort=Sort.UNKNOWN,
        number=bottle.number,
        name=UNKNOWN,
        known=raised(bottle.remark),
        keep=bottle.place,
        warning="Never open, smell or taste it to find out. Ask.",
    )


def batch_label(make: Make, line: Line, hazards: Hazards, made_on: date | None) -> Label:
    """The label of a batch still to be made: its bottle's number is written in when it has one.

    `made_on` is the day it is made instead of the planned one; what counts from it moves along.
    """
    check_name(make.id, line.item)
    made = made_on or make.on
    ready = made + (make.ready - make.on)
    record = Record(made=made, nominal=line.strength, ready_on=ready)
    dates: Dates = [("made", day_in_words(made))]
    dates += [("ready from", day_in_words(ready))] if ready != made else []
    # what is titrated on finishing is known from that day: nobody can print it before
    titrated = make.finishing and any(rule.kind is RuleKind.RECHECK for rule in line.rules)
    judged = verdict(record, line.rules, ready)
    dates += until_rows(replace(judged, recheck_by=None) if titrated else judged)
    dates += [("recheck by", "")] if titrated else []
    return Label(
        sort=Sort.FULL,
        number="",
        name=raised(line.item),
        strength=raised(line.strength_text) or _no_strength(line),
        known="made to, not found" if line.strength_text else "",
        dates=tuple(dates),
        keep=raised(line.keep_note),
        vented=VENTED if line.vented_cap else "",
        hazards=hazard_text(hazards, f'"{line.key}"'),
        about=make.id,
    )


def check_name(whose: str, name: str) -> None:
    """Nothing for a name in words. Raises: NotAllowed for one that is a formula only."""
    if not _LIKE_FORMULA.fullmatch(name.strip()):
        return
    try:
        molar_mass(name.strip())
    except BadAmount:
        return
    raise NotAllowed(
        f"{whose}: {name} is a formula. Labels need the name in words.",
        "Enter the line under its name, with the formula beside it.",
    )


def strength_words(bottle: Bottle, line: Line, found: Verdict) -> tuple[str, str]:
    """The strength to print and, in words, how it is known: found and when, or that it is not."""
    known, nominal = found.strengths, raised(line.strength_text)
    if known.found is not None and known.found_on is not None and line.unit:
        said = f"found {day_in_words(known.found_on)}"
        return raised(say_strength(line, known.found)), said
    if bottle.record.blend is not None and line.unit:
        how = f", {bottle.known_by}" if bottle.known_by else ""
        blend = bottle.record.blend
        said = f"worked out {day_in_words(blend.on)}{how}"
        return format_strength(blend.strength, line.unit), said
    if nominal:
        fades = any(rule.kind is RuleKind.FADES for rule in line.rules)
        how = f", {bottle.known_by}" if bottle.known_by else ""
        return nominal, f"nominal, not found{'; it fades' if fades else ''}{how}"
    return _no_strength(line), ""


def _no_strength(line: Line) -> str:
    return "strength not known" if line.form is Form.SOLUTION else ""


def _dates(bottle: Bottle, line: Line, found: Verdict) -> Dates:
    record = bottle.record
    rows: Dates = []
    if bottle.made_here or record.made:
        rows.append(("made", day_in_words(record.made) if record.made else ""))
        if record.ready_on and record.ready_on != record.made:
            rows.append(("ready from", day_in_words(record.ready_on)))
    else:
        guessed = " (guessed)" if record.opened_guessed else ""
        rows.append(("received", day_in_words(record.received) if record.received else ""))
        rows.append(("opened", f"{day_in_words(record.opened)}{guessed}" if record.opened else ""))
    # a blank, where a look has to set the day first
    undated = found.condition is Condition.NO_DATE
    return rows + ([("good until", "")] if undated else until_rows(found))


def until_rows(found: Verdict) -> Dates:
    """ "good until" (or by when to test or discard) and "recheck by", whichever are set."""
    rows: Dates = []
    if found.usable_until:
        rows.append((_until_word(found, "good until"), day_in_words(found.usable_until)))
    if found.recheck_by:
        rows.append(("recheck by", day_in_words(found.recheck_by)))
    return rows


def keep_words(line: Line, place: str, places: Iterable[Place]) -> str:
    """How it is kept and where: "cool, dark; D1 dark cupboard"."""
    title = next((each.title for each in places if each.name == place), "")
    return raised("; ".join(filter(None, (line.keep_note, f"{place} {title}".strip()))))


def _cap(line: Line, bottle: Bottle) -> str:
    if not line.vented_cap:
        return ""
    return f"{VENTED} (it has a tight one)" if bottle.cap == "tight" else VENTED


def _warning(found: Verdict) -> str:
    """What a hand has to know first: a safety date gone by, or what the bottle is like."""
    if found.condition in (Condition.SOUND, Condition.GONE):
        return ""
    look = ": needs a look" if found.condition is Condition.NO_DATE else ""
    mark = f"{MARKS[found.condition]} {found.condition}{look}"
    return f"{mark}: {found.warning}" if found.warning else mark


def _from_opening(rules: Iterable[Rule]) -> str:
    """How long it lasts once opened, in words, "" where no rule says."""
    lives = [r.lasts for r in rules if r.kind is RuleKind.LIFE and r.origin is Origin.OPENED]
    return next((format_period(lasts) for lasts in lives if lasts), "")


def hazard_text(found: Hazards | None, what: str) -> HazardText:
    """The hazards for a label: the house's text where typed, else what is worked out.

    Where neither is held, that it is not entered; so too for None.
    """
    ask = f"stockroom hazards {what}"
    if found is not None and found.sheet:
        return HazardText(
            found.signal_word,
            found.pictograms,
            (("", found.sheet.statements),),
            f"from {found.sheet.sheet}",
            ask,
        )
    if found is None or not found.entered:
        return HazardText(statements=(("", LOOK_IT_UP),), ask=ask)
    codes = (*found.statements, *found.supplemental)
    words = tuple((code, _wording(found, code)) for code in codes)
    lacking = found.worked_out.unknown
    more = f"; of {', '.join(lacking)} nothing is held: look it up" if lacking else ""
    # a strong acid or alkali is corrosive by its pH, whatever the limits say
    acid = PH_RULE in found.worked_out.notes
    also = f"; {PH_NOT_HELD}" if acid and words else ""
    return HazardText(
        found.signal_word,
        found.pictograms,
        words or (("", f"{NO_STATEMENT}{f' {PH_NOT_HELD}.' if acid else ''}"),),
        f"worked out; the supplier's sheet comes first{more}{also}",
        ask,
    )


def _wording(found: Hazards, code: str) -> str:
    text = statement(code).text
    named = ", ".join(found.worked_out.allergens)
    return text.replace("(name of sensitising substance)", named) if named else text
