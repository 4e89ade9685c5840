"""Normality: equivalents in one dm³, which say nothing until the reaction is stated.

"0.1 N for acid-base", "0.1 N (KMnO4 to Mn2+)", "0.1 N, 5 equivalents per mol" and
"0.1 N (1/5 KMnO4)" are all stated. The reactions held are in `equivalents.py`.
"""

from __future__ import annotations

import re
import unicodedata
from dataclasses import dataclass

from stockroom.chemistry.equivalents import REACTIONS, Reaction
from stockroom.chemistry.water_words import WATER_WORD
from stockroom.errors import BadAmount

_NUMBER = r"(?P<number>[0-9]+(?:\.[0-9]+)?)"
_STATED = (
    re.compile(rf"{_NUMBER} ?(?:equivalents?|equivs?|eq|equiv)\.? ?(?:per |/ ?|a )mol(?:e)?\b"),
    re.compile(rf"\b(?:n|z|n-factor|valence factor) ?= ?{_NUMBER}"),
    re.compile(rf"^{_NUMBER} ?(?:electrons?|protons?|e-|h\+)(?: (?:per|a) mole?)?$"),
    # the way of the standards: c(1/5 KMnO4) = 0.1 mol/dm³
    re.compile(rf"(?:^|\()1 ?[/\u2044] ?{_NUMBER} ?[a-z(]"),
)
_MOST = 24.0  # no mole of anything on a bench takes part in more steps than these
_ARROWS = re.compile(r" ?(?:->|=>|→|⇌|⟶) ?")
_HYDRATE = re.compile(rf"[.·*•∙⋅ ][0-9]*h2o$|,? {WATER_WORD}$")


@dataclass(frozen=True, slots=True)
class Equivalents:
    """How many equivalents a mole gives: `per_mole`, above 0, and the reading in words."""

    per_mole: float
    said: str


def equivalents(reaction: str, *names: str, shown: str = "normality") -> Equivalents:
    """The equivalents per mole of a substance in the reaction stated.

    `names` are what the substance is called, its formula among them; `shown` is put in
    front of the question asked back. A number stated wins over words, unless all rows
    that the words fit say otherwise.
    Raises: BadAmount for no reaction, one with two readings and one nobody holds, with
    the readings that substance may have.

    >>> equivalents("KMnO4 to Mn2+", "potassium permanganate").per_mole
    5
    """
    held = readings(*names)
    fitting = _fitting(held, reaction)
    stated = _stated(reaction, shown)
    if stated is not None:
        if fitting and all(row.per_mole != stated for row in fitting):
            raise BadAmount(
                f"{shown}: {stated:g} equivalents per mol, and {fitting[0].change} has"
                f" {fitting[0].per_mole}.",
                "State one of them.",
            )
        return Equivalents(stated, f"{stated:g} equivalents per mol, as stated")
    if len({row.per_mole for row in fitting}) == 1:
        return Equivalents(fitting[0].per_mole, _in_words(fitting[0]))
    raise _ask(reaction, fitting or held, names[0] if names else "", shown)


def readings(*names: str) -> tuple[Reaction, ...]:
    """The reactions held of a substance, by any of its names or formulas."""
    asked = {_plain_name(name) for name in names if name}
    return tuple(row for row in REACTIONS if asked.intersection(row.names))


def _stated(reaction: str, shown: str) -> float | None:
    text = _plain(reaction)
    for form in _STATED:
        found = form.search(text)
        if found:
            number = float(found["number"])
            if not 0 < number <= _MOST:
                raise BadAmount(
                    f"{shown}: {number:g} equivalents per mol cannot be.", "Give 1 to 8, mostly."
                )
            return number
    return None


def _fitting(held: tuple[Reaction, ...], reaction: str) -> tuple[Reaction, ...]:
    # whole words only: "acid" must not be found in "acid-base", nor "i-" in "mi-"
    text = f" {re.sub(r'[^a-z0-9+()-]+', ' ', _plain(reaction))} "
    own = tuple(row for row in held if any(f" {word} " in text for word in row.words))
    kind = tuple(row for row in held if any(f" {word} " in text for word in row.kinds))
    # "acid-base, to CO2" fits both carbonates by its kind and one by its own words;
    # "to iodine, with thiosulfate" names two rows, and both are left for the question
    return own if own and (not kind or set(own) & set(kind)) else (*own, *kind)


def _ask(reaction: str, rows: tuple[Reaction, ...], of: str, shown: str) -> BadAmount:
    if not rows:
        return BadAmount(
            f"{shown}: normality depends on the reaction, and I hold none of {of or 'it'}.",
            'State it, as "0.1 N, 2 equivalents per mol", or write it in mol/dm3.',
        )
    said = "; ".join(f"{row.per_mole} {row.said}" for row in rows)
    doubt = f'"{reaction}" does not say which' if reaction else "normality depends on the reaction"
    return BadAmount(
        f"{shown}: {doubt}. Equivalents per mol of {of}: {said}.",
        f'Say it after the N, as "N {_worded(rows[0])}".',
    )


def _worded(row: Reaction) -> str:
    return f"({row.said})" if row.said.startswith("to ") else f"for {row.said}"


def _in_words(row: Reaction) -> str:
    counted = "equivalent" if row.per_mole == 1 else "equivalents"
    return f"{row.per_mole} {counted} per mol ({row.change})"


def _plain(text: str) -> str:
    # superscripts to digits, every dash to a minus, arrows to the word they stand for
    plain = unicodedata.normalize("NFKC", text).replace("^", "")
    plain = re.sub(r"[\u2010-\u2015\u2212]", "-", plain)
    return re.sub(r"\s+", " ", _ARROWS.sub(" to ", plain)).strip().lower()


def _plain_name(name: str) -> str:
    return _HYDRATE.sub("", _plain(name))
