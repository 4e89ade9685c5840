"""Which stock line a row means: by any name, formula or registry number, form and strength.

What is certain is taken; what is only likely is offered; nothing is ever made up.
"""

from __future__ import annotations

import re
from collections.abc import Iterable
from dataclasses import dataclass, replace
from difflib import SequenceMatcher

from stockroom.bringing.known import House, KnownLine
from stockroom.bringing.name_slips import another_thing, begins_word, contradicts, words_known
from stockroom.bringing.name_words import NameWords, name_words, spelt
from stockroom.chemistry.strength import canonical
from stockroom.errors import StockroomError
from stockroom.measure.amounts import Kind
from stockroom.measure.parsing import parse_strength
from stockroom.measure.reading import tidy

MOST_OFFERED = 3
"""Names offered for one nobody knows. Our choice: a glance takes in three."""
MOST_LOOKED_UP = 500
"""So many unknown names are told from their nearest; a list with more is of another house.

Our choice: five hundred are looked for in seconds.
"""

_SAME_STRENGTH = 5e-4
"""Part of a strength that is the same: labels give three figures. Our choice."""
_SAME_DENSITY = 0.0051
"""In g/cm³: ".88" and ".885" are one bottle, each rounded to its last figure. Our choice."""
_TYPING_ERROR = 0.83
"""How alike a mistyped name is: one letter in six, more is another name. Our choice."""
_SHORTEST = 3
"""Letters in the longest word of a short name: two begin half the shelf. Our choice."""


@dataclass(frozen=True, slots=True)
class Asked:
    """What is known of a row before its line is: the name, and what else tells lines apart."""

    name: str
    kind: Kind | None = None
    strength: str = ""
    formula: str = ""
    cas: str = ""


@dataclass(frozen=True, slots=True)
class Match:
    """What a name came to: the line when it is certain, else what to ask and what to offer.

    `doubt` is the question, empty when there is none. `substance` is known sooner than
    the line: `named` are all the lines of it, whatever their form and strength.
    """

    line: KnownLine | None
    doubt: str = ""
    offered: tuple[KnownLine, ...] = ()
    named: tuple[KnownLine, ...] = ()
    likely: bool = False
    """True where even the substance is only likely."""
    none_fits: bool = False
    """True where the substance is known, and no line of it is as the row says."""
    missing_strength: bool = False
    """True where all that fits is of another strength."""


class Matcher:
    """Finds lines by name, and remembers what it found: a list says the same name often."""

    def __init__(self, house: House) -> None:
        self._house = house
        self._known: dict[Asked, Match] = {}
        self._words = [(name.split(), name) for name in house.named]
        self._turned = {tuple(sorted(parts)): name for parts, name in reversed(self._words)}
        self._looked_up = 0

    def find(self, asked: Asked) -> Match:
        """The line a row means, or the question about it."""
        if asked not in self._known:
            self._known[asked] = self._find(asked)
        return self._known[asked]

    def knows(self, text: str) -> bool:
        """Whether it is a name of the house's, strength and form put aside."""
        return bool(self._exactly(text, name_words(text)))

    def _find(self, asked: Asked) -> Match:
        key = self._house.keys.get(spelt(f"{asked.name} {asked.strength}"))
        key = key or self._house.keys.get(spelt(asked.name))
        if key is not None and asked.kind in (None, key.kind) and _at(key, asked.strength):
            return Match(key, named=(key,))
        words = name_words(asked.name)
        words = replace(words, strength=asked.strength or words.strength)
        named = self._exactly(asked.name, words) or self._by_number(asked)
        if named:
            return _chosen(named, asked, words)
        return self._likely(asked, words)

    def _exactly(self, text: str, words: NameWords) -> tuple[KnownLine, ...]:
        house = self._house
        for each in (text, words.core, words.bare):
            found = house.named.get(spelt(each)) or house.formulas.get(_formula(each))
            if found:
                return found
        orders = (tuple(sorted(spelt(each).split())) for each in (words.core, words.bare))
        turned = next((self._turned[order] for order in orders if order in self._turned), "")
        return house.named[turned] if turned else self._formula_beside(words.core)

    def _formula_beside(self, core: str) -> tuple[KnownLine, ...]:
        # "KI potassium iodide", "sodium chloride (NaCl)"
        for part in re.split(r"[\s()\[\],]+", core):
            rest = core.replace(part, " ").strip(" ()[],-")
            found = self._house.formulas.get(part, ())
            if found and (not spelt(rest) or self._house.named.get(spelt(rest))):
                return self._house.named.get(spelt(rest), found)
        return ()

    def _by_number(self, asked: Asked) -> tuple[KnownLine, ...]:
        by_cas = self._house.named.get(spelt(asked.cas), ()) if asked.cas else ()
        return by_cas or self._house.formulas.get(_formula(asked.formula), ())

    def _likely(self, asked: Asked, words: NameWords) -> Match:
        core = spelt(words.core)
        short = self._shortened(core)
        if short:
            found = _chosen(short, asked, words)
            offered = (found.line,) if found.line else found.offered
            if offered:
                text = f"short for {offered[0].key}?" if len(offered) == 1 else "short for which"
                return Match(_only(offered), text, offered, short, likely=True)
        self._looked_up += 1
        if self._looked_up > MOST_LOOKED_UP:
            return Match(None, "no such name here; nearest not looked for, there are so many")
        return self._mistyped(core, asked, words)

    def _mistyped(self, core: str, asked: Asked, words: NameWords) -> Match:
        """What a name may be a slip for; what is only like it is told of, and never offered."""
        written = words.core or asked.name
        listed = self._house.nearest(written, self._house.shown.values())
        near = [name for name in listed if not contradicts(written, name)]
        for name in near:
            other = another_thing(written, name)
            if other or SequenceMatcher(None, core, spelt(name)).ratio() < _TYPING_ERROR:
                continue
            named = self._house.named[spelt(name)]
            meant = _chosen(named, asked, words)
            if meant.line is not None:
                text = f"{meant.line.key}, mistyped?"
                return Match(meant.line, text, (meant.line,), named, likely=True)
            if meant.offered and not meant.none_fits:
                text = f"{name}, mistyped? Then {meant.doubt}"
                return Match(None, text, meant.offered, named, likely=True)
        lines = _once(line for name in near for line in self._house.named.get(spelt(name), ()))
        fitting = tuple(_fitting(lines, asked, words))
        return Match(None, "no such name here", fitting[:MOST_OFFERED])

    def _shortened(self, core: str) -> tuple[KnownLine, ...]:
        """The lines whose name begins, word for word, with the words of a short one."""
        tokens = [token.rstrip(".") for token in core.split()]
        if not tokens or max(map(len, tokens)) < _SHORTEST:
            return ()
        # the quick question first: what begins a word stands in the name
        longest = max(tokens, key=len)
        hits = [name for parts, name in self._words if longest in name and _begins(parts, tokens)]
        if words_known(tokens):
            # a word in full may stand for nothing else, whatever the rest is short for
            hits = [name for name in hits if not contradicts(core, name)]
        # where the first words agree it is the likelier meaning: iron before ammonium iron
        hits.sort(key=lambda name: (not name.startswith(tokens[0]), len(name), name))
        return _once(line for name in hits for line in self._house.named[name])


def _begins(parts: list[str], tokens: list[str]) -> bool:
    rest = iter(parts)
    return all(any(begins_word(part, token) for part in rest) for token in tokens)


def _formula(text: str) -> str:
    return re.sub(r"[*•·](?=[0-9.]*H2O)", ".", tidy(text).replace(" ", ""))


def _chosen(named: tuple[KnownLine, ...], asked: Asked, words: NameWords) -> Match:
    fitting = list(_fitting(named, asked, words))
    items = [line for line in fitting if spelt(asked.name) in (spelt(line.item), spelt(line.key))]
    if len(items) == 1:
        # its own name in full, form and all
        return Match(items[0], named=named)
    if not fitting:
        return _nothing_fits(named, asked, words)
    if len(fitting) > 1:
        return Match(None, _which(fitting), tuple(fitting), named)
    line = fitting[0]
    return Match(line, _form_doubt(line, named, words), (line,), named)


def _fitting(lines: Iterable[KnownLine], asked: Asked, words: NameWords) -> Iterable[KnownLine]:
    for line in lines:
        if asked.kind is not None and line.kind is not asked.kind:
            continue
        solid = line.form == "solid"
        if words.water is not None and solid and line.water != words.water:
            continue
        if words.neat and line.form != "liquid":
            continue
        if (words.dissolved and solid) or (words.water is not None and not solid):
            continue
        if words.density is not None and not _dense(line, words.density):
            continue
        if solid or _at(line, words.strength):
            yield line


def _dense(line: KnownLine, density: float) -> bool:
    return line.density is not None and abs(line.density - density) <= _SAME_DENSITY


def _at(line: KnownLine, written: str) -> bool:
    """Whether a line is of that strength; nothing said fits all."""
    if not written or spelt(line.strength_text) == spelt(written) or line.form == "solid":
        return True
    if line.strength is None:
        return False
    try:
        asked = canonical(parse_strength(written), molar_mass=line.molar_mass, density=line.density)
    # what it lacks, a density or a kind of per cent, is asked about where the row is read
    except StockroomError:
        return False
    return asked.unit == line.unit and abs(asked.value - line.strength) <= (
        _SAME_STRENGTH * line.strength
    )


def _nothing_fits(named: tuple[KnownLine, ...], asked: Asked, words: NameWords) -> Match:
    solids = [line for line in named if line.form == "solid"]
    missing = False
    if words.water is not None and not any(line.water == words.water for line in solids):
        how = f"with {words.water:g} H2O" if words.water else "anhydrous"
        text = f"no stock line of it is {how}"
    elif asked.kind is not None and all(line.kind is not asked.kind for line in named):
        text = f"no stock line of it is measured by {asked.kind}"
        missing = asked.kind is Kind.VOLUME and bool(words.strength)
    elif words.strength and asked.kind is not Kind.MASS:
        text, missing = f'no stock line of it at "{words.strength}"', True
    elif words.density is not None:
        text = f"no stock line of it has a density of {words.density:g} g/cm³"
    else:
        text = "no stock line of it is as the row says"
    # something weighed is no solution, whatever else is like it
    offered = [line for line in named if asked.kind in (None, line.kind)][:MOST_OFFERED]
    return Match(None, text, tuple(offered), named, none_fits=True, missing_strength=missing)


def _which(fitting: list[KnownLine]) -> str:
    if all(line.form == "solid" for line in fitting):
        return "which form or kind"
    return "which strength" if len({line.kind for line in fitting}) == 1 else "which of them"


def _form_doubt(line: KnownLine, named: tuple[KnownLine, ...], words: NameWords) -> str:
    """The question about its form: weighed for another, it makes half as strong again."""
    if line.form != "solid":
        return ""
    if words.water is None:
        return f"it does not say which form: {line.key}?" if line.water else ""
    if words.in_full:
        return ""
    others = [each for each in named if each.form == "solid" and each.water != line.water]
    beside = f", not {others[0].key}" if others else ""
    return f"{line.key}{beside}?"


def _only(offered: tuple[KnownLine, ...]) -> KnownLine | None:
    return offered[0] if len(offered) == 1 else None


def _once(lines: Iterable[KnownLine]) -> tuple[KnownLine, ...]:
    return tuple({line.key: line for line in lines}.values())
