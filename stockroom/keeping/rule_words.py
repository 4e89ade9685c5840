"""An ageing rule in the words of the bench: what it says, of which strength, in which place."""

from __future__ import annotations

from stockroom.keeping.rules import Law, Purpose, Rule, RuleKind
from stockroom.measure.formats import format_number, format_strength, unit_mark
from stockroom.measure.periods import format_period


def rule_in_words(rule: Rule, unit: str, label: tuple[str, float] | None = None) -> str:
    """One rule on one line; `unit` is the line's, "mol/dm3" or "g/dm3".

    With `label`, a unit and how many of it one `unit` makes, bands are told in that.

    >>> from stockroom.measure.periods import Period
    >>> rule_in_words(Rule(RuleKind.LIFE, Period(28, "days")), "mol/dm3")
    'life: 28 days from made'
    """
    words = [f"{rule.kind}: {_what(rule, unit)}" if _what(rule, unit) else str(rule.kind)]
    if rule.purpose is not Purpose.ANY:
        words.append(f"for {rule.purpose} use")
    words += [part for part in (_band(rule, *(label or (unit, 1.0))), _place(rule)) if part]
    if rule.safety:
        words.append("a safety date")
    return ", ".join(words)


def _what(rule: Rule, unit: str) -> str:
    if rule.kind is RuleKind.FADES and rule.law is not None:
        return f"{_law(rule.law, unit)} from {rule.origin}"
    if rule.lasts is None:
        return ""
    since = f"{format_period(rule.lasts)} from {rule.origin}"
    if rule.at_c is None or not rule.factor_per_10c:
        return since
    return f"{since} at {rule.at_c:g} °C, × {rule.factor_per_10c:g} faster per 10 °C"


def _law(law: Law, unit: str) -> str:
    if law.named:
        return f"by the {law.named} law"
    per = {0: f"{unit_mark(unit)} a day", 1: "a day", 2: f"per {unit_mark(unit)} and day"}
    words = f"order {law.order}, {format_number(law.rate, 3)} {per[law.order]}"
    if law.at_c is not None:
        words += f" at {law.at_c:g} °C"
    if law.ea_kj_mol is not None:
        words += f", Ea {law.ea_kj_mol:g} kJ/mol"
    if law.factor_per_10c is not None:
        words += f", × {law.factor_per_10c:g} per 10 °C"
    return words


def _band(rule: Rule, unit: str, one: float) -> str:
    above = f"above {format_strength(rule.above * one, unit)}" if rule.above is not None else ""
    upto = f"up to {format_strength(rule.upto * one, unit)}" if rule.upto is not None else ""
    return " ".join(part for part in (above, upto) if part)


def _place(rule: Rule) -> str:
    colder = f"at {rule.colder_than:g} °C or colder" if rule.colder_than is not None else ""
    warmer = f"warmer than {rule.warmer_than:g} °C" if rule.warmer_than is not None else ""
    return " and ".join(part for part in (warmer, colder) if part)
