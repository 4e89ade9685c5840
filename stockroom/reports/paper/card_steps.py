"""The steps of a make in the order of the bench, each caution beside the step it belongs to.

The house's own words for the method are kept as written and only parted where one act ends
and the next begins; what they leave out is added by common practice, no source.
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Sequence
from dataclasses import dataclass, field
from datetime import date

from stockroom.planning.decisions import Make
from stockroom.planning.facts import Method
from stockroom.reports.words import day, raised
from stockroom.safety.cautions import CAUTIONS
from stockroom.safety.cautions import Step as When

_ACTS = (
    "weigh|measure|run|add|dissolve|make up|made up|stand|leave|filter|titrate|mix|keep|cool|boil"
    "|pour|stir|shake|decant|stopper|write|dilute|sprinkle|try|warm|heat|label|rinse|swirl|store"
)
_PARTED = re.compile(rf"(?:(?<=[.;])\s+|,\s+(?:and\s+|then\s+)?|\s+and\s+)(?=(?:{_ACTS})\b)", re.I)
_SENTENCE = re.compile(r"(?<=[.;])\s+(?=[A-Z\d])")
_MAKES_UP = re.compile(r"\bma[kd]e (?:it )?up\b", re.I)
_WHOLE = re.compile(r"\bwith (?:all )?the (?:purified )?water\b", re.I)
_WAITS = re.compile(
    r"^(?:leave|let|settle|cool)\b|\bovernight\b"
    r"|\bstand(?: for| until| over| \d| half| one| two| three| four| an? (?:hour|day|night))\b",
    re.I,
)
_COOLS = re.compile(r"^(?:leave to |let it )?cool\b", re.I)
_MIXES = re.compile(r"\b(mix|shake)\b", re.I)
_WETS = re.compile(r"\b(water|acid|dissolve|solution)\b", re.I)
_SECOND = re.compile(r"\b(filter|titrate|decant)\b", re.I)
_AFTER = re.compile(r"\b(filter|titrate|decant)\b|^(?:keep|store|stopper|write|label|try)\b", re.I)
_FINDS = re.compile(r"\b(titrate|standardise)\b", re.I)

WEAR, TAKE, MIX, KEEP, CLEAR = "wear", "take", "mix", "keep", "clear"

_BESIDE = (
    (re.compile("filter", re.I), re.compile("filter", re.I)),
    (re.compile("on dissolving", re.I), re.compile("dissolve", re.I)),
    (re.compile("boiling water", re.I), re.compile(r"\bpour\b", re.I)),
    (
        re.compile("into water|portions", re.I),
        re.compile(r"\b(add|run|pour|sprinkle|dissolve)\b", re.I),
    ),
    (re.compile(r"\blet it cool|cool it\b|grows hot", re.I), _COOLS),
)
"""A caution and the act it belongs beside, where there is such an act."""

_BACK = re.compile("poured back|return", re.I)
# the first that matches counts; what none of them knows is read before anything is touched
_WHERE = (
    (re.compile(r"residue|waste|sink|poured away", re.I), CLEAR),
    (re.compile(r"never kept|vented|brim|mould|brown, |when brown|new label", re.I), KEEP),
    (re.compile(r"crust|dust|poured back|return|metal|oxidiser|flame|never with", re.I), TAKE),
    (re.compile(r"gloves|goggles|eye protection|skin|fume cupboard", re.I), WEAR),
    (re.compile(r"water|portions|stirring|cool it", re.I), MIX),
    (re.compile(r"cool and dark|cold and dark", re.I), KEEP),
)
_AT = {
    When.BEGIN: WEAR,
    When.OPEN: TAKE,
    When.MIX: MIX,
    When.KEEP: KEEP,
    When.LABEL: KEEP,
    When.USE: WEAR,
    When.WASTE: CLEAR,
}


@dataclass(frozen=True, slots=True)
class Step:
    """One act: what to do, what with, its cautions; `day` where another day's work begins."""

    words: str
    details: tuple[str, ...] = ()
    cautions: tuple[str, ...] = ()
    day: str = ""


@dataclass(slots=True)
class _Act:
    words: str
    place: str
    details: list[str] = field(default_factory=list)
    cautions: list[str] = field(default_factory=list)


def parted(text: str) -> list[str]:
    """A method's words parted into acts: all of them as written, but the "and" and "then" between.

    >>> parted("Dissolve in water and make up to the mark. Keep cold.")
    ['Dissolve in water', 'make up to the mark.', 'Keep cold.']
    """
    sentences = _SENTENCE.split(text.strip())
    acts = [act for sentence in sentences for act in _PARTED.split(sentence)]
    return [act for act in acts if act.strip(" ;,.")]


@dataclass(frozen=True, slots=True)
class Amounts:
    """What is weighed, what is measured, what fills to the mark, and the whole volume."""

    weighed: tuple[str, ...]
    measured: tuple[str, ...]
    filled: tuple[str, ...]
    volume: str


@dataclass(frozen=True, slots=True)
class Care:
    """What it asks for beside the cautions: a vented cap; gloves, by its hazards."""

    vented: bool = False
    gloves: bool = False


def steps_of(make: Make, method: Method | None, amounts: Amounts, care: Care) -> list[Step]:
    """Wear, take, add, stand, make up, mix, check, label, clear away: all steps of a make."""
    acts = [_Act(_sentence(words), MIX) for words in parted(make.steps)]
    _take(acts, amounts)
    _make_up(acts, make, amounts)
    _wait(acts, make, method)
    if method is not None and method.titrated and not any(_FINDS.search(a.words) for a in acts):
        acts.append(_Act("Titrate it and write down what is found.", MIX))
    acts.insert(0, _Act("", WEAR))
    acts.append(_Act(_label_words(make, care), KEEP))
    acts.append(_Act("Rinse the glass and clear away.", CLEAR))
    for caution in make.cautions:
        for act in _homes(acts, caution):
            act.cautions.append(raised(caution))
    acts[0].words = _wear_words(make.cautions, care)
    return _dated(acts, make)


def _take(acts: list[_Act], amounts: Amounts) -> None:
    """What is weighed and measured, at the house's own words for it, else as acts before them."""
    bare, place = not acts, 0
    for verb, things in (("weigh", amounts.weighed), ("measure", amounts.measured)):
        made_up = _first(acts, _MAKES_UP)
        early = acts[: acts.index(made_up)] if made_up else acts
        own = _first(early, re.compile(rf"\b{verb}\b", re.I))
        if own is not None and things:
            own.place = TAKE
            own.details += things
            place = acts.index(own) + 1
            continue
        acts[place:place] = [_Act(f"{verb.capitalize()} {one}.", TAKE) for one in things]
        place += len(things)
    if bare:
        acts.append(_Act("Add it to most of the water, stirring, until it is all taken up.", MIX))


def _make_up(acts: list[_Act], make: Make, amounts: Amounts) -> None:
    """The volume at the act it belongs to, then mixing, where the house does not speak of it."""
    found = _first(acts, _MAKES_UP) or _first(acts, _WHOLE)
    if found is None:
        found = _Act("Make up to the mark.", MIX)
        # nothing is filled to the mark before all is in it and has cooled
        after = _first(acts, _AFTER)
        acts.insert(acts.index(after) if after else len(acts), found)
    found.details += [*amounts.filled, amounts.volume]
    place = acts.index(found) + 1
    if not any(_MIXES.search(act.words) for act in acts[place - 1 :]):
        closed = place < len(acts) and acts[place].words.lower().startswith("stopper")
        mixed = "Turn over and mix well." if closed else "Stopper, turn over and mix well."
        place += closed
        acts.insert(place, _Act(mixed, MIX))
    if make.vessels > 1:
        acts.insert(place + 1, _Act(f"Mix all {make.vessels} vessels together.", MIX))


def _wait(acts: list[_Act], make: Make, method: Method | None) -> None:
    hours = method.stands_hours if method else 0.0
    later = _later(make)
    if not hours and later is None:
        return
    told = f"until {day(later)}" if later else f"{_span(hours)} in all"
    found = _waiting(acts, later)
    if found is not None:
        found.details.append(told)
        return
    second = _first(acts, _SECOND)
    place = acts.index(second) if second else len(acts)
    acts.insert(place, _Act(f"Leave to stand, {told}.", MIX))


def _waiting(acts: Iterable[_Act], later: date | None) -> _Act | None:
    """The act after which nothing is done for a while; to another day none merely cools."""
    waits = [act for act in acts if _WAITS.search(act.words)]
    if later is None:
        return waits[0] if waits else None
    long = [act for act in waits if not _COOLS.search(act.words)]
    return long[-1] if long else None


def _span(hours: float) -> str:
    return f"{round(hours * 60)} min" if hours < 1 else f"{hours:g} h"


def _later(make: Make) -> date | None:
    """The day what was started is gone on with; None where all is done on one day."""
    when = make.finish_on or make.ready
    return when if when > make.on else None


def _dated(acts: Sequence[_Act], make: Make) -> list[Step]:
    later = _later(make)
    waits = _waiting(acts, later) if later else None
    begins = acts.index(waits) + 1 if waits else len(acts)
    days = {0: day(make.on), begins: day(later)} if later else {}
    return [
        Step(act.words, tuple(act.details), tuple(act.cautions), days.get(number, ""))
        for number, act in enumerate(acts)
    ]


def _homes(acts: list[_Act], caution: str) -> list[_Act]:
    """The acts a caution stands beside: two, where it speaks of the bottle and of keeping."""
    home = _home(acts, caution)
    early = next((act for act in acts if act.place == TAKE), home)
    if home.place == KEEP and _BACK.search(caution):
        return [early, home]
    return [home]


def _home(acts: list[_Act], caution: str) -> _Act:
    """The act a caution belongs to; the first act for one that nobody can place."""
    for told, act in _BESIDE:
        own = _first((a for a in acts if a.place == MIX), act) if told.search(caution) else None
        if own is not None:
            return own
    place = _place_of(caution)
    if place == MIX:
        wet = (a for a in acts if a.place == MIX and _WETS.search(a.words))
        return next(wet, None) or next((a for a in acts if a.place == MIX), acts[0])
    return next((act for act in acts if act.place == place), acts[0])


def _place_of(caution: str) -> str:
    for each in CAUTIONS:
        if caution in (each.text, *(f"{w[0].upper()}{w[1:]}." for _, w in each.parts)):
            return _AT[each.step]
    return next((place for words, place in _WHERE if words.search(caution)), WEAR)


def _wear_words(cautions: Iterable[str], care: Care) -> str:
    said = " ".join(cautions).lower()
    gloves = " and gloves" if care.gloves or "gloves" in said else ""
    where = "; work in the fume cupboard" if "fume cupboard" in said else ""
    return f"Wear goggles{gloves}{where}."


def _label_words(make: Make, care: Care) -> str:
    said = any("vented" in caution.lower() for caution in make.cautions)
    cap = " Vented cap." if care.vented and not said else ""
    when = f", good until {day(make.good_until)}" if make.good_until else ""
    return f"Label it at once: name, strength, made{when}, initials.{cap}"


def _first(acts: Iterable[_Act], words: re.Pattern[str]) -> _Act | None:
    return next((act for act in acts if words.search(act.words)), None)


def _sentence(words: str) -> str:
    ended = words.rstrip(" ;,")
    return raised(f"{ended[0].upper()}{ended[1:]}" + ("" if ended.endswith(".") else "."))
