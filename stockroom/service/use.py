"""What the term uses, for the page: the plan, what went unused, and what is meant by a name."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Facts
from stockroom.service.term_report import term_told
from stockroom.settings import StoreAt
from stockroom.store.left_bottles import LeftBottle
from stockroom.store.likeness import nearest, plain
from stockroom.store.line_names import LineNames, line_names, spelt
from stockroom.store.reading import reading


@dataclass(frozen=True, slots=True)
class TermUse:
    """One term's use. `lines` are the keys of the lines asked for, None for every one.

    `nearest` are up to three names like the one asked for, where no line has it. `terms` are
    all terms by name, in their order; `term` is the one told of, "" where none is entered.
    """

    known: Facts
    plan: Plan
    left: tuple[LeftBottle, ...]
    lines: frozenset[str] | None
    nearest: tuple[str, ...]
    terms: tuple[str, ...]
    term: str


def term_use(path: StoreAt, *, as_at: date, term: str = "", what: str = "") -> TermUse:
    """The use of the term named, else of the one begun last, as at a day.

    `what` is any name of a thing, or part of one. Raises: UnknownName for a term.
    """
    known, plan, left = term_told(path, as_at=as_at, term=term)
    with reading(path) as reader:
        names = line_names(reader)
        rows = reader.rows("term", "ORDER BY starts_on, id")
    lines = _lines(names, what) if what.strip() else None
    near = nearest(what, {each.key for each in names}) if lines is not None and not lines else ()
    told = [row["term"] for row in rows if row["starts_on"] == known.start.isoformat()]
    return TermUse(
        known=known,
        plan=plan,
        left=left,
        lines=lines,
        nearest=tuple(near),
        terms=tuple(row["term"] for row in rows),
        term=told[0] if told else "",
    )


def _lines(names: tuple[LineNames, ...], what: str) -> frozenset[str]:
    """The lines of that name, of that formula, or with it in a name."""
    whole = spelt(what)
    exact = {each.key for each in names if whole in (*each.words, *each.signs)}
    part = plain(what)
    return frozenset(exact or {n.key for n in names if any(part in word for word in n.words)})
