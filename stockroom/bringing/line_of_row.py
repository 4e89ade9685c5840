"""The stock line of a row: its name, its strength, and what its amount says of its form."""

from __future__ import annotations

import re
from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from typing import TYPE_CHECKING

from stockroom.bringing.dates import says_nothing
from stockroom.bringing.decimals import plain_number
from stockroom.bringing.doubts import Doubts, in_one
from stockroom.bringing.known import KnownLine
from stockroom.bringing.name_words import NUMBER, name_words, spelt, written_strength
from stockroom.bringing.names import Asked, Match
from stockroom.errors import BadAmount
from stockroom.measure.amounts import Kind
from stockroom.measure.parsing import parse_strength
from stockroom.measure.reading import tidy

if TYPE_CHECKING:
    from stockroom.bringing.row import Beside

# no more figures behind it: the front of "1.2.3" is no number
_BARE = re.compile(rf"(?P<number>{NUMBER})(?!\.?[0-9])(?P<unit> ?%| ?per ?cent)?")
_PER_CENT = re.compile(rf"(?P<number>{NUMBER}) ?%(?: ?[wm]/[wm])?")
_NAMELESS = frozenset(
    "?; ??; unknown; unlabelled; unlabeled; no label; label gone; mystery".split("; ")
)
_MOST_OPTIONS = 6
"""More choices than this nobody reads. Our choice."""
_LEAST_PURE = 50
"""In %: what is sold as a solid is purer, and a smaller number is a strength. Our choice."""


@dataclass(frozen=True, slots=True)
class LineFound:
    """The line, None where it must be asked; `named` are all that the name can mean."""

    line: KnownLine | None
    named: tuple[KnownLine, ...] = ()
    assay: float | None = None


def line_of_row(
    cells: Mapping[str, str],
    kind: Kind | None,
    beside: Beside,
    doubts: Doubts,
    accepted: frozenset[str],
) -> LineFound:
    """Find it; the doubts about name and strength are added."""
    name = cells.get("name", "")
    if not name or tidy(name).casefold() in _NAMELESS:
        text = "what is it? If nobody knows, log it by its look: stockroom unknown LOOK SIZE"
        doubts.refuse("name", text)
        return LineFound(None)
    written, settled = _strength(cells, kind, beside, doubts)
    asked = Asked(name, kind, written, cells.get("formula", ""), cells.get("cas", ""))
    match = beside.matcher.find(asked)
    assay = None
    if kind is Kind.MASS and written:
        # weighed, it is no solution: what stands there is how pure it is
        assay = _assay(written, doubts)
    elif cells.get("assay"):
        assay = _assay(cells["assay"], doubts, field="assay")
    if not settled:
        known = beside.matcher.find(Asked(_core(name), kind)) if not match.named else match
        options = _strengths(written, known.named)
        doubts.ask("strength", _which_kind(written, options), options=options)
        if known.named and not known.likely:
            return LineFound(None, known.named)
    line = _settled(match, asked, beside, doubts, accepted)
    if line is not None and line.never_kept:
        doubts.refuse("name", f"never kept: {line.never_kept}")
    return LineFound(line, match.named, assay)


def _core(name: str) -> str:
    words = name_words(name)
    return words.core if words.strength else name


def _strength(
    cells: Mapping[str, str], kind: Kind | None, beside: Beside, doubts: Doubts
) -> tuple[str, bool]:
    """The strength as the reader of strengths takes it, and whether it can be read."""
    cell = cells.get("strength", "")
    cell = "" if says_nothing(cell) else written_strength(cell)
    inside = name_words(cells.get("name", "")).strength
    if cell and inside and not _same(cell, inside):
        text = f'"{inside}" in the name and "{cell}" here: which is it?'
        doubts.ask("strength", text, options=(inside, cell))
        return inside, True
    # the one that says more: "100 vol" in an answer beside the "100" that was asked about
    written = inside if inside and not (cell and _readable(cell)) else cell
    if not written or (kind is Kind.MASS and _PER_CENT.fullmatch(tidy(written))):
        return written, True
    plain = plain_number(written, "strength", beside.decimals, doubts)
    if plain is None:
        return "", True
    return plain, _readable(plain)


def _same(one: str, other: str) -> bool:
    if spelt(one) == spelt(other):
        return True
    # "12%" beside "12 % w/v": the longer says more, and does not contradict
    bare = [_BARE.match(tidy(each)) for each in (one, other)]
    try:
        first, second = parse_strength(one), parse_strength(other)
    except BadAmount:
        return bool(bare[0] and bare[1] and bare[0]["number"] == bare[1]["number"])
    return (first.value, first.unit) == (second.value, second.unit)


def _readable(written: str) -> bool:
    try:
        parse_strength(written)
    except BadAmount:
        return False
    return True


def _which_kind(written: str, options: tuple[str, ...]) -> str:
    if options:
        return f"{' or '.join(options)}?"
    try:
        parse_strength(written)
    except BadAmount as error:
        _, _, reason = error.message.rpartition('": ')
        return in_one(reason, error.hint)
    return f"{written} of what?"


def _strengths(written: str, named: Iterable[KnownLine]) -> tuple[str, ...]:
    """What a number without its unit may mean here, the house's own lines first."""
    found = _BARE.fullmatch(tidy(written))
    if found is None:
        return ()
    number = found["number"]
    held = [
        line.strength_text
        for line in named
        if (own := _BARE.match(line.strength_text)) and float(own["number"]) == float(number)
    ]
    by_volume = any(line.strength_text.endswith("vol") for line in named)
    kinds: tuple[str, ...] = ("mol/dm3", "% w/v", "% w/w")
    if found["unit"]:
        kinds = ("% w/v", "% w/w", "% v/v")
    elif by_volume:
        kinds = ("vol", "% w/v")
    others = [kind for kind in kinds if not any(text.endswith(kind) for text in held)]
    return tuple(dict.fromkeys([*held, *(f"{number} {kind}" for kind in others)]))


def _assay(written: str, doubts: Doubts, field: str = "strength") -> float | None:
    found = _PER_CENT.fullmatch(tidy(written)) or _BARE.fullmatch(tidy(written))
    if found and _LEAST_PURE <= float(found["number"]) <= 100:
        doubts.note(field, f"taken as how pure it is: {found['number']} %")
        return float(found["number"]) / 100
    doubts.refuse(field, "something weighed has no strength: is it a solution, or how pure is it?")
    return None


def _settled(
    match: Match, asked: Asked, beside: Beside, doubts: Doubts, accepted: frozenset[str]
) -> KnownLine | None:
    """The line of a match, once whatever is doubtful about it has been said."""
    if match.line is not None and (not match.doubt or "name" in accepted):
        return match.line
    if match.line is not None:
        others = [
            each.key
            for each in match.named
            if each.form == match.line.form == "solid" and each.key != match.line.key
        ]
        doubts.ask("name", match.doubt, options=("yes", *others[:_MOST_OPTIONS]))
        return None
    keys = tuple(line.key for line in match.offered[:_MOST_OPTIONS])
    if not match.named:
        doubts.refuse("name", f"{match.doubt}{_unknown(asked, keys)}")
    elif match.missing_strength:
        add = _add_line(match.named, asked)
        doubts.refuse("strength" if asked.strength else "name", f"{match.doubt}. {add}")
    elif match.none_fits:
        doubts.refuse("name", match.doubt, options=keys)
    else:
        doubts.ask("name", f"{match.doubt}: {'; '.join(keys)}?", options=keys)
    return None


def _unknown(asked: Asked, keys: tuple[str, ...]) -> str:
    """What may be done with a name nobody knows; the nearest are told of, not offered."""
    near = f"; nearest, and hardly it: {'; '.join(keys)}" if keys else ""
    form = "liquid" if asked.kind is Kind.VOLUME else "solid"
    name = name_words(asked.name).core or asked.name
    return (
        f'{near}. To hold it: stockroom add substances substance="{name}", then stockroom add lines'
        f' item="{name}" substance="{name}" form={form}; if nobody knows what it is:'
        " stockroom unknown LOOK"
    )


def _add_line(named: tuple[KnownLine, ...], asked: Asked) -> str:
    """The command that adds the stock line a row tells of, when that is what is meant."""
    line = next((each for each in named if each.form == "solution"), named[0])
    strength = asked.strength or name_words(asked.name).strength
    item = line.substance or line.item
    return (
        f'If the house is to hold it: stockroom add lines item="{item}" strength="{strength}"'
        f' substance="{line.substance}" form=solution'
    )
