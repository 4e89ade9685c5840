"""The house rules as a page: each table its keeper may change, and every change ever made."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass
from datetime import date
from typing import Protocol

from stockroom.keeping.rule_words import rule_in_words
from stockroom.planning.facts import Facts, Line
from stockroom.reports.files.handover_parts import Change
from stockroom.reports.house_rules_text import HOUSE_RULE, STARTER
from stockroom.reports.pages.rules_house import equipment, places, settings
from stockroom.reports.pages.rules_parts import Row, Section
from stockroom.reports.words import amount, counted, day_heading, listed, money, raised

_MOST_CHANGES = 100
"""Changes shown; the folder for a successor has them all. Our choice."""


class _Kept(Protocol):
    @property
    def settings(self) -> Sequence[tuple[str, str]]: ...
    @property
    def closures(self) -> Sequence[tuple[date, date, str]]: ...
    @property
    def changes(self) -> Sequence[Change]: ...


@dataclass(frozen=True, slots=True)
class Rules:
    """The page: its sections in order, and the words that lines are looked for by."""

    sections: tuple[Section, ...]
    what: str


def rules_page(
    known: Facts, kept: _Kept, terms: Sequence[tuple[str, date, date]], what: str = ""
) -> Rules:
    """Everything that is settled for the house; of the lines those with all words of `what`."""
    lines = sorted(known.lines.values(), key=lambda line: line.key)
    words = raised(what).casefold().split()
    found = [line for line in lines if all(word in _names(line) for word in words)]
    sections = [
        _lives(found),
        _levels(line for line in found if line.level is not None or line.ask_first),
    ]
    if not words:
        sections += [
            places(known),
            _terms(terms),
            _closed(kept.closures),
            settings(known, dict(kept.settings)),
            *equipment(known),
            _departments(known),
            _packs(known, lines),
            _changes(kept.changes),
        ]
    return Rules(tuple(sections), what.strip())


def _names(line: Line) -> str:
    return raised(f"{line.key} {line.substance}").casefold()


def _lives(lines: Iterable[Line]) -> Section:
    ruled, bare = [], []
    for line in lines:
        name = raised(line.key)
        if line.rules:
            ruled.append(Row((name, *_keeps(line)), line=line.key))
        else:
            bare.append(Row((name,), line=line.key))
    return Section(
        "lives",
        "How things keep",
        "Open a line to see where each rule is from, to change one, or to look at its level.",
        ("Line", "How it keeps", "Whose rule"),
        tuple(ruled),
        empty="No line is called so.",
        add=("lines", "Add a stock line"),
        rest=tuple(bare),
        rest_is="No rule, so good until somebody says otherwise:",
    )


def _keeps(line: Line) -> tuple[str, str]:
    told = [raised(rule_in_words(rule, line.unit)) for rule in line.rules]
    owners = dict.fromkeys(HOUSE_RULE if rule.house else STARTER for rule in line.rules)
    return "; ".join(told), listed(owners)


def _levels(lines: Iterable[Line]) -> Section:
    return Section(
        "levels",
        "Levels",
        "More is ordered before less than this is left. To give another line a level, open it.",
        ("Line", "Level", "Ask first"),
        tuple(Row((raised(line.key), level_of(line), asks(line)), key=line.key) for line in lines),
        change="lines",
        empty="No line has a level.",
    )


def level_of(line: Line) -> str:
    """A line's reorder level as a person reads it, "" for none."""
    return "" if line.level is None else amount(line.level, line.kind)


def asks(line: Line) -> str:
    """Whose leave an order of the line needs, and the open days that takes; "" for nobody's."""
    if not line.ask_first:
        return ""
    return f"{line.ask_first}: {counted(line.ask_days, 'open day')}"


def _terms(terms: Sequence[tuple[str, date, date]]) -> Section:
    return Section(
        "terms",
        "Terms",
        "",
        ("Term", "First day", "Last day"),
        tuple(Row((name, day_heading(first), day_heading(last))) for name, first, last in terms),
        empty="No term is written down.",
        add=("terms", "Add a term"),
    )


def _closed(closures: Sequence[tuple[date, date, str]]) -> Section:
    return Section(
        "closures",
        "Closed days",
        "Beside weekends. Those that are over are left out.",
        ("From", "To", "Why"),
        tuple(Row((day_heading(first), day_heading(last), why)) for first, last, why in closures),
        empty="None is written down.",
        add=("closures", "Add closed days"),
    )


def _departments(known: Facts) -> Section:
    rows = [
        Row(
            (
                payer.code,
                payer.name,
                "no limit kept" if payer.left_pence is None else money(payer.left_pence),
            ),
            key=payer.code,
        )
        for payer in known.departments
    ]
    return Section(
        "departments",
        "Departments",
        "",
        ("Department", "Name", "Left for the term"),
        tuple(rows),
        change="departments",
        empty="No department is written down.",
        add=("departments", "Add a department"),
    )


def _packs(known: Facts, lines: Iterable[Line]) -> Section:
    usual = known.house.default_lead
    return Section(
        "packs",
        "Packs and lead times",
        f"Where no lead time is written, {counted(usual, 'open day')} are assumed.",
        ("Pack", "Price", "Lead time", "Supplier"),
        tuple(row for line in lines for row in packs_of(line, usual)),
        change="packs",
        empty="No pack of anything is written down.",
        add=("packs", "Add a pack"),
    )


def packs_of(line: Line, usual: int) -> Iterator[Row]:
    """The packs a line is sold in; `usual` is the lead time where none is written."""
    for pack in line.packs:
        sold = f"{line.key}, {pack.text}"
        lead = f"{counted(usual, 'open day')} assumed"
        if pack.lead is not None:
            lead = counted(pack.lead, "open day")
        seller = pack.supplier or "not entered"
        key = f"{sold}, {pack.supplier}" if pack.supplier else sold
        yield Row((raised(sold), money(pack.pence), lead, seller), key=key)


def _changes(changes: Sequence[Change]) -> Section:
    newest = list(reversed(changes))[:_MOST_CHANGES]
    more = len(changes) - len(newest)
    kept = f" {more} older ones stand in the folder for a successor." if more else ""
    return Section(
        "changes",
        "What was changed",
        f"The newest first; nothing is rubbed out.{kept}",
        ("When", "Who", "What", "Was", "Now", "Why"),
        tuple(Row(_change(each)) for each in newest),
        empty="Nothing was changed yet: all is as the house began.",
    )


def _change(each: Change) -> tuple[str, ...]:
    when = day_heading(date.fromisoformat(each.on))
    gone = "withdrawn" if each.table == "keeping" else "blank"
    what = raised(f"{each.table.replace('_', ' ')}: {each.row}, {each.column.replace('_', ' ')}")
    return (
        when,
        each.by,
        what,
        raised(each.before or "not there"),
        raised(each.after or gone),
        each.why,
    )
