"""How one line keeps, as a page: each rule with whose it is, what changed, its level and packs."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

from stockroom.keeping.rule_words import rule_in_words
from stockroom.keeping.rules import Rule, RuleKind
from stockroom.measure.periods import format_period
from stockroom.planning.facts import Line
from stockroom.reports.house_rules_text import Keeping, RuleChange, rule_owner
from stockroom.reports.pages.rules import asks, level_of, packs_of
from stockroom.reports.pages.rules_parts import Row
from stockroom.reports.words import day_heading, raised

PERIOD = ("lasts", "counted_from")
LAW = ("order", "rate", "rate_of", "rate_per", "named_law", "at_c", "factor_per_10c", "ea_kj_mol")
"""What is asked for to change a rule of a period, and one of a law."""


@dataclass(frozen=True, slots=True)
class Kept:
    """One rule in words, and whose it is.

    `which` are the line, the kind and the cells that tell it from others of its kind,
    `asked` the columns to ask for when it is changed, `now` what stands in them; `fixed` says
    that it cannot be changed.
    """

    words: str
    whose: str
    which: dict[str, str]
    asked: tuple[str, ...]
    now: dict[str, str]
    fixed: bool = False


@dataclass(frozen=True, slots=True)
class Changed:
    """One change of a rule: when, by whom, why, what it was and what it is."""

    when: str
    by: str
    why: str
    was: str
    now: str


@dataclass(frozen=True, slots=True)
class Page:
    """One line: its rules, their changes, its level, whose leave an order needs, its packs."""

    line: str
    key: str
    form: str
    never: str
    note: str
    rules: tuple[Kept, ...]
    changes: tuple[Changed, ...]
    level: str
    ask: str
    packs: tuple[Row, ...]


def line_page(keeping: Keeping, line: Line, usual_lead: int) -> Page:
    """The page of one line; `usual_lead` is the lead time in open days where none is written."""
    return Page(
        line=raised(line.key),
        key=line.key,
        form=str(line.form),
        never=raised(line.never_kept),
        note=raised(line.keep_note),
        rules=tuple(_rule(keeping, line, rule) for rule in keeping.rules),
        changes=tuple(_changed(each) for each in reversed(keeping.changes)),
        level=level_of(line),
        ask=asks(line),
        packs=tuple(packs_of(line, usual_lead)),
    )


def _rule(keeping: Keeping, line: Line, rule: Rule) -> Kept:
    return Kept(
        words=raised(rule_in_words(rule, keeping.unit, keeping.shown)),
        whose=raised(rule_owner(rule, keeping.sources)),
        which={"line": line.key, "rule": str(rule.kind)} | _which(rule, keeping.unit),
        asked=LAW if rule.kind is RuleKind.FADES else PERIOD if rule.lasts else (),
        now=_now(rule),
        # as the store has it: no rule of a house makes it safe to stand
        fixed=rule.kind is RuleKind.NEVER and bool(line.never_kept),
    )


def _which(rule: Rule, unit: str) -> dict[str, str]:
    """The cells that say which rule is meant where a line has several of a kind."""
    bounds = {"stronger_than": rule.above, "up_to_strength": rule.upto}
    warmth = {"colder_than_c": rule.colder_than, "warmer_than_c": rule.warmer_than}
    cells = {"purpose": str(rule.purpose)}
    # every digit: a bound typed again must be the bound it was
    cells |= {name: f"{value:.17g} {unit}" for name, value in bounds.items() if value is not None}
    return cells | {name: f"{value:g}" for name, value in warmth.items() if value is not None}


def _now(rule: Rule) -> dict[str, str]:
    if rule.kind is RuleKind.FADES or rule.lasts is None:
        # a law is changed by what is typed, and keeps the rest as it was
        return {}
    return {"lasts": format_period(rule.lasts), "counted_from": str(rule.origin)}


def _changed(change: RuleChange) -> Changed:
    when = day_heading(date.fromisoformat(change.on))
    was, now = change.before or "not there", change.after or "withdrawn"
    return Changed(when, change.by, change.why, raised(was), raised(now))
